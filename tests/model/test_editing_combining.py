"""Many edits as one step give what they give one after the other."""

import pytest

from onelinefault.errors import EditError
from onelinefault.model import editing
from onelinefault.model.edits import Edit, apply, inverse
from onelinefault.model.plant import End, Plant


def test_one_step_for_a_whole_gesture(plant: Plant) -> None:
    edits: list[Edit] = []
    after = plant
    for step in (
        lambda p: editing.place(p, "load", "s1", 18, 8),
        lambda p: editing.connect(p, End("p1", "bar", 18), End("p20", "line")),
        lambda p: editing.move(p, ["p20"], 1, 1),
        lambda p: editing.remove(p, ["p2"]),
        lambda p: editing.set_tag(p, "p4", (1, 1)),
        lambda p: editing.set_document(p, "name", "Mill"),
        editing.add_sheet,
        lambda p: editing.add_arrangement(p, "Night"),
        editing.clear_tags,
    ):
        edits.append(step(after))
        after = apply(after, edits[-1])
    whole = editing.combine(edits, "All of it")
    assert whole.sentence == "All of it"
    assert apply(plant, whole) == after
    assert apply(after, inverse(plant, whole)) == plant


def test_steps_in_turn(plant: Plant) -> None:
    steps = [
        lambda p: editing.place(p, "load", "s1", 18, 8),
        lambda p: editing.connect(p, End("p1", "bar", 18), End("p20", "line")),
    ]
    edit = editing.in_turn(plant, steps, "Draw a load")
    assert len(apply(plant, edit).wires) == len(plant.wires) + 1
    with pytest.raises(EditError):
        editing.in_turn(plant, [*steps, steps[1]], "twice")


def test_nothing_is_nothing() -> None:
    assert editing.combine([], "nothing").empty
    assert editing.combine([Edit("a"), Edit("b")], "nothing").empty
