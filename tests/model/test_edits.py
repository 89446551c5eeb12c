"""Edits as values: apply, inverse, and what the plant refuses."""

from dataclasses import replace

import pytest

from onelinefault.errors import EditError
from onelinefault.model.consumers import Bus, Load
from onelinefault.model.edits import Edit, apply, inverse
from onelinefault.model.plant import Arrangement, Document, End, Plant, Sheet, Wire

BUS, LOAD = Bus(id="p1", name="Board"), Load(id="p2", name="LD1", y=5)
WIRE = Wire("w3", End("p1", "bar", 4), End("p2", "line"))
PLANT = Plant(parts={"p1": BUS, "p2": LOAD}, wires={"w3": WIRE}, tags={"p1": (1, 2)}, next_number=4)

EDITS = [
    Edit("nothing"),
    Edit("add", parts={"p4": Load(id="p4")}, next_number=5),
    Edit("change", parts={"p2": replace(LOAD, x=7)}),
    Edit("take away", parts={"p2": None}, wires={"w3": None}, tags={"p1": None}),
    Edit("tag", tags={"p2": (3, 4)}),
    Edit("document", document=Document(name="Tarnwick Mill")),
    Edit("sheets", sheets=(*PLANT.sheets, Sheet("s5")), next_number=6),
    Edit("arrange", arrangements=(Arrangement("a4", "Night"),), next_number=5),
]


@pytest.mark.parametrize("edit", EDITS, ids=lambda e: e.sentence)
def test_the_inverse_takes_an_edit_back(edit: Edit) -> None:
    after = apply(PLANT, edit)
    assert apply(after, inverse(PLANT, edit)) == PLANT
    assert edit.empty == (after == PLANT)


def test_untouched_things_are_shared() -> None:
    after = apply(PLANT, Edit("change", parts={"p2": replace(LOAD, x=7)}))
    assert after.parts["p1"] is BUS and after.wires is PLANT.wires and after.document is PLANT.document
    assert PLANT.parts["p2"].x == 0


@pytest.mark.parametrize(
    ("edit", "says"),
    [
        (Edit("", parts={"p2": None}), "would end at a part that is gone"),
        (Edit("", wires={"w4": Wire("w4", End("p1", "bar", 0), End("p9", "a"))}), "does not exist"),
        (Edit("", wires={"w4": Wire("w4", End("p1", "bar", 0), End("p2", "top"))}), "has no terminal 'top'"),
        (Edit("", parts={"p2": replace(LOAD, sheet="s7")}), "stand on a sheet that does not exist"),
        (Edit("", sheets=(Sheet("s2"),)), "stand on a sheet that does not exist"),
        (Edit("", sheets=()), "at least one sheet"),
    ],
)
def test_the_plant_refuses_loose_ends(edit: Edit, says: str) -> None:
    with pytest.raises(EditError, match=says):
        apply(PLANT, edit)
