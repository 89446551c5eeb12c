"""Ribbons: Kirchhoff's law along a bar, areas and outlines by elementary geometry, gaps by sampling."""

from __future__ import annotations

from itertools import combinations, pairwise
from math import hypot, sqrt

import pytest
from hypothesis import assume, example, given, settings
from hypothesis import strategies as st

from onelinefault.drawing.ribbons import bar_flow, chevrons, clip_to_gaps, ribbon, width_of

# width by current


@given(st.floats(0.005, 1.0), st.floats(0.01, 500.0))
def test_widths_go_with_the_root_of_the_current(share, largest):
    assert width_of(share * largest * 1.000001, largest) == pytest.approx(max(2.0, 16.0 * sqrt(share)), rel=1e-5)


def test_widths_at_the_ends_of_the_scale():
    assert width_of(40.0, 40.0, widest_du=12.0) == 12.0
    assert width_of(0.0049 * 40.0, 40.0) == 0.0
    assert width_of(0.0051 * 40.0, 40.0, narrowest_du=3.0) == 3.0
    assert width_of(80.0, 40.0) == 16.0
    assert width_of(-10.0, 40.0) == width_of(10.0, 40.0) == 8.0
    assert width_of(1.0, 0.0) == 0.0


# flow along a bus bar

_attachments = st.lists(st.tuples(st.integers(0, 30), st.integers(-9, 9)), max_size=8)


@given(_attachments, st.integers(0, 30))
def test_the_flow_past_any_place_is_what_enters_on_one_side_of_it(attachments, fault):
    """Kirchhoff's current law for the part of the bar on the left of a cut; whole numbers, so exact."""
    flows = bar_flow(attachments, fault)
    total = sum(current for _, current in attachments)
    offsets = [offset for offset, _ in attachments] + [fault]
    for half in range(1, 60, 2):
        cut = half / 2
        left = sum(current for offset, current in attachments if offset < cut) - (total if fault < cut else 0)
        found = [flow for start, stop, flow in flows if start < cut < stop]
        assert found == ([left] if min(offsets) < cut < max(offsets) else [])


def test_the_flow_turns_at_the_fault():
    flows = bar_flow([(2, 8.4), (9, 2.9), (16, 1.6)], 12)
    assert [(start, stop) for start, stop, _ in flows] == [(2, 9), (9, 12), (12, 16)]
    assert [flow for *_, flow in flows] == pytest.approx([8.4, 11.3, -1.6])


def test_a_bar_without_fault_passes_current_on():
    assert bar_flow([(0, 5.0), (10, -2.0), (20, -3.0)], None) == [(0, 10, 5.0), (10, 20, 3.0)]
    assert bar_flow([], None) == []
    assert bar_flow([(4, 1.0)], 4) == []


# gaps


@st.composite
def _paths(draw, least=1):
    """Orthogonal polylines on the module grid that never touch themselves, du."""
    places = [(0, 0)]
    corners = [(0, 0)]
    upright = draw(st.booleans())
    for _ in range(draw(st.integers(least, 6))):
        length = draw(st.integers(1, 5)) * draw(st.sampled_from([-1, 1]))
        sign = 1 if length > 0 else -1
        x, y = corners[-1]
        steps = [(x, y + k * sign) if upright else (x + k * sign, y) for k in range(1, abs(length) + 1)]
        assume(not set(steps) & set(places))
        places += steps
        corners.append(steps[-1])
        upright = not upright
    return [(10.0 * x, 10.0 * y) for x, y in corners]


@st.composite
def _gaps(draw):
    gaps = []
    for _ in range(draw(st.integers(0, 4))):
        left, top = draw(st.integers(-60, 60)) + 0.25, draw(st.integers(-60, 60)) + 0.25
        gaps.append((left, top, left + draw(st.integers(1, 40)), top + draw(st.integers(1, 40))))
    return gaps


def _samples(points):
    """Places every half du along a polyline, off its corners."""
    for (x0, y0), (x1, y1) in pairwise(points):
        count = max(1, round(2 * hypot(x1 - x0, y1 - y0)))
        for k in range(count):
            share = (k + 0.5) / count
            yield x0 + (x1 - x0) * share, y0 + (y1 - y0) * share


