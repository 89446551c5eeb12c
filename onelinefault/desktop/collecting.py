"""Garbage is collected in the thread of the window only.

Python collects cycles in whatever thread happens to allocate when a threshold is passed. If that is the solver's, the
widgets of a closed dialog would be destroyed there, and Qt crashes. So the automatic collection is off while a window
is open, and a timer does it in the window's thread, in the pauses between events.
"""

from __future__ import annotations

import gc
from typing import Final

from PySide6.QtCore import QObject, Qt, QTimer
from PySide6.QtGui import QGuiApplication

_EVERY_MS: Final = 500
_YOUNG: Final = 20_000  # new objects that make a look at the young ones worth while: a few milliseconds
_FULL_AFTER: Final = 40  # such looks before all objects are looked at


class Collector(QObject):
    """Collects from its start until ``stop``; a full collection waits until no mouse button is down."""

    def __init__(self, parent: QObject) -> None:
        super().__init__(parent)
        self.looks = 0
        self._timer = QTimer(self)
        self._timer.setInterval(_EVERY_MS)
        self._timer.timeout.connect(self.look)
        gc.disable()
        self._timer.start()

    def look(self) -> None:
        """Collect if there is enough to look at."""
        if gc.get_count()[0] < _YOUNG:
            return
        self.looks += 1
        idle = QGuiApplication.mouseButtons() == Qt.MouseButton.NoButton
        if self.looks >= _FULL_AFTER and idle:
            self.looks = 0
            gc.collect()
        else:
            gc.collect(1)

    def stop(self) -> None:
        """Leave collecting to Python again; for when no other thread of ours runs any more."""
        self._timer.stop()
        gc.enable()
