"""Wires: where they run, how they look, and the tags by which they go on on another sheet."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from itertools import pairwise
from math import floor

from onelinefault.drawing.part_picture import PartPicture, Roles
from onelinefault.drawing.routing import E, N, S, W, route
from onelinefault.drawing.routing_lattice import Box as GridBox
from onelinefault.drawing.routing_lattice import Dir
from onelinefault.drawing.shapes import MODULE_DU, Box, Polyline, Shapes, Stroke, bounds, transform
from onelinefault.drawing.symbols_marks import sheet_link
from onelinefault.model.consumers import Bus
from onelinefault.model.part import Part, Terminal, place_of
from onelinefault.model.parts import terminal_of, terminal_place
from onelinefault.model.plant import End, Plant, Point, Sheet, Wire

WIRE_DU = 2.0
_REACH = 12  # modules round the ends of a wire within which it takes notice of obstacles
_CELL = 16
_NO_KEYS: frozenset[str] = frozenset()
ZONE_MODULES = 20  # a zone of the border grid: 50 mm (ISO 5457)


@dataclass(frozen=True, slots=True)
class WirePicture:
    """A wire on one sheet. path: its corners in modules from end a to end b; shapes in du; link: its tag's box."""

    wire: str
    path: tuple[Point, ...]
    shapes: Shapes
    box: Box
    link: Box | None = None


def directions(part: Part, terminal: Terminal) -> tuple[Dir, ...]:
    """Ways in which a wire may leave a terminal: straight out of a symbol, to either side of a bar."""
    if isinstance(part, Bus):
        if part.length == 0:
            return (N, E, S, W)
        return (N, S) if part.turn % 2 == 0 else (E, W)
    out_x, out_y = (0, terminal.dy) if abs(terminal.dy) >= abs(terminal.dx) else (terminal.dx, 0)
    x, y = place_of(part, out_x, out_y)
    dx, dy = x - part.x, y - part.y
    return ((E if dx > 0 else W) if abs(dx) > abs(dy) else (S if dy > 0 else N),)


def obstacle(picture: PartPicture) -> GridBox:
    """What a wire runs round: the symbol's body in modules, a little smaller, so that it may be touched."""
    body = picture.body
    inset = 0.1
    left, right = sorted((body.left / MODULE_DU + inset, body.right / MODULE_DU - inset))
    top, bottom = sorted((body.top / MODULE_DU + inset, body.bottom / MODULE_DU - inset))
    return (left, top, right, bottom)


class Obstacles:
    """Boxes found by place: what wires run round. A wire looks only at what stands near it."""

    def __init__(self) -> None:
        self._boxes: dict[str, GridBox] = {}
        self._cells: dict[tuple[int, int], set[str]] = {}

    def put(self, key: str, box: GridBox | None) -> None:
        """Set, move or take away (None) one obstacle."""
        old = self._boxes.pop(key, None)
        if old is not None:
            for cell in _cells(old):
                self._cells[cell].discard(key)
        if box is not None:
            self._boxes[key] = box
            for cell in _cells(box):
                self._cells.setdefault(cell, set()).add(key)

    def get(self, key: str) -> GridBox | None:
        """The obstacle of this key."""
        return self._boxes.get(key)

    def near(self, region: GridBox) -> tuple[GridBox, ...]:
        """All obstacles that touch a region, in an order that depends on their places only."""
        return tuple(sorted(self._boxes[key] for key in self.keys_near(region)))

    def keys_near(self, region: GridBox) -> set[str]:
        """The keys of all that touch a region."""
        keys: set[str] = set()
        for cell in _cells(region):
            keys |= self._cells.get(cell, _NO_KEYS)
        left, top, right, bottom = region
        found = set()
        for key in keys:
            box = self._boxes[key]
            if box[0] < right and left < box[2] and box[1] < bottom and top < box[3]:
                found.add(key)
        return found


def _cells(box: GridBox) -> list[tuple[int, int]]:
    xs = range(floor(box[0] / _CELL), floor(box[2] / _CELL) + 1)
    ys = range(floor(box[1] / _CELL), floor(box[3] / _CELL) + 1)
    return [(x, y) for x in xs for y in ys]


