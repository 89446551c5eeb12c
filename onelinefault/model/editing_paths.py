"""The set corners of a wire: which are pointless, which lie before a place on the wire, which way it runs there."""

from collections.abc import Sequence
from itertools import pairwise

from onelinefault.model.plant import Point


def tidy_corners(start: Point, corners: Sequence[Point], end: Point) -> tuple[Point, ...]:
    """The corners without those that have become pointless: on a straight line, doubling back, or doubled.

    >>> tidy_corners((0, 0), [(0, 3), (0, 5), (4, 5)], (4, 9))
    ((0, 5), (4, 5))
    """
    kept = [start]
    for point in (*corners, end):
        while len(kept) > 1 and _pointless(kept[-2], kept[-1], point):
            kept.pop()
        kept.append(point)
    return tuple(kept[1:-1])


def split_corners(start: Point, corners: Sequence[Point], end: Point, at: Point) -> tuple[tuple[Point, ...], ...]:
    """The corners before and after a place on the wire: it is on the leg that makes the least detour over it.

    >>> split_corners((0, 0), [(0, 5), (4, 5)], (4, 9), (2, 5))
    (((0, 5),), ((4, 5),))
    """
    legs = list(pairwise((start, *corners, end)))
    leg = min(range(len(legs)), key=lambda i: _detour(legs[i][0], legs[i][1], at))
    before = tuple(c for c in corners[:leg] if c != at)
    after = tuple(c for c in corners[leg:] if c != at)
    return before, after


def heading_at(path: Sequence[Point], at: Point) -> Point:
    """The way of a wire at a place: (0, 1) down, (0, −1) up, (1, 0) right, (−1, 0) left, from its first end.

    A leg that is neither level nor upright counts by its longer side; upright when equal.
    """
    legs = [leg for leg in pairwise(path) if leg[0] != leg[1]] or [((0, 0), (0, 1))]
    (x0, y0), (x1, y1) = min(legs, key=lambda leg: _detour(leg[0], leg[1], at))
    if abs(x1 - x0) > abs(y1 - y0):
        return (1 if x1 > x0 else -1), 0
    return 0, (1 if y1 > y0 else -1)


def _pointless(a: Point, b: Point, c: Point) -> bool:
    return b in (a, c) or a[0] == b[0] == c[0] or a[1] == b[1] == c[1]


def _detour(a: Point, b: Point, over: Point) -> int:
    return _steps(a, over) + _steps(over, b) - _steps(a, b)


def _steps(a: Point, b: Point) -> int:
    return abs(a[0] - b[0]) + abs(a[1] - b[1])
