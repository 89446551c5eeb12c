"""Wires on the module grid: routed round parts, dragged by their segments, kept at the corners a person has set.

All coordinates are whole modules; y grows downwards. A wire is a polyline of level and upright segments that includes
both of its ends. Fast enough to be called for every wire of a part that is being dragged.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from itertools import pairwise
from math import ceil, floor, hypot
from typing import NamedTuple

from onelinefault.drawing.routing_lattice import COMPASS, Box, Dir, Point, Segment, lattice
from onelinefault.drawing.routing_search import Stub, best_path

__all__ = [
    "COMPASS",
    "Box",
    "Dir",
    "E",
    "N",
    "Point",
    "S",
    "Segment",
    "W",
    "drag_segment",
    "nearest_on_bar",
    "route",
    "segment_at",
    "tidy_corners",
]

N, E, S, W = COMPASS

Dirs = Dir | Sequence[Dir] | None
"""Ways in which a wire may leave a terminal: one, several (both sides of a bus bar), or None for any."""

_MARGINS = (10, 32)  # modules round both ends that are searched first: most detours are short
_RING = 3  # modules kept round all obstacles when everything has to be searched


class _End(NamedTuple):
    """A place that a leg of a wire ends at, and the permitted ways out of it with the bends that each of them costs."""

    at: Point
    ways: Mapping[int, int]


def route(
    start: Point,
    start_dir: Dirs,
    end: Point,
    end_dir: Dirs,
    obstacles: Sequence[Box],
    *,
    corners: Sequence[Point] = (),
    wires: Sequence[Segment] = (),
) -> tuple[Point, ...]:
    """The polyline of a wire from `start` to `end`, both included, in modules.

    The wire leaves each end in its direction (`end_dir` also points out of the terminal), passes the `corners` in their
    order, stays out of the inside of the `obstacles` (left, top, right, bottom; an end may lie inside and is then left
    straight) and has the fewest bends, then the least length; a middle segment that may slide is put half-way. It
    keeps a module from obstacles and does not run on top of other `wires` where that costs no bend. If there is no
    free way, obstacles are crossed, and in the last resort directions are not kept; it never fails.

    >>> route((0, 0), S, (4, 6), N, [])
    ((0, 0), (0, 3), (4, 3), (4, 6))
    """
    places = (start, *tidy_corners(start, corners, end), end)
    legs = list(pairwise(places))
    path = [start]
    for number, (here, there) in enumerate(legs):
        exits = _permitted(start_dir) if number == 0 else _onwards(path)
        entries = _permitted(end_dir) if number == len(legs) - 1 else _towards(there, legs[number + 1][1])
        path += _leg(_End(here, exits), _End(there, entries), obstacles, wires)[1:]
    return (start, *_without_pointless(path)[1:-1], end)


def _permitted(dirs: Dirs) -> dict[int, int]:
    """The ways named by `dirs`, free of charge."""
    many = dirs if dirs else COMPASS
    return {way: 0 for way, step in enumerate(COMPASS) if step == many or step in many}


def _onwards(path: Sequence[Point]) -> dict[int, int]:
    """Ways on from the end of a path: straight on is free, a turn is a bend, never back."""
    heading = _way(path[-2], path[-1])
    return {way: int(way != heading) for way in range(4) if way != heading ^ 2}


def _towards(corner: Point, following: Point) -> dict[int, int]:
    """Ways by which to come into a corner, seen from it, given where the wire goes on from there."""
    if corner[0] != following[0] and corner[1] != following[1]:
        return dict.fromkeys(range(4), 0)
    onwards = _way(corner, following)
    return {way: int(way != onwards ^ 2) for way in range(4) if way != onwards}


def _way(start: Point, end: Point) -> int:
    """Place in COMPASS of the direction of a segment."""
    if start[0] == end[0]:
        return 0 if end[1] < start[1] else 2
    return 1 if end[0] > start[0] else 3


def _leg(start: _End, end: _End, obstacles: Sequence[Box], wires: Sequence[Segment]) -> tuple[Point, ...]:
    """A free path between two places; else one across the obstacles; else the plainest one."""
    a, b = start.at, end.at
    if a == b:
        return (a, b)
    if a[0] == b[0] or a[1] == b[1]:
        way = _way(a, b)
        if way in start.ways and way ^ 2 in end.ways and not any(_blocks(box, a, b) for box in obstacles):
            return (a, b)
    for region, boxes in _neighbourhoods(a, b, obstacles):
        near_wires = [wire for wire in wires if _overlap(_bounds(wire), region)]
        starts, ends = _stubs(start, boxes), _stubs(end, boxes)
        if starts and ends:
            turns = best_path(lattice(region, (a, b), boxes, near_wires), a, starts, b, ends)
            if turns is not None:
                return _centred((a, *turns, b), [*boxes, _spot(a), _spot(b)], near_wires)
    return _plainest(start, b)


def _bounds(points: Sequence[Point], margin: float = 0) -> Box:
    """The box round some points."""
    xs, ys = [x for x, _ in points], [y for _, y in points]
    return min(xs) - margin, min(ys) - margin, max(xs) + margin, max(ys) + margin


def _spot(point: Point) -> Box:
    """A box round one point only."""
    return point[0] - 0.5, point[1] - 0.5, point[0] + 0.5, point[1] + 0.5


def _overlap(one: Box, other: Box) -> bool:
    """Whether two boxes share a point."""
    return one[0] <= other[2] and other[0] <= one[2] and one[1] <= other[3] and other[1] <= one[3]


def _blocks(box: Box, a: Point, b: Point) -> bool:
    """Whether the inside of a box meets the level or upright segment from a to b."""
    left, top, right, bottom = box
    return left < max(a[0], b[0]) and right > min(a[0], b[0]) and top < max(a[1], b[1]) and bottom > min(a[1], b[1])


def _neighbourhoods(start: Point, end: Point, obstacles: Sequence[Box]) -> Iterator[tuple[Box, list[Box]]]:
    """Regions to be searched, small first, with the obstacles in them; the last one without any."""
    for margin in _MARGINS:
        region = _bounds((start, end), margin)
        near = [box for box in obstacles if _overlap(box, region)]
        yield region, near
        clear = _bounds((start, end), margin - _RING)
        if len(near) == len(obstacles) and all(_within(box, clear) for box in near):
            break
    else:
        corners = [(floor(box[0]), floor(box[1])) for box in obstacles]
        corners += [(ceil(box[2]), ceil(box[3])) for box in obstacles]
        yield _bounds([start, end, *corners], _RING), list(obstacles)
    yield _bounds((start, end), _MARGINS[0]), []


def _within(box: Box, region: Box) -> bool:
    return region[0] <= box[0] and region[1] <= box[1] and box[2] <= region[2] and box[3] <= region[3]


def _stubs(end: _End, boxes: Sequence[Box]) -> list[Stub]:
    """The free ways out of a place; out of a box that it lies in they lead straight."""
    x, y = end.at
    around = [box for box in boxes if box[0] < x < box[2] and box[1] < y < box[3]]
    others = [box for box in boxes if box not in around]
    stubs = []
    for way, bends in end.ways.items():
        step_x, step_y = COMPASS[way]
        outs = [(y - floor(box[1]), ceil(box[2]) - x, ceil(box[3]) - y, x - floor(box[0]))[way] for box in around]
        length = max([1, *outs])
        tip = (x + step_x * length, y + step_y * length)
        if not any(_blocks(box, end.at, tip) for box in others):
            stubs.append(Stub(way, tip, bends))
    return stubs


def _plainest(start: _End, end: Point) -> tuple[Point, ...]:
    """One bend, leaving the start as permitted if that can be; for ends that are too tight to be joined properly."""
    elbows = [elbow for elbow in ((start.at[0], end[1]), (end[0], start.at[1])) if elbow != start.at]
    elbow = next((elbow for elbow in elbows if _way(start.at, elbow) in start.ways), elbows[0])
    return (start.at, end) if elbow == end else (start.at, elbow, end)


def _centred(path: tuple[Point, ...], boxes: Sequence[Box], wires: Sequence[Segment]) -> tuple[Point, ...]:
    """The path with each middle segment that can slide without a change of length put half-way, where that is free."""
    points = list(path)
    for i in range(1, len(points) - 2):
        before, a, b, after = points[i - 1 : i + 3]
        if _way(before, a) != _way(b, after):
            continue
        if a[1] == b[1]:
            middle = _half_way((before, a, b, after), boxes, [(p, q) for p, q in wires if p[1] == q[1]])
            points[i], points[i + 1] = (a[0], middle), (b[0], middle)
        else:
            turned = tuple((y, x) for x, y in (before, a, b, after))
            upright = [((p[1], p[0]), (q[1], q[0])) for p, q in wires if p[0] == q[0]]
            middle = _half_way(turned, [(box[1], box[0], box[3], box[2]) for box in boxes], upright)
            points[i], points[i + 1] = (middle, a[1]), (middle, b[1])
    return tuple(points)


def _half_way(bent: tuple[Point, ...], boxes: Sequence[Box], wires: Sequence[Segment]) -> int:
    """Best row for the level middle segment of a step (upright, level, upright): clear by a module, near the middle."""
    (x0, y0), (_, now), (x1, _), (_, y1) = bent
    low, high = min(y0, y1), max(y0, y1)
    upper_x, lower_x = (x0, x1) if y0 < y1 else (x1, x0)
    left, right = min(x0, x1), max(x0, x1)
    shut: list[tuple[float, float]] = []
    zones = [(box[0] - 1, box[1] - 1, box[2] + 1, box[3] + 1) for box in boxes]
    for box in (*boxes, *zones):
        if box[0] < right and box[2] > left:
            shut.append((box[1], box[3]))
            if box[0] < upper_x < box[2] and box[1] >= now:
                high = min(high, floor(box[1]) + 1)
            if box[0] < lower_x < box[2] and box[3] <= now:
                low = max(low, ceil(box[3]) - 1)
    shut += [(a[1] - 0.5, a[1] + 0.5) for a, b in wires if min(a[0], b[0]) < right and max(a[0], b[0]) > left]
    free = [row for row in range(low + 1, high) if not any(start < row < stop for start, stop in shut)]
    return min(free, key=lambda row: (abs(2 * row - y0 - y1), row), default=now)


def tidy_corners(start: Point, corners: Sequence[Point], end: Point) -> tuple[Point, ...]:
    """The corners without those that have become pointless: on a straight line, doubling back, or doubled.

    >>> tidy_corners((0, 0), [(0, 3), (0, 5), (4, 5)], (4, 9))
    ((0, 5), (4, 5))
    """
    return tuple(_without_pointless([start, *corners, end])[1:-1])


def _without_pointless(points: Sequence[Point]) -> list[Point]:
    """The points without those that lie on one line with the two beside them; first and last are kept."""
    kept = [points[0]]
    for point in points[1:]:
        kept.append(point)
        while len(kept) > 2 and _aligned(*kept[-3:]):
            del kept[-2]
    return kept


def _aligned(a: Point, b: Point, c: Point) -> bool:
    """Whether three points lie on one level or upright line, or the middle one equals one of the others."""
    return b in (a, c) or a[0] == b[0] == c[0] or a[1] == b[1] == c[1]


def drag_segment(polyline: Sequence[Point], index: int, delta: int) -> tuple[Point, ...]:
    """Corners of the wire after its segment `index` was moved sideways by `delta` modules (down or right if positive).

    The ends stay: an end segment keeps one module at the terminal. All corners are returned, so that the wire that is
    shown is the wire that is kept. Raises IndexError when there is no such segment.

    >>> drag_segment([(0, 0), (0, 3), (4, 3), (4, 6)], 1, 2)
    ((0, 5), (4, 5))
    """
    if not 0 <= index < len(polyline) - 1:
        raise IndexError(f"a wire of {len(polyline) - 1} segments has no segment {index}")
    a, b = polyline[index], polyline[index + 1]
    if a == b or not delta:
        return tidy_corners(polyline[0], polyline[1:-1], polyline[-1])
    ahead = COMPASS[_way(a, b)]
    aside = (abs(ahead[1]) * delta, abs(ahead[0]) * delta)
    before, after = list(polyline[1 : index + 1]), list(polyline[index + 1 : -1])
    if index == 0:
        before.append((a[0] + ahead[0], a[1] + ahead[1]))
        a = before[-1]
    else:
        before.pop()
    if index == len(polyline) - 2:
        after.insert(0, (b[0] - ahead[0], b[1] - ahead[1]))
        b = after[0]
    else:
        after.pop(0)
    moved = [(x + aside[0], y + aside[1]) for x, y in (a, b)]
    return tidy_corners(polyline[0], [*before, *moved, *after], polyline[-1])


def segment_at(polyline: Sequence[Point], x: float, y: float, tolerance: float) -> int | None:
    """Index of the segment nearest to a place, if it is within `tolerance` (all in modules); of equals the first."""
    distances = [
        hypot(x - min(max(x, min(a[0], b[0])), max(a[0], b[0])), y - min(max(y, min(a[1], b[1])), max(a[1], b[1])))
        for a, b in pairwise(polyline)
    ]
    nearest = min(range(len(distances)), key=distances.__getitem__, default=None)
    return None if nearest is None or distances[nearest] > tolerance else nearest


def nearest_on_bar(bar_start: Point, bar_end: Point, point: tuple[float, float]) -> int:
    """Offset in modules from the start of a level or upright bar to its place nearest to a point.

    >>> nearest_on_bar((2, 5), (12, 5), (6.4, 9.0))
    4
    """
    axis = 0 if bar_start[1] == bar_end[1] else 1
    length = bar_end[axis] - bar_start[axis]
    along = (point[axis] - bar_start[axis]) * (1 if length >= 0 else -1)
    return max(0, min(floor(along + 0.5), abs(length)))
