"""Small signs that several symbols share: winding connections, earth and neutral signs, waves, "times n"."""

from __future__ import annotations

from math import cos, radians, sin
from typing import Final

from onelinefault.drawing.shapes import Command, Line, Path, Point, Rect, Shapes, Stroke, Text, arc, steps
from onelinefault.drawing.symbols_look import FINE_DU

NEUTRALS: Final = ("isolated", "solid", "resistor", "reactor")


def winding_glyph(cx: float, cy: float, connection: str, role: str) -> Path:
    """The sign of a winding's connection round (cx, cy): triangle, star or zigzag; it stays upright.

    Raises ValueError for a connection that is none of D, Y, YN, Z, ZN.
    """
    letter = connection.upper().removesuffix("N")
    if letter == "D":
        commands = steps(*(_ray(cx, cy + 1, 6.8, angle) for angle in (-90, 30, 150)), closed=True)
    elif letter == "Y":
        commands = tuple(c for a in (90, -30, -150) for c in steps((cx, cy), _ray(cx, cy, 7.0, a)))
    elif letter == "Z":
        commands = steps((cx - 7, cy + 5), (cx - 2.5, cy - 5.5), (cx + 2.5, cy + 5.5), (cx + 7, cy - 5))
    else:
        raise ValueError(f"no winding connection {connection!r}")
    return Path(commands, Stroke(role, FINE_DU), pivot=(cx, cy))


def _ray(cx: float, cy: float, length: float, angle_deg: float) -> Point:
    return cx + length * cos(radians(angle_deg)), cy + length * sin(radians(angle_deg))


def wave(cx: float, cy: float, role: str, pivot: Point | None = None) -> Path:
    """One period of alternating current, 13 du wide, upright at its pivot (its own middle if not given)."""
    x, half = cx - 6.5, 6.5
    up = Command("Q", ((x + half / 2, cy - 6.0), (cx, cy)))
    down = Command("Q", ((cx + half / 2, cy + 6.0), (cx + half, cy)))
    return Path((Command("M", ((x, cy),)), up, down), Stroke(role, FINE_DU), pivot=pivot or (cx, cy))


def earth(x: float, y: float, role: str) -> Shapes:
    """The earth sign with its upper bar at height y: three bars, 8 du high."""
    return tuple(
        Line(x - half, y + down, x + half, y + down, Stroke(role, FINE_DU)) for half, down in ((8, 0), (5, 4), (2, 8))
    )


def neutral_sign(x: float, y: float, treatment: str, role: str) -> Shapes:
    """How a neutral is treated, hanging from (x, y), at most 30 du high; nothing for "".

    Raises ValueError for a treatment that is not in NEUTRALS.
    """
    pen = Stroke(role, FINE_DU)
    if not treatment:
        return ()
    if treatment == "isolated":
        return (Line(x, y, x, y + 4, pen), Path(arc(x, y + 7.5, 3.5, 0, 360), pen, "paper"))
    if treatment == "solid":
        return (Line(x, y, x, y + 7, pen), *earth(x, y + 7, role))
    if treatment == "resistor":
        body = Rect(x - 4.5, y + 4, 9, 14, 0.0, pen)
        return (Line(x, y, x, y + 4, pen), body, Line(x, y + 18, x, y + 21, pen), *earth(x, y + 21, role))
    if treatment == "reactor":
        return (coil(x, y, y + 21, turns=2, radius=4.0, pen=pen), *earth(x, y + 21, role))
    raise ValueError(f"no neutral treatment {treatment!r}")


def side_neutral(x: float, y: float, reach: float, treatment: str, role: str) -> Shapes:
    """A neutral led out sideways from (x, y) by ``reach`` du (negative: to the left) and its sign at the end."""
    if not treatment:
        return ()
    end = x + reach
    pen = Stroke(role, FINE_DU)
    if treatment == "isolated":
        inward = -3.5 if reach > 0 else 3.5
        return (Line(x, y, end + inward, y, pen), Path(arc(end, y, 3.5, 0, 360), pen, "paper"))
    return (Line(x, y, end, y, pen), *neutral_sign(end, y, treatment, role))


def coil(x: float, top: float, bottom: float, *, turns: int, radius: float, pen: Stroke) -> Path:
    """A coil as half turns to the right, with straight leads from its middle to top and bottom."""
    start = (top + bottom) / 2 - turns * radius
    commands = [Command("M", ((x, top),))]
    for i in range(turns):
        commands += arc(x, start + (2 * i + 1) * radius, radius, -90, 180, joined=True)
    return Path((*commands, Command("L", ((x, bottom),))), pen)


def times(n: int, x: float, role: str) -> Shapes:
    """ "×4" to the right of a symbol, nothing for one."""
    return () if n <= 1 else (Text(x, 0, f"×{n}", 11, "bold", "start", "middle", role),)
