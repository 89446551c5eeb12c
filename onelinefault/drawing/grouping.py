"""Gathers the shapes of a display list that can be painted as one path without changing the picture.

Painting costs a fixed price for each path, so a symbol of ten shapes is painted in three or four steps. Two shapes may
be painted together when they have the same pen and when nothing that lies between them in the list covers, or is
covered by, the one that moves forward.
"""

from __future__ import annotations

from collections.abc import Iterable

from onelinefault.drawing.shapes import Box, Line, Polyline, Shape, Text

_TOUCH_DU = 1e-6


def fill_of(shape: Shape) -> str | None:
    """The role that a shape is filled with, None for lines, text and open outlines."""
    return None if isinstance(shape, Line | Polyline | Text) else shape.fill


def grouped(shapes: Iterable[Shape]) -> list[list[Shape]]:
    """Shapes in groups of one pen and at most one filling, to be painted in order; text always by itself."""
    groups: list[list[Shape]] = []
    for shape in shapes:
        home = _home(groups, shape)
        if home is None:
            groups.append([shape])
        else:
            home.append(shape)
    return groups


def _home(groups: list[list[Shape]], shape: Shape) -> list[Shape] | None:
    """The last group that can take the shape, if it may be painted that early."""
    for group in reversed(groups):
        if _can_take(group, shape):
            return group
        if any(_order_matters(other, shape) for other in group):
            return None
    return None


def _can_take(group: list[Shape], shape: Shape) -> bool:
    """Same pen, and filling all shapes first and stroking them afterwards gives the same picture."""
    first = group[0]
    if isinstance(shape, Text) or isinstance(first, Text) or shape.stroke != first.stroke:
        return False
    fill, fills = fill_of(shape), {fill_of(other) for other in group} - {None}
    if fill is None:
        # inside a filled path an open curve would be filled too; a straight line has no inside
        return not fills or isinstance(shape, Line)
    if fills not in ({fill}, set()):
        return False
    if not fills and not all(isinstance(other, Line) for other in group):
        return False
    return shape.stroke is None or not any(_inner_box(shape).overlaps(_inner_box(other)) for other in group)


def _order_matters(earlier: Shape, later: Shape) -> bool:
    """Whether the picture changes when the two are painted the other way round."""
    if not isinstance(earlier, Text) and not isinstance(later, Text):
        lines_only = fill_of(earlier) is None and fill_of(later) is None
        if lines_only and earlier.stroke and later.stroke and earlier.stroke.role == later.stroke.role:
            return False
    return earlier.box().overlaps(later.box())


def _inner_box(shape: Shape) -> Box:
    """The box of the outline itself, without half the pen's width, a little smaller so that touching is no overlap."""
    pen = None if isinstance(shape, Text) else shape.stroke
    return shape.box().grown(-(pen.width_du / 2 if pen else 0.0) - _TOUCH_DU)
