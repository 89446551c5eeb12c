"""Inspector edits: one step for one or many parts, said in plain words."""

import pytest

from onelinefault.errors import EditError, EntryError
from onelinefault.model import editing
from onelinefault.model.consumers import Bus, Note
from onelinefault.model.edits import apply
from onelinefault.model.fields import Basis
from onelinefault.model.plant import Plant
from onelinefault.model.transforming import Transformer


def two_transformers() -> Plant:
    return Plant(
        parts={
            "p1": Transformer(id="p1", name="T1").with_text("load_loss", "90 kW"),
            "p2": Transformer(id="p2", name="T2"),
            "p3": Note(id="p3"),
        },
        next_number=4,
    )


def test_typing_a_rating_says_what_it_did() -> None:
    plant = two_transformers()
    edit = editing.set_text(plant, ["p2"], "x_over_r", "22", Basis.LETTER)
    assert edit.sentence == "Set X/R of T2 to 22"
    part = apply(plant, edit).parts["p2"]
    assert part.text("x_over_r") == "22" and part.basis_of("x_over_r") is Basis.LETTER
    assert editing.set_text(plant, ["p1", "p2"], "impedance", "10").sentence == "Set Impedance of 2 parts to 10 %"
    assert editing.set_text(plant, ["p1"], "load_loss", "").sentence == "Clear Load loss of T1"
    assert editing.set_text(plant, ["p2"], "load_loss", "").empty


def test_what_was_typed_last_counts_among_forms_of_one_rating() -> None:
    plant = two_transformers()
    after = apply(plant, editing.set_text(plant, ["p1", "p2"], "x_over_r", "22"))
    assert after.parts["p1"].given("load_loss") is None and after.parts["p1"].text("x_over_r") == "22"
    back = apply(after, editing.set_text(after, ["p1"], "load_loss", "85 kW"))
    assert back.parts["p1"].given("x_over_r") is None
    cleared = apply(after, editing.set_text(after, ["p1"], "x_over_r", ""))
    assert cleared.parts["p1"].given("x_over_r") is None


def test_a_text_that_cannot_be_taken_changes_nothing() -> None:
    plant = two_transformers()
    with pytest.raises(EntryError, match=r"Impedance: 120 %: must be at most"):
        editing.set_text(plant, ["p1", "p2"], "impedance", "120 %")
    with pytest.raises(EntryError, match="Note has no rating impedance"):
        editing.set_text(plant, ["p1", "p3"], "impedance", "10 %")
    with pytest.raises(EditError, match="no part p9"):
        editing.set_text(plant, ["p9"], "impedance", "10 %")


def test_a_lookup_fills_several_ratings_in_one_step() -> None:
    plant = two_transformers()
    texts = {"rated_power": "1000 kVA", "impedance": "6 %", "load_loss": "10.5 kW"}
    edit = editing.set_texts(plant, "p2", texts, Basis.TYPICAL)
    part = apply(plant, edit).parts["p2"]
    assert {name: part.text(name) for name in texts} == texts
    assert all(part.basis_of(name) is Basis.TYPICAL for name in texts)


def test_basis_is_marked_only_where_something_is_typed() -> None:
    plant = two_transformers()
    after = apply(plant, editing.set_basis(plant, ["p1", "p2"], "load_loss", Basis.MEASURED))
    assert after.parts["p1"].basis_of("load_loss") is Basis.MEASURED
    assert after.parts["p2"] is plant.parts["p2"]
    back = apply(after, editing.set_basis(after, ["p1"], "load_loss", None))
    assert back == plant


def test_names(plant: Plant) -> None:
    after = apply(plant, editing.rename(plant, "p2", "  Q  incomer "))
    assert after.parts["p2"].name == "Q incomer"
    assert editing.rename(plant, "p2", "Q7").sentence == "Rename Q1 to Q7"
    assert editing.rename(plant, "p2", "Q1").empty


def test_drawn_measures(plant: Plant) -> None:
    longer = apply(plant, editing.set_attribute(plant, "p4", "length", 30)).parts["p4"]
    shorter = apply(plant, editing.set_attribute(plant, "p4", "length", 2)).parts["p4"]
    assert isinstance(longer, Bus) and isinstance(shorter, Bus)
    assert (longer.length, shorter.length) == (30, 9)  # wires end at 5 and 9
    notes = two_transformers()
    note = apply(notes, editing.set_attribute(notes, "p3", "width", 1)).parts["p3"]
    assert isinstance(note, Note) and note.width == 2
    with pytest.raises(EditError, match="a bus has a length"):
        editing.set_attribute(plant, "p3", "length", 4)  # the length of a cable is a rating


def test_positions(plant: Plant) -> None:
    opened = apply(plant, editing.set_closed(plant, ["p2"], False))
    assert opened.parts["p2"].value("closed") is False
    assert editing.set_closed(plant, ["p2"], True).empty
    assert editing.toggle_closed(plant, "p2").sentence == "Open Q1"
    toggled = apply(opened, editing.toggle_closed(opened, "p2"))
    assert toggled.parts["p2"].value("closed") is True
    with pytest.raises(EditError, match="cable W1 cannot be opened"):
        editing.set_closed(plant, ["p2", "p3"], False)
    with pytest.raises(EditError):
        editing.toggle_closed(plant, "p3")


def test_service(plant: Plant) -> None:
    out = apply(plant, editing.set_in_service(plant, ["p5", "p7"], False))
    assert not out.parts["p5"].in_service and not out.parts["p7"].in_service and out.parts["p1"].in_service
    assert editing.set_in_service(out, ["p5"], True).sentence == "Put LD1 into service"


def test_the_title_block(plant: Plant) -> None:
    after = apply(plant, editing.set_document(plant, "frequency", "60"))
    assert after.document.frequency_hz == 60
    edit = editing.set_document(plant, "name", "Tarnwick Mill")
    assert edit.sentence == "Set Plant to Tarnwick Mill" and apply(plant, edit).document.name == "Tarnwick Mill"
    assert editing.set_document(plant, "name", "").empty
    with pytest.raises(EntryError, match="Frequency"):
        editing.set_document(plant, "frequency", "5000 Hz")
    with pytest.raises(EntryError, match="no field colour"):
        editing.set_document(plant, "colour", "red")
