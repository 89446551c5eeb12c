"""Corners on the module grid: laws that any tidying must keep."""

from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.model.editing_paths import heading_at, split_corners, tidy_corners

POINTS = st.tuples(st.integers(0, 5), st.integers(0, 5))
CORNERS = st.lists(POINTS, max_size=6)


@given(POINTS, CORNERS, POINTS)
@settings(max_examples=150)
def test_tidying_leaves_nothing_to_tidy_and_adds_nothing(
    start: tuple[int, int], corners: list[tuple[int, int]], end: tuple[int, int]
) -> None:
    kept = tidy_corners(start, corners, end)
    assert tidy_corners(start, kept, end) == kept
    rest = iter(corners)
    assert all(corner in rest for corner in kept)  # a subsequence
    path = (start, *kept, end)
    for a, b, c in zip(path, path[1:], path[2:], strict=False):
        assert b not in (a, c) and not a[0] == b[0] == c[0] and not a[1] == b[1] == c[1]


def test_real_corners_stay() -> None:
    assert tidy_corners((0, 0), [(0, 5), (4, 5), (4, 9)], (8, 9)) == ((0, 5), (4, 5), (4, 9))


@given(POINTS, CORNERS, POINTS, POINTS)
@settings(max_examples=100)
def test_splitting_loses_no_corner(
    start: tuple[int, int], corners: list[tuple[int, int]], end: tuple[int, int], at: tuple[int, int]
) -> None:
    before, after = split_corners(start, corners, end, at)
    assert [*before, *after] == [c for c in corners if c != at]


def test_a_place_on_a_leg_splits_there() -> None:
    corners = [(0, 10), (10, 10)]
    assert split_corners((0, 0), corners, (10, 20), (0, 4)) == ((), ((0, 10), (10, 10)))
    assert split_corners((0, 0), corners, (10, 20), (5, 10)) == (((0, 10),), ((10, 10),))
    assert split_corners((0, 0), corners, (10, 20), (10, 15)) == (((0, 10), (10, 10)), ())


def test_headings() -> None:
    path = [(0, 0), (0, 10), (10, 10), (10, 2)]
    assert heading_at(path, (0, 4)) == (0, 1)
    assert heading_at(path, (6, 10)) == (1, 0)
    assert heading_at(path, (10, 5)) == (0, -1)
    assert heading_at(path[::-1], (6, 10)) == (-1, 0)
    assert heading_at([(3, 3), (3, 3)], (3, 3)) == (0, 1)
