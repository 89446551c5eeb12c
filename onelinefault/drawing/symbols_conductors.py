"""Symbols of bars, cables, lines, busways and series reactors."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from onelinefault.drawing.palette import bar_weight_du
from onelinefault.drawing.shapes import MODULE_DU, Circle, Line, Path, Polyline, Rect, Shapes, Stroke, steps
from onelinefault.drawing.symbols_glyphs import coil, times
from onelinefault.drawing.symbols_look import FINE_DU, MAIN_DU, Art, Artist, Look, lead

USUAL_BUS_MODULES: Final = 10
_MOST_CAPSULES = 3
_PITCH_DU = 10.0


def bus(look: Look) -> Art:
    """A bar from the origin to the right, weighted by its level; of length 0, the dot of a joint."""
    role = look.role("bar")
    length = USUAL_BUS_MODULES if look.length is None else look.length
    if length <= 0:
        return Art((), (Circle(0, 0, 3.5, None, role),))
    return Art((), (Line(0, 0, length * MODULE_DU, 0, Stroke(role, bar_weight_du(role))),))


def cable(look: Look) -> Art:
    """A slim capsule; up to three side by side for parallel cables, beyond that with their number."""
    role = look.role("a")
    shown = min(max(look.parallel, 1), _MOST_CAPSULES)
    places = [(i - (shown - 1) / 2) * _PITCH_DU for i in range(shown)]
    pen = Stroke(role, MAIN_DU)
    capsules: Shapes = tuple(Rect(x - 4, -18, 8, 36, 4, pen, "paper") for x in places)
    if shown == 1:
        return Art(_through(look, 18), capsules)
    yokes: Shapes = tuple(
        Polyline(((places[0], y), (places[0], far), (places[-1], far), (places[-1], y)), pen)
        for y, far in ((-18, -24), (18, 24))
    )
    inner: Shapes = tuple(lead(x, y, x, far, role) for x in places[1:-1] for y, far in ((-18, -24), (18, 24)))
    number = times(look.parallel if look.parallel > _MOST_CAPSULES else 1, 20, role)
    return Art(_through(look, 24), (*yokes, *inner, *capsules, *number))


def _through(look: Look, inner: float) -> Shapes:
    """The two leads of a conductor from the body at ±inner du to the terminals at ±30 du."""
    return (lead(0, -30, 0, -inner, look.role("a")), lead(0, inner, 0, 30, look.role("b")))


def overhead_line(look: Look) -> Art:
    """A wire with two open arrow heads."""
    role = look.role("a")
    heads = (*steps((-9, -14), (0, -6), (9, -14)), *steps((-9, 6), (0, 14), (9, 6)))
    wire = Line(0, -18, 0, 18, Stroke(role, MAIN_DU))
    number = times(look.parallel, 14, role)
    return Art(_through(look, 18), (wire, Path(heads, Stroke(role, MAIN_DU)), *number))


def busway(look: Look) -> Art:
    """A straight case with two ribs."""
    role = look.role("a")
    case = Rect(-6, -20, 12, 40, 1, Stroke(role, MAIN_DU), "paper")
    ribs: Shapes = tuple(Line(-6, y, 6, y, Stroke(role, FINE_DU)) for y in (-7, 7))
    return Art(_through(look, 20), (case, *ribs, *times(look.parallel, 12, role)))


def reactor(look: Look) -> Art:
    """Three half turns in line."""
    role = look.role("a")
    turns = coil(0, -24, 24, turns=3, radius=7.5, pen=Stroke(role, MAIN_DU))
    return Art(_through(look, 24), (turns, *times(look.parallel, 14, role)))


ARTISTS: Final[Mapping[str, Artist]] = {
    "bus": bus,
    "cable": cable,
    "overhead_line": overhead_line,
    "busway": busway,
    "reactor": reactor,
}
