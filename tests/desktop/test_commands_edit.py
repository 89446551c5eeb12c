"""Edit commands: each is one step, and the selection follows what was made."""

import pytest
from pytestqt.qtbot import QtBot

from onelinefault.desktop.commands_edit import EditCommands, selected
from tests.desktop.conftest import Desk


@pytest.fixture
def commands(desk: Desk, qtbot: QtBot) -> EditCommands:
    return EditCommands(desk.session, desk.canvas)


def pick(desk: Desk, *names: str) -> None:
    desk.session.select(frozenset(desk.ids[name] for name in names))


def test_copy_and_paste_make_new_parts_and_select_them(desk: Desk, commands: EditCommands) -> None:
    pick(desk, "w1", "m1")
    commands.copy()
    before = desk.session.plant
    commands.paste()
    fresh = desk.session.plant.parts.keys() - before.parts.keys()
    assert desk.session.selection == fresh
    assert {desk.session.plant.parts[key].kind for key in fresh} == {"cable", "induction_motor"}
    assert len(desk.session.plant.wires) == len(before.wires) + 1
    desk.session.undo()
    assert desk.session.plant is before


def test_pasting_again_goes_aside_and_not_on_top(desk: Desk, commands: EditCommands) -> None:
    pick(desk, "m1")
    commands.copy()
    places = set()
    for _ in range(3):
        commands.paste()
        part = desk.session.plant.parts[next(iter(desk.session.selection))]
        places.add((part.x, part.y))
    original = desk.session.plant.parts[desk.ids["m1"]]
    assert len(places | {(original.x, original.y)}) == 4


def test_cut_takes_away_and_can_be_pasted(desk: Desk, commands: EditCommands) -> None:
    pick(desk, "g1")
    commands.cut()
    assert desk.ids["g1"] not in desk.session.plant.parts
    commands.paste()
    assert any(part.kind == "synchronous_generator" for part in desk.session.plant.parts.values())


def test_duplicate_delete_and_nudge(desk: Desk, commands: EditCommands) -> None:
    pick(desk, "g1")
    commands.duplicate()
    (copy_id,) = desk.session.selection
    assert desk.session.plant.parts[copy_id].name == "G2"
    commands.delete()
    assert copy_id not in desk.session.plant.parts
    pick(desk, "g1")
    x = desk.session.plant.parts[desk.ids["g1"]].x
    assert commands.nudge(3, 0)
    assert desk.session.plant.parts[desk.ids["g1"]].x == x + 3
    desk.session.select(frozenset())
    assert not commands.nudge(1, 0)


def test_deleting_a_series_part_heals_its_wire(desk: Desk, commands: EditCommands) -> None:
    wires = len(desk.session.plant.wires)
    pick(desk, "q1")
    commands.delete()
    assert len(desk.session.plant.wires) == wires - 1


def test_wires_alone_can_be_deleted(desk: Desk, commands: EditCommands) -> None:
    pick(desk, "to_pumps")
    commands.delete()
    assert desk.ids["to_pumps"] not in desk.session.plant.wires


def test_select_all_and_what_is_selected_in_order(desk: Desk, commands: EditCommands) -> None:
    commands.select_all()
    parts, wires = selected(desk.session)
    assert (parts, wires) == (list(desk.session.plant.parts), list(desk.session.plant.wires))


def test_undo_and_redo(desk: Desk, commands: EditCommands) -> None:
    before = desk.session.plant
    pick(desk, "g1")
    commands.nudge(1, 0)
    after = desk.session.plant
    commands.undo()
    assert desk.session.plant is before
    commands.redo()
    assert desk.session.plant is after


def test_nothing_to_paste_is_said(desk: Desk, commands: EditCommands, qapp: object) -> None:
    from PySide6.QtGui import QGuiApplication

    QGuiApplication.clipboard().setText("just words")
    said: list[str] = []
    desk.session.said.connect(said.append)
    before = desk.session.plant
    commands.paste()
    assert desk.session.plant is before
    assert "paste" in said[-1]
