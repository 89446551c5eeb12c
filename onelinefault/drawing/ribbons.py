"""The fault current as ribbons along the wires: how wide, where along a bus bar, cut where symbols stand, which way.

Pure geometry in du (10 du = 1 module), x to the right, y downwards; polylines run in the direction of flow and consist
of level and upright segments. Currents are kA, or any one unit throughout.
"""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Iterable, Sequence
from itertools import accumulate, pairwise
from math import hypot, sqrt

Point = tuple[float, float]
Box = tuple[float, float, float, float]
"""Left, top, right, bottom."""

_UNSEEN = 0.005  # of the largest current: less is not drawn
_SAME = 1e-9  # du; shorter is nothing


def width_of(current_ka: float, largest_ka: float, widest_du: float = 16.0, narrowest_du: float = 2.0) -> float:
    """Width of the ribbon of a current, du, when the largest current of the picture has the widest ribbon.

    As the square root of the current, so that a motor is still seen beside a supply; never under the narrowest; 0
    below 0.5 % of the largest. Only magnitudes count.

    >>> width_of(2.5, 10.0)
    8.0
    """
    current, largest = abs(current_ka), abs(largest_ka)
    if not largest or current < _UNSEEN * largest:
        return 0.0
    return max(narrowest_du, min(widest_du, widest_du * sqrt(current / largest)))


def bar_flow(
    attachments: Sequence[tuple[float, float]], fault_offset: float | None
) -> list[tuple[float, float, float]]:
    """Current along a bus bar as (offset, next offset, current), positive towards the greater offset.

    `attachments`: offset along the bar and current into the bar there (negative: out of it). With a fault the sum of
    all currents leaves the bar at `fault_offset`. Kirchhoff's current law, applied from the lower end of the bar.

    >>> bar_flow([(0, 3.0), (10, 1.0)], 4)
    [(0, 4, 3.0), (4, 10, -1.0)]
    """
    into: dict[float, float] = {}
    for offset, current in attachments:
        into[offset] = into.get(offset, 0.0) + current
    if fault_offset is not None:
        into[fault_offset] = into.get(fault_offset, 0.0) - sum(current for _, current in attachments)
    offsets = sorted(into)
    flows = accumulate(into[offset] for offset in offsets)
    return [(start, stop, flow) for (start, stop), flow in zip(pairwise(offsets), flows, strict=False)]


def clip_to_gaps(polyline: Sequence[Point], boxes: Iterable[Box]) -> list[tuple[Point, ...]]:
    """The pieces of a polyline outside all boxes, in its direction.

    >>> clip_to_gaps([(0, 0), (10, 0)], [(4, -1, 6, 1)])
    [((0, 0), (4.0, 0.0)), ((6.0, 0.0), (10, 0))]
    """
    points = _distinct(polyline)
    return [_part(points, start, stop) for start, stop in _visible(points, boxes)]


def ribbon(
    polyline: Sequence[Point], width_start: float, width_end: float, gaps: Iterable[Box] = ()
) -> list[tuple[Point, ...]]:
    """Outlines (closed polygons) of a ribbon along a polyline, one for each piece outside the `gaps`.

    Its width goes evenly from `width_start` to `width_end`; corners are mitred. Where the polyline comes back close to
    itself the ribbon is narrowed, so that no outline crosses itself. Empty when both widths are 0.
    """
    points = _distinct(polyline)
    if len(points) < 2 or max(width_start, width_end) <= 0:
        return []
    stations = _stations(points)
    limits = _half_width_limits(points, max(width_start, width_end))
    halves = [
        min(limit, (width_start + (width_end - width_start) * station / stations[-1]) / 2)
        for station, limit in zip(stations, limits, strict=True)
    ]
    outlines = []
    for start, stop in _visible(points, gaps):
        piece = _part(points, start, stop)
        inner = [half for station, half in zip(stations, halves, strict=True) if start < station < stop]
        outlines.append(_outline(piece, [_between(stations, halves, start), *inner, _between(stations, halves, stop)]))
    return outlines


