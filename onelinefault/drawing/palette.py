"""Which colour a role has: one palette for screen and paper, because the paper on the screen is light too.

Colour is never the only sign: verdicts differ by shape first, voltage levels by the weight of the bar, dead parts by
dashes. Beyond that the members of a family (verdicts, levels) stay apart in three ways, and a test computes it: CIE
distance of at least 15 for full colour vision, for deuteranopia and for protanopia (matrices of Machado, Oliveira and
Fernandes 2009), and a step in lightness L* of at least 10, so that a grey printer keeps them apart.
"""

from __future__ import annotations

from collections.abc import Mapping
from types import MappingProxyType
from typing import Final

LEVELS: Final = ("level-hv", "level-mv", "level-lv")
VERDICTS: Final = ("holds", "near", "exceeded")

SHEET: Final[Mapping[str, str]] = MappingProxyType(
    {
        # the sheet itself
        "paper": "#FCFBF7",
        "ink": "#22303C",
        "muted": "#6B7680",
        "faint": "#D9D4C7",  # dot grid, rules
        "frame": "#22303C",
        # voltage levels, darkest first: above 36 kV, 1 to 36 kV, up to 1 kV, nothing
        "level-hv": "#432069",
        "level-mv": "#2352A1",
        "level-lv": "#308750",
        "dead": "#8B9095",
        # a fault and what it drives
        "fault": "#C8501E",
        "on-fault": "#FFFFFF",  # marks upon a fault-coloured ground
        "fault-tint": "#FBE9DF",
        "ribbon": "#EDC8B6",  # opaque: joined ribbons show no seams and no darker overlaps
        "gauge": "#1F6F8B",
        "stale": "#A3A9AE",
        "ghost": "#7F878E",
        # duty
        "holds": "#1B7A66",
        "near": "#B88200",
        "exceeded": "#8A0F32",
        # how sure a value is
        "basis-nameplate": "#22303C",
        "basis-letter": "#1F6F8B",
        "basis-typical": "#B88200",
        "basis-guessed": "#8A0F32",
        # editing, on the screen only
        "selection": "#0F6FD1",
        "guide": "#5AA0DE",
        "hover": "#BFD9F2",
    }
)

# On real paper nothing stands behind the drawing, so what hides a line is white.
PRINT: Final[Mapping[str, str]] = MappingProxyType({**SHEET, "paper": "#FFFFFF"})

# Weight of a bus bar by the role of its level, du: the second sign of the voltage beside the tint.
BAR_WEIGHT_DU: Final[Mapping[str, float]] = MappingProxyType(
    {"level-hv": 7.0, "level-mv": 6.0, "level-lv": 5.0, "dead": 3.0}
)
DEFAULT_BAR_WEIGHT_DU: Final = 6.0


def level_role(voltage_kv: float | None) -> str:
    """The colour role of a voltage level (line-to-line, kV): bounds 1 kV and 36 kV; "ink" when it is not known.

    1 kV is the bound between low and high voltage in IEC 60038; 36 kV is its highest voltage for equipment of the
    distribution series. The names of the three groups are ours.
    """
    if voltage_kv is None:
        return "ink"
    if voltage_kv <= 1.0:
        return "level-lv"
    return "level-mv" if voltage_kv <= 36.0 else "level-hv"


def bar_weight_du(role: str) -> float:
    """Weight of a bus bar of a level, du."""
    return BAR_WEIGHT_DU.get(role, DEFAULT_BAR_WEIGHT_DU)


def grey(palette: Mapping[str, str]) -> Mapping[str, str]:
    """The palette as a grey printer shows it: each colour's luma (ITU-R BT.601 weights) in place of the colour."""
    return MappingProxyType({role: _grey(colour) for role, colour in palette.items()})


def _grey(colour: str) -> str:
    red, green, blue = (int(colour[i : i + 2], 16) for i in (1, 3, 5))
    luma = round(0.299 * red + 0.587 * green + 0.114 * blue)
    return f"#{luma:02X}{luma:02X}{luma:02X}"
