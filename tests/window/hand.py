"""A hand on the real screen: moves the X pointer and types with xdotool, at places the window itself names."""

import subprocess
from dataclasses import dataclass

from PySide6.QtCore import QPoint, QPointF
from PySide6.QtWidgets import QScrollArea, QWidget
from pytestqt.qtbot import QtBot

from onelinefault.desktop.main_window import MainWindow


@dataclass
class ScreenHand:
    """Real X events; the event loop runs while they arrive."""

    qtbot: QtBot
    window: MainWindow

    def xdo(self, *words: object) -> None:
        """Run one xdotool command while the window goes on living."""
        process = subprocess.Popen(["xdotool", *map(str, words)])
        self.qtbot.waitUntil(lambda: process.poll() is not None, timeout=20000)
        assert process.returncode == 0
        self.qtbot.wait(30)

    def centre(self, widget: QWidget) -> QPoint:
        """The middle of a widget on the screen."""
        return widget.mapToGlobal(widget.rect().center())

    def on_sheet(self, x: float, y: float) -> QPoint:
        """A place on the sheet (modules) on the screen."""
        view = self.window.canvas.view
        return view.viewport().mapToGlobal(view.mapFromScene(QPointF(x * 10, y * 10)))

    def click(self, at: QPoint) -> None:
        self.xdo("mousemove", at.x(), at.y(), "sleep", 0.05, "click", 1)

    def drag(self, start: QPoint, stop: QPoint) -> None:
        """Press, many small moves, a last one inside the target, release.

        One command, since a drag from the shelf holds the program in a loop of its own until the button is let go.
        """
        words: list[object] = ["mousemove", start.x(), start.y(), "sleep", 0.05, "mousedown", 1, "sleep", 0.05]
        for i in range(1, 16):
            x = start.x() + (stop.x() - start.x()) * i // 15
            y = start.y() + (stop.y() - start.y()) * i // 15
            words += ["mousemove", x, y, "sleep", 0.012]
        words += ["mousemove", stop.x() + 1, stop.y(), "sleep", 0.1, "mousemove", stop.x(), stop.y(), "sleep", 0.05]
        self.xdo(*words, "mouseup", 1)
        self.qtbot.wait(80)

    def key(self, *combos: str) -> None:
        self.xdo("key", *combos)

    def type(self, text: str) -> None:
        self.xdo("type", "--delay", 5, text)

    def enter(self, key: str, text: str) -> None:
        """Type a rating into its row of the inspector and leave it with Tab."""
        row = self.window.panels.inspector.row(key)
        area = self.window.panels.inspector.findChild(QScrollArea)
        assert isinstance(area, QScrollArea)
        area.ensureWidgetVisible(row)
        self.qtbot.wait(20)
        self.click(self.centre(row.editor))
        self.key("ctrl+a")
        self.type(text)
        self.key("Tab")
        self.qtbot.wait(40)
