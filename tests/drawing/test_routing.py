"""Wires: orthogonal, out of parts, fewest bends; the oracle is an exhaustive search over every module."""

from __future__ import annotations

from collections import deque
from itertools import pairwise

import pytest
from hypothesis import example, given, settings
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
Polyline = tuple[Point, ...]

_SIDE = 9  # modules of the sheets drawn by hypothesis
_RIM = 10  # modules round both ends that are searched first


def _meets(box: Box, a: Point, b: Point) -> bool:
    """Whether the open inside of the box meets the closed segment, by looking at every quarter of a module."""
    count = max(4 * (abs(a[0] - b[0]) + abs(a[1] - b[1])), 1)
    places = ((a[0] + (b[0] - a[0]) * k / count, a[1] + (b[1] - a[1]) * k / count) for k in range(count + 1))
    return any(box[0] < x < box[2] and box[1] < y < box[3] for x, y in places)


def _steps(polyline: Polyline) -> list[Point]:
    """Direction of every segment."""
    return [((b[0] > a[0]) - (b[0] < a[0]), (b[1] > a[1]) - (b[1] < a[1])) for a, b in pairwise(polyline)]


def _length(polyline: Polyline) -> int:
    return sum(abs(a[0] - b[0]) + abs(a[1] - b[1]) for a, b in pairwise(polyline))


def _is_orthogonal(polyline: Polyline) -> bool:
    on_grid = all(isinstance(value, int) for point in polyline for value in point)
    return on_grid and all((a[0] == b[0]) != (a[1] == b[1]) for a, b in pairwise(polyline))


def _enters(polyline: Polyline, boxes: list[Box]) -> bool:
    return any(_meets(box, a, b) for box in boxes for a, b in pairwise(polyline))


def fewest_bends(
    start: Point, starts: tuple[Point, ...], end: Point, ends: tuple[Point, ...], boxes: list[Box]
) -> int | None:
    """Fewest bends of any free way, by breadth-first search over every module and direction; None if there is none."""
    low_x, high_x = min(start[0], end[0]) - _RIM, max(start[0], end[0]) + _RIM
    low_y, high_y = min(start[1], end[1]) - _RIM, max(start[1], end[1]) + _RIM
    queue = deque((0, start, step) for step in starts)
    done = set()
    while queue:
        bends, here, step = queue.popleft()
        if here == end:
            return bends
        if (here, step) in done:
            continue
        done.add((here, step))
        turns = () if here == start else ((step[1], step[0]), (-step[1], -step[0]))
        for turn in (step, *turns):
            there = (here[0] + turn[0], here[1] + turn[1])
            wrong = there == start or (there == end and (-turn[0], -turn[1]) not in ends)
            if wrong or not (low_x <= there[0] <= high_x and low_y <= there[1] <= high_y):
                continue
            if not any(_meets(box, here, there) for box in boxes):
                queue.appendleft((bends, there, turn)) if turn == step else queue.append((bends + 1, there, turn))
    return None


_points = st.tuples(st.integers(0, _SIDE), st.integers(0, _SIDE))
_dirs = st.sampled_from([None, N, E, S, W, (N, S), (E, W), (N, E, S)])


@st.composite
def _boxes(draw: st.DrawFn) -> list[Box]:
    """Boxes of parts: on the grid, shrunk, or thin as a bus bar."""
    boxes: list[Box] = []
    for _ in range(draw(st.integers(0, 7))):
        x, y = draw(_points)
        width, height = draw(st.integers(0, 5)), draw(st.integers(0, 5))
        shrink = draw(st.sampled_from([0.0, 0.1, 0.4])) if width and height else -0.2
        boxes.append((x + shrink, y + shrink, x + width - shrink, y + height - shrink))
    return boxes


def _outside(boxes: list[Box], *points: Point) -> list[Box]:
    """The boxes that none of the points lies in."""
    return [box for box in boxes if not any(_meets(box, point, point) for point in points)]


