"""What can be done now, what is chosen, what undo would take back."""

from types import SimpleNamespace

from PySide6.QtCore import QObject
from pytestqt.qtbot import QtBot

from onelinefault.desktop.action_states import ActionStates
from onelinefault.desktop.actions import COMMANDS, make_actions
from onelinefault.model.editing import add_sheet, move
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.desktop.windows import pump_session


def nothing() -> None:
    """Does nothing."""


def test_actions_follow_the_session(qtbot: QtBot) -> None:
    session, ids = pump_session()
    owner = QObject()
    actions = make_actions(owner, [SimpleNamespace(**{c.key: nothing for c in COMMANDS})])
    states = ActionStates(session, actions, owner)
    can = {key: action.isEnabled for key, action in actions.items()}

    assert not can["delete"]() and not can["undo"]() and not can["next_sheet"]() and not can["clear_fault"]()
    session.select(frozenset({ids["t1"]}))
    assert can["delete"]() and can["copy"]() and can["rename"]() and not can["open_close"]() and not can["align_left"]()
    session.select(frozenset({ids["t1"], ids["q1"]}))
    assert can["open_close"]() and can["align_left"]() and not can["rename"]() and not can["distribute_across"]()
    session.select(frozenset({ids["below"]}))
    assert not can["copy"]()
    session.apply(move(session.plant, [ids["t1"]], 1, 0))
    assert actions["undo"].text() == f"&Undo {session.history.next_undo}"
    assert actions["undo"].iconText() == "&Undo".replace("&", "")
    session.undo()
    assert not can["undo"]() and can["redo"]()
    session.apply(add_sheet(session.plant))
    assert can["next_sheet"]() and can["remove_sheet"]()
    session.set_fault(Fault(Place(ids["board"])))
    assert can["clear_fault"]()
    session.choose(kind=FaultKind.TWO_LINES_TO_EARTH, level="min", detail=3)
    assert actions["two_lines_to_earth"].isChecked() and actions["smallest"].isChecked()
    assert actions["detail_3"].isChecked() and can["next_phases"]()
    states.refresh()
    assert not actions["three_phase"].isChecked()