def chevrons(polyline: Sequence[Point], size: float, spacing: float) -> list[tuple[Point, Point, Point]]:
    """Arrow heads (wing, tip, wing) along a polyline, pointing the way it runs, about `spacing` apart.

    They are `size` across and half as deep, evenly spread, kept off the corners and ends; a polyline that has room for
    one has at least one. Segments shorter than `size` carry none.
    """
    points = _distinct(polyline)
    stations = _stations(points)
    if len(points) < 2 or size <= 0 or spacing <= 0:
        return []
    count = max(1, round(stations[-1] / spacing))
    places: list[float] = []
    for k in range(count):
        place = _off_corners(stations, size, stations[-1] * (k + 0.5) / count)
        if place is not None and (not places or place - places[-1] >= size):
            places.append(place)
    return [_chevron(points, stations, place, size) for place in places]


def _off_corners(stations: Sequence[float], size: float, wanted: float) -> float | None:
    """The place nearest to the wanted one that is a size from all corners, in short segments half-way; None if none."""
    insets = [(start, stop, min(size, (stop - start) / 2)) for start, stop in pairwise(stations)]
    rooms = [(start + inset, stop - inset) for start, stop, inset in insets if inset >= size / 2]
    places = [min(max(wanted, start), stop) for start, stop in rooms]
    return min(places, key=lambda place: abs(place - wanted), default=None)


def _chevron(
    points: Sequence[Point], stations: Sequence[float], place: float, size: float
) -> tuple[Point, Point, Point]:
    """The arrow head whose middle lies at a place along the polyline."""
    segment = min(max(bisect_right(stations, place) - 1, 0), len(points) - 2)
    x, y = _at(points, stations, place)
    ux, uy = _unit(points[segment], points[segment + 1])
    back_x, back_y = x - ux * size / 4, y - uy * size / 4
    side_x, side_y = -uy * size / 2, ux * size / 2
    tip = (x + ux * size / 4, y + uy * size / 4)
    return (back_x + side_x, back_y + side_y), tip, (back_x - side_x, back_y - side_y)


def _outline(points: Sequence[Point], halves: Sequence[float]) -> tuple[Point, ...]:
    """One side of the ribbon forwards, the other backwards; at a corner the two edges are mitred."""
    ahead = [_unit(a, b) for a, b in pairwise(points)]
    if len(points) > 2:  # the mitre beside a short end would reach back over what the end keeps clear of
        first, *_, last = (hypot(b[0] - a[0], b[1] - a[1]) for a, b in pairwise(points))
        halves = [halves[0], min(halves[1], first), *halves[2:]]
        halves = [*halves[:-2], min(halves[-2], last), halves[-1]]
    left, right = [], []
    for (x, y), half, before, after in zip(points, halves, [ahead[0], *ahead], [*ahead, ahead[-1]], strict=True):
        aside_x, aside_y = -before[1] * half, before[0] * half
        if before != after:
            aside_x, aside_y = aside_x - after[1] * half, aside_y + after[0] * half
        left.append((x + aside_x, y + aside_y))
        right.append((x - aside_x, y - aside_y))
    return (*left, *reversed(right))


def _half_width_limits(points: Sequence[Point], width: float) -> list[float]:
    """Greatest half-width at each point that keeps parallel segments beside each other apart.

    Segments count as beside each other also when only their mitres are; not those on both sides of a step.
    """
    limits = [float("inf")] * len(points)
    segments = list(pairwise(points))
    for i, one in enumerate(segments):
        for j in range(i + 1, len(segments)):
            distance = _abreast(one, segments[j], 0.0 if j == i + 2 else width)
            if distance is not None:
                for k in (i, i + 1, j, j + 1):
                    limits[k] = min(limits[k], distance / 2)
    return limits


