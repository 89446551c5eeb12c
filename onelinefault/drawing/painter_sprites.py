"""Paints symbols on the screen as small ready pictures: many equal symbols at one zoom cost one painting.

Only for the screen: paper, PDF and SVG take the outlines of `painter`. A picture is made for each list of shapes, scale
and half-pixel position, so it lies within a quarter of a pixel of where the outlines would be.
"""

from __future__ import annotations

from collections import OrderedDict
from math import ceil, floor
from typing import Final, NamedTuple

from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QPainter, QPixmap, QTransform

from onelinefault.drawing.painter import Painter
from onelinefault.drawing.shapes import Shapes, bounds

LARGEST_PX: Final = 480  # larger symbols are few on a screen, and outlines are sharper
_KEPT: Final = 4096
_PHASES: Final = 2


class _Sprite(NamedTuple):
    shapes: Shapes  # kept, so that the id in the key cannot go to another list
    pixmap: QPixmap
    corner: QPointF  # of the pixmap from the symbol's origin, device-independent pixels


class SpritePainter:
    """Paints display lists on the screen through a store of small pictures; falls back on a Painter's outlines."""

    def __init__(self, painter: Painter) -> None:
        self._painter = painter
        self._sprites: OrderedDict[tuple[int, float, int, int], _Sprite] = OrderedDict()

    def paint(self, painter: QPainter, shapes: Shapes, lod: float) -> None:
        """Paint shapes on a painter whose unit is 1 du; lod: pixels per du.

        Turned or distorted painters, and symbols larger than LARGEST_PX, get the outlines.
        """
        device = painter.deviceTransform()
        scale = device.m11()
        if scale <= 0 or device.m22() != scale or device.m12() or device.m21():
            self._painter.paint(painter, shapes, lod)
            return
        x, y = device.dx(), device.dy()
        column, fx = _snapped(x)
        row, fy = _snapped(y)
        world = painter.worldTransform()
        ratio = scale / world.m11()  # device pixels per logical pixel
        sprite = self._sprite(shapes, scale, fx, fy, ratio)
        if sprite is None:
            self._painter.paint(painter, shapes, lod)
            return
        left, top = world.dx() + (column - x) / ratio, world.dy() + (row - y) / ratio
        painter.setWorldTransform(QTransform.fromTranslate(left, top))
        painter.drawPixmap(sprite.corner, sprite.pixmap)
        painter.setWorldTransform(world)

    def _sprite(self, shapes: Shapes, scale: float, fx: int, fy: int, ratio: float) -> _Sprite | None:
        key = (id(shapes), scale, fx, fy)
        known = self._sprites.get(key)
        if known is None:
            made = self._make(shapes, scale, fx / _PHASES, fy / _PHASES, ratio)
            if made is None:
                return None
            self._sprites[key] = known = made
            if len(self._sprites) > _KEPT:
                self._sprites.popitem(last=False)
        return known

    def _make(self, shapes: Shapes, scale: float, dx: float, dy: float, ratio: float) -> _Sprite | None:
        box = bounds(shapes)
        left, top = floor(box.left * scale + dx) - 1, floor(box.top * scale + dy) - 1
        width, height = ceil(box.right * scale + dx) + 1 - left, ceil(box.bottom * scale + dy) + 1 - top
        if max(width, height) > LARGEST_PX * ratio:
            return None
        pixmap = QPixmap(width, height)
        pixmap.fill(Qt.GlobalColor.transparent)
        brush = QPainter(pixmap)
        brush.setRenderHint(QPainter.RenderHint.Antialiasing)
        brush.translate(dx - left, dy - top)
        brush.scale(scale, scale)
        self._painter.paint(brush, shapes, scale)
        brush.end()
        pixmap.setDevicePixelRatio(ratio)
        return _Sprite(shapes, pixmap, QPointF(left / ratio, top / ratio))


def _snapped(position: float) -> tuple[int, int]:
    """A device coordinate as a whole pixel and the nearest half pixel beyond it, as a number of halves."""
    halves = floor(position * _PHASES + 0.5)
    return halves // _PHASES, halves % _PHASES
