"""The shelf: parts in trade groups; drag one on to the sheet, or press it and click."""

from __future__ import annotations

from functools import lru_cache
from typing import Final

from PySide6.QtCore import QPoint, QRectF, QSize, Qt, Signal
from PySide6.QtGui import QDrag, QKeyEvent, QMouseEvent, QPainter, QPalette, QPen, QPixmap
from PySide6.QtWidgets import (
    QAbstractButton,
    QApplication,
    QGridLayout,
    QLabel,
    QLineEdit,
    QScrollArea,
    QVBoxLayout,
    QWidget,
)

from onelinefault.desktop.catalogue import GROUPS, OFFERS, Offer, found, group_name
from onelinefault.desktop.drop import part_mime
from onelinefault.desktop.style import symbol_palette, widget_scale
from onelinefault.drawing.painter import Painter
from onelinefault.drawing.shapes import Box, Shapes, bounds
from onelinefault.drawing.symbols import Look, symbol

TILE: Final = QSize(64, 66)
WIDTH: Final = 168
_SCALE: Final = 0.72
_PICTURE: Final = QRectF(4, 5, 56, 43)
_NAME_SHARES: Final = (0.79, 0.74, 0.7)  # of the usual size; a long name is set smaller before it is cut


def offer_shapes(offer: Offer) -> Shapes:
    """The symbol of an offer as its tile shows it."""
    short = {"bus": 8, "note": 7}.get(offer.kind)
    count = int(offer.presets.get("count", 1))
    return symbol(offer.kind, Look(count=count, length=short, text="Note" if offer.kind == "note" else "")).shapes


@lru_cache(maxsize=4)
def _painter(colours: tuple[tuple[str, str], ...]) -> Painter:
    return Painter(dict(colours))


def paint_offer(painter: QPainter, offer: Offer, palette: QPalette, into: QRectF) -> None:
    """Paint an offer's symbol into the middle of a rectangle, smaller where it would not fit."""
    shapes = offer_shapes(offer)
    box: Box = bounds(shapes)
    scale = min(_SCALE, into.width() / box.width, into.height() / max(box.height, 1.0))
    painter.save()
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    painter.translate(into.center())
    painter.scale(scale, scale)
    painter.translate(-(box.left + box.right) / 2, -(box.top + box.bottom) / 2)
    _painter(tuple(symbol_palette(palette).items())).paint(painter, shapes)
    painter.restore()


