"""Marks that stand upon a drawing: fault pins, verdicts, basis dots, links to another sheet, voltage gauges.

All in du, upright, round (0, 0) unless said otherwise; move them with `shapes.transform`.
"""

from __future__ import annotations

from functools import lru_cache
from math import acos, asin, degrees, isnan
from typing import Final

from onelinefault.drawing.metrics import text_width
from onelinefault.drawing.shapes import Circle, Command, Line, Path, Polygon, Rect, Shapes, Stroke, Text, arc, steps
from onelinefault.drawing.symbols_look import FINE_DU, MAIN_DU, lead

# phases that a fault joins when none are named, and whether it has to do with earth
FAULT_KINDS: Final = {
    "three-phase": ("abc", False),
    "line-to-line": ("bc", False),
    "two-lines-to-earth": ("bc", True),
    "line-to-earth": ("a", True),
    "three-phase-to-earth": ("abc", True),
}
_PHASE_X = {"a": -7.0, "b": 0.0, "c": 7.0}
_HEAD_Y = -26.0
_HEAD_R = 16.0


@lru_cache(maxsize=64)
def fault_pin(kind: str, phases: str = "") -> Shapes:
    """A pin whose tip is at (0, 0), 42 du high: three dots for the phases, joined as the fault joins them, and earth.

    phases: letters out of "abc" that are struck, "" for the usual ones. Raises ValueError for an unknown kind or a
    number of phases that does not fit it.
    """
    if kind not in FAULT_KINDS:
        raise ValueError(f"no fault pin for {kind!r}")
    usual, to_earth = FAULT_KINDS[kind]
    struck = "".join(sorted(phases.lower())) or usual
    if len(struck) != len(usual) or not set(struck) <= set(_PHASE_X) or len(set(struck)) != len(struck):
        raise ValueError(f"a {kind} fault cannot strike the phases {phases!r}")
    y = _HEAD_Y - 2 if to_earth else _HEAD_Y
    return (*_pin_head(), *_joint(struck, y), *_phase_dots(struck, y), *(_to_earth(struck, y) if to_earth else ()))


def _pin_head() -> Shapes:
    flank = degrees(acos(_HEAD_R / -_HEAD_Y))  # where a line from the tip touches the head
    drop = (
        Command("M", ((0, 0),)),
        *arc(0, _HEAD_Y, _HEAD_R, 90 + flank, 360 - 2 * flank, joined=True),
        Command("Z"),
    )
    return (Path(drop, Stroke("paper", 1.5), "fault"),)


def _joint(struck: str, y: float) -> Shapes:
    """The line that joins the struck phases; it goes over a phase that is left out."""
    pen = Stroke("on-fault", 1.8)
    left, right = _PHASE_X[struck[0]], _PHASE_X[struck[-1]]
    if struck == "ac":
        over = (Command("M", ((left, y),)), Command("Q", ((0, y - 11), (right, y))))
        return (Path(over, pen),)
    return (Line(left, y, right, y, pen),) if left != right else ()


def _phase_dots(struck: str, y: float) -> Shapes:
    pen = Stroke("on-fault", 1.3)
    return tuple(Circle(x, y, 2.3, pen, "on-fault" if phase in struck else "fault") for phase, x in _PHASE_X.items())


def _to_earth(struck: str, y: float) -> Shapes:
    """A stem from the struck phases to a short earth sign."""
    pen = Stroke("on-fault", 1.6)
    joined = "c" if struck == "ac" else struck  # between a and c the stem would run through b
    x = sum(_PHASE_X[phase] for phase in joined) / len(joined)
    stem = Line(x, y, x, y + 8, pen)
    return (stem, Line(x - 4, y + 8, x + 4, y + 8, pen), Line(x - 1.5, y + 11, x + 1.5, y + 11, pen))


@lru_cache(maxsize=64)
def verdict(result: str, size_du: float = 12.0) -> Shapes:
    """The sign of a duty check: "holds" open ring, "near" half-filled ring, "exceeded" filled square with a notch.

    "unrated", a short stroke, says that there was nothing to check against. Raises ValueError for anything else.
    """
    r = size_du / 2
    width = size_du * 0.17
    inner = r - width / 2
    if result == "holds":
        return (Circle(0, 0, inner, Stroke("holds", width), "paper"),)
    if result == "near":
        half = (*arc(0, 0, inner, -90, 180), Command("Z"))
        return (Circle(0, 0, inner, Stroke("near", width), "paper"), Path(half, None, "near"))
    if result == "exceeded":
        notch = size_du / 3
        corners = ((-r, -r), (r - notch, -r), (r, notch - r), (r, r), (-r, r))
        return (Polygon(corners, None, "exceeded"),)
    if result == "unrated":
        return (Line(-r * 0.6, 0, r * 0.6, 0, Stroke("muted", width)),)
    raise ValueError(f"no mark for the verdict {result!r}")


