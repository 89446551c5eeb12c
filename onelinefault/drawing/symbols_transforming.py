"""Symbols of what changes the voltage: linked circles, each winding in its own level's tint."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from onelinefault.drawing.shapes import Circle, Command, Path, Point, Shapes, Stroke
from onelinefault.drawing.symbols_glyphs import neutral_sign, side_neutral, winding_glyph
from onelinefault.drawing.symbols_look import MAIN_DU, Art, Artist, Look, lead

_RADIUS = 18.0


def _connections(look: Look, usual: tuple[str, ...]) -> tuple[str, ...]:
    """The given connections, made up with the usual ones."""
    return (*look.connections, *usual[len(look.connections) :])


def _ground(circles: tuple[tuple[Point, float], ...]) -> Shapes:
    """Paper under linked circles, so that wires behind are hidden and both outlines still show in the overlap."""
    return tuple(Circle(cx, cy, r, None, "paper") for (cx, cy), r in circles)


def _rings(circles: tuple[tuple[Point, float], ...], roles: tuple[str, ...]) -> Shapes:
    return tuple(Circle(cx, cy, r, Stroke(role, MAIN_DU)) for ((cx, cy), r), role in zip(circles, roles, strict=True))


def transformer(look: Look) -> Art:
    """Two linked circles; neutrals of the high side to the left, of the low side to the right."""
    roles = (look.role("high"), look.role("low"))
    connections = _connections(look, ("D", "Y"))
    circles = (((0.0, -12.0), _RADIUS), ((0.0, 12.0), _RADIUS))
    body: Shapes = (
        *_ground(circles),
        *side_neutral(-_RADIUS, -12, -15, look.neutral(0), roles[0]),
        *side_neutral(_RADIUS, 12, 15, look.neutral(1), roles[1]),
        *_rings(circles, roles),
        winding_glyph(0, -17, connections[0], roles[0]),
        winding_glyph(0, 17, connections[1], roles[1]),
    )
    return Art((lead(0, -40, 0, -30, roles[0]), lead(0, 30, 0, 40, roles[1])), body)


def transformer3(look: Look) -> Art:
    """Three linked circles."""
    roles = (look.role("high"), look.role("medium"), look.role("low"))
    connections = _connections(look, ("Y", "Y", "D"))
    circles = (((0.0, -14.0), _RADIUS), ((-16.0, 12.0), _RADIUS), ((16.0, 12.0), _RADIUS))
    body: Shapes = (
        *_ground(circles),
        *side_neutral(-13.4, -26, -32.6, look.neutral(0), roles[0]),
        *side_neutral(-34, 12, -12, look.neutral(1), roles[1]),
        *side_neutral(34, 12, 12, look.neutral(2), roles[2]),
        *_rings(circles, roles),
        winding_glyph(0, -18, connections[0], roles[0]),
        winding_glyph(-20, 14, connections[1], roles[1]),
        winding_glyph(20, 14, connections[2], roles[2]),
    )
    foot = 12 + (_RADIUS**2 - 4**2) ** 0.5  # the terminals stand 4 du outside of the circles' middles
    stubs = (
        lead(0, -40, 0, -32, roles[0]),
        lead(-20, foot, -20, 40, roles[1]),
        lead(20, foot, 20, 40, roles[2]),
    )
    return Art(stubs, body)


def autotransformer(look: Look) -> Art:
    """The common winding as a circle that the series winding runs round and into; a small circle for a tertiary."""
    high, low, third = look.role("high"), look.role("low"), look.role("tertiary")
    connections = _connections(look, ("Y", "Y", "D") if len(look.connections) != 2 else ())
    series = (
        Command("M", ((0, -40),)),
        Command("L", ((0, -28),)),
        Command("C", ((16, -28), (28, -18), (28, -5))),
        Command("C", ((28, 3), (24, 7), (17.4, 4.6))),
    )
    body: Shapes = (
        Circle(0, 0, _RADIUS, None, "paper"),
        *side_neutral(12.4, 13, 20, look.neutral(0), low),
        Path(series, Stroke(high, MAIN_DU)),
        Circle(0, 0, _RADIUS, Stroke(low, MAIN_DU)),
        winding_glyph(0, 0, connections[0], low),
    )
    stubs: Shapes = (lead(0, 18, 0, 40, low),)
    if len(connections) < 3:
        return Art(stubs, body, ("tertiary",))
    small = Circle(-23, 0, 10, Stroke(third, MAIN_DU), "paper")
    return Art((*stubs, lead(-40, 0, -33, 0, third)), (*body, small, winding_glyph(-23, 0, connections[2], third)))


def earthing_transformer(look: Look) -> Art:
    """One circle, zigzag or star-delta, whose neutral hangs below."""
    role = look.role("line")
    connection = _connections(look, ("ZN",))[0]
    treatment = look.neutrals[0] if look.neutrals else "solid"
    body: Shapes = (
        Circle(0, 0, _RADIUS, Stroke(role, MAIN_DU), "paper"),
        winding_glyph(0, 0, connection, role),
        *neutral_sign(0, _RADIUS, treatment, role),
    )
    return Art((lead(0, -30, 0, -_RADIUS, role),), body)


ARTISTS: Final[Mapping[str, Artist]] = {
    "transformer": transformer,
    "transformer3": transformer3,
    "autotransformer": autotransformer,
    "earthing_transformer": earthing_transformer,
}
