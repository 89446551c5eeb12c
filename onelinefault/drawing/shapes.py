"""The display list of the drawing: frozen shapes without a toolkit, moved and measured by pure functions.

Unit: du, drawing units; 10 du = 1 module of the sheet's grid = 2.5 mm on paper. x to the right, y downwards.
Shapes name a colour *role* ("ink", "level-mv"); `palette` says which colour that is. One list feeds screen, paper,
PDF, SVG and DXF.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from math import ceil, cos, radians, sin, tan
from typing import Final, Literal, NamedTuple, TypeAlias

from onelinefault.drawing.curves import extreme_points
from onelinefault.drawing.metrics import ASCENT_EM, CAP_HEIGHT_EM, DESCENT_EM, text_width

MODULE_DU: Final = 10.0
MM_PER_DU: Final = 0.25

Point: TypeAlias = tuple[float, float]
Anchor: TypeAlias = Literal["start", "middle", "end"]
Baseline: TypeAlias = Literal["alphabetic", "middle", "top", "bottom"]
Weight: TypeAlias = Literal["regular", "bold"]
Halo: TypeAlias = Literal["none", "outline", "box"]


class Box(NamedTuple):
    """An upright rectangle in du, a plain tuple (left, top, right, bottom) for those who want one."""

    left: float
    top: float
    right: float
    bottom: float

    @property
    def width(self) -> float:
        """Width in du."""
        return self.right - self.left

    @property
    def height(self) -> float:
        """Height in du."""
        return self.bottom - self.top

    @property
    def centre(self) -> Point:
        """The middle of the box, du."""
        return (self.left + self.right) / 2, (self.top + self.bottom) / 2

    def united(self, other: Box) -> Box:
        """The smallest box round both."""
        return Box(
            min(self.left, other.left),
            min(self.top, other.top),
            max(self.right, other.right),
            max(self.bottom, other.bottom),
        )

    def grown(self, margin_du: float) -> Box:
        """The box with a margin on all four sides."""
        return Box(self.left - margin_du, self.top - margin_du, self.right + margin_du, self.bottom + margin_du)

    def moved(self, dx: float, dy: float) -> Box:
        """The box shifted by (dx, dy) du."""
        return Box(self.left + dx, self.top + dy, self.right + dx, self.bottom + dy)

    def holds(self, x: float, y: float) -> bool:
        """Whether a point lies in the box or on its edge."""
        return self.left <= x <= self.right and self.top <= y <= self.bottom

    def overlaps(self, other: Box) -> bool:
        """Whether the two boxes share more than an edge."""
        return (
            self.left < other.right and other.left < self.right and self.top < other.bottom and other.top < self.bottom
        )


def box_of(points: Iterable[Point], margin_du: float = 0.0) -> Box:
    """The box round some points. Raises ValueError for none."""
    xs, ys = zip(*points, strict=True)
    return Box(min(xs), min(ys), max(xs), max(ys)).grown(margin_du)


class Placement(NamedTuple):
    """How a part lies on the sheet: first mirrored left to right, then turned clockwise, then moved (du)."""

    turn: int = 0
    mirrored: bool = False
    dx: float = 0.0
    dy: float = 0.0

    def point(self, x: float, y: float) -> Point:
        """Where a point of the part's own frame comes to lie."""
        if self.mirrored:
            x = -x
        for _ in range(self.turn % 4):
            x, y = -y, x
        return x + self.dx, y + self.dy

    def points(self, points: Iterable[Point]) -> tuple[Point, ...]:
        """Where several points come to lie."""
        return tuple(self.point(x, y) for x, y in points)


@dataclass(frozen=True, slots=True)
class Stroke:
    """A line's colour role, width and dash lengths (line, gap, ...) in du; ends and joins are always round."""

    role: str = "ink"
    width_du: float = 2.0
    dash: tuple[float, ...] = ()


