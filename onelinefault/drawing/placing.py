"""Where the tags go: callout boxes beside their anchors that keep off symbols, each other, texts and wires.

Greedy over a fixed ring of candidate places (common practice of map lettering): tags with the highest priority first,
of equals the one with the smaller key, each at the cheapest place left. So the order of the requests does not matter
and nothing jumps between two equal pictures. All lengths are du (10 du = 1 module), x to the right, y downwards.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from functools import lru_cache
from math import ceil, floor, hypot, inf
from operator import itemgetter
from typing import Literal

Point = tuple[float, float]
Box = tuple[float, float, float, float]
"""Left, top, right, bottom."""
Segment = tuple[Point, Point]
Side = Literal["right", "left", "above", "below"]
_Thing = tuple[float, float, float, float, float]  # the box of something, and the cost of lying on it

# What lying on something costs; each rank outweighs a few of the next, the last outweighs any distance.
_OFF_PAGE = 20000.0
_ON_SYMBOL = 16000.0
_ON_TAG = 4000.0
_ON_TEXT = 1000.0
_ON_WIRE = 250.0
_ACROSS = 0.08  # a leader across something costs this part of lying on it,
_ALONG = 20.0  # du² and once more for each such area that it shares with it

_DISTANCES = (0.0, 10.0, 22.0, 38.0, 58.0, 84.0, 116.0)  # du beyond the clearance
_SHIFTS = (0.0, -0.5, 0.5, -1.0, 1.0)  # along the side, in halves of the tag's size there and its clearance
_SIDE_COST = 12.0  # du that a tag goes further to stay on the side that is preferred to the next
_BREATH = 2.0  # du kept free round a tag
_NEAR = 4.0  # du beyond the clearance up to which a tag needs no leader
_PIECE = 8.0  # du; slanted lines are looked at as strings of boxes of this size
_HALF_STROKE = 1.0
_ROUND = 4.0  # du of a tag's corner that a leader does not end at
_CELL = 128.0  # du
_cost = itemgetter(4)


@dataclass(frozen=True, slots=True)
class TagRequest:
    """A tag that wants a place.

    `anchor`: what it speaks of; `sides`: where it may stand, best first (those left out come last); `priority`: higher
    is placed earlier; `pinned`: left top corner chosen by hand, kept whatever lies there; `clearance`: du kept free
    between anchor and tag, for a ribbon or a bar.
    """

    key: str
    anchor: Point
    width: float
    height: float
    sides: tuple[Side, ...] = ("right", "left", "above", "below")
    priority: int = 0
    pinned: Point | None = None
    clearance: float = 8.0


@dataclass(frozen=True, slots=True)
class TagPlace:
    """The place found for a tag; `leader` runs from the anchor to the edge of `box`, None when the tag is beside it."""

    key: str
    box: Box
    leader: tuple[Point, Point] | None


class _Things:
    """What lies on the sheet, found by place through square cells."""

    def __init__(self) -> None:
        self._cells: dict[tuple[int, int], list[_Thing]] = {}

    def add(self, box: Box, cost: float) -> None:
        """Puts a thing into every cell that it touches."""
        thing = (*box, cost)
        for cell in _cells(box):
            self._cells.setdefault(cell, []).append(thing)

    def add_line(self, a: Point, b: Point) -> None:
        """Puts in a wire or leader."""
        for box in _pieces(a, b):
            self.add(box, _ON_WIRE)

    def near(self, box: Box) -> list[_Thing]:
        """Things that overlap a box, each once, the worst first."""
        left, top, right, bottom = box
        found = {
            id(thing): thing
            for cell in _cells(box)
            for thing in self._cells.get(cell, ())
            if thing[0] < right and left < thing[2] and thing[1] < bottom and top < thing[3]
        }
        return sorted(found.values(), key=_cost, reverse=True)


def place_tags(
    requests: Sequence[TagRequest],
    obstacles: Sequence[Box],
    segments: Sequence[Segment],
    page: Box,
    texts: Sequence[Box] = (),
) -> list[TagPlace]:
    """A place for every request, in the order of the requests.

    `obstacles`: boxes of symbols; `segments`: wires; `texts`: boxes of labels; `page`: tags stay on it if they can.
    Places are chosen by what they lie on, symbols worst, then tags, texts, wires; then by nearness and preferred side.
    """
    things = _Things()
    for box in obstacles:
        things.add(box, _ON_SYMBOL)
    for box in texts:
        things.add(box, _ON_TEXT)
    for a, b in segments:
        things.add_line(a, b)
    places: dict[str, TagPlace] = {}
    for request in sorted(requests, key=lambda each: (each.pinned is None, -each.priority, each.key)):
        place = _pinned(request) or _best(request, things, page)
        places[request.key] = place
        things.add(place.box, _ON_TAG)
        if place.leader:
            things.add_line(*place.leader)
    return [places[request.key] for request in requests]


def _pinned(request: TagRequest) -> TagPlace | None:
    """The place chosen by hand, if there is one."""
    return request.pinned and _placed(request, *request.pinned)


def _placed(request: TagRequest, left: float, top: float) -> TagPlace:
    """The tag at a place, with its leader."""
    box = (left, top, left + request.width, top + request.height)
    return TagPlace(request.key, box, _leader(request, box))


def _leader(request: TagRequest, box: Box) -> tuple[Point, Point] | None:
    """A straight line from the anchor to the nearest place of the tag's edge, off its corners."""
    x, y = request.anchor
    gap = hypot(max(box[0] - x, 0, x - box[2]), max(box[1] - y, 0, y - box[3]))
    if gap <= request.clearance + _NEAR:
        return None
    inset_x, inset_y = min(_ROUND, request.width / 2), min(_ROUND, request.height / 2)
    if box[1] <= y <= box[3] or not box[0] <= x <= box[2]:
        edge = box[0] if x < box[0] else box[2]
        return request.anchor, (edge, min(max(y, box[1] + inset_y), box[3] - inset_y))
    edge = box[1] if y < box[1] else box[3]
    return request.anchor, (min(max(x, box[0] + inset_x), box[2] - inset_x), edge)


