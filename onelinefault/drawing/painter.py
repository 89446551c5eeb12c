"""Paints a display list with QPainter: the same on the screen, on paper, in PDF, SVG and pictures.

The caller scales the painter so that one unit is one du. Text is real text: fonts are set at ten times their size in
du under a scale of 1/10, because pixel sizes are whole numbers; PDF and SVG stay searchable. Kerning and ligatures are
off, so that a text is exactly as wide as `metrics.text_width` says.
"""

from __future__ import annotations

from collections import OrderedDict
from collections.abc import Mapping
from functools import lru_cache
from itertools import pairwise
from math import inf
from pathlib import Path as FilePath
from typing import Final, TypeAlias

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QBrush, QColor, QFont, QFontDatabase, QPainter, QPainterPath, QPen

from onelinefault.drawing.grouping import fill_of, grouped
from onelinefault.drawing.palette import SHEET
from onelinefault.drawing.shapes import (
    Circle,
    Command,
    Line,
    Path,
    Polygon,
    Polyline,
    Rect,
    Shape,
    Shapes,
    Stroke,
    Text,
)
from onelinefault.errors import OutputError

TEXT_MIN_PX: Final = 3.5  # smaller text is not painted: nobody could read it
_TEXT_SCALE: Final = 10  # font pixels per du
_CACHE_SIZE: Final = 8192
_FONT_FILES: Final = ("DejaVuSans.ttf", "DejaVuSans-Bold.ttf")
_HALO_DU: Final = 4.0  # width of the pen round the letters, half of it outside


def resources_root() -> FilePath:
    """The folder of shipped files: inside the installed package, or beside it in a source tree.

    Raises OutputError when there is none.
    """
    package = FilePath(__file__).parent.parent
    for folder in (package / "resources", package.parent / "resources"):
        if folder.is_dir():
            return folder
    raise OutputError(f"The program's own files are missing ({package / 'resources'}). Install the program again.")


@lru_cache(maxsize=1)
def load_fonts() -> str:
    """Make the shipped fonts known to Qt, once, and give their family name. A QGuiApplication must exist.

    Raises OutputError when a font file is missing or broken.
    """
    families: list[str] = []
    for name in _FONT_FILES:
        file = resources_root() / "fonts" / name
        number = QFontDatabase.addApplicationFont(str(file)) if file.is_file() else -1
        if number < 0:
            raise OutputError(f"The font {name} is missing or broken. Install the program again.")
        families += QFontDatabase.applicationFontFamilies(number)
    return families[0]


@lru_cache(maxsize=64)
def text_font(size_du: float, bold: bool) -> QFont:
    """The font for a text of a size in du, to be used under a scale of 1/10."""
    font = QFont(load_fonts())
    font.setPixelSize(max(1, round(size_du * _TEXT_SCALE)))
    font.setBold(bold)
    font.setKerning(False)
    font.setHintingPreference(QFont.HintingPreference.PreferNoHinting)
    for feature in (b"liga", b"clig"):
        font.setFeature(QFont.Tag.fromString(feature.decode()), 0)
    return font


class _PathStep:
    """One path with its pen and brush."""

    def __init__(self, path: QPainterPath, pen: QPen, brush: QBrush) -> None:
        self._path, self._pen, self._brush = path, pen, brush

    def draw(self, painter: QPainter, lod: float) -> None:
        """Stroke and fill; the level of detail does not matter."""
        painter.setPen(self._pen)
        painter.setBrush(self._brush)
        painter.drawPath(self._path)


class _TextStep:
    """One line of text, with what lies under it to set it off from lines."""

    def __init__(self, text: Text, palette: Mapping[str, str]) -> None:
        self._text = text
        self._font = text_font(text.size_du, text.weight == "bold")
        self._pen = QPen(QColor(palette[text.role]))
        self._paper = QColor(palette["paper"])
        self._origin = QPointF(text.left * _TEXT_SCALE, text.baseline_y * _TEXT_SCALE)
        self._halo: QPainterPath | None = None

    def draw(self, painter: QPainter, lod: float) -> None:
        """Draw the text unless it is too small to be read."""
        if self._text.size_du * lod < TEXT_MIN_PX:
            return
        painter.scale(1 / _TEXT_SCALE, 1 / _TEXT_SCALE)
        if self._text.halo != "none":
            self._draw_halo(painter)
        painter.setFont(self._font)
        painter.setPen(self._pen)
        painter.drawText(self._origin, self._text.text)
        painter.scale(_TEXT_SCALE, _TEXT_SCALE)

    def _draw_halo(self, painter: QPainter) -> None:
        if self._halo is None:
            self._halo = self._halo_path()
        pen = QPen(self._paper, _HALO_DU * _TEXT_SCALE, Qt.PenStyle.SolidLine)
        pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
        painter.setPen(pen)
        painter.setBrush(self._paper)
        painter.drawPath(self._halo)

    def _halo_path(self) -> QPainterPath:
        path = QPainterPath()
        if self._text.halo == "outline":
            path.addText(self._origin, self._font, self._text.text)
        else:
            box = self._text.box()
            corner = QPointF(box.left, box.top) * _TEXT_SCALE
            path.addRect(QRectF(corner, QPointF(box.right, box.bottom) * _TEXT_SCALE))
        return path


