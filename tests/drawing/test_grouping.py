"""Grouping shapes for the painter: fewer steps, never another picture."""

from __future__ import annotations

import pytest

from onelinefault.drawing.grouping import fill_of, grouped
from onelinefault.drawing.shapes import Circle, Line, Rect, Stroke, Text
from onelinefault.drawing.symbols import KINDS, symbol

STUB = Line(0, -30, 0, -17)
RING = Circle(0, 0, 17, fill="paper")


def test_lead_joins_the_circle_that_it_only_touches() -> None:
    assert grouped((STUB, RING)) == [[STUB, RING]]


def test_line_that_the_circle_hides_stays_below_it() -> None:
    through = Line(0, -30, 0, 30)
    assert grouped((through, RING)) == [[through], [RING]]


def test_a_circle_that_covers_another_stays_above_it() -> None:
    behind = Circle(5, -4, 17, fill="paper")
    assert grouped((behind, RING)) == [[behind], [RING]]


def test_separate_filled_shapes_share_a_path() -> None:
    cases = [Rect(x, 0, 8, 36, 4, fill="paper") for x in (0, 10, 20)]
    assert grouped(cases) == [cases]


def test_other_pens_are_other_steps_but_need_not_part_what_belongs_together() -> None:
    fine = Line(-3, 0, 3, 0, Stroke("ink", 1.6))
    later = Line(40, 0, 50, 0)
    assert grouped((STUB, fine, later)) == [[STUB, later], [fine]]


def test_nothing_moves_past_what_covers_it() -> None:
    cover = Circle(0, 0, 9, None, "paper")
    upon = Line(-5, 0, 5, 0)
    assert grouped((STUB, cover, upon)) == [[STUB], [cover], [upon]]


def test_text_stands_alone() -> None:
    word = Text(0, 0, "M")
    assert grouped((STUB, word, STUB)) == [[STUB, STUB], [word]]
    assert fill_of(word) is None


@pytest.mark.parametrize("kind", KINDS)
def test_no_shape_is_lost(kind: str) -> None:
    shapes = symbol(kind).shapes
    groups = grouped(shapes)
    assert sorted(map(repr, shapes)) == sorted(repr(s) for group in groups for s in group)
    assert len(groups) <= 7
