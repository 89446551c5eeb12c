"""Plants for tests, written through the public model classes: parts with typed ratings, wires between terminals."""

from typing import Any

from onelinefault.model.consumers import Bus
from onelinefault.model.part import Part
from onelinefault.model.parts import part_class
from onelinefault.model.plant import Document, End, Plant, Wire

TerminalKey = tuple[str, str]


class Sketch:
    """Collects parts and wires; ``plant`` gives the value."""

    def __init__(self, **document: str) -> None:
        self.parts: dict[str, Part] = {}
        self.wires: dict[str, Wire] = {}
        self.document = Document(**{name: _read(Document, name, text) for name, text in document.items()})

    def add(self, kind: str, **ratings: str | bool) -> str:
        """A part of a kind with ratings as texts ("name" names it, in_service=False stops it). Returns its id."""
        part_id = f"p{len(self.parts) + 1}"
        part: Part = part_class(kind)(id=part_id, name=str(ratings.pop("name", "")), y=10 * len(self.parts))
        if not ratings.pop("in_service", True):
            part = _with(part, in_service=False)
        for name, text in ratings.items():
            part = part.with_text(name, str(text))
        self.parts[part_id] = part
        return part_id

    def bus(self, kv: float, name: str = "") -> TerminalKey:
        """A bus with a nominal voltage. Returns its terminal."""
        return self.add("bus", name=name, nominal_voltage=f"{kv!r} kV"), "bar"

    def wire(self, a: TerminalKey, b: TerminalKey) -> str:
        """Join two terminals. Returns the wire's id."""
        wire_id = f"w{len(self.wires) + 1}"
        self.wires[wire_id] = Wire(wire_id, self._end(a), self._end(b))
        return wire_id

    def _end(self, key: TerminalKey) -> End:
        on_bus = isinstance(self.parts[key[0]], Bus)
        return End(key[0], key[1], len(self.wires) % 12 if on_bus else None)

    def hang(self, kind: str, *ends: TerminalKey, **ratings: str | bool) -> str:
        """A part wired at once: its terminals, in their order, to ``ends``. Returns its id."""
        part_id = self.add(kind, **ratings)
        for terminal, end in zip(self.parts[part_id].terminals, ends, strict=True):
            self.wire((part_id, terminal.name), end)
        return part_id

    @property
    def plant(self) -> Plant:
        """The plant as it stands."""
        number = len(self.parts) + len(self.wires) + 1
        return Plant(self.document, dict(self.parts), dict(self.wires), next_number=number)


def _read(owner: type, name: str, text: str) -> Any:
    from onelinefault.model.fields import fields_of

    return fields_of(owner)[name].value_from(text)


def _with(part: Part, **changes: Any) -> Part:
    from dataclasses import replace

    return replace(part, **changes)
