"""Plants written down by a script."""

import re

import pytest

from onelinefault.errors import EntryError
from onelinefault.model.building import PlantBuilder
from onelinefault.model.edits import check_end
from onelinefault.model.fields import Basis
from onelinefault.model.parts import terminal_place
from onelinefault.model.plant import End


def started() -> PlantBuilder:
    b = PlantBuilder("Pump house", frequency="60 Hz", customer="Example Works")
    b.add("supply", "Grid", nominal_voltage="33 kV", fault_level_max="900 MVA", x_over_r=12)
    b.add("bus", "Intake", nominal_voltage="33 kV")
    b.add("transformer", "T1", rated_power="2 MVA", high_voltage="33 kV", low_voltage="0.4 kV", impedance="6 %")
    b.add("cable", "W1", length="120 m", size="2x240 mm²")
    b.add("bus", "Bus 1.2")
    return b


def test_ratings_are_taken_as_text() -> None:
    plant = started().plant()
    parts = {part.name: part for part in plant.parts.values()}
    assert plant.document.name == "Pump house" and plant.document.frequency_hz == 60
    assert parts["Grid"].text("x_over_r") == "12" and parts["T1"].text("impedance") == "6 %"
    assert parts["W1"].text("length") == "120 m"  # a rating of a cable, a size of a bus
    assert list(plant.parts) == ["p1", "p2", "p3", "p4", "p5"] and plant.next_number == 6


def test_joints_find_their_terminals() -> None:
    b = started()
    b.chain("Grid", "Intake", "T1.high")
    b.chain("T1", "W1", "Bus 1.2")  # low is the only one free; a, then b; a name with a point
    wires = list(b.plant().wires.values())
    assert [(w.a.part, w.a.terminal, w.b.part, w.b.terminal) for w in wires] == [
        ("p1", "out", "p2", "bar"),
        ("p2", "bar", "p3", "high"),
        ("p3", "low", "p4", "a"),
        ("p4", "b", "p5", "bar"),
    ]
    plant = b.plant()
    for wire in wires:
        check_end(plant, wire.a)
        check_end(plant, wire.b)


def test_wires_meet_a_bar_opposite_their_other_end() -> None:
    b = PlantBuilder("Placed", paper="A3")
    b.add("bus", "B", at=(10, 20), length=20)
    b.add("load", "L1", at=(16, 30))
    b.add("load", "L2", at=(16, 40))
    b.add("load", "Far", at=(90, 30))
    b.add("bus", "Upright", at=(60, 10), turn=1, length=16)
    b.add("load", "L3", at=(70, 17))
    for name in ("L1", "L2", "Far"):
        b.join("B", name)
    b.join("Upright", "L3")
    plant = b.plant()
    assert [wire.a.at for wire in plant.wires.values()] == [6, 5, 20, 5]
    last = list(plant.wires.values())[-1]
    assert terminal_place(plant.parts[last.a.part], "bar", last.a.at) == (60, 15)
    assert plant.parts["p1"].x == 10 and plant.sheets[0].paper == "A3"


def test_parts_without_a_place_go_beside_those_with_one() -> None:
    b = PlantBuilder("Mixed", paper="A3")
    b.add("bus", "B", at=(10, 20), length=30)
    b.add("load", "L1")
    b.join("B", "L1")
    part = b.plant().parts["p2"]
    assert part.x > 40


def test_several_sheets() -> None:
    b = started()
    second = b.sheet("Low voltage", "A2", upright=True)
    b.add("bus", "Far", sheet=second)
    b.join("Bus 1.2", "Far")
    plant = b.plant()
    assert [sheet.title for sheet in plant.sheets] == ["One-line diagram", "Low voltage"]
    assert plant.parts["p7"].sheet == second == "s6"


def test_basis_for_all_or_for_some() -> None:
    b = PlantBuilder("x")
    b.add("bus", "A", nominal_voltage="11 kV", rated_current="630 A", basis="guessed")
    b.add("bus", "B", nominal_voltage="11 kV", rated_current="630 A", basis={"rated_current": "letter"})
    one, two = b.plant().parts.values()
    assert one.basis == {"nominal_voltage": Basis.GUESSED, "rated_current": Basis.GUESSED}
    assert two.basis == {"rated_current": Basis.LETTER}


@pytest.mark.parametrize(
    ("add", "message"),
    [
        ({"kind": "flux_gate", "name": "X"}, "there is no kind of part called 'flux_gate'"),
        ({"kind": "bus", "name": " grid "}, "bus  grid : there is already a part called"),
        ({"kind": "bus", "name": "X", "sheet": "s9"}, "bus X: there is no sheet 's9'"),
        ({"kind": "bus", "name": "X", "nominal_voltage": "33 kA"}, "bus X: Nominal voltage: 33 kA"),
        ({"kind": "bus", "name": "X", "voltage": "33 kV"}, "bus X has no rating 'voltage'; near it: nominal_voltage"),
        ({"kind": "bus", "name": "X", "rated_current": "1 A", "basis": "hearsay"}, "bus X: 'hearsay' is no basis"),
    ],
)
def test_mistakes_are_named(add: dict[str, str], message: str) -> None:
    b = started()
    with pytest.raises(EntryError, match=re.escape(message)):
        b.add(**add)
    assert len(b.plant().parts) == 5


@pytest.mark.parametrize(
    ("a", "b", "message"),
    [
        ("Gird", "Intake", "there is no part called 'Gird'; near it: Grid"),
        ("T1", "Intake", "say which terminal of transformer T1: T1.high, T1.low"),
        ("T1.middle", "Intake", "transformer T1 has no terminal 'middle'; it has high, low"),
    ],
)
def test_joints_to_nowhere_are_named(a: str, b: str, message: str) -> None:
    builder = started()
    with pytest.raises(EntryError, match=re.escape(message)):
        builder.join(a, b)
    assert builder.plant().wires == {}


def test_a_part_with_both_ends_joined_asks_for_the_terminal() -> None:
    b = started()
    b.chain("Intake", "W1", "Bus 1.2")
    with pytest.raises(EntryError, match=r"say which terminal of cable W1: W1\.a, W1\.b"):
        b.join("W1", "Intake")
    b.join("W1.b", "Intake")
    assert list(b.plant().wires.values())[-1].a == End("p4", "b")


def test_an_unknown_paper_is_refused() -> None:
    with pytest.raises(EntryError, match="'B9' is no paper"):
        PlantBuilder("x", paper="B9")


def test_asking_twice_gives_the_same_plant() -> None:
    b = started()
    b.chain("Grid", "Intake", "T1.high")
    assert b.plant() == b.plant()
