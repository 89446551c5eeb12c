"""Lookups: whatever is offered can be taken over, and makes sense."""

import pytest

from onelinefault.model import editing
from onelinefault.model.edits import apply
from onelinefault.model.fields import Basis
from onelinefault.model.offers import offers
from onelinefault.model.part import Part
from onelinefault.model.part_checks import check_part
from onelinefault.model.parts import PART_CLASSES, part_class
from onelinefault.model.plant import Plant
from onelinefault.model.quantity import Quantity
from onelinefault.model.typical import Tables
from onelinefault.store.tables import load_tables

BASES = [
    ("cable", {"length": "100 m"}),
    ("cable", {"length": "100 m", "material": "aluminium", "construction": "in steel conduit"}),
    ("overhead_line", {"length": "3 km"}),
    ("synchronous_generator", {"rated_power": "5 MVA", "rated_voltage": "11 kV"}),
    ("synchronous_motor", {"rated_power": "5 MW", "rated_voltage": "11 kV"}),
    ("induction_motor", {"rated_power": "100 hp", "rated_voltage": "460 V"}),
    ("transformer", {"high_voltage": "11 kV", "low_voltage": "0.42 kV"}),
    ("breaker", {}),
]


@pytest.fixture(scope="module")
def tables() -> Tables:
    return load_tables()


def made(kind: str, texts: dict[str, str]) -> Part:
    part = part_class(kind)(id="p1", name="X1")
    for name, text in texts.items():
        part = part.with_text(name, text)
    return part


@pytest.mark.parametrize(("kind", "texts"), BASES, ids=[k for k, _ in BASES])
@pytest.mark.parametrize("hertz", [50.0, 60.0])
def test_every_offer_can_be_taken_over(tables: Tables, kind: str, texts: dict[str, str], hertz: float) -> None:
    part = made(kind, texts)
    found = offers(part, tables, hertz)
    assert len(found) >= 4 and len({o.label for o in found}) == len(found)
    plant = Plant(parts={"p1": part}, next_number=2)
    for offer in found:
        filled = apply(plant, editing.set_texts(plant, "p1", dict(offer.texts), Basis.TYPICAL)).parts["p1"]
        assert {name: filled.text(name) for name in offer.texts} == dict(offer.texts)
        assert offer.source
        usual = {"locked-rotor", "power-unusual"}  # the ends of a table may be unusual, never wrong
        assert {f.code for f in check_part(filled)} <= usual, (offer.label, check_part(filled))


def test_kinds_that_no_table_knows(tables: Tables) -> None:
    known = {kind for kind, _ in BASES}
    for part_type in PART_CLASSES:
        if part_type.kind not in known:
            assert offers(part_type(id="p1"), tables) == ()


def test_a_code_letter_by_hand(tables: Tables) -> None:
    # 100 hp, η 0.93, cosφ 0.85: 74.57/(0.93·0.85) = 94.33 kVA; letter G goes to 6.29 kVA/hp (NEC table 430.7(B))
    motor = made("induction_motor", {"rated_power": "100 hp", "efficiency": "93 %", "power_factor": "0.85"})
    letter = next(o for o in offers(motor, tables) if o.label.startswith("code letter G"))
    assert float(letter.texts["locked_rotor_ratio"]) == pytest.approx(629 / 94.33, rel=2e-3)
    assert offers(made("induction_motor", {}), tables) == ()


def test_generators_and_motors_are_kept_apart(tables: Tables) -> None:
    generators = {o.label for o in offers(made("synchronous_generator", {}), tables)}
    motors = {o.label for o in offers(made("synchronous_motor", {}), tables)}
    assert not generators & motors and all("generator" in g or "salient pole" in g for g in generators)


def test_breakers_follow_the_frequency(tables: Tables) -> None:
    at = {hz: {o.label: o.texts["making_current"] for o in offers(made("breaker", {}), tables, hz)} for hz in (50, 60)}
    assert at[50]["25 kA above 1 kV"] == "62.5 kA" and at[60]["25 kA above 1 kV"] == "65 kA"  # IEC 62271-100


def test_cables_list_the_customary_sizes_first(tables: Tables) -> None:
    cable = made("cable", {})
    assert offers(cable, tables, 50)[0].label.startswith("1.5 mm²")
    assert offers(cable, tables, 60)[0].label.startswith("14 AWG")
    values = [made("cable", dict(o.texts)).given("r_per_length") for o in offers(cable, tables, 50)[:10]]
    ohms = [v.to("ohm/km") for v in values if isinstance(v, Quantity)]
    assert ohms == sorted(ohms, reverse=True)
