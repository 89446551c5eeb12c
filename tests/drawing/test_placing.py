"""Tags: ranks of what they may lie on, pinned tags, leaders, order of the requests; overlaps by elementary geometry."""

from __future__ import annotations

from dataclasses import replace
from itertools import combinations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.drawing.placing import TagRequest, place_tags

_PAGE = (0.0, 0.0, 1000.0, 800.0)
_EVERYWHERE = [(0.0, 0.0, 1000.0, 381.0), (0.0, 419.0, 1000.0, 800.0), (0.0, 381.0, 380.0, 419.0)]
_EVERYWHERE += [(620.0, 381.0, 1000.0, 419.0)]  # symbols but for a slot (380 to 620, 381 to 419) for two tags


def _overlap(one, other):
    width = min(one[2], other[2]) - max(one[0], other[0])
    height = min(one[3], other[3]) - max(one[1], other[1])
    return max(width, 0.0) * max(height, 0.0)


def _tag(key="a", x=500.0, y=400.0, **more):
    return TagRequest(key, (x, y), **{"width": 90.0, "height": 28.0, **more})


def _place(*requests, obstacles=(), segments=(), page=_PAGE, texts=()):
    return place_tags(requests, obstacles, segments, page, texts)


@pytest.mark.parametrize(
    ("side", "box"),
    [
        ("right", (508, 386, 598, 414)),
        ("left", (402, 386, 492, 414)),
        ("above", (455, 364, 545, 392)),
        ("below", (455, 408, 545, 436)),
    ],
)
def test_on_a_free_sheet_a_tag_stands_beside_its_anchor_on_its_first_side(side, box):
    (place,) = _place(_tag(sides=(side,)))
    assert place.box == box
    assert place.leader is None


def test_the_second_side_is_taken_when_the_first_is_not_free():
    (place,) = _place(_tag(sides=("left", "above")), obstacles=[(0, 0, 450, 800)])
    assert place.box == (455, 364, 545, 392)
    assert place.leader is None


def test_a_tag_rather_shifts_a_little_than_changes_its_side():
    (place,) = _place(_tag(), obstacles=[(508, 384, 514, 390)])
    assert place.box[0] == 508
    assert place.box[1] > 390


_KINDS = ["symbol", "tag", "text", "wire", "nothing"]


@pytest.mark.parametrize(("worse", "better"), list(combinations(_KINDS, 2)))
@pytest.mark.parametrize("mirrored", [False, True])
def test_of_two_places_the_one_on_the_lesser_thing_is_taken(worse, better, mirrored):
    """A slot between symbols leaves room on the right and on the left of the anchor, with something in either."""
    left, right = (worse, better) if mirrored else (better, worse)
    boxes = {left: (390.0, 385.0, 485.0, 415.0), right: (515.0, 385.0, 610.0, 415.0)}
    wires = {left: ((390.0, 400.0), (485.0, 400.0)), right: ((515.0, 400.0), (610.0, 400.0))}
    requests = [_tag("b", sides=("right", "left"), height=30.0)]
    if "tag" in boxes:
        requests.append(_tag("a", priority=1, pinned=boxes["tag"][:2], height=30.0))
    places = _place(
        *requests,
        obstacles=[*_EVERYWHERE, *(boxes[kind] for kind in boxes if kind == "symbol")],
        texts=[boxes[kind] for kind in boxes if kind == "text"],
        segments=[wires[kind] for kind in wires if kind == "wire"],
    )
    assert (places[0].box[2] < 500) is not mirrored


def test_a_pinned_tag_stays_and_the_others_make_room():
    pinned = _tag("z", pinned=(508.0, 386.0), x=300.0)
    free = _tag("a")
    places = _place(free, pinned)
    assert places[1].box == (508.0, 386.0, 598.0, 414.0)
    assert places[1].leader == ((300.0, 400.0), (508.0, 400.0))
    assert _overlap(places[0].box, places[1].box) == 0


def test_a_pinned_tag_stays_even_on_a_symbol_or_off_the_page():
    places = _place(_tag("a", pinned=(-50.0, 386.0)), _tag("b", pinned=(10.0, 10.0)), obstacles=[(0, 0, 200, 200)])
    assert [place.box[:2] for place in places] == [(-50.0, 386.0), (10.0, 10.0)]


def test_the_higher_priority_has_the_first_choice():
    places = _place(_tag("a"), _tag("b", priority=1))
    assert places[1].box == (508, 386, 598, 414)
    assert _overlap(places[0].box, places[1].box) == 0


def test_of_equal_priority_the_smaller_key_has_the_first_choice():
    places = _place(_tag("b"), _tag("a"))
    assert [place.key for place in places] == ["b", "a"]
    assert places[1].box == (508, 386, 598, 414)


def test_tags_stay_on_the_page():
    for x, y in [(2, 2), (998, 2), (2, 798), (998, 798), (500, 1)]:
        (place,) = _place(_tag(x=float(x), y=float(y)))
        left, top, right, bottom = place.box
        assert left >= 0
        assert top >= 0
        assert right <= 1000
        assert bottom <= 800


