"""Sheet commands."""

import pytest
from pytestqt.qtbot import QtBot

from onelinefault.desktop.commands_sheets import SheetCommands
from onelinefault.desktop.session import Session
from onelinefault.desktop.sheet_tabs import SheetTabs
from tests.desktop.windows import pump_session


@pytest.fixture
def bench(qtbot: QtBot) -> tuple[Session, SheetCommands]:
    session, _ = pump_session()
    tabs = SheetTabs(session)
    qtbot.addWidget(tabs)
    return session, SheetCommands(session, tabs)


def order(session: Session) -> list[str]:
    return [sheet.id for sheet in session.plant.sheets]


def test_add_turns_to_the_new_sheet_and_undo_back(bench: tuple[Session, SheetCommands]) -> None:
    session, commands = bench
    first = session.sheet_id
    commands.add_sheet()
    assert session.sheet_id == order(session)[-1] != first
    session.undo()
    assert session.sheet_id == first


def test_turning_goes_round(bench: tuple[Session, SheetCommands]) -> None:
    session, commands = bench
    commands.add_sheet()
    commands.add_sheet()
    a, b, c = order(session)
    commands.next_sheet()
    assert session.sheet_id == a
    commands.previous_sheet()
    assert session.sheet_id == c
    commands.previous_sheet()
    assert session.sheet_id == b


def test_order_can_be_changed_and_ends_hold(bench: tuple[Session, SheetCommands]) -> None:
    session, commands = bench
    commands.add_sheet()
    a, b = order(session)
    commands.sheet_earlier()
    assert order(session) == [b, a]
    before = session.plant
    commands.sheet_earlier()
    assert session.plant is before
    commands.sheet_later()
    assert order(session) == [a, b]


def test_a_sheet_goes_with_its_parts_and_comes_back(bench: tuple[Session, SheetCommands]) -> None:
    session, commands = bench
    commands.add_sheet()
    commands.previous_sheet()
    before = session.plant
    commands.remove_sheet()
    assert len(session.plant.sheets) == 1 and session.plant.parts == {}
    session.undo()
    assert session.plant is before
    session.undo()
    said: list[str] = []
    session.said.connect(said.append)
    commands.remove_sheet()
    assert "at least one sheet" in said[-1]
