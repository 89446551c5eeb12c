"""Where curves turn back, for cases that can be worked out by hand; dense sampling is in test_shapes."""

from __future__ import annotations

import pytest

from onelinefault.drawing.curves import extreme_points


def test_straight_steps_give_their_ends() -> None:
    assert list(extreme_points([((1, 2),), ((5, 2),), ()])) == [(1, 2), (5, 2)]


def test_quadratic_turns_half_way_to_its_handle() -> None:
    # y = 2 t (1 - t) 10 is highest at t = 1/2, with 5
    assert (4.0, 5.0) in list(extreme_points([((0, 0),), ((4, 10), (8, 0))]))


def test_symmetric_cubic_turns_at_three_quarters_of_its_handles() -> None:
    # y = 3 t (1 - t) 8 is highest at t = 1/2, with 3/4 of 8
    highest = max(extreme_points([((0, 0),), ((0, 8), (6, 8), (6, 0))]), key=lambda point: point[1])
    assert highest == pytest.approx((3, 6))


def test_cubic_that_only_rises_does_not_turn() -> None:
    assert list(extreme_points([((0, 0),), ((1, 1), (2, 2), (3, 3))])) == [(0, 0), (3, 3)]
