"""The top line shows the session's choices, changes them, and fits a small screen."""

from collections.abc import Iterator

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtGui import QAction
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from onelinefault.desktop.session import Session
from onelinefault.desktop.top_line import TopLine
from onelinefault.model.editing import add_arrangement, move, set_document
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.desktop.windows import dressed, pump_session

LEFT = Qt.MouseButton.LeftButton


@pytest.fixture
def top(qtbot: QtBot, qapp: QApplication) -> Iterator[tuple[Session, TopLine]]:
    session, _ = pump_session()
    with dressed(qapp):
        line = TopLine(session, QAction("Undo"), QAction("Redo"), QAction("Print"))
        qtbot.addWidget(line)
        line.resize(1680, 44)
        line.show()
        qtbot.waitExposed(line)
        yield session, line


def test_pressing_a_kind_changes_the_standing_fault(top: tuple[Session, TopLine]) -> None:
    session, line = top
    session.set_fault(Fault(Place(next(iter(session.plant.parts)), "out")))
    QTest.mouseClick(line.kind.buttons[FaultKind.LINE_TO_LINE], LEFT)
    assert session.choices.kind is FaultKind.LINE_TO_LINE
    QTest.mouseClick(line.phases.buttons["ca"], LEFT)
    QTest.mouseClick(line.level.buttons["min"], LEFT)
    assert session.fault is not None
    assert (session.fault.kind, session.fault.phases) == (FaultKind.LINE_TO_LINE, "ca")
    assert session.choices.case.level == "min"


def test_phases_are_offered_only_where_there_is_a_choice(top: tuple[Session, TopLine]) -> None:
    session, line = top
    assert not line.phases.isVisible()
    session.choose(kind=FaultKind.LINE_TO_EARTH, phases="b")
    assert line.phases.isVisible()
    assert list(line.phases.buttons) == ["a", "b", "c"]
    assert line.phases.buttons["b"].isChecked()
    assert line.kind.buttons[FaultKind.LINE_TO_EARTH].isChecked()


def test_arrangements_can_be_chosen_and_follow_the_plant(top: tuple[Session, TopLine]) -> None:
    session, line = top
    session.apply(add_arrangement(session.plant, "Tie closed"))
    names = [line.arrangement.itemText(i) for i in range(line.arrangement.count())]
    assert names == ["as drawn", "Tie closed"]
    line.arrangement.setCurrentIndex(1)
    line.arrangement.activated.emit(1)
    assert session.choices.arrangement == session.plant.arrangements[0].id
    session.choose(arrangement=None)
    assert line.arrangement.currentIndex() == 0


def test_detail_dots_take_clicks_and_keys(top: tuple[Session, TopLine]) -> None:
    session, line = top
    QTest.mouseClick(line.detail, LEFT, pos=QPoint(line.detail.width() - 8, 12))
    assert session.choices.detail == 3
    QTest.keyClick(line.detail, Qt.Key.Key_Left)
    assert session.choices.detail == 2
    assert line.detail.accessibleName() == "Detail 2 of 3"
    QTest.keyClick(line.detail, Qt.Key.Key_Space)
    QTest.keyClick(line.detail, Qt.Key.Key_Space)
    assert session.choices.detail == 1


def test_name_and_edited_mark(top: tuple[Session, TopLine]) -> None:
    session, line = top
    assert not line.edited.isVisible()
    session.apply(set_document(session.plant, "name", "Brackwater pumps"))
    assert line.name.text() == "Brackwater pumps"
    assert line.edited.isVisible()
    session.undo()
    assert not line.edited.isVisible()


@pytest.mark.parametrize("width", [1280, 1366, 1920])
@pytest.mark.parametrize("kind", list(FaultKind))
def test_everything_fits_the_width_of_a_small_screen(top: tuple[Session, TopLine], width: int, kind: FaultKind) -> None:
    session, line = top
    session.choose(kind=kind, phases="")
    part = next(iter(session.plant.parts))
    session.apply(move(session.plant, [part], 1, 0))  # edited
    session.apply(set_document(session.plant, "name", "A plant with quite a long name for one line"))
    line.resize(width, 44)
    QApplication.processEvents()
    buttons = [b for group in (line.kind, line.phases, line.level, line.method) for b in group.buttons.values()]
    visible = [w for w in (*buttons, line.arrangement, line.detail) if w.isVisible()]
    rects = [w.rect().translated(w.mapTo(line, QPoint(0, 0))) for w in visible]
    assert all(rect.right() <= width for rect in rects)
    for i, a in enumerate(rects):
        assert not any(a.intersects(b) for b in rects[i + 1 :])
    hints = [w for w in buttons if w.isVisible() and w.width() < w.fontMetrics().horizontalAdvance(w.text())]
    assert hints == []  # no word is cut
