"""The main job with real mouse and keyboard events: an empty sheet to a PDF whose text holds the expected current.

Expected, by hand (ohms at 11 kV, X/R = 10 everywhere, so magnitudes add):
supply 33² / 900 = 1.21 ohm, at 11 kV 1.21 · (11/33)² = 0.13444; transformer 0.08 · 11² / 10 = 0.968;
together 1.10244 ohm, I″ = 11 / (√3 · 1.10244) = 5.76 kA.
"""

from pathlib import Path

import pypdf
import pytest
from PySide6.QtCore import QPoint
from pytestqt.qtbot import QtBot

from onelinefault.desktop.main_window import MainWindow
from onelinefault.desktop.shelf import PartTile
from onelinefault.model.consumers import Bus
from tests.window.hand import ScreenHand

pytestmark = pytest.mark.window


def tile(window: MainWindow, kind: str) -> PartTile:
    return next(t for t in window.panels.shelf.findChildren(PartTile) if t.offer.kind == kind)


def only(window: MainWindow, kind: str) -> str:
    (key,) = [p.id for p in window.session.plant.parts.values() if p.kind == kind]
    return key


def select(window: MainWindow, hand: ScreenHand, key: str) -> None:
    part = window.session.plant.parts[key]
    hand.click(hand.on_sheet(part.x, part.y))
    assert window.session.selection == {key}


def test_from_an_empty_sheet_to_a_print(window: MainWindow, hand: ScreenHand, qtbot: QtBot, tmp_path: Path) -> None:
    session = window.session
    assert not session.plant.parts

    # parts: one by drag and drop from the shelf, others by click, one by type-ahead
    hand.drag(hand.centre(tile(window, "supply")), hand.on_sheet(40, 10))
    qtbot.waitUntil(lambda: len(session.plant.parts) == 1, timeout=5000)
    hand.click(hand.centre(tile(window, "bus")))
    hand.click(hand.on_sheet(30, 20))
    hand.click(hand.centre(tile(window, "transformer")))
    hand.click(hand.on_sheet(40, 30))
    hand.xdo("mousemove", hand.on_sheet(30, 44).x(), hand.on_sheet(30, 44).y())
    hand.key("a")
    hand.type("bus")
    hand.key("Return")
    hand.click(hand.on_sheet(30, 44))
    assert sorted(p.kind for p in session.plant.parts.values()) == ["bus", "bus", "supply", "transformer"]
    _, board = sorted((p for p in session.plant.parts.values() if isinstance(p, Bus)), key=lambda p: p.y)

    # wires by drag from terminals
    supply, transformer = only(window, "supply"), only(window, "transformer")
    hand.drag(hand.on_sheet(40, 13), hand.on_sheet(40, 20))
    hand.drag(hand.on_sheet(40, 26), hand.on_sheet(40, 20))
    hand.drag(hand.on_sheet(40, 34), hand.on_sheet(40, 44))
    assert len(session.plant.wires) == 3

    # ratings as the nameplates give them
    select(window, hand, supply)
    hand.enter("nominal_voltage", "33 kV")
    hand.enter("fault_level_max", "900 MVA")
    hand.enter("x_over_r", "10")
    select(window, hand, transformer)
    for field, text in {
        "rated_power": "10 MVA", "high_voltage": "33 kV", "low_voltage": "11 kV", "impedance": "8 %", "x_over_r": "10",
    }.items():  # fmt: skip
        hand.enter(field, text)
    hand.click(hand.on_sheet(board.x + 9, board.y))
    hand.enter("nominal_voltage", "11 kV")
    assert session.plant.parts[transformer].text("impedance") == "8 %"

    # the click on the board has put the fault pin: the figures stand
    solver = window.solver
    qtbot.waitUntil(lambda: solver.answer is not None and not solver.stale and solver.answer.result is not None)
    assert solver.answer is not None and solver.answer.result is not None
    assert solver.answer.result.ik_ka == pytest.approx(5.76, rel=1e-3)
    assert "fault" in window.canvas.scene.tag_items

    # print
    pdf = tmp_path / "sheet.pdf"
    hand.key("ctrl+shift+e")
    qtbot.waitUntil(lambda: window.printing.dialog is not None and window.printing.dialog.isVisible(), timeout=5000)
    dialog = window.printing.dialog
    assert dialog is not None
    dialog.activateWindow()
    qtbot.wait(200)
    hand.key("ctrl+a")
    hand.type(str(pdf))
    hand.key("Return")
    qtbot.waitUntil(pdf.exists, timeout=10000)
    words = " ".join(pypdf.PdfReader(pdf).pages[0].extract_text().split())
    assert "5.76 kA" in words
    assert "three-phase fault" in words and "lock-out" in words


def test_undo_and_redo_by_keys(window: MainWindow, hand: ScreenHand, qtbot: QtBot) -> None:
    hand.click(hand.centre(tile(window, "bus")))
    hand.click(hand.on_sheet(30, 20))
    one = window.session.plant
    assert len(one.parts) == 1
    hand.drag(hand.on_sheet(36, 20), hand.on_sheet(46, 30))
    moved = window.session.plant
    assert moved != one
    hand.key("ctrl+z")
    assert window.session.plant == one
    hand.key("ctrl+z")
    assert not window.session.plant.parts
    hand.key("ctrl+y", "ctrl+y")
    assert window.session.plant == moved


def test_wheel_and_middle_button(window: MainWindow, hand: ScreenHand, qtbot: QtBot) -> None:
    view = window.canvas.view
    spot = hand.on_sheet(40, 30)
    before = view.scale_factor
    hand.xdo("mousemove", spot.x(), spot.y(), "sleep", 0.05, "click", 4, "click", 4, "click", 4)
    qtbot.wait(100)
    assert view.scale_factor > before * 1.3
    there = hand.on_sheet(40, 30)
    assert (there - spot).manhattanLength() <= 4
    hand.xdo("mousemove", spot.x(), spot.y(), "mousedown", 2, "mousemove", spot.x() + 60, spot.y() + 25, "mouseup", 2)
    qtbot.wait(100)
    assert (hand.on_sheet(40, 30) - there - QPoint(60, 25)).manhattanLength() <= 4


def test_the_delete_key_heals(window: MainWindow, hand: ScreenHand, qtbot: QtBot) -> None:
    hand.click(hand.centre(tile(window, "bus")))
    hand.click(hand.on_sheet(30, 20))
    hand.click(hand.centre(tile(window, "induction_motor")))
    hand.click(hand.on_sheet(36, 40))
    hand.drag(hand.on_sheet(36, 37), hand.on_sheet(36, 20))
    hand.click(hand.centre(tile(window, "breaker")))
    hand.click(hand.on_sheet(36, 28))
    assert len(window.session.plant.wires) == 2
    hand.key("Delete")  # what was placed last is selected
    assert len(window.session.plant.wires) == 1
    assert sorted(p.kind for p in window.session.plant.parts.values()) == ["bus", "induction_motor"]
