"""The picture of one part on its sheet: its symbol in its place, its name and ratings beside it."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Final, TypeAlias

from onelinefault.drawing.shapes import MODULE_DU, Anchor, Box, Shapes, Text, bounds, transform
from onelinefault.drawing.symbols import Look, Symbol, levels, placed_symbol
from onelinefault.model.conductors import Busway, Cable, OverheadLine
from onelinefault.model.consumers import Bus, Note
from onelinefault.model.figures import voltage_text
from onelinefault.model.part import Part, place_of
from onelinefault.model.quantity import Quantity
from onelinefault.model.sources import InductionMotor, SynchronousGenerator, SynchronousMotor
from onelinefault.model.summary import rating_lines
from onelinefault.model.switching import Breaker, Fuse, Switch
from onelinefault.model.transforming import Autotransformer, EarthingTransformer, Transformer, Transformer3
from onelinefault.model.values import ConductorSize, Neutral, VectorGroup

# colour role of each terminal's voltage level: (part id, terminal) → "level-mv", "dead", ...; missing: ink
Roles: TypeAlias = Mapping[tuple[str, str], str]

NAME_DU: Final = 11.5
RATING_DU: Final = 10.0
_LINE_DU = 13.5
_SWITCHING = (Breaker, Switch, Fuse)
_LABEL_LEFT = (Transformer, Transformer3)
_NEUTRAL_FIELDS = ("neutral_high", "neutral_medium", "neutral_low", "neutral")


@dataclass(frozen=True, slots=True)
class PartPicture:
    """The symbol with its place (x, y in du) and the words beside it, in du on the sheet.

    box: everything; body: the symbol without its leads. Equal looks share one symbol, so that a painter can keep it.
    """

    part: str
    symbol: Symbol
    x: float
    y: float
    words: Shapes
    box: Box
    body: Box

    @property
    def shapes(self) -> Shapes:
        """The symbol's shapes in du on the sheet."""
        return transform(self.symbol.shapes, dx=self.x, dy=self.y)


def part_picture(part: Part, roles: Roles) -> PartPicture:
    """The picture of a part. roles: see Roles."""
    symbol = placed_symbol(part.kind, look_of(part, roles), part.turn, part.mirrored)
    dx, dy = part.x * MODULE_DU, part.y * MODULE_DU
    body = symbol.body.moved(dx, dy)
    words = _words(part, body, roles)
    box = symbol.box.moved(dx, dy)
    return PartPicture(part.id, symbol, dx, dy, words, box.united(bounds(words)) if words else box, body)


def look_of(part: Part, roles: Roles) -> Look:
    """What matters of a part for its symbol."""
    level = levels({t.name: roles[part.id, t.name] for t in part.terminals if (part.id, t.name) in roles})
    look = Look(level=level, in_service=part.in_service, neutrals=_neutrals(part), connections=_connections(part))
    match part:
        case Bus():
            look = replace(look, length=part.length)
        case Note():
            look = Look(length=part.width, text=part.note or "Note")
        case Breaker() | Switch():
            look = replace(look, closed=part.value("closed") is True)
        case Fuse():
            look = replace(look, intact=part.value("closed") is True)
        case InductionMotor():
            look = replace(look, count=part.count or 1, connections=(), neutrals=())
        case Cable() | OverheadLine() | Busway():
            look = replace(look, parallel=_parallel(part))
    return look


def _parallel(part: Part) -> int:
    size = part.given("size") if isinstance(part, Cable) else None
    runs = size.runs if isinstance(size, ConductorSize) else 1
    parallel = part.value("parallel")
    return max(runs, parallel if isinstance(parallel, int) else 1)


def _neutrals(part: Part) -> tuple[str, ...]:
    """How each winding's star point is treated; a delta has none."""
    names = [name for name in _NEUTRAL_FIELDS if hasattr(part, name)]
    found = [part.value(name) for name in names]
    if len(names) > 1:
        deltas = [c == "D" for c in _connections(part)]
    else:
        deltas = [hasattr(part, "connection") and part.value("connection") == "delta"]
    return tuple(
        value.form if isinstance(value, Neutral) and not delta else ""
        for value, delta in zip(found, [*deltas, *[False] * len(found)], strict=False)
    )


def _connections(part: Part) -> tuple[str, ...]:
    if isinstance(part, EarthingTransformer):
        return ("ZN",) if part.value("connection") == "zigzag" else ("YN",)
    group = part.value("vector_group") if hasattr(part, "vector_group") else None
    if not isinstance(group, VectorGroup):
        return ()
    letters = [c.replace("A", "Y") for c in group.connections]
    return tuple(c + ("N" if out else "") for c, out in zip(letters, group.brought_out, strict=True))


