"""Symbols of what interrupts: breaker, switch, fuse. Each half takes the tint of its own side."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from onelinefault.drawing.shapes import Line, Path, Rect, Shape, Stroke, steps
from onelinefault.drawing.symbols_look import BLADE_DU, FINE_DU, MAIN_DU, Art, Artist, Look, lead

_CONTACT_Y = -9.0
_HINGE_Y = 10.0


def _switching(look: Look, contact: Shape) -> Art:
    """A fixed contact above, a blade that turns about the hinge below."""
    above, below = look.role("a"), look.role("b")
    tip = (0.0, _CONTACT_Y) if look.closed else (-13.0, _CONTACT_Y + 2)
    blade = Line(0, _HINGE_Y, *tip, Stroke(below, BLADE_DU))
    return Art((lead(0, -20, 0, _CONTACT_Y, above), lead(0, _HINGE_Y, 0, 20, below)), (blade, contact))


def breaker(look: Look) -> Art:
    """A cross for the contact that breaks fault current."""
    y, arm = _CONTACT_Y, 5.5
    cross = (*steps((-arm, y - arm), (arm, y + arm)), *steps((arm, y - arm), (-arm, y + arm)))
    return _switching(look, Path(cross, Stroke(look.role("a"), MAIN_DU)))


def switch(look: Look) -> Art:
    """A bar for the contact that only isolates."""
    return _switching(look, Line(-8, _CONTACT_Y, 8, _CONTACT_Y, Stroke(look.role("a"), BLADE_DU)))


def fuse(look: Look) -> Art:
    """A cartridge with its wire; blown or taken out, the wire is gone and a stroke crosses it."""
    above, below = look.role("a"), look.role("b")
    case = Rect(-5.5, -12, 11, 24, 2, Stroke(above, MAIN_DU), "paper")
    whole = look.closed and look.intact
    pen = Stroke(above, FINE_DU)
    wire = Line(0, -12, 0, 12, pen) if whole else Line(-5.5, 9, 5.5, -9, pen)
    return Art((lead(0, -20, 0, -12, above), lead(0, 12, 0, 20, below)), (case, wire))


ARTISTS: Final[Mapping[str, Artist]] = {"breaker": breaker, "switch": switch, "fuse": fuse}
