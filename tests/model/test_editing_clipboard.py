"""Cut, copy, paste: a piece of a plant keeps its inner wires and takes new ids and free names."""

import pytest

from onelinefault.errors import EditError
from onelinefault.model import editing
from onelinefault.model.edits import apply
from onelinefault.model.plant import Plant, Sheet

WHOLE = ("p1", "p2", "p3", "p4", "p5", "p6", "p7")


def shape(plant: Plant, ids: list[str]) -> list[tuple[object, ...]]:
    """Parts and inner wires of a piece, by order instead of id and relative to its first part."""
    x0, y0 = plant.parts[ids[0]].x, plant.parts[ids[0]].y
    parts = [(p.kind, p.turn, p.x - x0, p.y - y0) for p in (plant.parts[k] for k in ids)]
    wires = [
        (*((ids.index(e.part), e.terminal, e.at) for e in w.ends), tuple((x - x0, y - y0) for x, y in w.corners))
        for w in plant.wires.values()
        if w.a.part in ids and w.b.part in ids
    ]
    return [*parts, *sorted(wires, key=str)]


def test_a_pasted_piece_is_the_same_figure_elsewhere(plant: Plant) -> None:
    fragment = editing.copy(plant, WHOLE)
    assert fragment.origin == (0, 0) and len(fragment.wires) == 6
    edit = editing.paste(plant, fragment, "s1", 40, 3)
    after = apply(plant, edit)
    new = list(editing.added_parts(plant, edit))
    assert shape(after, new) == shape(plant, list(WHOLE))
    assert min(after.parts[k].x for k in new) == 40 and min(after.parts[k].y for k in new) == 3
    assert [after.parts[k].name for k in new] == ["Intake 2", "Q2", "W2", "Board 2", "LD2", "", "M2"]
    assert {k: after.parts[k] for k in plant.parts} == plant.parts
    assert edit.sentence == "Paste 7 parts"


def test_places_are_relative(plant: Plant) -> None:
    fragment = editing.copy(plant, ["p6", "p7"])
    assert fragment.origin == (9, 20)
    assert [(p.x, p.y) for p in fragment.parts] == [(0, 0), (5, 6)] and fragment.wires[0].corners == ((5, 0),)


def test_only_inner_wires_come_along(plant: Plant) -> None:
    assert [w.id for w in editing.copy(plant, ["p1", "p2"]).wires] == ["w11"]
    assert editing.copy(plant, ["p1", "p3"]).wires == ()
    assert editing.copy(plant, []).empty and editing.paste(plant, editing.copy(plant, []), "s1", 0, 0).empty


def test_free_names_are_kept_in_another_plant(plant: Plant) -> None:
    other = Plant(sheets=(Sheet("s1"), Sheet("s2")), next_number=3)
    edit = editing.paste(other, editing.copy(plant, ["p2", "p7"]), "s2", 0, 0)
    parts = list(apply(other, edit).parts.values())
    assert [(p.name, p.sheet) for p in parts] == [("Q1", "s2"), ("M1", "s2")]
    with pytest.raises(EditError, match="no sheet s9"):
        editing.paste(other, editing.copy(plant, ["p2"]), "s9", 0, 0)


def test_a_joint_without_its_branches_is_not_left_hanging(plant: Plant) -> None:
    edit = editing.paste(plant, editing.copy(plant, ["p5", "p6", "p7"]), "s1", 40, 0)
    after = apply(plant, edit)
    kinds = sorted(after.parts[k].kind for k in editing.added_parts(plant, edit))
    assert kinds == ["induction_motor", "load"] and len(after.wires) == len(plant.wires) + 1
    alone = editing.paste(plant, editing.copy(plant, ["p6"]), "s1", 40, 0)
    assert alone.empty


def test_duplicating_stays_beside(plant: Plant) -> None:
    edit = editing.duplicate(plant, ["p5", "p7"], 4, 1)
    (load, motor) = (apply(plant, edit).parts[k] for k in editing.added_parts(plant, edit))
    assert (load.x, load.y, motor.x, motor.y) == (13, 26, 18, 27)
    assert editing.duplicate(plant, []).empty


def test_cutting_takes_away_with_healing_and_pastes_back(plant: Plant) -> None:
    fragment, edit = editing.cut(plant, ["p2"])
    after = apply(plant, edit)
    assert after.wires["w11"].b.part == "p3" and edit.sentence == "Cut Q1"
    back = apply(after, editing.paste(after, fragment, "s1", *fragment.origin))
    pasted = next(p for p in back.parts.values() if p.id not in after.parts)
    assert (pasted.name, pasted.x, pasted.y) == ("Q1", 5, 4)


def test_a_large_piece_pastes_with_names_of_its_own(plant: Plant) -> None:
    for _ in range(4):
        plant = apply(plant, editing.paste(plant, editing.copy(plant, list(plant.parts)), "s1", 0, 0))
    names = [p.name for p in plant.parts.values() if p.name]
    assert len(plant.parts) == 7 * 16 and len(set(names)) == len(names)