@lru_cache(maxsize=16)
def basis_dot(basis: str) -> Shapes:
    """How sure a value is, 9 du wide: "nameplate" dot, "letter" ring with a dot, "typical" triangle, "guessed" square.

    Raises ValueError for anything else.
    """
    role = f"basis-{basis}"
    pen = Stroke(role, FINE_DU)
    if basis == "nameplate":
        return (Circle(0, 0, 4.5, None, role),)
    if basis == "letter":
        return (Circle(0, 0, 3.9, pen, "paper"), Circle(0, 0, 1.8, None, role))
    if basis == "typical":
        return (Polygon(((0, -4.2), (4.2, 3.3), (-4.2, 3.3)), pen, "paper"),)
    if basis == "guessed":
        return (Polygon(((-3.6, -3.6), (3.6, -3.6), (3.6, 3.6), (-3.6, 3.6)), pen, "paper"),)
    raise ValueError(f"no mark for the basis {basis!r}")


@lru_cache(maxsize=256)
def sheet_link(text: str, role: str = "ink") -> Shapes:
    """A wire that goes on on another sheet: its end at (0, -20), an arrow tag below with the place, "2·C4"."""
    half = max(16.0, text_width(text, 10, bold=True) / 2 + 6)
    corners = steps((-half, -9), (half, -9), (half, 8), (0, 19), (-half, 8), closed=True)
    tag = Path(corners, Stroke(role, MAIN_DU), "paper")
    return (lead(0, -20, 0, -9, role), tag, Text(0, 0.5, text, 10, "bold", "middle", "middle", role))


GAUGE_WIDTH_DU: Final = 9.0
GAUGE_HEIGHT_DU: Final = 40.0
_WALL_DU = 1.4
_GAP_DU = 1.3
_LEAST_DU = 2.4  # a trace of voltage must not look like none


@lru_cache(maxsize=512)
def gauge(percent: float, label: str | None = None) -> Shapes:
    """A tube of 9 x 40 du filled to the voltage left, with the figure to its right.

    percent: of the prefault voltage; above 100 the tube is full, not a number leaves it empty. label: text instead of
    the whole percent, "" for none.
    """
    share = 0.0 if isnan(percent) else min(max(percent / 100, 0.0), 1.0)
    half, height = GAUGE_WIDTH_DU / 2, GAUGE_HEIGHT_DU
    shell = Rect(-half, -height / 2, 2 * half, height, half, Stroke("gauge", _WALL_DU), "paper")
    inset = _WALL_DU / 2 + _GAP_DU
    text = label if label is not None else _percent_text(percent)
    words: Shapes = (Text(half + 5, 0, text, 11, "bold", "start", "middle", "gauge"),) if text else ()
    return (shell, *_filling(half - inset, height / 2 - inset, share), *words)


def _percent_text(percent: float) -> str:
    return "–" if isnan(percent) else f"{percent:.0f} %"


def _filling(r: float, bottom: float, share: float) -> Shapes:
    """The part of the inner tube (radius r, from -bottom to bottom) below the level, with a flat surface."""
    if share <= 0:
        return ()
    level = bottom - max(share * 2 * bottom, _LEAST_DU)
    if share >= 1:
        return (Rect(-r, -bottom, 2 * r, 2 * bottom, r, None, "gauge"),)
    return (Path(_tube_below(r, bottom, level), None, "gauge"),)


def _tube_below(r: float, bottom: float, level: float) -> tuple[Command, ...]:
    low, high = bottom - r, r - bottom
    if level >= low:  # only part of the lower cap
        angle = degrees(asin((level - low) / r))
        return (*arc(0, low, r, angle, 180 - 2 * angle), Command("Z"))
    cap = arc(0, low, r, 0, 180)
    if level >= high:
        return (*cap, Command("L", ((-r, level),)), Command("L", ((r, level),)), Command("Z"))
    angle = degrees(asin((high - level) / r))  # the surface stands in the upper cap
    return (*cap, *arc(0, high, r, 180, angle, joined=True), *arc(0, high, r, -angle, angle, joined=True), Command("Z"))