def _best(request: TagRequest, things: _Things, page: Box) -> TagPlace:
    """The cheapest of the candidate places; candidates come with growing distance, so that most are never looked at."""
    x, y = request.anchor
    candidates = _candidates(request.width, request.height, request.sides, request.clearance)
    reach_x = request.width + request.clearance + _DISTANCES[-1] + _BREATH
    reach_y = request.height + request.clearance + _DISTANCES[-1] + _BREATH
    around = things.near((x - reach_x, y - reach_y, x + reach_x, y + reach_y))
    best, least = None, inf
    for distance, dx, dy in candidates:
        if distance >= least:
            break
        box = (x + dx, y + dy, x + dx + request.width, y + dy + request.height)
        cost = distance + _off_page(box, page)
        cost += _lying_on(box, around, least - cost)
        if cost < least:
            place = _placed(request, box[0], box[1])
            cost += _across(request, place.leader, around) if place.leader else 0.0
            if cost < least:
                best, least = place, cost
    assert best is not None, "the ring of candidates is never empty"
    return best


@lru_cache(maxsize=256)
def _candidates(
    width: float, height: float, sides: tuple[Side, ...], clearance: float
) -> tuple[tuple[float, float, float], ...]:
    """Cost by distance, and left top corner from the anchor, of the places in a ring round it, the nearest first."""
    ordered = [*dict.fromkeys((*sides, "right", "left", "above", "below"))]
    found = []
    for rank, side in enumerate(ordered):
        for distance in _DISTANCES:
            away = clearance + distance
            half = (width if side in ("above", "below") else height) / 2
            diagonal = half + away if distance else 0.0
            for along in dict.fromkeys((*(shift * (half + clearance) for shift in _SHIFTS), -diagonal, diagonal)):
                cost = distance + abs(along) / 4 + rank * _SIDE_COST
                dx = {"right": away, "left": -away - width}.get(side, along - width / 2)
                dy = {"below": away, "above": -away - height}.get(side, along - height / 2)
                found.append((cost, dx, dy))
    return tuple(sorted(found, key=lambda each: each[0]))


