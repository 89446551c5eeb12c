"""How a part travels from the shelf to the sheet."""

import json
from typing import Any

from PySide6.QtCore import QMimeData, QPointF
from PySide6.QtGui import QDragEnterEvent, QDragLeaveEvent, QDragMoveEvent, QDropEvent
from PySide6.QtWidgets import QWidget

PART_MIME = "application/x-onelinefault-part"


def part_mime(kind: str, presets: dict[str, Any] | None = None) -> QMimeData:
    """The drag's data for a kind of part with presets."""
    data = QMimeData()
    data.setData(PART_MIME, json.dumps({"kind": kind, "presets": presets or {}}).encode())
    return data


def read_part_drop(data: QMimeData) -> tuple[str, dict[str, Any]]:
    """Kind and presets of what is dragged; an empty kind when it is something else."""
    if not data.hasFormat(PART_MIME):
        return "", {}
    try:
        read = json.loads(bytes(data.data(PART_MIME).data()).decode())
        return str(read["kind"]), dict(read["presets"])
    except (ValueError, KeyError, TypeError):
        return "", {}


class PartDrops(QWidget):
    """A widget that parts can be dropped on; says so in plain calls."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setAcceptDrops(True)

    def drag_entered(self, kind: str, presets: dict[str, Any]) -> None:
        """A part has come in."""

    def dragged(self, point: QPointF) -> None:
        """It is over a point of the widget."""

    def drag_left(self) -> None:
        """It has gone again."""

    def dropped(self, point: QPointF) -> None:
        """It was let go."""

    def dragEnterEvent(self, event: QDragEnterEvent) -> None:
        """Let parts in, nothing else."""
        kind, presets = read_part_drop(event.mimeData())
        if kind:
            self.drag_entered(kind, presets)
            event.acceptProposedAction()

    def dragMoveEvent(self, event: QDragMoveEvent) -> None:
        """Hand the point on."""
        if event.mimeData().hasFormat(PART_MIME):
            self.dragged(event.position())
            event.acceptProposedAction()

    def dragLeaveEvent(self, event: QDragLeaveEvent) -> None:
        """Say so."""
        self.drag_left()
        event.accept()

    def dropEvent(self, event: QDropEvent) -> None:
        """Say where."""
        self.dropped(event.position())
        event.acceptProposedAction()
