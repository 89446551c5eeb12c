"""How far Bezier curves reach: the points where they end or turn back."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from itertools import pairwise
from math import sqrt
from typing import TypeAlias

Point: TypeAlias = tuple[float, float]


def extreme_points(steps: Iterable[tuple[Point, ...]]) -> Iterator[Point]:
    """The ends of all steps of a path and the points where a curve turns back in x or in y.

    steps: for each step the points after the one where the step before has ended: one of a straight step, two of a
    quadratic, three of a cubic, none of a closing one.
    """
    here = (0.0, 0.0)
    for points in steps:
        curve = (here, *points)
        for time in (t for axis in (0, 1) for t in _turning_times([p[axis] for p in curve])):
            yield _on_curve(curve, time)
        if points:
            here = points[-1]
            yield here


def _turning_times(ordinates: list[float]) -> list[float]:
    """Times in (0, 1) when a Bezier ordinate of degree 2 or 3 stands still: roots of its derivative."""
    slopes = [b - a for a, b in pairwise(ordinates)]
    if len(slopes) == 2:
        slopes = [slopes[0], (slopes[0] + slopes[1]) / 2, slopes[1]]  # the same line, written as a parabola
    if len(slopes) != 3:
        return []
    a, b, c = slopes[0] - 2 * slopes[1] + slopes[2], slopes[1] - slopes[0], slopes[0]  # a t² + 2 b t + c
    if abs(a) < 1e-12:
        roots = [] if b == 0 else [-c / (2 * b)]
    else:
        inner = b * b - a * c
        roots = [] if inner < 0 else [(-b + sign * sqrt(inner)) / a for sign in (1, -1)]
    return [t for t in roots if 0 < t < 1]


def _on_curve(points: tuple[Point, ...], time: float) -> Point:
    """The point of a Bezier curve at a time, by repeated division (de Casteljau)."""
    while len(points) > 1:
        points = tuple(((1 - time) * a[0] + time * b[0], (1 - time) * a[1] + time * b[1]) for a, b in pairwise(points))
    return points[0]
