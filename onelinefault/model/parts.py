"""All kinds of parts by name; what a kind is called, where its terminals are, what it is rated by.

The classes live beside their trade: sources, transforming, conductors, switching, consumers.
"""

from onelinefault.errors import EntryError
from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor
from onelinefault.model.consumers import Bus, Capacitor, Load, Note
from onelinefault.model.part import Part, Terminal, place_of
from onelinefault.model.sources import ConverterSource, InductionMotor, Supply, SynchronousGenerator, SynchronousMotor
from onelinefault.model.switching import Breaker, Fuse, Switch
from onelinefault.model.transforming import Autotransformer, EarthingTransformer, Transformer, Transformer3

PART_CLASSES: tuple[type[Part], ...] = (
    Bus, Supply, SynchronousGenerator, SynchronousMotor, InductionMotor, ConverterSource,
    Transformer, Transformer3, Autotransformer, EarthingTransformer,
    Cable, OverheadLine, Busway, Reactor, Breaker, Switch, Fuse, Load, Capacitor, Note,
)  # fmt: skip
_BY_KIND = {part_class.kind: part_class for part_class in PART_CLASSES}


def part_class(kind: str) -> type[Part]:
    """The class of a kind of part. Raises EntryError with the known kinds."""
    if kind not in _BY_KIND:
        raise EntryError(f"there is no kind of part called {kind!r}; known kinds: {', '.join(_BY_KIND)}")
    return _BY_KIND[kind]


def terminal_of(part: Part, name: str) -> Terminal:
    """One terminal by name. Raises EntryError when the part has no such terminal."""
    for terminal in part.terminals:
        if terminal.name == name:
            return terminal
    names = ", ".join(t.name for t in part.terminals) or "no terminals"
    raise EntryError(f"{part.title} has no terminal {name!r}; it has {names}")


def terminal_place(part: Part, name: str, at: int | None = None) -> tuple[int, int]:
    """Sheet position of a terminal in modules; ``at`` is the distance along a bus bar from its origin.

    Raises EntryError when the part has no such terminal.
    """
    terminal = terminal_of(part, name)
    x, y = place_of(part, terminal.dx + (at or 0), terminal.dy)
    return int(x), int(y)
