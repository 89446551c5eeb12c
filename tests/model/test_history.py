"""Undo gives back exactly what was."""

import pytest

from onelinefault.errors import EditError
from onelinefault.model import editing
from onelinefault.model.edits import Edit
from onelinefault.model.history import History
from onelinefault.model.plant import End, Plant


def test_undo_and_redo_walk_the_same_plants(plant: Plant) -> None:
    history = History(plant)
    seen = [plant]
    for step in (
        lambda p: editing.remove(p, ["p2"]),
        lambda p: editing.move(p, ["p7"], 2, 2),
        lambda p: editing.rename(p, "p7", "Fan"),
    ):
        seen.append(history.apply(step(history.plant)))
    assert history.sentences == ("Delete Q1", "Move M1", "Rename M1 to Fan")
    for before in reversed(seen[:-1]):
        assert history.undo() and history.plant is before
    assert history.undo() is None and history.next_undo is None
    assert [s.edit.sentence for s in history.undone] == ["Delete Q1", "Move M1", "Rename M1 to Fan"]
    for after in seen[1:]:
        assert history.next_redo == history.redo() and history.plant is after
    assert history.redo() is None
    assert history.done[0].before is plant and history.done[-1].after is history.plant


def test_a_new_step_forgets_what_was_taken_back(plant: Plant) -> None:
    history = History(plant)
    history.apply(editing.move(plant, ["p7"], 1, 0))
    history.undo()
    history.apply(editing.move(plant, ["p5"], 1, 0))
    assert history.redo() is None and history.sentences == ("Move LD1",)


def test_refused_and_empty_edits_are_no_steps(plant: Plant) -> None:
    history = History(plant)
    with pytest.raises(EditError):
        history.apply(Edit("bad", parts={"p1": None}))
    assert history.apply(Edit("nothing")) is plant
    assert history.plant is plant and history.sentences == ()


def test_a_refused_edit_keeps_what_can_be_done_again(plant: Plant) -> None:
    history = History(plant)
    after = history.apply(editing.move(plant, ["p7"], 1, 0))
    history.undo()
    with pytest.raises(EditError):
        history.apply(Edit("bad", parts={"p1": None}))
    history.redo()
    assert history.plant is after


def test_the_oldest_steps_are_forgotten_first(plant: Plant) -> None:
    history = History(plant, limit=3)
    for i in range(5):
        history.apply(editing.rename(history.plant, "p7", f"Fan {i}"))
    assert history.sentences == ("Rename Fan 1 to Fan 2", "Rename Fan 2 to Fan 3", "Rename Fan 3 to Fan 4")
    while history.undo():
        pass
    assert history.plant.parts["p7"].name == "Fan 1"


def test_redo_brings_the_wires_back_too(plant: Plant) -> None:
    history = History(plant)
    fragment = editing.copy(plant, list(plant.parts))
    pasted = history.apply(editing.paste(plant, fragment, "s1", 40, 0))
    history.undo()
    history.redo()
    assert history.plant.wires == pasted.wires and len(pasted.wires) == 2 * len(plant.wires)
    history.apply(editing.connect(history.plant, End("p1", "bar", 19), End("p20", "bar", 1)))
    assert history.undo() == "Connect Intake to Intake 2"
