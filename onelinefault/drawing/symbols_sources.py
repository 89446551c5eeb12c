"""Symbols of what feeds a fault: supply, machines, converter."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from onelinefault.drawing.shapes import Circle, Line, Path, Rect, Shapes, Stroke, Text, steps
from onelinefault.drawing.symbols_glyphs import neutral_sign, times, wave
from onelinefault.drawing.symbols_look import FINE_DU, MAIN_DU, Art, Artist, Look, lead

_RADIUS = 17.0


def supply(look: Look) -> Art:
    """The network outside: a meshed net in a rounded frame."""
    role = look.role("out")
    cy, spread = -8.0, 10.5
    frame = Rect(-19, cy - 19, 38, 38, 7, Stroke(role, MAIN_DU), "paper")
    places = (-spread, 0.0, spread)
    mesh: Shapes = tuple(
        line
        for at in places
        for line in (
            Line(-spread, cy + at, spread, cy + at, Stroke(role, 1.1)),
            Line(at, cy - spread, at, cy + spread, Stroke(role, 1.1)),
        )
    )
    knots: Shapes = tuple(Circle(x, cy + y, 2.3, None, role) for y in places for x in places)
    return Art((lead(0, cy + 19, 0, 30, role),), (frame, *mesh, *knots))


def _machine(letter: str, look: Look, outer: float = _RADIUS, behind: Shapes = ()) -> Art:
    """A rotating machine: letter over a wave in a circle; its star point hangs below."""
    role = look.role("line")
    neutral = look.neutral(0)
    body: Shapes = (
        *behind,
        Circle(0, 0, _RADIUS, Stroke(role, MAIN_DU), "paper"),
        Text(0, -3.6, letter, 14, "bold", "middle", "middle", role, pivot=(0, 0)),
        wave(0, 7.6, role, pivot=(0, 0)),
        *times(look.count, 26, role),
        *neutral_sign(0, outer, neutral, role),
    )
    return Art((lead(0, -30, 0, -outer, role),), body)


def _group_ring(look: Look) -> Shapes:
    """A second circle behind the first, for several machines in one symbol."""
    if look.count <= 1:
        return ()
    role = look.role("line")
    return (Circle(5, -4, _RADIUS, Stroke(role, FINE_DU), "paper"), lead(0, -30, 0, -_RADIUS, role))


def synchronous_generator(look: Look) -> Art:
    """A generator, or several alike."""
    return _machine("G", look, behind=_group_ring(look))


def synchronous_motor(look: Look) -> Art:
    """A motor with its own field: the second ring round it."""
    role = look.role("line")
    ring = Circle(0, 0, 21.5, Stroke(role, FINE_DU), "paper")
    return _machine("M", look, 21.5, (ring,))


def induction_motor(look: Look) -> Art:
    """An induction motor, or a group of them."""
    return _machine("M", look, behind=_group_ring(look))


def converter_source(look: Look) -> Art:
    """A converter that feeds in: direct current above the diagonal, alternating below."""
    role = look.role("line")
    middle = (0.0, 0.0)
    bars = (*steps((-11, -10), (-2, -10)), *steps((-11, -5.5), (-2, -5.5)))
    body: Shapes = (
        Rect(-17, -17, 34, 34, 3, Stroke(role, MAIN_DU), "paper"),
        Path(steps((-16.2, 16.2), (16.2, -16.2)), Stroke(role, MAIN_DU), pivot=middle),
        Path(bars, Stroke(role, FINE_DU), pivot=middle),
        wave(6.5, 8.5, role, pivot=middle),
        *times(look.count, 24, role),
    )
    return Art((lead(0, -30, 0, -17, role),), body)


ARTISTS: Final[Mapping[str, Artist]] = {
    "supply": supply,
    "synchronous_generator": synchronous_generator,
    "synchronous_motor": synchronous_motor,
    "induction_motor": induction_motor,
    "converter_source": converter_source,
}
