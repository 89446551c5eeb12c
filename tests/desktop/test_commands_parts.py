"""Part commands act on the selection, as one step each."""

import pytest
from PySide6.QtGui import QAction

from onelinefault.desktop.commands_parts import PartCommands
from onelinefault.desktop.modes import Placing
from onelinefault.model.editing import add_sheet, set_corners
from tests.desktop.conftest import Desk


@pytest.fixture
def commands(desk: Desk) -> PartCommands:
    return PartCommands(desk.session, desk.canvas)


def pick(desk: Desk, *names: str) -> None:
    desk.session.select(frozenset(desk.ids[name] for name in names))


def test_rotate_and_mirror(desk: Desk, commands: PartCommands) -> None:
    pick(desk, "g1")
    commands.rotate()
    commands.mirror()
    part = desk.session.plant.parts[desk.ids["g1"]]
    assert (part.turn, part.mirrored) == (3, True)  # a quarter turn, seen in a mirror
    assert len(desk.session.history.done) == 2


def test_rotate_turns_what_hangs_at_the_pointer(desk: Desk, commands: PartCommands) -> None:
    pick(desk, "g1")
    desk.canvas.start_placing("cable", {})
    assert isinstance(desk.canvas.mode, Placing)
    commands.rotate()
    assert desk.session.plant.parts[desk.ids["g1"]].turn == 0
    desk.hand.click(70, 50)
    placed = max(desk.session.plant.parts.values(), key=lambda part: int(part.id[1:]))
    assert (placed.kind, placed.turn) == ("cable", 1)


def test_open_and_close(desk: Desk, commands: PartCommands) -> None:
    pick(desk, "q1", "t1")
    commands.open_close()
    assert desk.session.plant.parts[desk.ids["q1"]].value("closed") is False
    commands.open_close()
    assert desk.session.plant.parts[desk.ids["q1"]].value("closed") is True
    said: list[str] = []
    desk.session.said.connect(said.append)
    pick(desk, "t1")
    commands.open_close()
    assert "breaker" in said[-1]


def test_in_and_out_of_service(desk: Desk, commands: PartCommands) -> None:
    pick(desk, "g1", "m1")
    commands.in_out_of_service()
    assert not any(desk.session.plant.parts[desk.ids[name]].in_service for name in ("g1", "m1"))
    commands.in_out_of_service()
    assert all(desk.session.plant.parts[desk.ids[name]].in_service for name in ("g1", "m1"))


@pytest.mark.parametrize(
    ("command", "axis"), [("align_left", "x"), ("align_centre", "x"), ("align_top", "y"), ("align_middle", "y")]
)
def test_align_lines_up(desk: Desk, commands: PartCommands, command: str, axis: str) -> None:
    pick(desk, "g1", "m1")
    getattr(commands, command)()
    parts = [desk.session.plant.parts[desk.ids[name]] for name in ("g1", "m1")]
    assert getattr(parts[0], axis) == getattr(parts[1], axis)
    assert len(desk.session.history.done) == 1


def test_distribute_spaces_out(desk: Desk, commands: PartCommands) -> None:
    pick(desk, "g1", "w1", "m1")
    commands.distribute_across()
    xs = sorted(desk.session.plant.parts[desk.ids[name]].x for name in ("g1", "w1", "m1"))
    assert xs[1] - xs[0] == xs[2] - xs[1]


def test_reroute_forgets_corners(desk: Desk, commands: PartCommands) -> None:
    wire = desk.ids["to_pumps"]
    desk.session.apply(set_corners(desk.session.plant, wire, [(60, 47), (60, 49)]))
    assert desk.session.plant.wires[wire].corners
    desk.session.select(frozenset({wire}))
    commands.reroute()
    assert desk.session.plant.wires[wire].corners == ()


def test_to_another_sheet_and_after_it(desk: Desk, commands: PartCommands) -> None:
    desk.session.apply(add_sheet(desk.session.plant))
    other = desk.session.plant.sheets[1].id
    pick(desk, "m1")
    action = QAction("Sheet 2")
    action.setData(other)
    commands.to_sheet(action)
    assert desk.session.plant.parts[desk.ids["m1"]].sheet == other
    assert desk.session.sheet_id == other


def test_without_a_selection_nothing_happens(desk: Desk, commands: PartCommands) -> None:
    before = desk.session.plant
    for name in ("rotate", "mirror", "align_left", "distribute_down", "reroute", "in_out_of_service", "open_close"):
        getattr(commands, name)()
    assert desk.session.plant is before
