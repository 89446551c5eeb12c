"""Typical values for what is not typed."""

from onelinefault.desktop.typical_values import completed_parts, fill_in, offered
from onelinefault.model.editing import place
from onelinefault.model.edits import apply
from onelinefault.model.fields import Basis
from onelinefault.model.plant import Plant


def two_transformers() -> Plant:
    plant = Plant()
    for x, power in ((10, "1.6 MVA"), (40, "630 kVA")):
        edit = place(plant, "transformer", "s1", x, 10, rated_power=power, high_voltage="11 kV", low_voltage="420 V")
        plant = apply(plant, edit)
    return plant


def test_nothing_that_was_typed_is_offered_or_changed() -> None:
    plant = two_transformers()
    parts = list(plant.parts.values())
    for part, full in zip(parts, completed_parts(plant, parts), strict=True):
        texts = offered(part, full)
        assert "impedance" in texts
        assert "rated_power" not in texts
    filled = apply(plant, fill_in(plant, parts))
    for key, part in plant.parts.items():
        assert filled.parts[key].text("rated_power") == part.text("rated_power")
        assert filled.parts[key].basis_of("impedance") is Basis.TYPICAL


def test_filling_in_twice_is_no_step() -> None:
    plant = two_transformers()
    filled = apply(plant, fill_in(plant, list(plant.parts.values())))
    assert fill_in(filled, list(filled.parts.values())).empty


def test_the_sentence_says_whom() -> None:
    plant = two_transformers()
    parts = list(plant.parts.values())
    assert fill_in(plant, parts).sentence.endswith("2 parts")
    assert fill_in(plant, parts[:1]).sentence.endswith(parts[0].name)