_Step: TypeAlias = _PathStep | _TextStep


class Painter:
    """Paints display lists in the colours of one palette and remembers what it made of each list.

    Lists are remembered by identity: pass the same tuple again (as the cached symbols do) and nothing is built anew.
    """

    def __init__(self, palette: Mapping[str, str] = SHEET) -> None:
        self._palette = palette
        self._made: OrderedDict[int, tuple[Shapes, list[_Step]]] = OrderedDict()

    def paint(self, painter: QPainter, shapes: Shapes, lod: float = inf) -> None:
        """Paint shapes on a painter whose unit is 1 du. lod: device pixels per du; infinite on paper.

        Pen, brush and font of the painter are changed, its transformation is not. Raises KeyError for a role that the
        palette lacks.
        """
        for step in self._steps(shapes):
            step.draw(painter, lod)

    def _steps(self, shapes: Shapes) -> list[_Step]:
        key = id(shapes)
        known = self._made.get(key)
        if known is not None:  # the entry holds the tuple, so its id cannot have gone to another one
            return known[1]
        steps = self._make(shapes)
        self._made[key] = (shapes, steps)
        if len(self._made) > _CACHE_SIZE:
            self._made.popitem(last=False)
        return steps

    def _make(self, shapes: Shapes) -> list[_Step]:
        """Painting steps: as few paths as give the same picture."""
        return [self._step(group) for group in grouped(shapes)]

    def _step(self, group: list[Shape]) -> _Step:
        first = group[0]
        if isinstance(first, Text):
            return _TextStep(first, self._palette)
        path = QPainterPath()
        path.setFillRule(Qt.FillRule.WindingFill)
        for shape in group:
            add_to_path(path, shape)
        fill = next((f for shape in group if (f := fill_of(shape)) is not None), None)
        return _PathStep(path, self._pen(first.stroke), self._brush(fill))

    def _pen(self, stroke: Stroke | None) -> QPen:
        if stroke is None:
            return QPen(Qt.PenStyle.NoPen)
        pen = QPen(QColor(self._palette[stroke.role]), stroke.width_du)
        pen.setCapStyle(Qt.PenCapStyle.RoundCap)
        pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
        if stroke.dash:
            pen.setDashPattern([length / stroke.width_du for length in stroke.dash])
        return pen

    def _brush(self, role: str | None) -> QBrush:
        return QBrush(Qt.BrushStyle.NoBrush) if role is None else QBrush(QColor(self._palette[role]))


@lru_cache(maxsize=8)
def _painter_for(palette: tuple[tuple[str, str], ...]) -> Painter:
    return Painter(dict(palette))


def paint(painter: QPainter, shapes: Shapes, palette: Mapping[str, str] = SHEET, lod: float = inf) -> None:
    """Paint shapes once, as `Painter.paint` does; who paints often keeps a Painter."""
    _painter_for(tuple(palette.items())).paint(painter, shapes, lod)


def overview_paths(shapes: Shapes) -> dict[str, QPainterPath]:
    """One path of outlines for each colour role, without text: for drawing many symbols at once, very small."""
    paths: dict[str, QPainterPath] = {}
    for shape in shapes:
        if isinstance(shape, Text):
            continue
        role = shape.stroke.role if shape.stroke else fill_of(shape)
        if role is not None and role != "paper":
            add_to_path(paths.setdefault(role, QPainterPath()), shape)
    return paths


def add_to_path(path: QPainterPath, shape: Shape) -> None:
    """Add a shape's outline in du to a path. Text has none and adds nothing."""
    match shape:
        case Line():
            path.moveTo(shape.x1, shape.y1)
            path.lineTo(shape.x2, shape.y2)
        case Polyline() | Polygon():
            path.moveTo(*shape.points[0])
            for start, end in pairwise(shape.points):
                if start != end:
                    path.lineTo(*end)
            if isinstance(shape, Polygon):
                path.closeSubpath()
        case Circle():
            path.addEllipse(QPointF(shape.cx, shape.cy), shape.r, shape.r)
        case Rect():
            radius = min(shape.radius, shape.width / 2, shape.height / 2)
            path.addRoundedRect(QRectF(shape.x, shape.y, shape.width, shape.height), radius, radius)
        case Path():
            for command in shape.commands:
                _add_command(path, command)


def _add_command(path: QPainterPath, command: Command) -> None:
    ends = [QPointF(x, y) for x, y in command.points]
    match command.letter:
        case "M":
            path.moveTo(ends[0])
        case "L":
            path.lineTo(ends[0])
        case "Q":
            path.quadTo(ends[0], ends[1])
        case "C":
            path.cubicTo(ends[0], ends[1], ends[2])
        case "Z":
            path.closeSubpath()
