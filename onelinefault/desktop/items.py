"""Scene items: each knows an id and how to paint a display list; none holds data of the plant."""

from dataclasses import replace

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPainterPath, QPen
from PySide6.QtWidgets import QGraphicsItem, QStyleOptionGraphicsItem, QWidget

from onelinefault.drawing.painter import Painter
from onelinefault.drawing.painter_sprites import SpritePainter
from onelinefault.drawing.palette import SHEET
from onelinefault.drawing.part_picture import PartPicture
from onelinefault.drawing.shapes import MODULE_DU, Box, Shapes, Text, bounds
from onelinefault.drawing.wire_picture import WirePicture

PAINTER = Painter(SHEET)  # one cache of paths for all items
SPRITES = SpritePainter(PAINTER)
WORDS_FROM_SCALE = 0.42  # below this scale labels could not be read
HALO_FROM_SCALE = 0.9  # below it halos round words are too thin to matter, and cost more than all else
OVERVIEW_BELOW_SCALE = 0.3  # below it one item paints all outlines at once

Z_PAGE, Z_RIBBONS, Z_WIRES, Z_PARTS, Z_OVER, Z_TAGS, Z_PIN, Z_GUIDES = range(-10, 70, 10)


def rect_of(box: Box, margin: float = 0.0) -> QRectF:
    """A box as a rectangle of the scene, with a margin."""
    return QRectF(box.left - margin, box.top - margin, box.width + 2 * margin, box.height + 2 * margin)


class ShapesItem(QGraphicsItem):
    """Paints any display list: page, ribbons, gauges, pin."""

    def __init__(self, z: float) -> None:
        super().__init__()
        self._shapes: Shapes = ()
        self._rect = QRectF()
        self.setZValue(z)
        self.setAcceptedMouseButtons(Qt.MouseButton.NoButton)

    @property
    def shapes(self) -> Shapes:
        """What is painted."""
        return self._shapes

    def show_shapes(self, shapes: Shapes) -> None:
        """Paint something else from now on."""
        if shapes != self._shapes:
            self.prepareGeometryChange()
            self._shapes = shapes
            self._rect = rect_of(bounds(shapes), 3) if shapes else QRectF()
            self.update()

    def boundingRect(self) -> QRectF:
        """Extent in du."""
        return self._rect

    def paint(self, painter: QPainter, option: QStyleOptionGraphicsItem, widget: QWidget | None = None) -> None:
        """Paint the shapes."""
        lod = QStyleOptionGraphicsItem.levelOfDetailFromTransform(painter.worldTransform())
        PAINTER.paint(painter, self._shapes, lod)


class PartItem(QGraphicsItem):
    """The symbol and words of one part."""

    def __init__(self, picture: PartPicture) -> None:
        super().__init__()
        self.picture = picture
        self.chosen = False
        self._plain: Shapes | None = None
        self.setZValue(Z_PARTS)
        self._rect = rect_of(picture.box, 6)

    def show_picture(self, picture: PartPicture) -> None:
        """Paint the part as it is now."""
        self.prepareGeometryChange()
        self.picture = picture
        self._plain = None
        self._rect = rect_of(picture.box, 6)
        self.update()

    def choose(self, chosen: bool, *, repaint: bool = True) -> None:
        """Mark as selected or not."""
        if chosen != self.chosen:
            self.chosen = chosen
            if repaint:
                self.update()

    def boundingRect(self) -> QRectF:
        """Extent of symbol and words in du."""
        return self._rect

    def paint(self, painter: QPainter, option: QStyleOptionGraphicsItem, widget: QWidget | None = None) -> None:
        """Paint the halo of the selection, the symbol, and the words where they can be read."""
        lod = QStyleOptionGraphicsItem.levelOfDetailFromTransform(painter.worldTransform())
        if self.chosen:
            _paint_halo(painter, rect_of(self.picture.body, 2.5 if self.picture.symbol.kind == "bus" else 5))
        painter.translate(self.picture.x, self.picture.y)
        SPRITES.paint(painter, self.picture.symbol.shapes, lod)
        painter.translate(-self.picture.x, -self.picture.y)
        if self.picture.words and lod >= HALO_FROM_SCALE:
            SPRITES.paint(painter, self.picture.words, lod)
        elif self.picture.words and lod >= WORDS_FROM_SCALE:
            PAINTER.paint(painter, self._plain_words(), lod)

    def _plain_words(self) -> Shapes:
        """The words without halo; the same tuple each time, which the painter relies on."""
        if self._plain is None:
            words = self.picture.words
            self._plain = tuple(replace(w, halo="none") if isinstance(w, Text) else w for w in words)
        return self._plain


class WireItem(QGraphicsItem):
    """One wire."""

    def __init__(self, picture: WirePicture) -> None:
        super().__init__()
        self.picture = picture
        self.chosen = False
        self.setZValue(Z_WIRES)
        self._rect = rect_of(picture.box, 6)

    def show_picture(self, picture: WirePicture) -> None:
        """Paint the wire as it runs now."""
        self.prepareGeometryChange()
        self.picture = picture
        self._rect = rect_of(picture.box, 6)
        self.update()

    def choose(self, chosen: bool, *, repaint: bool = True) -> None:
        """Mark as selected or not."""
        if chosen != self.chosen:
            self.chosen = chosen
            if repaint:
                self.update()

    def boundingRect(self) -> QRectF:
        """Extent in du."""
        return self._rect

    def paint(self, painter: QPainter, option: QStyleOptionGraphicsItem, widget: QWidget | None = None) -> None:
        """Paint the wire over the halo of the selection."""
        if self.chosen:
            path = QPainterPath()
            points = [QPointF(x * MODULE_DU, y * MODULE_DU) for x, y in self.picture.path]
            path.moveTo(points[0])
            for point in points[1:]:
                path.lineTo(point)
            pen = QPen(QColor(SHEET["hover"]), 8)
            pen.setCapStyle(Qt.PenCapStyle.RoundCap)
            painter.setPen(pen)
            painter.setBrush(Qt.BrushStyle.NoBrush)
            painter.drawPath(path)
        PAINTER.paint(painter, self.picture.shapes)


class TagItem(ShapesItem):
    """A callout that can be dragged; knows its key and where it points."""

    def __init__(self, key: str) -> None:
        super().__init__(Z_TAGS)
        self.key = key
        self.anchor = (0.0, 0.0)
        self.box = Box(0, 0, 0, 0)


def _paint_halo(painter: QPainter, rect: QRectF) -> None:
    painter.setPen(QPen(QColor(SHEET["selection"]), 1.4))
    colour = QColor(SHEET["hover"])
    colour.setAlpha(110)
    painter.setBrush(colour)
    painter.drawRoundedRect(rect, 5, 5)
