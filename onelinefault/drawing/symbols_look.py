"""What a symbol is made from (Look), what it is (Art, Symbol), where its terminals are, the pens of the family."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Final, TypeAlias

from onelinefault.drawing.shapes import Box, Line, Shapes, Stroke

MAIN_DU: Final = 2.0  # outlines and stubs: the one weight of the family
BLADE_DU: Final = 2.6  # the moving piece of a switch, the plates of a capacitor
FINE_DU: Final = 1.6  # what stands inside an outline

Ends: TypeAlias = tuple[tuple[str, int, int], ...]

_MACHINE: Final[Ends] = (("line", 0, -3),)
_CONDUCTOR: Final[Ends] = (("a", 0, -3), ("b", 0, 3))
_SWITCH: Final[Ends] = (("a", 0, -2), ("b", 0, 2))

# Terminals of each kind in modules, in the symbol's own frame. The bar of a bus may be joined anywhere along it.
TERMINALS: Final[Mapping[str, Ends]] = MappingProxyType(
    {
        "bus": (("bar", 0, 0),),
        "supply": (("out", 0, 3),),
        "synchronous_generator": _MACHINE,
        "synchronous_motor": _MACHINE,
        "induction_motor": _MACHINE,
        "converter_source": _MACHINE,
        "transformer": (("high", 0, -4), ("low", 0, 4)),
        "transformer3": (("high", 0, -4), ("medium", -2, 4), ("low", 2, 4)),
        "autotransformer": (("high", 0, -4), ("low", 0, 4), ("tertiary", -4, 0)),
        "earthing_transformer": _MACHINE,
        "cable": _CONDUCTOR,
        "overhead_line": _CONDUCTOR,
        "busway": _CONDUCTOR,
        "reactor": _CONDUCTOR,
        "breaker": _SWITCH,
        "switch": _SWITCH,
        "fuse": _SWITCH,
        "load": (("line", 0, -2),),
        "capacitor": _MACHINE,
        "note": (),
    }
)


def levels(roles: Mapping[str, str]) -> tuple[tuple[str, str], ...]:
    """Colour role of each terminal's voltage level in the hashable form that Look takes."""
    return tuple(sorted(roles.items()))


@dataclass(frozen=True, slots=True)
class Look:
    """All that matters for a part's picture, hashable, so that equal looks share one symbol.

    level: (terminal, colour role) pairs, see `levels`; a terminal that is missing is drawn in "ink".
    connections: of each winding in terminal order, "D", "Y", "YN", "Z", "ZN"; () takes the kind's usual ones; an
    autotransformer given two has no tertiary. neutrals: of each winding, "isolated", "solid", "resistor", "reactor" or
    "". count: machines in a group. parallel: conductors side by side. length: of a bus (0 is a joint) or a note in
    modules, None for the usual one. text: of a note.
    """

    level: tuple[tuple[str, str], ...] = ()
    closed: bool = True
    intact: bool = True
    in_service: bool = True
    count: int = 1
    parallel: int = 1
    connections: tuple[str, ...] = ()
    neutrals: tuple[str, ...] = ()
    length: int | None = None
    text: str = ""

    def role(self, terminal: str) -> str:
        """Colour role of what belongs to a terminal."""
        return dict(self.level).get(terminal, "ink")

    def neutral(self, winding: int) -> str:
        """Treatment of a winding's neutral, "" when there is nothing to draw.

        An isolated neutral shows only where the winding has its neutral brought out ("YN", "ZN").
        """
        treatment = self.neutrals[winding] if winding < len(self.neutrals) else ""
        connection = self.connections[winding] if winding < len(self.connections) else ""
        if treatment == "isolated" and not connection.upper().endswith("N"):
            return ""
        return treatment


@dataclass(frozen=True, slots=True)
class Art:
    """A symbol as it is drawn: leads out to the terminals below, the body above; ``missing`` names absent terminals."""

    stubs: Shapes
    body: Shapes
    missing: tuple[str, ...] = ()


Artist: TypeAlias = Callable[[Look], Art]


@dataclass(frozen=True, slots=True)
class Symbol:
    """A finished symbol in du: all shapes, their bounds, the bounds of the body without leads, terminals in modules."""

    kind: str
    shapes: Shapes
    box: Box
    body: Box
    terminals: Ends


def lead(x1: float, y1: float, x2: float, y2: float, role: str) -> Line:
    """A piece of conductor between the body and a terminal."""
    return Line(x1, y1, x2, y2, Stroke(role, MAIN_DU))