@dataclass(frozen=True, slots=True)
class Line:
    """A straight line from (x1, y1) to (x2, y2)."""

    x1: float
    y1: float
    x2: float
    y2: float
    stroke: Stroke = Stroke()

    def placed(self, where: Placement) -> Line:
        """The line at its place."""
        return Line(*where.point(self.x1, self.y1), *where.point(self.x2, self.y2), self.stroke)

    def box(self) -> Box:
        """Extent with the stroke's width."""
        return box_of(((self.x1, self.y1), (self.x2, self.y2)), self.stroke.width_du / 2)


@dataclass(frozen=True, slots=True)
class Polyline:
    """An open line through points."""

    points: tuple[Point, ...]
    stroke: Stroke = Stroke()

    def placed(self, where: Placement) -> Polyline:
        """The line at its place."""
        return replace(self, points=where.points(self.points))

    def box(self) -> Box:
        """Extent with the stroke's width."""
        return box_of(self.points, self.stroke.width_du / 2)


@dataclass(frozen=True, slots=True)
class Polygon:
    """A closed outline through points, filled with a role or open (None)."""

    points: tuple[Point, ...]
    stroke: Stroke | None = Stroke()
    fill: str | None = None

    def placed(self, where: Placement) -> Polygon:
        """The polygon at its place."""
        return replace(self, points=where.points(self.points))

    def box(self) -> Box:
        """Extent with the stroke's width."""
        return box_of(self.points, _half(self.stroke))


@dataclass(frozen=True, slots=True)
class Circle:
    """A circle round (cx, cy) with radius r."""

    cx: float
    cy: float
    r: float
    stroke: Stroke | None = Stroke()
    fill: str | None = None

    def placed(self, where: Placement) -> Circle:
        """The circle at its place."""
        cx, cy = where.point(self.cx, self.cy)
        return replace(self, cx=cx, cy=cy)

    def box(self) -> Box:
        """Extent with the stroke's width."""
        return box_of(((self.cx, self.cy),), self.r + _half(self.stroke))


@dataclass(frozen=True, slots=True)
class Rect:
    """An upright rectangle with corner (x, y), rounded by ``radius``."""

    x: float
    y: float
    width: float
    height: float
    radius: float = 0.0
    stroke: Stroke | None = Stroke()
    fill: str | None = None

    def placed(self, where: Placement) -> Rect:
        """The rectangle at its place, again upright."""
        corners = where.points(((self.x, self.y), (self.x + self.width, self.y + self.height)))
        turned = box_of(corners)
        return replace(self, x=turned.left, y=turned.top, width=turned.width, height=turned.height)

    def box(self) -> Box:
        """Extent with the stroke's width."""
        return Box(self.x, self.y, self.x + self.width, self.y + self.height).grown(_half(self.stroke))


class Command(NamedTuple):
    """One step of a path with SVG's meaning, absolute: M x y, L x y, Q cx cy x y, C cx cy cx cy x y, Z."""

    letter: Literal["M", "L", "Q", "C", "Z"]
    points: tuple[Point, ...] = ()


@dataclass(frozen=True, slots=True)
class Path:
    """Straight and curved steps. With a ``pivot`` the path stays upright and only moves, as that point does."""

    commands: tuple[Command, ...]
    stroke: Stroke | None = Stroke()
    fill: str | None = None
    pivot: Point | None = None

    def placed(self, where: Placement) -> Path:
        """The path at its place."""
        pivot = None if self.pivot is None else where.point(*self.pivot)
        if self.pivot is not None and pivot is not None:
            where = Placement(dx=pivot[0] - self.pivot[0], dy=pivot[1] - self.pivot[1])
        commands = tuple(Command(c.letter, where.points(c.points)) for c in self.commands)
        return replace(self, commands=commands, pivot=pivot)

    def box(self) -> Box:
        """Exact extent of the curves with the stroke's width. Raises ValueError for a path without a point."""
        return box_of(extreme_points(command.points for command in self.commands), _half(self.stroke))


