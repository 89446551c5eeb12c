"""Sheets: a plant keeps one, no part stands on none."""

import pytest

from onelinefault.errors import EditError
from onelinefault.model import editing
from onelinefault.model.edits import apply
from onelinefault.model.plant import Plant, Sheet


@pytest.fixture
def two(plant: Plant) -> Plant:
    return apply(plant, editing.add_sheet(plant, "Details", "A3", True))


def test_a_new_sheet_is_like_the_last(two: Plant) -> None:
    assert two.sheets[1] == Sheet("s20", "Details", "A3", True)
    third = apply(two, editing.add_sheet(two)).sheets[2]
    assert (third.title, third.paper, third.upright) == ("Sheet 3", "A3", True)
    with pytest.raises(EditError, match="no paper A9"):
        editing.add_sheet(two, paper="A9")


def test_ids_of_sheets_are_not_issued_twice() -> None:
    plant = Plant()  # holds s1 from the start
    plant = apply(plant, editing.add_sheet(plant))
    plant = apply(plant, editing.add_sheet(plant))
    assert len({s.id for s in plant.sheets}) == 3


def test_removing(plant: Plant, two: Plant) -> None:
    with pytest.raises(EditError, match="at least one sheet"):
        editing.remove_sheet(plant, "s1")
    with pytest.raises(EditError, match="Sheet holds 7 parts"):
        editing.remove_sheet(two, "s1")
    with pytest.raises(EditError, match="no sheet s9"):
        editing.remove_sheet(two, "s9")
    assert apply(two, editing.remove_sheet(two, "s20")).sheets == plant.sheets
    emptied = apply(two, editing.remove_sheet(two, "s1", with_parts=True))
    assert [s.id for s in emptied.sheets] == ["s20"] and not emptied.parts and not emptied.wires


def test_a_removed_sheet_takes_wires_to_other_sheets_along_without_healing(two: Plant) -> None:
    split = apply(two, editing.move_to_sheet(two, ["p2"], "s20"))
    after = apply(split, editing.remove_sheet(split, "s20", with_parts=True))
    assert "p2" not in after.parts and set(after.wires) == {"w13", "w14", "w15", "w16"}


def test_moving_parts_keeps_them_joined(two: Plant) -> None:
    after = apply(two, editing.move_to_sheet(two, ["p6", "p7"], "s20", 2, 3))
    assert {after.parts[k].sheet for k in ("p6", "p7")} == {"s20"} and after.parts["p7"].x == 16
    assert after.wires.keys() == two.wires.keys()
    assert after.wires["w16"].corners == ((16, 23),)  # both ends moved
    alone = apply(two, editing.move_to_sheet(two, ["p7"], "s20"))
    assert alone.wires["w16"].corners == ()  # corners on one sheet say nothing about a wire to another
    assert editing.move_to_sheet(after, ["p6", "p7"], "s20").empty


def test_titles_paper_and_order(two: Plant) -> None:
    assert apply(two, editing.rename_sheet(two, "s20", " LV ")).sheets[1].title == "LV"
    assert apply(two, editing.set_paper(two, "s20", "ANSI B")).sheets[1] == Sheet("s20", "Details", "ANSI B", True)
    assert apply(two, editing.set_paper(two, "s20", "A3", False)).sheets[1].upright is False
    assert editing.set_paper(two, "s20", "A3").empty
    assert [s.id for s in apply(two, editing.move_sheet(two, "s20", 0)).sheets] == ["s20", "s1"]
    assert editing.move_sheet(two, "s20", 7).empty
    for refuse in (
        lambda: editing.rename_sheet(two, "s20", " "),
        lambda: editing.set_paper(two, "s20", "A9"),
        lambda: editing.set_paper(two, "s9", "A3"),
        lambda: editing.move_to_sheet(two, ["p1"], "s9"),
    ):
        with pytest.raises(EditError):
            refuse()