def _several(dirs: object) -> tuple[Point, ...]:
    if dirs is None:
        return COMPASS
    return (dirs,) if dirs in COMPASS else dirs  # type: ignore[return-value]


@settings(max_examples=120, deadline=None)
@given(start=_points, start_dir=_dirs, end=_points, end_dir=_dirs, boxes=_boxes())
@example(start=(3, 1), start_dir=(E, W), end=(7, 0), end_dir=S, boxes=[])  # one bend, at the tip of the end's stub
@example(start=(1, 2), start_dir=W, end=(2, 2), end_dir=N, boxes=[])  # ends side by side, looking elsewhere
@example(start=(2, 4), start_dir=E, end=(6, 4), end_dir=E, boxes=[])  # not straight through the end
@example(start=(2, 4), start_dir=E, end=(6, 4), end_dir=E, boxes=[(2.4, 1.4, 2.6, 3.6), (3.8, 4.8, 4.2, 6.2)])
def test_a_free_route_is_found_if_there_is_one_and_none_has_fewer_bends(start, start_dir, end, end_dir, boxes):
    boxes = _outside(boxes, start, end)
    wire = route(start, start_dir, end, end_dir, boxes)
    assert (wire[0], wire[-1]) == (start, end)
    if start == end:
        assert wire == (start, end)
        return
    assert _is_orthogonal(wire)
    bends = fewest_bends(start, _several(start_dir), end, _several(end_dir), boxes)
    if bends is None:
        return
    steps = _steps(wire)
    assert not _enters(wire, boxes)
    assert steps[0] in _several(start_dir)
    assert (-steps[-1][0], -steps[-1][1]) in _several(end_dir)
    assert len(wire) - 2 == bends
    assert _modules(wire).count(start) == _modules(wire).count(end) == 1


def _inner(a: Point, b: Point) -> list[Point]:
    """The modules between the ends of a segment."""
    (dx, dy), length = _steps((a, b))[0], _length((a, b))
    return [(a[0] + k * dx, a[1] + k * dy) for k in range(1, length)]


def _modules(wire: Polyline) -> list[Point]:
    """Every module that a wire passes, in its order."""
    return [wire[0], *(point for a, b in pairwise(wire) if a != b for point in (*_inner(a, b), b))]


@settings(max_examples=40, deadline=None)
@given(start=_points, end=_points, start_dir=_dirs, end_dir=_dirs)
def test_without_parts_a_route_is_as_short_as_its_directions_let_it_be(start, end, start_dir, end_dir):
    wire = route(start, start_dir, end, end_dir, [])
    free = route(start, None, end, None, [])
    assert _length(free) == abs(start[0] - end[0]) + abs(start[1] - end[1])
    assert len(free) <= 3
    assert _length(wire) <= _length(free) + 8  # at most a loop of one module round each end


def test_straight_when_possible():
    assert route((4, 0), S, (4, 9), N, []) == ((4, 0), (4, 9))
    assert route((4, 0), None, (9, 0), None, [(5, 1, 6, 2)]) == ((4, 0), (9, 0))


@pytest.mark.parametrize(
    ("end", "middle"),
    [((6, 10), 5), ((6, 11), 5), ((-6, 10), 5)],
)
def test_the_middle_segment_lies_half_way_on_the_module(end, middle):
    assert route((0, 0), S, end, N, []) == ((0, 0), (0, middle), (end[0], middle), end)


def test_the_middle_segment_keeps_a_module_from_parts():
    wire = route((0, 0), S, (10, 10), N, [(3.1, 3.1, 6.9, 5.9)])
    assert wire == ((0, 0), (0, 7), (10, 7), (10, 10))


@pytest.mark.parametrize(
    ("part", "row"),
    [
        ((9.1, 8.1, 10.9, 11.9), 13),  # over the way down into the end: only below it
        ((-0.9, 8.1, 0.9, 10.9), 7),  # under the start: only above it
    ],
)
def test_the_middle_segment_is_not_put_where_its_neighbours_would_enter_a_part(part, row):
    assert route((0, 0), S, (10, 20), N, [part]) == ((0, 0), (0, row), (10, row), (10, 20))