def _length(points):
    return sum(hypot(b[0] - a[0], b[1] - a[1]) for a, b in pairwise(points))


def _on(place, points):
    """Whether a place lies on a polyline."""
    x, y = place
    return any(
        min(a[0], b[0]) - 1e-9 <= x <= max(a[0], b[0]) + 1e-9 and min(a[1], b[1]) - 1e-9 <= y <= max(a[1], b[1]) + 1e-9
        for a, b in pairwise(points)
    )


@settings(max_examples=60, deadline=None)
@given(_paths(), _gaps())
def test_just_what_lies_outside_the_boxes_is_left(path, gaps):
    pieces = clip_to_gaps(path, gaps)
    for x, y in _samples(path):
        if min((abs(v - e) for g in gaps for v, e in ((x, g[0]), (x, g[2]), (y, g[1]), (y, g[3]))), default=1) < 1e-6:
            continue
        hidden = any(left < x < right and top < y < bottom for left, top, right, bottom in gaps)
        assert any(_on((x, y), piece) for piece in pieces) is not hidden
    assert all(_length(piece) > 0 for piece in pieces)
    assert _length(path) - sum(map(_length, pieces)) >= -1e-9


def test_pieces_run_on_round_corners():
    pieces = clip_to_gaps([(0, 0), (0, 40), (50, 40)], [(-5, 10, 5, 20), (60, 0, 70, 50)])
    assert pieces == [((0, 0), (0, 10)), ((0, 20), (0, 40), (50, 40))]
    nested = [(-5, 10, 5, 30), (-5, 15, 5, 20)]
    assert clip_to_gaps([(0, 0), (0, 40)], nested) == [((0, 0), (0, 10)), ((0, 30), (0, 40))]
    assert clip_to_gaps([(0, 0), (0, 40)], [(-5, -5, 5, 45)]) == []
    assert clip_to_gaps([(0, 0), (0, 40)], [(0, 10, 20, 30)]) == [((0, 0), (0, 40))]  # along its edge: not inside
    assert clip_to_gaps([(3, 3)], []) == []


# outlines


def _area(polygon):
    """Shoelace formula."""
    return abs(sum(a[0] * b[1] - b[0] * a[1] for a, b in pairwise([*polygon, polygon[0]]))) / 2


def _cross(a, b, c, d):
    """Whether two segments properly cross each other."""

    def side(p, q, r):
        value = (q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0])
        return 0 if abs(value) < 1e-7 else (1 if value > 0 else -1)

    return side(a, b, c) * side(a, b, d) < 0 and side(c, d, a) * side(c, d, b) < 0


@settings(max_examples=120, deadline=None)
@given(_paths(), st.floats(0, 16), st.floats(0.5, 16), _gaps())
@example([(60, 40), (-20, 40), (-20, -20), (60, -20), (60, 30), (100, 30)], 16, 16, [])  # a mitre near its own start
@example([(0, 0), (50, 0), (50, 50)], 16, 16, [(10, -9, 47, 9)])  # a gap just before a corner
@example([(0, 0), (50, 0), (50, 50)], 16, 16, [(41, 3, 59, 30)])  # a gap just behind a corner
def test_outlines_never_cross_themselves(path, width_start, width_end, gaps):
    for outline in ribbon(path, width_start, width_end, gaps):
        edges = list(pairwise([*outline, outline[0]]))
        assert not any(_cross(*one, *other) for one, other in combinations(edges, 2))


@given(st.lists(st.integers(2, 9), min_size=1, max_size=6), st.floats(0.5, 16), st.floats(0.5, 16), st.booleans())
def test_the_area_of_a_staircase_is_length_times_width(lengths, width_start, width_end, upright):
    """Mitres take off inside a corner what they add outside, so each segment counts its length times its mean width."""
    path = [(0.0, 0.0)]
    for k, modules in enumerate(lengths):
        x, y = path[-1]
        path.append((x, y + 10 * modules) if upright == (k % 2 == 0) else (x + 10 * modules, y))
    stations = [_length(path[: k + 1]) for k in range(len(path))]
    widths = [width_start + (width_end - width_start) * station / stations[-1] for station in stations]
    expected = sum((b - a) * (v + w) / 2 for (a, b), (v, w) in zip(pairwise(stations), pairwise(widths), strict=True))
    (outline,) = ribbon(path, width_start, width_end)
    assert _area(outline) == pytest.approx(expected)


