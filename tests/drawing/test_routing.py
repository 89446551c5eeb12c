"""Wires: orthogonal, free of parts, fewest bends and least length; the oracle is an exhaustive search over all modules."""

from __future__ import annotations

import heapq
from itertools import pairwise

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.drawing.routing import (
    COMPASS,
    E,
    N,
    S,
    W,
    drag_segment,
    nearest_on_bar,
    route,
    segment_at,
    tidy_corners,
)

Point = tuple[int, int]
Box = tuple[float, float, float, float]

_SIDE = 9  # modules of the sheets drawn by hypothesis
_RIM = 10  # modules round both ends that are searched first


def _meets(box: Box, a: Point, b: Point) -> bool:
    """Whether the open inside of the box meets the closed segment, by sampling it every quarter of a module."""
    length = abs(a[0] - b[0]) + abs(a[1] - b[1])
    count = max(4 * length, 1)
    for k in range(count + 1):
        x, y = a[0] + (b[0] - a[0]) * k / count, a[1] + (b[1] - a[1]) * k / count
        if box[0] < x < box[2] and box[1] < y < box[3]:
            return True
    return False


def _directions(polyline: tuple[Point, ...]) -> list[Point]:
    signs = [((b[0] > a[0]) - (b[0] < a[0]), (b[1] > a[1]) - (b[1] < a[1])) for a, b in pairwise(polyline)]
    return signs


def _length(polyline: tuple[Point, ...]) -> int:
    return sum(abs(a[0] - b[0]) + abs(a[1] - b[1]) for a, b in pairwise(polyline))


def _closeness(polyline: tuple[Point, ...], boxes: list[Box]) -> int:
    """Modules of the polyline that come closer than one module to a box."""
    zones = [(box[0] - 1, box[1] - 1, box[2] + 1, box[3] + 1) for box in boxes]
    return sum(any(_meets(zone, a, b) for zone in zones) for a, b in _modules(polyline))


def _modules(polyline: tuple[Point, ...]) -> list[tuple[Point, Point]]:
    """The polyline cut into steps of one module."""
    steps = []
    for (a, b), (dx, dy) in zip(pairwise(polyline), _directions(polyline), strict=True):
        for k in range(abs(a[0] - b[0]) + abs(a[1] - b[1])):
            steps.append(((a[0] + k * dx, a[1] + k * dy), (a[0] + (k + 1) * dx, a[1] + (k + 1) * dy)))
    return steps


def exhaustive(
    start: Point, starts: tuple[Point, ...], end: Point, ends: tuple[Point, ...], boxes: list[Box]
) -> tuple[int, int] | None:
    """Fewest bends and, for these, least length (modules close to a box twice), by Dijkstra over every module."""
    xs, ys = (start[0], end[0]), (start[1], end[1])
    low_x, high_x, low_y, high_y = min(xs) - _RIM, max(xs) + _RIM, min(ys) - _RIM, max(ys) + _RIM
    zones = [(box[0] - 1, box[1] - 1, box[2] + 1, box[3] + 1) for box in boxes]
    queue = [(0, 0, start, step) for step in starts]
    done = set()
    while queue:
        bends, cost, here, step = heapq.heappop(queue)
        if (here, step) in done:
            continue
        done.add((here, step))
        if here == end:
            return bends, cost
        turns = (step,) if here == start else (step, (step[1], step[0]), (-step[1], -step[0]))
        for turn in turns:
            there = (here[0] + turn[0], here[1] + turn[1])
            if there == start or (there == end and (-turn[0], -turn[1]) not in ends):
                continue
            if not (low_x <= there[0] <= high_x and low_y <= there[1] <= high_y):
                continue
            if any(_meets(box, here, there) for box in boxes):
                continue
            close = any(_meets(zone, here, there) for zone in zones)
            heapq.heappush(queue, (bends + (turn != step), cost + 1 + close, there, turn))
    return None


_points = st.tuples(st.integers(0, _SIDE), st.integers(0, _SIDE))
_dirs = st.one_of(
    st.none(), st.sampled_from(COMPASS), st.lists(st.sampled_from(COMPASS), min_size=1, max_size=3, unique=True).map(tuple)
)


@st.composite
def _boxes(draw: st.DrawFn, most: int = 7) -> list[Box]:
    """Boxes of parts, some on the grid, some shrunk, some thin as a bus bar."""
    boxes: list[Box] = []
    for _ in range(draw(st.integers(0, most))):
        x, y = draw(_points)
        width, height = draw(st.integers(0, 5)), draw(st.integers(0, 5))
        shrink = draw(st.sampled_from([0.0, 0.1, 0.4])) if width and height else -0.2
        boxes.append((x + shrink, y + shrink, x + width - shrink, y + height - shrink))
    return boxes


def _outside(boxes: list[Box], *points: Point) -> list[Box]:
    return [box for box in boxes if not any(_meets(box, point, point) for point in points)]


def _ways(dirs: object) -> tuple[Point, ...]:
    if dirs is None:
        return COMPASS
    return (dirs,) if dirs in COMPASS else dirs  # type: ignore[return-value]


@settings(max_examples=150, deadline=None)
@given(start=_points, start_dir=_dirs, end=_points, end_dir=_dirs, boxes=_boxes())
def test_a_free_route_is_found_if_there_is_one_and_none_has_fewer_bends(start, start_dir, end, end_dir, boxes):
    boxes = _outside(boxes, start, end)
    if start == end:
        assert route(start, start_dir, end, end_dir, boxes) == (start, end)
        return
    wire = route(start, start_dir, end, end_dir, boxes)
    assert wire[0] == start
    assert wire[-1] == end
    assert all((a[0] == b[0]) != (a[1] == b[1]) for a, b in pairwise(wire))
    assert all(isinstance(value, int) for point in wire for value in point)
    best = exhaustive(start, _ways(start_dir), end, _ways(end_dir), boxes)
    if best is None:
        return
    assert not any(_meets(box, a, b) for box in boxes for a, b in pairwise(wire))
    steps = _directions(wire)
    assert steps[0] in _ways(start_dir)
    assert (-steps[-1][0], -steps[-1][1]) in _ways(end_dir)
    assert len(wire) - 2 == best[0]
    assert _length(wire) <= best[1]