def test_a_bus_is_left_on_the_side_that_suits():
    bar = (-0.2, -0.2, 20.2, 0.2)
    assert _steps(route((5, 0), (N, S), (9, -6), S, [bar]))[0] == N
    assert _steps(route((5, 0), (N, S), (9, 6), N, [bar]))[0] == S


def test_a_wire_from_inside_a_box_leaves_it_straight():
    part = (0.1, 0.1, 7.9, 7.9)
    wire = route((4, 4), N, (12, 12), W, [part])
    assert wire[1][0] == 4
    assert wire[1][1] <= 0
    assert not any(_meets(part, a, b) for a, b in pairwise(wire[1:]))


def test_a_detour_round_something_long_is_found_beyond_the_neighbourhood():
    bar = (-100.2, 4.8, 40.2, 5.2)
    wire = route((0, 0), S, (0, 10), N, [bar])
    assert not _enters(wire, [bar])
    assert _length(wire) == 10 + 2 * 42  # round its nearer end, a module off


def test_a_closed_in_terminal_still_gets_a_wire():
    cage = [(-2, 1.1, 2, 2), (-2, -2, 2, -1.1), (-2, -2, -1.1, 2), (1.1, -2, 2, 2)]
    wire = route((0, 0), S, (10, 10), N, cage)
    assert (wire[0], wire[-1]) == ((0, 0), (10, 10))
    assert _is_orthogonal(wire)
    assert len(wire) == 4  # plain: down, across, down


def test_terminals_that_touch_are_joined_even_against_their_directions():
    assert route((0, 0), S, (0, 1), E, []) == ((0, 0), (0, 1))


def test_a_wire_does_not_run_on_top_of_another_when_it_can_bend_elsewhere():
    other = ((2, 5), (8, 5))
    alone = route((0, 0), S, (10, 10), N, [])
    assert alone == ((0, 0), (0, 5), (10, 5), (10, 10))
    beside = route((0, 0), S, (10, 10), N, [], wires=[other])
    assert len(beside) == len(alone)
    assert beside[1][1] != 5


@settings(max_examples=30, deadline=None)
@given(start=_points, end=_points, boxes=_boxes(), data=st.data())
def test_the_order_of_the_parts_does_not_matter(start, end, boxes, data):
    shuffled = data.draw(st.permutations(boxes))
    assert route(start, S, end, N, boxes) == route(start, S, end, N, shuffled)


# corners set by a person


@settings(max_examples=60, deadline=None)
@given(start=_points, end=_points, corners=st.lists(_points, max_size=3), start_dir=_dirs, end_dir=_dirs)
def test_a_wire_passes_its_corners_in_their_order(start, end, corners, start_dir, end_dir):
    wire = route(start, start_dir, end, end_dir, [], corners=corners)
    assert (wire[0], wire[-1]) == (start, end)
    assert all(a == b or (a[0] == b[0]) != (a[1] == b[1]) for a, b in pairwise(wire))
    path, place = _modules(wire), 0
    for corner in tidy_corners(start, corners, end):
        assert corner in path[place:]
        place = path.index(corner, place)


def test_corners_stay_when_a_part_moves():
    dragged = drag_segment(route((0, 0), S, (10, 20), N, []), 1, 4)
    assert route((0, 0), S, (10, 20), N, [], corners=dragged) == ((0, 0), (0, 14), (10, 14), (10, 20))
    moved = route((3, 0), S, (10, 20), N, [], corners=dragged)
    assert moved[-4:] == ((0, 7), (0, 14), (10, 14), (10, 20))


def test_a_wire_with_corners_runs_round_parts_too():
    part = (3.1, 12.1, 6.9, 15.9)
    wire = route((0, 0), S, (10, 20), N, [part], corners=[(0, 14), (10, 14)])
    assert not _enters(wire, [part])
    assert {(0, 14), (10, 14)} <= set(_modules(wire))


