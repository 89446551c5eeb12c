"""Symbols of loads and capacitors, and the note, which is no part of the network."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from onelinefault.drawing.metrics import text_width, wrapped
from onelinefault.drawing.shapes import MODULE_DU, Line, Path, Polygon, Shapes, Stroke, Text, steps
from onelinefault.drawing.symbols_glyphs import earth, times
from onelinefault.drawing.symbols_look import BLADE_DU, MAIN_DU, Art, Artist, Look, lead

NOTE_SIZE_DU: Final = 10.0
_NOTE_LINE_DU = 14.0
_NOTE_MARGIN_DU = 8.0
_FOLD_DU = 8.0


def load(look: Look) -> Art:
    """An arrow head that points away from the network."""
    role = look.role("line")
    head = Polygon(((-9, -6), (9, -6), (0, 10)), Stroke(role, MAIN_DU), "paper")
    return Art((lead(0, -20, 0, -6, role),), (head, *times(look.count, 15, role)))


def capacitor(look: Look) -> Art:
    """Two plates to earth."""
    role = look.role("line")
    plates: Shapes = tuple(Line(-13, y, 13, y, Stroke(role, BLADE_DU)) for y in (-6, 3))
    to_earth = Line(0, 3, 0, 18, Stroke(role, MAIN_DU))
    return Art((lead(0, -30, 0, -6, role),), (*plates, to_earth, *earth(0, 18, role), *times(look.count, 18, role)))


def note(look: Look) -> Art:
    """A sheet with a folded corner, as large as its text; without text, ruled lines stand for it."""
    given = None if look.length is None else look.length * MODULE_DU
    lines = _note_lines(look.text, given)
    widest = max((text_width(line, NOTE_SIZE_DU) for line in lines), default=48.0 - 2 * _NOTE_MARGIN_DU)
    width = given if given else widest + 2 * _NOTE_MARGIN_DU + (_FOLD_DU / 2 if lines else 0)
    height = max(len(lines) * _NOTE_LINE_DU, 22.0 if lines else 24.0) + _NOTE_MARGIN_DU + 4
    right, top = width / 2, -height / 2
    outline = steps(
        (-right, top), (right - _FOLD_DU, top), (right, top + _FOLD_DU), (right, -top), (-right, -top), closed=True
    )
    fold = steps((right - _FOLD_DU, top), (right - _FOLD_DU, top + _FOLD_DU), (right, top + _FOLD_DU))
    pen = Stroke("muted", 1.6)
    frame = (Path(outline, pen, "paper", (0, 0)), Path(fold, Stroke("muted", 1.2), None, (0, 0)))
    return Art((), (*frame, *(_text_lines(lines, -right) if lines else _ruled_lines(width, top))))


def _note_lines(text: str, width_du: float | None) -> tuple[str, ...]:
    if not text.strip():
        return ()
    return wrapped(text, width_du - 2 * _NOTE_MARGIN_DU, NOTE_SIZE_DU) if width_du else tuple(text.split("\n"))


def _text_lines(lines: tuple[str, ...], left: float) -> Shapes:
    first = -(len(lines) - 1) / 2 * _NOTE_LINE_DU
    x = left + _NOTE_MARGIN_DU
    return tuple(
        Text(x, first + i * _NOTE_LINE_DU, line, NOTE_SIZE_DU, "regular", "start", "middle", "ink", pivot=(0, 0))
        for i, line in enumerate(lines)
        if line
    )


def _ruled_lines(width: float, top: float) -> Shapes:
    """Three rules for a note that says nothing yet."""
    left = -width / 2 + 10
    ends = (width / 2 - 14, width / 2 - 10, width / 2 - 22)
    pen = Stroke("muted", 1.4)
    return tuple(
        Path(steps((left, top + 12 + 7 * i), (end, top + 12 + 7 * i)), pen, pivot=(0, 0)) for i, end in enumerate(ends)
    )


ARTISTS: Final[Mapping[str, Artist]] = {"load": load, "capacitor": capacitor, "note": note}