@given(_paths(), st.floats(1, 4), st.floats(1, 4))
def test_a_ribbon_has_the_wire_in_its_middle_and_its_widths_at_its_ends(path, width_start, width_end):
    (outline,) = ribbon(path, width_start, width_end)
    half = len(outline) // 2
    middles = [
        ((a[0] + b[0]) / 2, (a[1] + b[1]) / 2) for a, b in zip(outline[:half], outline[: half - 1 : -1], strict=True)
    ]
    assert middles == [pytest.approx(point) for point in path]
    assert hypot(outline[0][0] - outline[-1][0], outline[0][1] - outline[-1][1]) == pytest.approx(width_start)
    assert hypot(*(outline[half][k] - outline[half - 1][k] for k in (0, 1))) == pytest.approx(width_end)


def test_the_taper_goes_on_behind_a_gap():
    before, after = ribbon([(0, 0), (100, 0)], 10, 0, [(40, -9, 60, 9)])
    assert before == ((0, 5), (40, 3), (40, -3), (0, -5))
    assert after == ((60, 2), (100, 0), (100, 0), (60, -2))


def test_a_narrow_turn_narrows_the_ribbon():
    (outline,) = ribbon([(0, 0), (0, 50), (10, 50), (10, 0)], 16, 16)
    assert max(x for x, y in outline if x < 5.1) == pytest.approx(5.0)
    assert min(x for x, y in outline) == pytest.approx(-5.0)


def test_a_corner_just_behind_a_symbol_does_not_reach_back_over_it():
    symbol = (10, -20, 47, 20)
    _, after = ribbon([(0, 0), (50, 0), (50, 50)], 16, 16, [symbol])
    assert all(x >= 47 or y >= 20 for x, y in after)


def test_no_current_no_ribbon():
    assert ribbon([(0, 0), (0, 50)], 0, 0) == []
    assert ribbon([(3, 3)], 8, 8) == []


# direction of flow


@settings(max_examples=80)
@given(_paths(), st.floats(2, 12), st.floats(15, 60))
def test_chevrons_point_along_the_flow_and_keep_off_corners(path, size, spacing):
    found = chevrons(path, size, spacing)
    segments = list(pairwise(path))
    places = []
    for wing, tip, other in found:
        back = ((wing[0] + other[0]) / 2, (wing[1] + other[1]) / 2)
        middle = ((back[0] + tip[0]) / 2, (back[1] + tip[1]) / 2)
        assert hypot(wing[0] - other[0], wing[1] - other[1]) == pytest.approx(size)
        (index,) = [k for k, (a, b) in enumerate(segments) if _on(middle, (a, b)) and _on(tip, (a, b))]
        a, b = segments[index]
        length = _length((a, b))
        ahead = ((tip[0] - back[0]) * (b[0] - a[0]) + (tip[1] - back[1]) * (b[1] - a[1])) / length
        assert ahead == pytest.approx(size / 2)
        from_start = _length((a, middle))
        assert size / 2 - 1e-6 <= from_start <= length - size / 2 + 1e-6
        places.append(_length(path[: index + 1]) + from_start)
    assert all(b - a >= size - 1e-6 for a, b in pairwise(places))
    assert bool(found) is any(_length(segment) >= size for segment in segments)


def test_chevrons_are_evenly_spread_on_a_straight_wire():
    tips = [tip for _, tip, _ in chevrons([(0, 0), (100, 0)], 8, 25)]
    assert tips == [(14.5, 0), (39.5, 0), (64.5, 0), (89.5, 0)]
    assert len(chevrons([(0, 0), (10, 0)], 8, 25)) == 1
    assert chevrons([(0, 0), (10, 0)], 12, 25) == []
    assert chevrons([(0, 0)], 8, 25) == []
