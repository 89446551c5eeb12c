"""Renaming in place: a line edit over the part's name."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import QEvent, QObject, QPointF, Qt
from PySide6.QtGui import QKeyEvent
from PySide6.QtWidgets import QLineEdit

from onelinefault.model.editing import rename

if TYPE_CHECKING:
    from onelinefault.desktop.canvas import Canvas


class NameEditor(QObject):
    """Lives until Enter, Escape or a click elsewhere; Enter and leaving rename, Escape does not."""

    def __init__(self, canvas: Canvas, part_id: str) -> None:
        super().__init__(canvas)
        self._canvas, self._part = canvas, part_id
        picture = canvas.scene.picture.parts[part_id]
        place = picture.words[0].box() if picture.words else picture.body
        corner = canvas.view.mapFromScene(QPointF(place.left - 4, place.top - 3))
        self._line = QLineEdit(canvas.session.plant.parts[part_id].name, canvas.view.viewport())
        self._line.setAccessibleName(canvas.tr("Name"))
        self._line.move(corner)
        self._line.resize(max(110, int(place.width * canvas.view.scale_factor) + 40), self._line.sizeHint().height())
        self._line.selectAll()
        self._line.installEventFilter(self)
        self._line.editingFinished.connect(self._finish)
        self._line.show()
        self._line.setFocus()
        self._open = True

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Escape gives up."""
        if isinstance(event, QKeyEvent) and event.type() == QEvent.Type.KeyPress and event.key() == Qt.Key.Key_Escape:
            self._close()
            return True
        return False

    def _finish(self) -> None:
        if self._open:
            text = self._line.text()
            self._close()
            if self._part in self._canvas.session.plant.parts:
                self._canvas.session.apply(rename(self._canvas.session.plant, self._part, text))

    def _close(self) -> None:
        self._open = False
        self._line.hide()
        self._line.deleteLater()
        self._canvas.view.setFocus()
