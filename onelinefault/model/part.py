"""What every part has: a place on a sheet, terminals, ratings and how sure we are of each."""

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from typing import Any, ClassVar, Self

from onelinefault.errors import EntryError
from onelinefault.model.fields import Basis, Field, Value, fields_of, text_of
from onelinefault.model.quantity import Quantity


@dataclass(frozen=True, slots=True)
class Terminal:
    """A connection point of a kind of part, in modules from the part's origin, before turning."""

    name: str
    dx: int
    dy: int
    level: str = ""


@dataclass(frozen=True, kw_only=True)
class Part:
    """One thing placed on a sheet.

    id: issued by the plant, kept for life. x, y: origin in modules (1 module = 2.5 mm on paper, y downwards).
    turn: quarter turns clockwise. basis: how the typed ratings are known, by field name. label_dx, label_dy: how far
    the person has moved the part's label, in modules.
    """

    kind: ClassVar[str] = ""
    label: ClassVar[str] = ""
    letter: ClassVar[str] = "X"
    terminals: ClassVar[tuple[Terminal, ...]] = ()
    is_source: ClassVar[bool] = False

    id: str
    name: str = ""
    sheet: str = "s1"
    x: int = 0
    y: int = 0
    turn: int = 0
    mirrored: bool = False
    in_service: bool = True
    label_dx: int = 0
    label_dy: int = 0
    basis: Mapping[str, Basis] = field(default_factory=dict)

    def given(self, name: str) -> Value | None:
        """The value as typed, or None when nothing was typed."""
        value: Value | None = getattr(self, name)
        return value

    def value(self, name: str) -> Value | None:
        """The value in use: as typed, else the field's default, else None."""
        typed = self.given(name)
        return typed if typed is not None else describe(type(self), name).default

    def basis_of(self, name: str) -> Basis | None:
        """How the value in use is known: as marked, nameplate when typed unmarked, typical for a default, or None."""
        if self.given(name) is not None:
            return self.basis.get(name, Basis.NAMEPLATE)
        return Basis.TYPICAL if describe(type(self), name).default is not None else None

    def with_text(self, name: str, text: str, basis: Basis | None = None) -> Self:
        """The part with one rating typed anew ("" clears it). Raises EntryError when the text cannot be taken."""
        value = describe(type(self), name).value_from(text)
        marks = {key: mark for key, mark in self.basis.items() if key != name}
        if value is not None and basis is not None:
            marks[name] = basis
        changes: dict[str, Any] = {name: value, "basis": marks}
        return replace(self, **changes)

    def text(self, name: str) -> str:
        """A rating as typed, or an empty text."""
        return text_of(self.given(name))

    @property
    def title(self) -> str:
        """The name for messages: "transformer T1", or the kind with the id when it has no name."""
        return f"{self.label.lower()} {self.name or self.id}"


def describe(part_class: type, name: str) -> Field:
    """The description of one field. Raises EntryError when the kind has no such field."""
    fields = fields_of(part_class)
    if name not in fields:
        known = ", ".join(fields)
        raise EntryError(f"{getattr(part_class, 'label', part_class.__name__)} has no rating {name}; it has {known}")
    return fields[name]


def number_in(part: Part, name: str, unit: str) -> float | None:
    """A rating in use as a number in a unit; None when there is none, or when it is of another dimension."""
    value = part.value(name)
    if not isinstance(value, Quantity) or value.dimension != Quantity(1.0, unit, "").dimension:
        return None
    return value.to(unit)


def place_of(part: Part, dx: float, dy: float) -> tuple[float, float]:
    """Sheet position (modules) of a point given in the part's own frame: mirror left-right, then turn, then shift."""
    if part.mirrored:
        dx = -dx
    for _ in range(part.turn % 4):
        dx, dy = -dy, dx
    return part.x + dx, part.y + dy
