"""The lattice says of every step between interesting lines what looking at the boxes themselves says."""

from __future__ import annotations

from itertools import pairwise

from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.drawing.routing_lattice import crossing_at, lattice

_coordinates = st.integers(0, 12)
_tenths = st.integers(0, 120).map(lambda tenths: tenths / 10)


@st.composite
def _boxes(draw):
    """Any boxes with an inside."""
    found = []
    for _ in range(draw(st.integers(0, 5))):
        left, top = draw(_tenths), draw(_tenths)
        found.append((left, top, left + draw(st.integers(1, 40)) / 10, top + draw(st.integers(1, 40)) / 10))
    return found


def _open_overlap(low: float, high: float, start: float, stop: float) -> bool:
    """Whether the open interval (low, high) meets the closed one from start to stop."""
    return low < stop and start < high


@settings(max_examples=60, deadline=None)
@given(start=st.tuples(_coordinates, _coordinates), end=st.tuples(_coordinates, _coordinates), boxes=_boxes())
def test_steps_are_free_or_close_as_the_boxes_say(start, end, boxes):
    grid = lattice((-3, -3, 20, 20), (start, end), boxes)
    spots = [(x - 0.5, y - 0.5, x + 0.5, y + 0.5) for x, y in (start, end)]
    for row, y in enumerate(grid.ys):
        for column, (x0, x1) in enumerate(pairwise(grid.xs)):
            shut = any(_open_overlap(b[0], b[2], x0, x1) and b[1] < y < b[3] for b in [*boxes, *spots])
            close = any(_open_overlap(b[0] - 1, b[2] + 1, x0, x1) and b[1] - 1 < y < b[3] + 1 for b in boxes)
            assert bool(grid.across[row] >> column & 1) is not shut
            assert bool(grid.across_close[row] >> column & 1) is close
    for column, x in enumerate(grid.xs):
        for row, (y0, y1) in enumerate(pairwise(grid.ys)):
            shut = any(_open_overlap(b[1], b[3], y0, y1) and b[0] < x < b[2] for b in [*boxes, *spots])
            close = any(_open_overlap(b[1] - 1, b[3] + 1, y0, y1) and b[0] - 1 < x < b[2] + 1 for b in boxes)
            assert bool(grid.down[row] >> column & 1) is not shut
            assert bool(grid.down_close[row] >> column & 1) is close


def test_nothing_leads_out_of_the_lattice():
    grid = lattice((0, 0, 9, 9), ((4, 4),), [])
    assert grid.xs == grid.ys == [3, 4, 5]
    assert all(row >> len(grid.xs) - 1 == 0 for row in grid.across)
    assert grid.down[-1] == 0


def test_wires_take_the_steps_that_they_lie_on_and_no_others():
    grid = lattice((-5, -5, 20, 20), ((0, 0), (9, 9)), [], [((2, 5), (7, 5)), ((4, 8), (4, 2))])
    across = {
        (x0, x1, y)
        for row, y in enumerate(grid.ys)
        for column, (x0, x1) in enumerate(pairwise(grid.xs))
        if grid.across_taken[row] >> column & 1
    }
    down = {
        (x, y0, y1)
        for column, x in enumerate(grid.xs)
        for row, (y0, y1) in enumerate(pairwise(grid.ys))
        if grid.down_taken[row] >> column & 1
    }
    assert {y for _, _, y in across} == {5}
    assert (min(x for x, _, _ in across), max(x for _, x, _ in across)) == (2, 7)
    assert {x for x, _, _ in down} == {4}
    assert (min(y for _, y, _ in down), max(y for _, _, y in down)) == (2, 8)


def test_the_lines_next_to_a_box_and_a_module_from_it_are_there():
    grid = lattice((-5, -5, 20, 20), ((0, 0),), [(4.1, 6, 8.9, 7)])
    assert {3, 4, 9, 10} <= set(grid.xs)
    assert {5, 6, 7, 8} <= set(grid.ys)
    assert crossing_at(grid, (4, 6)) == (grid.xs.index(4), grid.ys.index(6))
    assert crossing_at(grid, (6, 6)) is None