def _abreast(one: tuple[Point, Point], other: tuple[Point, Point], reach: float) -> float | None:
    """Distance of two parallel segments beside each other, both longer by half of `reach`; None if they are not."""
    for along, across in ((0, 1), (1, 0)):
        if one[0][across] == one[1][across] and other[0][across] == other[1][across]:
            start = max(min(one[0][along], one[1][along]), min(other[0][along], other[1][along]))
            stop = min(max(one[0][along], one[1][along]), max(other[0][along], other[1][along]))
            distance = abs(one[0][across] - other[0][across])
            return distance if start - reach < stop and distance > _SAME else None
    return None


def _visible(points: Sequence[Point], boxes: Iterable[Box]) -> list[tuple[float, float]]:
    """Stretches of a polyline outside all boxes, as distances along it from its start."""
    stations = _stations(points)
    if len(points) < 2:
        return []
    hidden = sorted(
        (station + inside[0], station + inside[1])
        for box in boxes
        for station, (a, b) in zip(stations, pairwise(points), strict=False)
        if (inside := _inside(a, b, box))
    )
    stretches, start = [], 0.0
    for enters, leaves in [*hidden, (stations[-1], stations[-1])]:
        if enters - start > _SAME:
            stretches.append((start, enters))
        start = max(start, leaves)
    return stretches


def _inside(a: Point, b: Point, box: Box) -> tuple[float, float] | None:
    """Where along a segment a box is entered and left, du from a; None if it is not (Liang and Barsky 1984)."""
    length = hypot(b[0] - a[0], b[1] - a[1])
    enters, leaves = 0.0, length
    for axis in (0, 1):
        step = (b[axis] - a[axis]) / length
        low, high = box[axis] - a[axis], box[axis + 2] - a[axis]
        if abs(step) < _SAME:
            if not low < 0 < high:
                return None
            continue
        first, last = sorted((low / step, high / step))
        enters, leaves = max(enters, first), min(leaves, last)
    return (enters, leaves) if leaves > enters else None


def _distinct(polyline: Sequence[Point]) -> list[Point]:
    """The points without repetitions and without points on a straight line."""
    points: list[Point] = []
    for point in polyline:
        if points and point == points[-1]:
            continue
        if len(points) > 1 and _unit(points[-2], points[-1]) == _unit(points[-1], point):
            points.pop()
        points.append(point)
    return points


def _stations(points: Sequence[Point]) -> list[float]:
    """Distance of each point along the polyline from its start."""
    return list(accumulate((hypot(b[0] - a[0], b[1] - a[1]) for a, b in pairwise(points)), initial=0.0))


def _part(points: Sequence[Point], start: float, stop: float) -> tuple[Point, ...]:
    """The polyline between two distances along it."""
    stations = _stations(points)
    inner = [point for station, point in zip(stations, points, strict=True) if start < station < stop]
    return (_at(points, stations, start), *inner, _at(points, stations, stop))


def _at(points: Sequence[Point], stations: Sequence[float], place: float) -> Point:
    """The point at a distance along the polyline."""
    if place <= 0 or place >= stations[-1]:
        return points[0] if place <= 0 else points[-1]
    xs, ys = [point[0] for point in points], [point[1] for point in points]
    return _between(stations, xs, place), _between(stations, ys, place)


def _between(stations: Sequence[float], values: Sequence[float], place: float) -> float:
    """The value at a place along the polyline, interpolated between its points."""
    i = min(max(bisect_right(stations, place) - 1, 0), len(stations) - 2)
    share = (place - stations[i]) / (stations[i + 1] - stations[i])
    return values[i] + (values[i + 1] - values[i]) * share


def _unit(a: Point, b: Point) -> Point:
    """Direction from a to b, of length 1."""
    length = hypot(b[0] - a[0], b[1] - a[1])
    return (b[0] - a[0]) / length, (b[1] - a[1]) / length
