"""Marks upon the drawing: pins, verdicts, basis dots, links, gauges."""

from __future__ import annotations

import math

import pytest

from onelinefault.drawing.palette import SHEET
from onelinefault.drawing.shapes import Circle, Line, Path, Polygon, Text, bounds
from onelinefault.drawing.symbols_marks import FAULT_KINDS, basis_dot, fault_pin, gauge, sheet_link, verdict


@pytest.mark.parametrize(
    ("kind", "phases", "struck"),
    [
        ("three-phase", "", "abc"),
        ("line-to-line", "", "bc"),
        ("line-to-line", "ca", "ac"),
        ("two-lines-to-earth", "ab", "ab"),
        ("line-to-earth", "", "a"),
        ("line-to-earth", "B", "b"),
        ("three-phase-to-earth", "", "abc"),
    ],
)
def test_pin_fills_the_struck_phases_and_shows_earth(kind: str, phases: str, struck: str) -> None:
    pin = fault_pin(kind, phases)
    dots = sorted((s for s in pin if isinstance(s, Circle)), key=lambda dot: dot.cx)
    assert "".join(p for p, dot in zip("abc", dots, strict=True) if dot.fill == "on-fault") == struck
    stems = [s for s in pin if isinstance(s, Line) and s.x1 == s.x2]
    assert bool(stems) == kind.endswith("earth")
    if stems and struck != "ac":
        middle = sum({"a": -7, "b": 0, "c": 7}[p] for p in struck) / len(struck)
        assert stems[0].x1 == pytest.approx(middle)


@pytest.mark.parametrize("kind", FAULT_KINDS)
def test_pin_points_at_the_origin_and_holds_its_signs(kind: str) -> None:
    pin = fault_pin(kind)
    head = pin[0]
    assert isinstance(head, Path)
    assert head.commands[0].points == ((0, 0),)
    assert head.box().bottom == pytest.approx(0.75)  # half the pale rim below the tip
    assert head.box().top == pytest.approx(-42.75)
    for sign in pin[1:]:
        box = sign.box()
        for x, y in ((box.left, box.top), (box.right, box.top), (box.left, box.bottom), (box.right, box.bottom)):
            assert math.dist((x, y), (0, -26)) < 16


@pytest.mark.parametrize(
    ("kind", "phases"),
    [("arc", ""), ("line-to-line", "abc"), ("line-to-earth", "x"), ("line-to-line", "aa"), ("three-phase", "ab")],
)
def test_impossible_pins_are_refused(kind: str, phases: str) -> None:
    with pytest.raises(ValueError, match="fault"):
        fault_pin(kind, phases)


def test_verdicts_differ_by_shape_not_only_by_colour() -> None:
    kinds = {name: [type(s) for s in verdict(name)] for name in ("holds", "near", "exceeded", "unrated")}
    assert kinds["holds"] == [Circle]
    assert kinds["near"] == [Circle, Path]
    assert kinds["exceeded"] == [Polygon]
    assert kinds["unrated"] == [Line]
    square = verdict("exceeded")[0]
    assert isinstance(square, Polygon)
    assert len(square.points) == 5  # a corner is cut off
    half = verdict("near")[1].box()
    assert half.left == pytest.approx(0)


@pytest.mark.parametrize("name", ["holds", "near", "exceeded"])
@pytest.mark.parametrize("size", [12, 20])
def test_verdicts_have_the_size_asked_for(name: str, size: float) -> None:
    box = bounds(verdict(name, size))
    assert (box.width, box.height) == pytest.approx((size, size), rel=1e-3)


def test_unknown_marks_are_refused() -> None:
    with pytest.raises(ValueError, match="verdict"):
        verdict("splendid")
    with pytest.raises(ValueError, match="basis"):
        basis_dot("hearsay")


def test_basis_dots_are_small_and_have_colours() -> None:
    for basis in ("nameplate", "letter", "typical", "guessed"):
        box = bounds(basis_dot(basis))
        assert 8 <= box.width <= 11
        assert f"basis-{basis}" in SHEET


@pytest.mark.parametrize("percent", [100, 99, 83, 42, 12])
def test_gauge_is_filled_in_proportion(percent: float) -> None:
    shell, filling = gauge(percent)[:2]
    full = gauge(100)[1].box()
    assert filling.box().height == pytest.approx(full.height * percent / 100, rel=1e-3)
    assert filling.box().bottom == pytest.approx(full.bottom, rel=1e-4)
    assert shell.box().holds(filling.box().left, filling.box().top)


def test_gauge_limits_and_words() -> None:
    assert len(gauge(0)) == 2  # the empty tube and its figure
    assert gauge(130)[1] == gauge(100)[1]
    assert gauge(1)[1].box().height > 2  # a trace is still seen
    assert [s.text for s in gauge(83.4) if isinstance(s, Text)] == ["83 %"]
    assert [s.text for s in gauge(math.nan) if isinstance(s, Text)] == ["–"]
    assert not [s for s in gauge(50, "") if isinstance(s, Text)]


def test_sheet_link_grows_with_its_text() -> None:
    for text in ("2·C4", "12·Board A"):
        lead, tag, words = sheet_link(text)
        assert isinstance(lead, Line)
        assert (lead.x1, lead.y1) == (0, -20)
        assert tag.box().left < words.box().left
        assert words.box().right < tag.box().right