def _words(part: Part, body: Box, roles: Roles) -> Shapes:
    if isinstance(part, Note):
        return ()
    shift = part.label_dx * MODULE_DU, part.label_dy * MODULE_DU
    if isinstance(part, Bus):
        return transform(_bus_words(part, body), dx=shift[0], dy=shift[1])
    ratings = [] if isinstance(part, _SWITCHING) else list(rating_lines(part))
    lines = [(part.name, True)] if part.name else []
    lines += [(text, False) for text in ratings if text]
    beside = _beside(part, lines, body)
    return (*transform(beside, dx=shift[0], dy=shift[1]), *_neutral_words(part))


def _bus_words(part: Bus, body: Box) -> Shapes:
    if part.length == 0 and not part.name:
        return ()
    x, y = (body.left, body.top - 6) if part.turn % 2 == 0 else (body.right + 6, body.top + 10)
    words: list[Text] = []
    if part.name:
        words.append(Text(x, y, part.name, 12.5, "bold", halo="outline"))
        x = words[0].box().right + 9
    if isinstance(part.nominal_voltage, Quantity):
        words.append(
            Text(x, y, voltage_text(part.nominal_voltage.to("kV")), RATING_DU + 0.5, role="muted", halo="outline")
        )
    return tuple(words)


def _beside(part: Part, lines: list[tuple[str, bool]], body: Box) -> Shapes:
    """Lines of text beside the symbol: upright symbols carry them to the side, lying ones above."""
    if not lines:
        return ()
    small = isinstance(part, _SWITCHING)
    middle: Anchor = "middle"
    anchor: Anchor
    if part.turn % 2 == 1:
        x, anchor = (body.left + body.right) / 2, middle
        first = body.top - 7 - (len(lines) - 1) * _LINE_DU
    else:
        left = isinstance(part, _LABEL_LEFT) != part.mirrored
        x, anchor = (body.left - 7, "end") if left else (body.right + 7, "start")
        middle_y = part.y * MODULE_DU if _hangs_a_neutral(part) else (body.top + body.bottom) / 2
        first = middle_y - (len(lines) - 1) / 2 * _LINE_DU + (0 if _hangs_a_neutral(part) else 4)
        if left and isinstance(part, (Transformer, Transformer3)):
            x = min(x, part.x * MODULE_DU - 26)
    return tuple(
        Text(
            x, first + i * _LINE_DU, text, (9.5 if small else NAME_DU) if bold else RATING_DU,
            "bold" if bold and not small else "regular", anchor, role="muted" if small or not bold else "ink",
            halo="outline",
        )
        for i, (text, bold) in enumerate(lines)
    )  # fmt: skip


def _hangs_a_neutral(part: Part) -> bool:
    """Whether a neutral with its size hangs below the symbol, so that the words keep above it."""
    value = part.value("neutral") if hasattr(part, "neutral") else None
    return isinstance(value, Neutral) and value.earthed and not isinstance(part, Autotransformer)


def _neutral_words(part: Part) -> Shapes:
    """The size of an earthing resistor or reactor beside its sign."""
    places = {"neutral_high": (-33.0, -2.0), "neutral_low": (33.0, 28.0), "neutral": (12.0, 34.0)}
    if isinstance(part, Transformer3):
        places = {"neutral_high": (-46.0, -16.0), "neutral_medium": (-46.0, 24.0), "neutral_low": (46.0, 24.0)}
    if isinstance(part, Autotransformer):
        places = {"neutral": (32.0, 30.0)}
    words = []
    for name, (dx, dy) in places.items():
        value = part.value(name) if hasattr(part, name) else None
        shown = isinstance(part, _WITH_SIGN) and any(_neutrals(part))
        if isinstance(value, Neutral) and value.size is not None and shown:
            x, y = place_of(part, dx / MODULE_DU, dy / MODULE_DU)
            right = x >= part.x
            text = value.size.text
            anchor: Anchor = "start" if right else "end"
            at = x * MODULE_DU + (11 if right else -11), y * MODULE_DU
            words.append(Text(*at, text, 9.5, "regular", anchor, "middle", "muted", "outline"))
    return tuple(words)


_WITH_SIGN = (
    Transformer, Transformer3, Autotransformer, EarthingTransformer,
    SynchronousGenerator, SynchronousMotor, InductionMotor,
)  # fmt: skip