@pytest.mark.parametrize(
    ("corners", "kept"),
    [
        ([(0, 3), (0, 5), (4, 5)], ((0, 5), (4, 5))),  # on a straight line
        ([(0, 7), (0, 5), (4, 5)], ((0, 5), (4, 5))),  # beyond the bend and back
        ([(0, 5), (0, 5), (4, 5)], ((0, 5), (4, 5))),  # twice the same
        ([(0, 5), (9, 5), (4, 5)], ((0, 5), (4, 5))),  # a spike
        ([(0, 5), (4, 5), (4, 7)], ((0, 5), (4, 5))),  # on the way into the end
        ([], ()),
    ],
)
def test_pointless_corners_go(corners, kept):
    assert tidy_corners((0, 0), corners, (4, 9)) == kept


@given(start=_points, end=_points, corners=st.lists(_points, max_size=6))
def test_tidy_corners_have_no_three_on_one_line(start, end, corners):
    tidy = tidy_corners(start, corners, end)
    assert tidy_corners(start, tidy, end) == tidy
    places = (start, *tidy, end)
    for a, b, c in zip(places, places[1:], places[2:], strict=False):
        assert not a[0] == b[0] == c[0]
        assert not a[1] == b[1] == c[1]


# dragging and pointing


@settings(max_examples=60, deadline=None)
@given(start=_points, end=_points, index=st.integers(0, 4), delta=st.integers(-6, 6))
def test_a_dragged_segment_moves_by_delta_and_the_ends_stay(start, end, index, delta):
    wire = route(start, S, end, N, [])
    if start == end or index >= len(wire) - 1:
        return
    corners = drag_segment(wire, index, delta)
    dragged = (start, *corners, end)
    assert all(a == b or (a[0] == b[0]) != (a[1] == b[1]) for a, b in pairwise(dragged))
    (ax, ay), (bx, by) = wire[index], wire[index + 1]
    if 0 < index < len(wire) - 2 and delta:
        moved = [(ax, ay + delta), (bx, by + delta)] if ay == by else [(ax + delta, ay), (bx + delta, by)]
        assert corners == tidy_corners(start, [*wire[1:index], *moved, *wire[index + 2 : -1]], end)


def test_an_end_segment_keeps_a_module_at_the_terminal():
    assert drag_segment([(0, 0), (0, 10)], 0, 3) == ((0, 1), (3, 1), (3, 9), (0, 9))
    assert drag_segment([(0, 0), (0, 5), (4, 5), (4, 9)], 0, -2) == ((0, 1), (-2, 1), (-2, 5), (4, 5))
    assert drag_segment([(0, 0), (0, 5), (4, 5), (4, 9)], 2, 2) == ((0, 5), (6, 5), (6, 8), (4, 8))


def test_dragging_what_is_not_there_is_refused():
    with pytest.raises(IndexError):
        drag_segment([(0, 0), (0, 10)], 1, 3)


@pytest.mark.parametrize(
    ("x", "y", "index"),
    [(0.3, 2, 0), (2, 5.4, 1), (4.2, 8, 2), (2, 3, None), (0, -0.4, 0), (0, -0.6, None), (0, 5, 0)],
)
def test_the_segment_under_the_pointer(x, y, index):
    assert segment_at([(0, 0), (0, 5), (4, 5), (4, 9)], x, y, 0.5) == index


def test_no_segment_of_a_wire_without_any():
    assert segment_at([(0, 0)], 0, 0, 5) is None


@pytest.mark.parametrize("bar", [((2, 5), (12, 5)), ((12, 5), (2, 5)), ((3, 9), (3, 1)), ((3, 1), (3, 9))])
@given(x=st.floats(-5, 20), y=st.floats(-5, 20))
@settings(max_examples=30)
def test_the_nearest_place_on_a_bar_is_nearest(bar, x, y):
    start, end = bar
    (dx, dy), length = _steps(bar)[0], _length(bar)
    distances = [abs(start[0] + k * dx - x) + abs(start[1] + k * dy - y) for k in range(length + 1)]
    assert distances[nearest_on_bar(start, end, (x, y))] == pytest.approx(min(distances))
