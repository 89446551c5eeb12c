"""A canvas on the small pump house, and a hand that moves the mouse over it in sheet coordinates."""

from collections.abc import Iterator
from dataclasses import dataclass

import pytest
from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from onelinefault.desktop.canvas import Canvas
from onelinefault.desktop.session import Session
from onelinefault.desktop.solver import Solver
from onelinefault.drawing.painter import load_fonts
from tests.drawing.plants import pump_house

LEFT = Qt.MouseButton.LeftButton
NONE = Qt.KeyboardModifier.NoModifier


@dataclass
class Hand:
    """Moves and clicks in modules of the sheet, with real events on the view's viewport."""

    canvas: Canvas

    def at(self, x: float, y: float) -> QPoint:
        return self.canvas.view.mapFromScene(QPointF(x * 10, y * 10))

    def move(self, x: float, y: float) -> None:
        QTest.mouseMove(self.canvas.view.viewport(), self.at(x, y))

    def click(self, x: float, y: float, modifier: Qt.KeyboardModifier = NONE, button: Qt.MouseButton = LEFT) -> None:
        QTest.mouseClick(self.canvas.view.viewport(), button, modifier, self.at(x, y))

    def double(self, x: float, y: float) -> None:
        QTest.mouseDClick(self.canvas.view.viewport(), LEFT, NONE, self.at(x, y))

    def drag(self, start: tuple[float, float], stop: tuple[float, float], modifier: Qt.KeyboardModifier = NONE) -> None:
        viewport = self.canvas.view.viewport()
        QTest.mousePress(viewport, LEFT, modifier, self.at(*start))
        for i in range(1, 9):
            share = i / 8
            x, y = (a + (b - a) * share for a, b in zip(start, stop, strict=True))
            QTest.mouseMove(viewport, self.at(x, y))
        QTest.mouseRelease(viewport, LEFT, modifier, self.at(*stop))


@dataclass
class Desk:
    """Session, canvas and hand together; ids by name."""

    session: Session
    solver: Solver
    canvas: Canvas
    hand: Hand
    ids: dict[str, str]


@pytest.fixture
def desk(qtbot: QtBot) -> Iterator[Desk]:
    load_fonts()
    plant, ids = pump_house()
    session = Session(plant)
    solver = Solver(session)
    canvas = Canvas(session, solver)
    qtbot.addWidget(canvas)
    canvas.resize(1400, 1000)
    canvas.show()
    qtbot.waitExposed(canvas)
    canvas.view.fit()
    yield Desk(session, solver, canvas, Hand(canvas), ids)
    solver.stop()
