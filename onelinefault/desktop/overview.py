"""The sheet from far away: all outlines merged into one path for each colour, painted at once, without words."""

from collections.abc import Mapping

from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPainterPath, QPen
from PySide6.QtWidgets import QGraphicsItem, QStyleOptionGraphicsItem, QWidget

from onelinefault.desktop.items import rect_of
from onelinefault.drawing.painter import overview_paths
from onelinefault.drawing.palette import SHEET
from onelinefault.drawing.sheet import SheetPicture
from onelinefault.drawing.symbols import Symbol

_WIDTH_DU = 2.4


class OverviewItem(QGraphicsItem):
    """Paints a whole sheet picture; its paths are built when they are first needed after a change."""

    def __init__(self) -> None:
        super().__init__()
        self._picture: SheetPicture | None = None
        self._chosen: frozenset[str] = frozenset()
        self._paths: Mapping[str, QPainterPath] | None = None
        self._rect = QRectF()
        self.setAcceptedMouseButtons(Qt.MouseButton.NoButton)
        self.setVisible(False)

    def show_picture(self, picture: SheetPicture, chosen: frozenset[str], page: QRectF) -> None:
        """Paint this picture from now on, what is chosen with a halo."""
        self.prepareGeometryChange()
        self._picture, self._chosen, self._paths, self._rect = picture, chosen, None, page
        self.update()

    def boundingRect(self) -> QRectF:
        """Extent in du."""
        return self._rect

    def paint(self, painter: QPainter, option: QStyleOptionGraphicsItem, widget: QWidget | None = None) -> None:
        """Paint halos, then one path for each colour."""
        if self._picture is None:
            return
        if self._paths is None:
            self._paths = merged_paths(self._picture)
        painter.setPen(QPen(QColor(SHEET["selection"]), 3))
        painter.setBrush(QColor(SHEET["hover"]))
        for key in self._chosen & self._picture.parts.keys():
            painter.drawRect(rect_of(self._picture.parts[key].body, 5))
        painter.setBrush(Qt.BrushStyle.NoBrush)
        for role, path in self._paths.items():
            painter.setPen(QPen(QColor(SHEET[role]), _WIDTH_DU))
            painter.drawPath(path)


def merged_paths(picture: SheetPicture) -> dict[str, QPainterPath]:
    """All outlines of a sheet by colour role, in du."""
    merged: dict[str, QPainterPath] = {}
    for part in picture.parts.values():
        for role, path in _symbol_paths(part.symbol).items():
            merged.setdefault(role, QPainterPath()).addPath(path.translated(part.x, part.y))
    for wire in picture.wires.values():
        for role, path in overview_paths(wire.shapes).items():
            merged.setdefault(role, QPainterPath()).addPath(path)
    return merged


_PATHS: dict[int, tuple[Symbol, Mapping[str, QPainterPath]]] = {}  # by identity: equal looks share one symbol


def _symbol_paths(symbol: Symbol) -> Mapping[str, QPainterPath]:
    known = _PATHS.get(id(symbol))
    if known is None:
        known = _PATHS[id(symbol)] = (symbol, overview_paths(symbol.shapes))
    return known[1]
