"""The search against Dijkstra's algorithm over every module and direction: the same bends, the same cost."""

from __future__ import annotations

import heapq
from itertools import pairwise

from hypothesis import example, given, settings
from hypothesis import strategies as st

from onelinefault.drawing.routing_lattice import COMPASS, lattice
from onelinefault.drawing.routing_search import Stub, bends_to_go, best_path

_LOW, _HIGH = -4, 12  # region searched, modules


def _meets(box, a, b):
    """Whether the open inside of the box meets the step from a to b, by looking at every quarter of a module."""
    places = ((a[0] + (b[0] - a[0]) * k / 4, a[1] + (b[1] - a[1]) * k / 4) for k in range(5))
    return any(box[0] < x < box[2] and box[1] < y < box[3] for x, y in places)


class _Sheet:
    """What a step of one module costs, worked out from the boxes and wires themselves."""

    def __init__(self, boxes, wires):
        self.boxes = boxes
        self.zones = [(b[0] - 1, b[1] - 1, b[2] + 1, b[3] + 1) for b in boxes]
        self.wires = [(min(p, q), max(p, q)) for p, q in wires]

    def is_free(self, a, b):
        return not any(_meets(box, a, b) for box in self.boxes)

    def cost(self, a, b):
        a, b = min(a, b), max(a, b)
        taken = any(p[i] == q[i] == a[i] == b[i] and p <= a and b <= q for p, q in self.wires for i in (0, 1))
        return 1 + any(_meets(zone, a, b) for zone in self.zones) + 4 * taken


def _dijkstra(sheet, start, starts, end, ends):
    """Fewest bends, and the least cost with these; None when there is no way."""
    queue = [(bends, 0, start, COMPASS[way]) for way, bends in starts.items()]
    heapq.heapify(queue)
    done = set()
    while queue:
        bends, cost, here, step = heapq.heappop(queue)
        if (here, step) in done:
            continue
        done.add((here, step))
        if here == end:
            return bends, cost
        turns = () if here == start else ((step[1], step[0]), (-step[1], -step[0]))
        for turn in (step, *turns):
            there = (here[0] + turn[0], here[1] + turn[1])
            more = bends + (turn != step)
            if there == end:
                way = COMPASS.index((-turn[0], -turn[1]))
                if way not in ends:
                    continue
                more += ends[way]
            inside = min(there) >= _LOW and max(there) <= _HIGH
            if there != start and inside and sheet.is_free(here, there):
                heapq.heappush(queue, (more, cost + sheet.cost(here, there), there, turn))
    return None


def _stubs(sheet, point, ways):
    tips = {way: (point[0] + COMPASS[way][0], point[1] + COMPASS[way][1]) for way in ways}
    return [Stub(way, tips[way], bends) for way, bends in ways.items() if sheet.is_free(point, tips[way])]


def _bends_and_cost(sheet, polyline, starts, ends):
    """Bends, those of the ends counted in, and cost of a path, worked out module by module."""
    cost, steps = 0, []
    for a, b in pairwise(polyline):
        length = abs(a[0] - b[0]) + abs(a[1] - b[1])
        assert length > 0
        steps.append(((b[0] - a[0]) // length, (b[1] - a[1]) // length))
        modules = [(a[0] + steps[-1][0] * k, a[1] + steps[-1][1] * k) for k in range(length + 1)]
        assert all(sheet.is_free(p, q) for p, q in pairwise(modules))
        cost += sum(sheet.cost(p, q) for p, q in pairwise(modules))
    first, last = COMPASS.index(steps[0]), COMPASS.index((-steps[-1][0], -steps[-1][1]))
    return len(polyline) - 2 + starts[first] + ends[last], cost


_points = st.tuples(st.integers(0, 8), st.integers(0, 8))
_ways = st.dictionaries(st.integers(0, 3), st.integers(0, 1), min_size=1)


@st.composite
def _boxes(draw):
    boxes = []
    for _ in range(draw(st.integers(0, 8))):
        (x, y), width, height = draw(_points), draw(st.integers(0, 5)), draw(st.integers(0, 5))
        shrink = draw(st.sampled_from([0.0, 0.1, 0.4])) if width and height else -0.2
        boxes.append((x + shrink, y + shrink, x + width - shrink, y + height - shrink))
    return boxes


@st.composite
def _wires(draw):
    wires = []
    for _ in range(draw(st.integers(0, 3))):
        (x, y), length = draw(_points), draw(st.integers(1, 6))
        wires.append(((x, y), (x + length, y)) if draw(st.booleans()) else ((x, y + length), (x, y)))
    return wires


@settings(max_examples=150, deadline=None)
@given(start=_points, starts=_ways, end=_points, ends=_ways, boxes=_boxes(), wires=_wires())
@example((0, 0), {0: 0, 1: 0, 2: 1}, (0, 2), {0: 1, 1: 0}, [], [((0, 1), (0, 0))])  # equal bends at unequal levels
def test_the_path_is_the_best_of_all(start, starts, end, ends, boxes, wires):
    if abs(start[0] - end[0]) + abs(start[1] - end[1]) < 2:
        return  # the caller joins neighbours itself
    boxes = [box for box in boxes if not any(_meets(box, point, point) for point in (start, end))]
    sheet = _Sheet(boxes, wires)
    grid = lattice((_LOW, _LOW, _HIGH, _HIGH), (start, end), boxes, wires)
    starts_free, ends_free = _stubs(sheet, start, starts), _stubs(sheet, end, ends)
    turns = best_path(grid, start, starts_free, end, ends_free)
    straight = start[0] == end[0] or start[1] == end[1]
    best = _dijkstra(sheet, start, starts, end, ends)
    if turns is None:
        assert best is None
    else:
        assert _bends_and_cost(sheet, (start, *turns, end), starts, ends) == best
        assert straight or turns


def test_there_is_no_path_into_a_closed_yard():
    walls = [(2, 2, 8, 3), (2, 7, 8, 8), (2, 2, 3, 8), (7, 2, 8, 8)]
    grid = lattice((-2, -2, 12, 12), ((5, 5), (0, 0)), walls)
    starts, ends = [Stub(2, (0, 1), 0)], [Stub(0, (5, 4), 0)]
    assert bends_to_go(grid, starts, ends) is None
    assert best_path(grid, (0, 0), starts, (5, 5), ends) is None


def test_a_maze_is_walked_to_its_end():
    """A comb of walls that can only be passed in turns: two bends for every wall."""
    walls = [(2 + 4 * k, -9 if k % 2 else 1, 3 + 4 * k, 0 if k % 2 else 10) for k in range(8)]
    walls += [(-1, 9, 40, 10), (-1, -9, 40, -8)]
    grid = lattice((-1, -8, 40, 9), ((0, 5), (36, 5)), walls)
    starts, ends = [Stub(0, (0, 4), 0)], [Stub(3, (35, 5), 0)]
    turns = best_path(grid, (0, 5), starts, (36, 5), ends)
    sheet = _Sheet(walls, [])
    polyline = ((0, 5), *turns, (36, 5))
    assert all(sheet.is_free(a, b) for a, b in pairwise(polyline))
    assert bends_to_go(grid, starts, ends)[0] == len(turns)