class PartTile(QAbstractButton):
    """One part on the shelf: click or press Enter to place it, or drag it on to the sheet."""

    wanted = Signal(object)

    def __init__(self, offer: Offer, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.offer = offer
        self.setText(offer.shown)
        self._scale = widget_scale(self)
        self.setFixedSize(TILE * self._scale)
        self.setAccessibleName(offer.shown)
        self.setToolTip(self.tr("{0}: drag it on to the sheet, or click here and then there").format(offer.shown))
        self.setStatusTip(self.toolTip())
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setCursor(Qt.CursorShape.OpenHandCursor)
        self._pressed_at: QPoint | None = None
        self.clicked.connect(self._want)

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Remember where a drag may start."""
        self._pressed_at = event.position().toPoint()
        super().mousePressEvent(event)

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        """Far enough from the press it becomes a drag."""
        far = QApplication.startDragDistance()
        start = self._pressed_at
        if start is None or (event.position().toPoint() - start).manhattanLength() < far:
            return
        self._pressed_at = None
        self.setDown(False)
        self.start_drag()

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        """No drag any more."""
        self._pressed_at = None
        super().mouseReleaseEvent(event)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Enter places, as the space bar does."""
        if event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            self._want()
            return
        super().keyPressEvent(event)

    def start_drag(self) -> None:
        """Carry the part away; the sheet shows it where it would land."""
        drag = QDrag(self)
        drag.setMimeData(part_mime(self.offer.kind, dict(self.offer.presets)))
        picture = QPixmap(self.size())
        picture.fill(Qt.GlobalColor.transparent)
        painter = QPainter(picture)
        paint_offer(painter, self.offer, self.palette(), self._picture)
        painter.end()
        drag.setPixmap(picture)
        drag.setHotSpot(self._picture.center().toPoint())
        drag.exec(Qt.DropAction.CopyAction)

    def paintEvent(self, event: object) -> None:
        """The symbol over its name, framed; a thicker frame shows the focus."""
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        palette = self.palette()
        lit = self.underMouse() or self.isDown()
        frame = palette.highlight().color() if self.hasFocus() else palette.mid().color()
        width = 2.0 if self.hasFocus() else 1.0
        painter.setPen(QPen(frame, width))
        painter.setBrush(palette.midlight() if lit else palette.alternateBase())
        inset = width / 2
        painter.drawRoundedRect(QRectF(self.rect()).adjusted(inset, inset, -inset, -inset), 7, 7)
        paint_offer(painter, self.offer, palette, self._picture)
        painter.setPen(palette.windowText().color())
        self._paint_name(painter)

    @property
    def _picture(self) -> QRectF:
        """Where the symbol stands."""
        s = self._scale
        return QRectF(_PICTURE.x() * s, _PICTURE.y() * s, _PICTURE.width() * s, _PICTURE.height() * s)

    def _paint_name(self, painter: QPainter) -> None:
        font, room = self.font(), self.rect().adjusted(2, int(self._picture.bottom()), -2, -3)
        for share in _NAME_SHARES:
            font.setPointSizeF(self.font().pointSizeF() * share)
            painter.setFont(font)
            if painter.fontMetrics().horizontalAdvance(self.text()) <= room.width():
                break
        name = painter.fontMetrics().elidedText(self.text(), Qt.TextElideMode.ElideRight, room.width())
        painter.drawText(room, Qt.AlignmentFlag.AlignHCenter | Qt.AlignmentFlag.AlignVCenter, name)

    def _want(self) -> None:
        self.wanted.emit(self.offer)


class Shelf(QWidget):
    """All parts in their groups under a search line. wanted: (offer) shall hang at the pointer."""

    wanted = Signal(object)

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setAccessibleName(self.tr("Shelf of parts"))
        self.search = QLineEdit()
        self.search.setPlaceholderText(self.tr("Find a part"))
        self.search.setAccessibleName(self.tr("Find a part"))
        self.search.setClearButtonEnabled(True)
        self.search.setToolTip(self.tr("Type a few letters; Enter places the first part that fits"))
        self.search.textChanged.connect(self._filter)
        self.search.returnPressed.connect(self._place_first)
        self.tiles = [PartTile(offer) for offer in OFFERS]
        self._groups = {group: _GroupOfTiles(group_name(group)) for group in GROUPS}
        self._nothing = QLabel(self.tr("No part fits."))
        self._nothing.setProperty("part", "muted")
        self._nothing.hide()
        self._lay_out()
        self._filter("")

    def _lay_out(self) -> None:
        inner = QWidget()
        column = QVBoxLayout(inner)
        column.setContentsMargins(14, 6, 4, 12)
        column.setSpacing(6)
        column.addWidget(self._nothing)
        for group in self._groups.values():
            column.addWidget(group)
        column.addStretch(1)
        for tile in self.tiles:
            tile.wanted.connect(self.wanted)
        scroll = QScrollArea()
        scroll.setWidget(inner)
        scroll.setWidgetResizable(True)
        scroll.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        scroll.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        whole = QVBoxLayout(self)
        whole.setContentsMargins(0, 0, 0, 0)
        whole.setSpacing(2)
        line = QVBoxLayout()
        line.setContentsMargins(12, 2, 12, 2)
        line.addWidget(self.search)
        whole.addLayout(line)
        whole.addWidget(scroll)
        self._width = round(WIDTH * widget_scale(self))
        self.setMinimumWidth(self._width)

    def sizeHint(self) -> QSize:
        """Two tiles wide."""
        return QSize(self._width, 600)

    def _filter(self, typed: str) -> None:
        fitting = found(typed)
        for group, holder in self._groups.items():
            holder.show_tiles([t for t in self.tiles if t.offer.group == group and t.offer in fitting])
        for tile in self.tiles:
            tile.setVisible(tile.offer in fitting)
        self._nothing.setVisible(not fitting)

    def _place_first(self) -> None:
        fitting = found(self.search.text())
        if fitting:
            self.wanted.emit(fitting[0])


class _GroupOfTiles(QWidget):
    """A heading and its tiles, two in a row."""

    def __init__(self, name: str) -> None:
        super().__init__()
        heading = QLabel(name.upper())
        heading.setProperty("part", "caps")
        self._grid = QGridLayout(self)
        self._grid.setContentsMargins(0, 0, 0, 4)
        self._grid.setHorizontalSpacing(8)
        self._grid.setVerticalSpacing(6)
        self._grid.addWidget(heading, 0, 0, 1, 3)
        self._grid.setColumnStretch(2, 1)

    def show_tiles(self, tiles: list[PartTile]) -> None:
        """Show these tiles and no others."""
        for place, tile in enumerate(tiles):
            self._grid.addWidget(tile, 1 + place // 2, place % 2)
        self.setVisible(bool(tiles))
