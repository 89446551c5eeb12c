"""The family of symbols: `symbol(kind, look)` gives the picture of a part in du, centred at (0, 0), in its own frame.

All are drawn with one weight and round joins, with leads right up to terminals on the module grid; what they must hide
behind them is filled with paper. Symbols are cached: equal looks share one tuple of shapes, which the
painter relies on.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from functools import lru_cache
from types import MappingProxyType
from typing import Final

from onelinefault.drawing import (
    symbols_conductors,
    symbols_consumers,
    symbols_sources,
    symbols_switching,
    symbols_transforming,
)
from onelinefault.drawing.shapes import Line, Placement, Polyline, Shape, Shapes, Stroke, Text, bounds, transform
from onelinefault.drawing.symbols_look import MAIN_DU, TERMINALS, Art, Artist, Ends, Look, Symbol, levels

__all__ = ["KINDS", "TERMINALS", "Look", "Symbol", "levels", "placed_symbol", "symbol"]

_ARTISTS: Final[Mapping[str, Artist]] = MappingProxyType(
    {
        **symbols_sources.ARTISTS,
        **symbols_transforming.ARTISTS,
        **symbols_conductors.ARTISTS,
        **symbols_switching.ARTISTS,
        **symbols_consumers.ARTISTS,
    }
)
KINDS: Final = tuple(TERMINALS)
_OUT_OF_SERVICE_DASH = (3.0, 4.0)
_USUAL: Final = Look()


@lru_cache(maxsize=4096)
def symbol(kind: str, look: Look = _USUAL) -> Symbol:
    """The symbol of a kind of part. Raises ValueError for an unknown kind, winding connection or neutral."""
    art = _art(kind, look)
    terminals = tuple(end for end in TERMINALS[kind] if end[0] not in art.missing)
    return _finished(kind, art, terminals)


@lru_cache(maxsize=4096)
def placed_symbol(kind: str, look: Look, turn: int, mirrored: bool) -> Symbol:
    """The symbol mirrored, then turned by quarter turns clockwise, about its own origin, terminals and boxes too.

    Raises ValueError as `symbol` does.
    """
    plain = symbol(kind, look)
    if not mirrored and turn % 4 == 0:
        return plain
    art = _art(kind, look)
    turned = Art(transform(art.stubs, turn, mirrored), transform(art.body, turn, mirrored))
    where = Placement(turn, mirrored)
    return _finished(kind, turned, tuple((name, *_grid_point(where, dx, dy)) for name, dx, dy in plain.terminals))


def _art(kind: str, look: Look) -> Art:
    if kind not in _ARTISTS:
        raise ValueError(f"no symbol for the kind {kind!r}")
    art = _ARTISTS[kind](look)
    return art if look.in_service else Art(_out_of_service(art.stubs), _out_of_service(art.body), art.missing)


def _finished(kind: str, art: Art, terminals: Ends) -> Symbol:
    shapes = (*art.stubs, *art.body)
    return Symbol(kind, shapes, bounds(shapes), bounds(art.body), terminals)


def _grid_point(where: Placement, dx: int, dy: int) -> tuple[int, int]:
    x, y = where.point(dx, dy)
    return round(x), round(y)


def _out_of_service(shapes: Shapes) -> Shapes:
    """The shapes of a part that is taken out: outlines dashed, all ink in the colour of dead parts."""
    return tuple(_taken_out(shape) for shape in shapes)


def _taken_out(shape: Shape) -> Shape:
    if isinstance(shape, Text):
        return replace(shape, role="dead")
    if isinstance(shape, Line | Polyline):
        return replace(shape, stroke=_dead_stroke(shape.stroke))
    stroke = None if shape.stroke is None else _dead_stroke(shape.stroke)
    fill = shape.fill if shape.fill in (None, "paper") else "dead"
    return replace(shape, stroke=stroke, fill=fill)


def _dead_stroke(stroke: Stroke) -> Stroke:
    dash = _OUT_OF_SERVICE_DASH if stroke.width_du >= MAIN_DU else stroke.dash
    return Stroke("dead", stroke.width_du, dash)