@dataclass(frozen=True, slots=True)
class Text:
    """One line of upright text at (x, y). Middle baseline: the middle of the capitals. ``pivot`` as for Path."""

    x: float
    y: float
    text: str
    size_du: float = 10.0
    weight: Weight = "regular"
    anchor: Anchor = "start"
    baseline: Baseline = "alphabetic"
    role: str = "ink"
    halo: Halo = "none"
    pivot: Point | None = None

    @property
    def left(self) -> float:
        """Where the line of text begins, du."""
        shift = {"start": 0.0, "middle": 0.5, "end": 1.0}[self.anchor]
        return self.x - shift * text_width(self.text, self.size_du, self.weight == "bold")

    @property
    def baseline_y(self) -> float:
        """Height of the line that the letters stand on, du."""
        below = {"alphabetic": 0.0, "middle": CAP_HEIGHT_EM / 2, "top": ASCENT_EM, "bottom": -DESCENT_EM}
        return self.y + below[self.baseline] * self.size_du

    def placed(self, where: Placement) -> Text:
        """The text at its place, still upright: its middle, or its pivot, goes where the part takes it."""
        x, y = self.pivot or self._middle()
        to_x, to_y = where.point(x, y)
        pivot = None if self.pivot is None else (to_x, to_y)
        return replace(self, x=self.x + to_x - x, y=self.y + to_y - y, pivot=pivot)

    def _middle(self) -> Point:
        width = text_width(self.text, self.size_du, self.weight == "bold")
        return self.left + width / 2, self.baseline_y - self.size_du * CAP_HEIGHT_EM / 2

    def box(self) -> Box:
        """Extent of the line, from its ascent to its descent."""
        width = text_width(self.text, self.size_du, self.weight == "bold")
        top, bottom = self.baseline_y - ASCENT_EM * self.size_du, self.baseline_y + DESCENT_EM * self.size_du
        return Box(self.left, top, self.left + width, bottom)


Shape: TypeAlias = Line | Polyline | Polygon | Circle | Rect | Path | Text
Shapes: TypeAlias = tuple[Shape, ...]


def transform(
    shapes: Iterable[Shape], turn: int = 0, mirrored: bool = False, dx: float = 0.0, dy: float = 0.0
) -> Shapes:
    """Shapes mirrored left to right, then turned by quarter turns clockwise, then moved by (dx, dy) du."""
    where = Placement(turn, mirrored, dx, dy)
    return tuple(shape.placed(where) for shape in shapes)


def bounds(shapes: Iterable[Shape]) -> Box:
    """The smallest box round all shapes, strokes and text lines included. Raises ValueError for none."""
    boxes = [shape.box() for shape in shapes]
    if not boxes:
        raise ValueError("no shapes, so no bounds")
    return Box(
        min(b.left for b in boxes), min(b.top for b in boxes), max(b.right for b in boxes), max(b.bottom for b in boxes)
    )


def steps(*points: Point, closed: bool = False) -> tuple[Command, ...]:
    """A polyline as path steps."""
    first, *others = points
    return (Command("M", (first,)), *(Command("L", (p,)) for p in others), *((Command("Z"),) if closed else ()))


def arc(
    cx: float, cy: float, r: float, start_deg: float, sweep_deg: float, *, joined: bool = False
) -> tuple[Command, ...]:
    """A circular arc as cubic steps: angles from the right, clockwise as y points down.

    ``joined`` begins with a line to the arc's start instead of a new stroke. The usual cubic with handles of
    4/3·tan(sweep/4)·r, at most a quarter turn each, is off by less than 0.03 % of the radius.
    """
    count = max(1, ceil(abs(sweep_deg) / 90))
    step = radians(sweep_deg) / count
    reach = 4 / 3 * tan(step / 4) * r
    angle = radians(start_deg)
    commands = [Command("L" if joined else "M", ((cx + r * cos(angle), cy + r * sin(angle)),))]
    for _ in range(count):
        end = angle + step
        near = (cx + r * cos(angle) - reach * sin(angle), cy + r * sin(angle) + reach * cos(angle))
        far = (cx + r * cos(end) + reach * sin(end), cy + r * sin(end) - reach * cos(end))
        commands.append(Command("C", (near, far, (cx + r * cos(end), cy + r * sin(end)))))
        angle = end
    return tuple(commands)


def _half(stroke: Stroke | None) -> float:
    return 0.0 if stroke is None else stroke.width_du / 2