def _off_page(box: Box, page: Box) -> float:
    """Cost of standing over the edge of the page."""
    if page[0] <= box[0] and box[2] <= page[2] and page[1] <= box[1] and box[3] <= page[3]:
        return 0.0
    return _OFF_PAGE * (2 - _shared(box, page) / ((box[2] - box[0]) * (box[3] - box[1])))


def _lying_on(box: Box, things: Iterable[_Thing], limit: float) -> float:
    """Cost of what a tag would lie on, more for more of it; summed only up to `limit`."""
    left, top, right, bottom = box[0] - _BREATH, box[1] - _BREATH, box[2] + _BREATH, box[3] + _BREATH
    area = (right - left) * (bottom - top)
    total = 0.0
    for thing_left, thing_top, thing_right, thing_bottom, cost in things:
        if thing_left < right and left < thing_right and thing_top < bottom and top < thing_bottom:
            width = min(thing_right, right) - max(thing_left, left)
            height = min(thing_bottom, bottom) - max(thing_top, top)
            total += cost * (1 + width * height / area)
            if total >= limit:
                break
    return total


def _across(request: TagRequest, leader: Segment, things: Sequence[_Thing]) -> float:
    """Cost of what a leader would cross, apart from what is close to its anchor."""
    (x, y), tip = leader
    length = hypot(tip[0] - x, tip[1] - y)
    free = min(request.clearance / length, 1.0)
    start = (x + (tip[0] - x) * free, y + (tip[1] - y) * free)
    pieces = list(_pieces(start, tip))
    hull = (min(start[0], tip[0]), min(start[1], tip[1]), max(start[0], tip[0]), max(start[1], tip[1]))
    total = 0.0
    for thing in things:
        if _meet(thing, hull):
            shared = sum(_shared(thing[:4], piece) for piece in pieces)
            total += _ACROSS * thing[4] * (1 + shared / _ALONG) if shared else 0.0
    return total


def _meet(one: _Thing, other: Box) -> bool:
    """Whether something overlaps a box."""
    return one[0] < other[2] and other[0] < one[2] and one[1] < other[3] and other[1] < one[3]


def _shared(one: Box, other: Box) -> float:
    """Area that two boxes share, du²."""
    width = min(one[2], other[2]) - max(one[0], other[0])
    height = min(one[3], other[3]) - max(one[1], other[1])
    return width * height if width > 0 and height > 0 else 0.0


def _pieces(a: Point, b: Point) -> Iterator[Box]:
    """Boxes that together cover a line: one for a level or upright line, a string of small ones for a slanted line."""
    straight = a[0] == b[0] or a[1] == b[1]
    count = 1 if straight else max(1, ceil(hypot(b[0] - a[0], b[1] - a[1]) / _PIECE))
    for k in range(count):
        x0, y0 = a[0] + (b[0] - a[0]) * k / count, a[1] + (b[1] - a[1]) * k / count
        x1, y1 = a[0] + (b[0] - a[0]) * (k + 1) / count, a[1] + (b[1] - a[1]) * (k + 1) / count
        left, right = min(x0, x1) - _HALF_STROKE, max(x0, x1) + _HALF_STROKE
        yield left, min(y0, y1) - _HALF_STROKE, right, max(y0, y1) + _HALF_STROKE


def _cells(box: Box) -> Iterator[tuple[int, int]]:
    """The cells that a box touches."""
    for column in range(floor(box[0] / _CELL), floor(box[2] / _CELL) + 1):
        for row in range(floor(box[1] / _CELL), floor(box[3] / _CELL) + 1):
            yield column, row
