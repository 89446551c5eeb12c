"""Shapes: placing by quarter turns, text that stays upright, exact bounds."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.drawing.metrics import text_width
from onelinefault.drawing.shapes import (
    Box,
    Circle,
    Command,
    Line,
    Path,
    Placement,
    Polygon,
    Polyline,
    Rect,
    Stroke,
    Text,
    arc,
    bounds,
    box_of,
    steps,
    transform,
)

THIN = Stroke("ink", 0.0)
SOME = (
    Line(0, -30, 0, -17),
    Polyline(((1, 2), (3, 4), (5, 0)), Stroke("muted", 1.0)),
    Polygon(((0, 0), (10, 0), (0, 5)), fill="paper"),
    Circle(3, -2, 17),
    Rect(-4, -18, 8, 36, 4, fill="paper"),
    Path((Command("M", ((0, 0),)), Command("C", ((10, 0), (10, 10), (0, 10))), Command("Z"))),
    Path(steps((-3, 1), (4, 1)), pivot=(0, 0)),
    Text(26, 0, "×4", 11, "bold", "start", "middle"),
    Text(0, -4, "M", 14, "bold", "middle", "middle", pivot=(0, 0)),
)


@given(st.floats(-99, 99), st.floats(-99, 99), st.integers(0, 7), st.booleans())
@settings(max_examples=60)
def test_point_turns_as_complex_multiplication(x: float, y: float, turn: int, mirrored: bool) -> None:
    # with y downwards a clockwise quarter turn is a multiplication by i; mirroring negates the real part first
    expected = complex(-x if mirrored else x, y) * 1j**turn + complex(5, -7)
    assert complex(*Placement(turn, mirrored, 5, -7).point(x, y)) == pytest.approx(expected)


@pytest.mark.parametrize("turn", range(4))
def test_turning_on_to_a_full_turn_gives_the_same_shapes(turn: int) -> None:
    there_and_back = transform(transform(SOME, turn), 4 - turn)
    for back, first in zip(there_and_back, SOME, strict=True):
        assert type(back) is type(first)
        assert tuple(back.box()) == pytest.approx(tuple(first.box()))


def test_mirroring_twice_gives_the_same_shapes() -> None:
    assert bounds(transform(transform(SOME, mirrored=True), mirrored=True)) == pytest.approx(bounds(SOME))


@given(st.integers(0, 3), st.booleans())
@settings(max_examples=8)
def test_bounds_of_turned_outlines_are_the_turned_bounds(turn: int, mirrored: bool) -> None:
    outlines = SOME[:6]  # those that turn with the part
    box = bounds(outlines)
    corners = box_of(Placement(turn, mirrored).points(((box.left, box.top), (box.right, box.bottom))))
    assert tuple(bounds(transform(outlines, turn, mirrored))) == pytest.approx(tuple(corners))


def test_move_only_moves() -> None:
    assert tuple(bounds(transform(SOME, dx=7, dy=-3))) == pytest.approx(tuple(bounds(SOME).moved(7, -3)))


def test_turned_text_keeps_its_size_and_goes_with_its_middle() -> None:
    text = SOME[7]
    assert isinstance(text, Text)
    width = text_width("×4", 11, bold=True)
    (turned,) = transform((text,), turn=1)
    assert (turned.box().width, turned.box().height) == pytest.approx((text.box().width, text.box().height))
    # right of the part becomes below the part, centred under it
    assert isinstance(turned, Text)
    assert turned.left + width / 2 == pytest.approx(0)
    assert turned.y == pytest.approx(26 + width / 2)


def test_mirrored_text_swaps_sides() -> None:
    (text,) = transform((SOME[7],), mirrored=True)
    assert text.box().right == pytest.approx(-26)


def test_what_has_a_pivot_stays_upright_in_place() -> None:
    letter, bar = transform((SOME[8], SOME[6]), turn=3, mirrored=True)
    assert tuple(letter.box()) == pytest.approx(tuple(SOME[8].box()))
    assert tuple(bar.box()) == pytest.approx(tuple(SOME[6].box()))
    moved = transform(transform((SOME[8],), turn=1, dx=40), turn=1)[0]  # the pivot is carried along
    assert moved.box().centre == pytest.approx((SOME[8].box().centre[0], SOME[8].box().centre[1] + 40))


@given(st.lists(st.tuples(st.floats(-50, 50), st.floats(-50, 50)), min_size=4, max_size=4))
@settings(max_examples=60)
def test_bounds_of_a_cubic_hold_it_tightly(points: list[tuple[float, float]]) -> None:
    p = points
    path = Path((Command("M", (p[0],)), Command("C", (p[1], p[2], p[3]))), THIN)
    box = path.box()
    # Bernstein form, sampled densely
    samples = [
        tuple(
            (1 - t) ** 3 * p[0][i] + 3 * (1 - t) ** 2 * t * p[1][i] + 3 * (1 - t) * t**2 * p[2][i] + t**3 * p[3][i]
            for i in (0, 1)
        )
        for t in (k / 400 for k in range(401))
    ]
    xs, ys = zip(*samples, strict=True)
    assert all(box.grown(1e-9).holds(x, y) for x, y in samples)
    # between samples a curve with handles of at most 100 du can rise by 3·200/400² du
    assert (box.left, box.right) == pytest.approx((min(xs), max(xs)), abs=0.01)
    assert (box.top, box.bottom) == pytest.approx((min(ys), max(ys)), abs=0.01)


def test_bounds_of_a_quadratic() -> None:
    # the top of a parabola with its handle at height -10 is half way, at -5
    path = Path((Command("M", ((0, 0),)), Command("Q", ((4, -10), (8, 0)))), THIN)
    assert tuple(path.box()) == pytest.approx((0, -5, 8, 0))


@pytest.mark.parametrize(("start", "sweep"), [(0, 360), (-90, 180), (30, -200), (10, 45)])
def test_arc_is_round_and_ends_where_it_should(start: float, sweep: float) -> None:
    commands = arc(3, 4, 10, start, sweep)
    end = math.radians(start + sweep)
    assert commands[-1].points[-1] == pytest.approx((3 + 10 * math.cos(end), 4 + 10 * math.sin(end)))
    here = commands[0].points[0]
    for command in commands[1:]:
        a, b, c = command.points
        middle = tuple((here[i] + 3 * a[i] + 3 * b[i] + c[i]) / 8 for i in (0, 1))
        assert math.dist(middle, (3, 4)) == pytest.approx(10, rel=3e-4)
        here = c


def test_full_circle_has_the_bounds_of_a_circle() -> None:
    assert tuple(Path(arc(0, 0, 5, 20, 360), THIN).box()) == pytest.approx((-5, -5, 5, 5), rel=1e-3)


@pytest.mark.parametrize(("anchor", "left"), [("start", 100.0), ("middle", 82.0), ("end", 64.0)])
def test_anchor(anchor: str, left: float) -> None:
    text = Text(100, 0, "m" * 1, 10, anchor=anchor)  # type: ignore[arg-type]
    width = text_width("m", 10)
    assert text.left == pytest.approx(100 - (100 - left) / 36 * width)


def test_middle_baseline_centres_capitals() -> None:
    # H of DejaVu Sans is 1493 units of 2048 high and stands on the baseline
    text = Text(0, 20, "H", 20.48, baseline="middle")
    assert text.baseline_y - 14.93 / 2 == pytest.approx(20)


def test_stroke_width_counts() -> None:
    assert Line(0, 0, 10, 0, Stroke(width_du=6)).box() == Box(-3, -3, 13, 3)
    assert Circle(0, 0, 5, None, "ink").box() == Box(-5, -5, 5, 5)


def test_box() -> None:
    box = Box(0, 0, 10, 4)
    assert (box.width, box.height, box.centre) == (10, 4, (5, 2))
    assert box.united(Box(-1, 2, 3, 9)) == Box(-1, 0, 10, 9)
    assert box.overlaps(Box(9, 3, 20, 20))
    assert not box.overlaps(Box(10, 0, 20, 4))
    assert box.holds(10, 4)
    assert not box.holds(10.1, 4)


def test_no_shapes_have_no_bounds() -> None:
    with pytest.raises(ValueError, match="no shapes"):
        bounds(())
