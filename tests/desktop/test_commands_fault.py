"""Fault commands change what the session asks for."""

import pytest

from onelinefault.desktop.commands_fault import FaultCommands
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.desktop.conftest import Desk


@pytest.fixture
def commands(desk: Desk) -> FaultCommands:
    return FaultCommands(desk.session, desk.canvas)


@pytest.mark.parametrize(
    ("command", "kind"),
    [("three_phase", FaultKind.THREE_PHASE), ("line_to_line", FaultKind.LINE_TO_LINE),
     ("two_lines_to_earth", FaultKind.TWO_LINES_TO_EARTH), ("line_to_earth", FaultKind.LINE_TO_EARTH)],
)  # fmt: skip
def test_kinds(desk: Desk, commands: FaultCommands, command: str, kind: FaultKind) -> None:
    desk.session.set_fault(Fault(Place(desk.ids["board"])))
    getattr(commands, command)()
    assert desk.session.choices.kind is kind
    assert desk.session.fault is not None and desk.session.fault.kind is kind


def test_phases_go_round_and_stay_with_the_kind(desk: Desk, commands: FaultCommands) -> None:
    commands.line_to_earth()
    seen = []
    for _ in range(3):
        commands.next_phases()
        seen.append(desk.session.choices.phases)
    assert seen == ["b", "c", "a"]
    commands.line_to_earth()
    assert desk.session.choices.phases == "a"  # the same kind again keeps the phases
    commands.three_phase()
    assert desk.session.choices.phases == ""


def test_level_and_detail(desk: Desk, commands: FaultCommands) -> None:
    commands.smallest()
    commands.detail_3()
    assert (desk.session.choices.level, desk.session.choices.detail) == ("min", 3)
    commands.largest()
    commands.detail_1()
    assert (desk.session.choices.level, desk.session.choices.detail) == ("max", 1)
    commands.detail_2()
    assert desk.session.choices.detail == 2


def test_fault_here_and_clear(desk: Desk, commands: FaultCommands) -> None:
    desk.hand.move(30, 34)
    commands.fault_here()
    assert desk.session.fault is not None
    assert desk.session.fault.place.part == desk.ids["board"]
    commands.clear_fault()
    assert desk.session.fault is None