def wire_region(plant: Plant, wire: Wire) -> GridBox:
    """The part of the sheet whose obstacles matter for a wire, in modules."""
    points = (_place(plant, wire.a), _place(plant, wire.b), *wire.corners)
    xs, ys = zip(*points, strict=True)
    return (min(xs) - _REACH, min(ys) - _REACH, max(xs) + _REACH, max(ys) + _REACH)


def wire_path(plant: Plant, wire: Wire, obstacles: Obstacles) -> tuple[Point, ...]:
    """Where a wire between two parts of one sheet runs, in modules."""
    a, b = plant.parts[wire.a.part], plant.parts[wire.b.part]
    start, end = _place(plant, wire.a), _place(plant, wire.b)
    return _routed(
        start, directions(a, terminal_of(a, wire.a.terminal)),
        end, directions(b, terminal_of(b, wire.b.terminal)),
        obstacles.near(wire_region(plant, wire)), wire.corners,
    )  # fmt: skip


@lru_cache(maxsize=16384)
def _routed(
    start: Point, start_ways: tuple[Dir, ...], end: Point, end_ways: tuple[Dir, ...],
    boxes: tuple[GridBox, ...], corners: tuple[Point, ...],
) -> tuple[Point, ...]:  # fmt: skip
    return route(start, start_ways, end, end_ways, boxes, corners=corners)


def wire_picture(plant: Plant, wire: Wire, sheet: Sheet, obstacles: Obstacles, roles: Roles) -> WirePicture:
    """The picture of a wire on one of the sheets it touches."""
    a, b = plant.parts[wire.a.part], plant.parts[wire.b.part]
    role = roles.get((wire.a.part, wire.a.terminal)) or roles.get((wire.b.part, wire.b.terminal)) or "ink"
    if a.sheet == b.sheet:
        path = wire_path(plant, wire, obstacles)
        shapes: Shapes = (Polyline(_in_du(path), Stroke(role, WIRE_DU)),)
        return WirePicture(wire.id, path, shapes, bounds(shapes))
    here, there = (wire.a, wire.b) if a.sheet == sheet.id else (wire.b, wire.a)
    path, line, tag = _link(plant, here, there, role)
    return WirePicture(wire.id, path, (*line, *tag), bounds((*line, *tag)), bounds(tag))


def zone(sheet: Sheet, x: float, y: float) -> str:
    """The zone of the border grid that a point (modules) lies in: letters down, figures across (ISO 5457)."""
    del sheet  # zones count from the top left corner on every size of sheet
    return f"{chr(ord('A') + max(0, int(y // ZONE_MODULES)))}{int(x // ZONE_MODULES) + 1}"


def _link(plant: Plant, here: End, there: End, role: str) -> tuple[tuple[Point, ...], Shapes, Shapes]:
    part, other = plant.parts[here.part], plant.parts[there.part]
    start = _place(plant, here)
    way = directions(part, terminal_of(part, here.terminal))
    dx, dy = next((d for d in way if d == S), way[0]) if isinstance(part, Bus) else way[0]
    end = (start[0] + 3 * dx, start[1] + 3 * dy)
    numbers = {sheet.id: i for i, sheet in enumerate(plant.sheets, 1)}
    x, y = _place(plant, there)
    sheet = plant.sheet(other.sheet)
    text = f"{numbers.get(other.sheet, '?')}·{zone(sheet, x, y) if sheet else '?'}"
    turn = {S: 0, W: 1, N: 2, E: 3}[(dx, dy)]
    tag = transform(sheet_link(text, role), turn, dx=end[0] * MODULE_DU, dy=end[1] * MODULE_DU)
    tag = transform(tag, dx=20.0 * dx, dy=20.0 * dy)
    return (start, end), (Polyline(_in_du((start, end)), Stroke(role, WIRE_DU)),), tag


def _place(plant: Plant, end: End) -> Point:
    return terminal_place(plant.parts[end.part], end.terminal, end.at)


def _in_du(path: Iterable[Point]) -> tuple[tuple[float, float], ...]:
    return tuple((x * MODULE_DU, y * MODULE_DU) for x, y in path)


def segments(path: Sequence[Point]) -> list[tuple[Point, Point]]:
    """The straight pieces of a path."""
    return list(pairwise(path))
