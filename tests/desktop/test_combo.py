"""A combo box that the wheel leaves alone."""

from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtGui import QWheelEvent
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from onelinefault.desktop.combo import Combo


def test_the_wheel_changes_nothing(qtbot: QtBot) -> None:
    combo = Combo()
    qtbot.addWidget(combo)
    combo.addItems(["a", "b", "c"])
    combo.show()
    qtbot.waitExposed(combo)
    event = QWheelEvent(
        QPointF(5, 5), QPointF(5, 5), QPoint(), QPoint(0, -120), Qt.MouseButton.NoButton,
        Qt.KeyboardModifier.NoModifier, Qt.ScrollPhase.NoScrollPhase, False,
    )  # fmt: skip
    QApplication.sendEvent(combo, event)
    assert combo.currentIndex() == 0
    assert not event.isAccepted()  # it goes on to what scrolls