def test_a_page_without_room_still_gets_its_tag():
    (place,) = _place(_tag(x=5.0, y=5.0), page=(0.0, 0.0, 10.0, 10.0))
    assert place.key == "a"


def test_a_leader_does_not_run_across_a_part_when_the_tag_can_stand_elsewhere():
    """Parts on three sides: behind the thin one on the preferred side there is room, but only across it."""
    thin, above, below = (506.0, 330.0, 512.0, 470.0), (455.0, 330.0, 512.0, 392.0), (455.0, 408.0, 512.0, 470.0)
    (place,) = _place(_tag(sides=("right", "above", "below", "left")), obstacles=[thin, above, below])
    assert place.box[2] < 500
    (forced,) = _place(_tag(), obstacles=[thin, above, below, (200.0, 200.0, 490.0, 600.0)])
    assert forced.box[0] > 512
    assert forced.leader == ((500.0, 400.0), (forced.box[0], pytest.approx(400.0)))


_floats = st.integers(0, 100).map(lambda value: value * 10.0)
_points = st.tuples(_floats, st.integers(0, 80).map(lambda value: value * 10.0))


@st.composite
def _requests(draw):
    found = []
    for k in range(draw(st.integers(1, 8))):
        pinned = draw(st.none() | _points) if draw(st.integers(0, 4)) == 0 else None
        width, height = draw(st.sampled_from([60.0, 90.0])), draw(st.sampled_from([16.0, 28.0]))
        x, y = draw(_points)
        found.append(TagRequest(f"t{k}", (x, y), width, height, priority=draw(st.integers(0, 1)), pinned=pinned))
    return found


@st.composite
def _symbols(draw):
    return [(x, y, x + draw(st.integers(2, 12)) * 10.0, y + 40.0) for x, y in draw(st.lists(_points, max_size=12))]


@settings(max_examples=40, deadline=None)
@given(_requests(), _symbols(), st.data())
def test_the_order_of_everything_does_not_matter(requests, symbols, data):
    segments = [((box[0], box[1]), (box[0], box[1] + 60.0)) for box in symbols]
    there = place_tags(requests, symbols, segments, _PAGE)
    shuffled = data.draw(st.permutations(requests))
    back = place_tags(shuffled, data.draw(st.permutations(symbols)), segments[::-1], _PAGE)
    assert {place.key: place for place in there} == {place.key: place for place in back}
    assert [place.key for place in back] == [request.key for request in shuffled]


@settings(max_examples=40, deadline=None)
@given(_requests(), _symbols())
def test_sizes_are_kept_and_leaders_run_from_the_anchor_to_the_edge(requests, symbols):
    for request, place in zip(requests, place_tags(requests, symbols, [], _PAGE), strict=True):
        left, top, right, bottom = place.box
        assert (right - left, bottom - top) == pytest.approx((request.width, request.height))
        x, y = request.anchor
        gap = max(left - x, x - right, top - y, y - bottom)
        if place.leader is None:
            assert gap <= request.clearance + 4
            continue
        assert place.leader[0] == request.anchor
        tip_x, tip_y = place.leader[1]
        assert left <= tip_x <= right
        assert top <= tip_y <= bottom
        assert tip_x in (left, right) or tip_y in (top, bottom)
        assert gap > 0


@settings(max_examples=30, deadline=None)
@given(_points, _symbols())
def test_only_what_is_near_counts(anchor, symbols):
    """Things further away than a tag may go do not change its place, so looking things up by cells forgets none."""
    request = TagRequest("a", anchor, 90.0, 28.0)
    x, y = anchor
    near = [box for box in symbols if _overlap(box, (x - 260, y - 200, x + 260, y + 200))]
    assert place_tags([request], symbols, [], _PAGE) == place_tags([request], near, [], _PAGE)


def test_a_plant_of_many_feeders_has_no_tag_on_anything():
    symbols, wires, requests = [], [], []
    for column in range(9):
        for row in range(6):
            x, y = column * 100.0 + 60.0, row * 130.0 + 20.0
            symbols.append((x - 18.0, y, x + 18.0, y + 50.0))
            wires.append(((x, y + 50.0), (x, y + 110.0)))
            requests.append(TagRequest(f"{column}{row}", (x, y + 80.0), 64.0, 26.0))
    places = place_tags(requests, symbols, wires, _PAGE)
    boxes = [place.box for place in places]
    assert not any(_overlap(box, symbol) for box in boxes for symbol in symbols)
    assert not any(_overlap(one, other) for one, other in combinations(boxes, 2))
    assert not any(_overlap(box, (a[0] - 1, a[1], b[0] + 1, b[1])) for box in boxes for a, b in wires)
    assert all(place.leader is None for place in places)


def test_a_ribbon_keeps_tags_at_a_distance():
    (near,), (far,) = _place(_tag()), _place(replace(_tag(), clearance=20.0))
    assert near.box[0] == 508.0
    assert far.box[0] == 520.0
