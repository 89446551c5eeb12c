"""A right click offers what fits."""

from types import SimpleNamespace

from PySide6.QtCore import QObject
from PySide6.QtWidgets import QWidget
from pytestqt.qtbot import QtBot

from onelinefault.desktop.actions import BY_KEY, COMMANDS, make_actions
from onelinefault.desktop.context_menu import context_menu, keys_for
from onelinefault.desktop.hit import NOTHING, Hit
from tests.drawing.plants import pump_house


def test_what_fits() -> None:
    plant, ids = pump_house()
    assert "open_close" in keys_for(Hit("part", ids["q1"]), plant)
    assert "open_close" not in keys_for(Hit("part", ids["t1"]), plant)
    assert keys_for(Hit("part", ids["board"]), plant)[0] == "fault_here"
    assert "reroute" in keys_for(Hit("wire", ids["below"]), plant)
    assert "fault_here" not in keys_for(Hit("wire", ids["below"]), plant)
    assert "paste" in keys_for(NOTHING, plant)


def test_the_menu_holds_the_windows_own_actions(qtbot: QtBot) -> None:
    plant, ids = pump_house()
    owner, parent = QObject(), QWidget()
    qtbot.addWidget(parent)
    actions = make_actions(owner, [SimpleNamespace(**{c.key: list for c in COMMANDS})])
    menu = context_menu(Hit("part", ids["q1"]), plant, actions, parent)
    shown = [action.objectName() for action in menu.actions() if not action.isSeparator()]
    assert shown == [key for key in keys_for(Hit("part", ids["q1"]), plant) if key != "-"]
    assert all(key in BY_KEY for key in shown)
