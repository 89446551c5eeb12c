"""Describe a field once: inspector rows, file format, schema, tables and documentation are derived from it.

A rating of a part is a dataclass field made by ``rating(...)``; its metadata holds the ``Field``.
"""

import dataclasses
import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from enum import StrEnum
from functools import lru_cache
from typing import Any

from onelinefault.errors import EntryError
from onelinefault.model.quantity import Quantity, UnitKind, read_quantity
from onelinefault.model.values import (
    ConductorSize,
    LineGeometry,
    Neutral,
    VectorGroup,
    read_conductor_size,
    read_line_geometry,
    read_neutral,
    read_vector_group,
)

Value = Quantity | Neutral | VectorGroup | ConductorSize | LineGeometry | str | int | bool


class Basis(StrEnum):
    """How an input value is known."""

    NAMEPLATE = "nameplate"
    LETTER = "letter"
    DRAWING = "drawing"
    MEASURED = "measured"
    TYPICAL = "typical"
    GUESSED = "guessed"


@dataclass(frozen=True)
class Field:
    """One rating of a part, as the engineer meets it.

    unit: the unit a bare number takes and in which limits are given. minimum, maximum: what is physically possible
    (inclusive; above_zero makes zero impossible too). alternatives: fields that say the same thing in another form.
    default: used when nothing is typed; it then counts as typical.
    """

    name: str
    label: str
    read: Callable[[str], Value]
    kind: str
    unit: str = ""
    minimum: float | None = None
    maximum: float | None = None
    above_zero: bool = False
    choices: tuple[str, ...] = ()
    alternatives: tuple[str, ...] = ()
    group: str = "Ratings"
    help: str = ""
    default: Value | None = None
    required: bool = False
    unit_kind: UnitKind | None = None

    def value_from(self, text: str) -> Value | None:
        """The value of a typed text; an empty text means "not given".

        Raises EntryError that names the field, says why the text cannot be taken and what would be.
        """
        if not text.strip():
            return None
        try:
            value = self.read(text)
            self._check_limits(value)
        except EntryError as error:
            raise EntryError(f"{self.label}: {error}") from None
        return value

    def _check_limits(self, value: Value) -> None:
        number = value.to(self.unit) if isinstance(value, Quantity) and self._comparable(value) else value
        if isinstance(value, Quantity) and self.above_zero and value.value <= 0:
            raise EntryError(f"{value.text}: must be above zero")
        if isinstance(number, bool) or not isinstance(number, (int, float)):
            return
        if self.minimum is not None and number < self.minimum:
            raise EntryError(f"{text_of(value)}: must be at least {self.minimum:g} {self.unit}".rstrip())
        if self.maximum is not None and number > self.maximum:
            raise EntryError(f"{text_of(value)}: must be at most {self.maximum:g} {self.unit}".rstrip())

    def _comparable(self, value: Quantity) -> bool:
        return value.dimension == Quantity(1.0, self.unit, "").dimension


def text_of(value: Value | None) -> str:
    """The text of a value as typed: what the file stores and the inspector shows."""
    if value is None:
        return ""
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, (str, int)):
        return str(value)
    return value.text


def rating(
    label: str,
    kind: UnitKind,
    *,
    unit: str | None = None,
    default: str | None = None,
    at_least: float | None = None,
    at_most: float | None = None,
    above_zero: bool = True,
    alternatives: tuple[str, ...] = (),
    group: str = "Ratings",
    help: str = "",
    required: bool = False,
) -> Any:
    """A dataclass field holding a Quantity or None, with its description."""
    shown = unit or kind.default_unit
    reader = _quantity_reader(kind, shown)
    return _field(
        label,
        reader,
        kind.name,
        unit=shown,
        minimum=at_least,
        maximum=at_most,
        above_zero=above_zero and at_least is None,
        alternatives=alternatives,
        group=group,
        help=help,
        default=reader(default) if default else None,
        required=required,
        unit_kind=kind,
    )


def choice(
    label: str, choices: tuple[str, ...], *, default: str | None = None, group: str = "Ratings", help: str = ""
) -> Any:
    """A dataclass field holding one of a few words."""

    def read(text: str) -> str:
        for word in choices:
            if word.casefold() == " ".join(text.split()).casefold():
                return word
        raise EntryError(f"{text.strip()}: choose one of {', '.join(choices)}")

    return _field(label, read, "choice", choices=choices, default=default, group=group, help=help)


def whole_number(
    label: str,
    *,
    default: int | None = None,
    at_least: int = 1,
    at_most: int = 9999,
    group: str = "Ratings",
    help: str = "",
) -> Any:
    """A dataclass field holding a count."""

    def read(text: str) -> int:
        if not re.fullmatch(r"\+?\d{1,9}", text.strip()):
            raise EntryError(f"{text.strip()}: expected a whole number")
        return int(text)

    return _field(label, read, "count", minimum=at_least, maximum=at_most, default=default, group=group, help=help)


def words(label: str, *, group: str = "Ratings", help: str = "", default: str | None = None) -> Any:
    """A dataclass field holding free text."""
    return _field(label, str, "text", group=group, help=help, default=default)


def flag(label: str, *, default: bool, group: str = "Ratings", help: str = "") -> Any:
    """A dataclass field holding yes or no."""

    def read(text: str) -> bool:
        word = text.strip().casefold()
        if word not in ("yes", "no", "true", "false"):
            raise EntryError(f"{text.strip()}: write yes or no")
        return word in ("yes", "true")

    return _field(label, read, "flag", choices=("yes", "no"), default=default, group=group, help=help)


def neutral(label: str, *, default: str = "isolated", group: str = "Earthing", help: str = "") -> Any:
    """A dataclass field holding the earthing of a star point."""
    return _field(label, read_neutral, "neutral", default=read_neutral(default), group=group, help=help)


def vector_group(label: str, *, default: str, group: str = "Ratings", help: str = "") -> Any:
    """A dataclass field holding a vector group."""
    return _field(label, read_vector_group, "vector group", default=read_vector_group(default), group=group, help=help)


def conductor_size(label: str, *, group: str = "Ratings", help: str = "") -> Any:
    """A dataclass field holding a conductor size."""
    return _field(label, read_conductor_size, "conductor size", group=group, help=help)


def line_geometry(label: str, *, group: str = "Geometry", help: str = "") -> Any:
    """A dataclass field holding conductor positions of a line."""
    return _field(label, read_line_geometry, "line geometry", group=group, help=help)


def _quantity_reader(kind: UnitKind, unit: str) -> Callable[[str], Value]:
    return lambda text: read_quantity(text, kind, unit)


def _field(label: str, read: Callable[[str], Value], kind: str, **more: Any) -> Any:
    description = {"label": label, "read": read, "kind": kind, **more}
    return dataclasses.field(default=None, metadata={"field": description})


def fields_of(part_class: type) -> Mapping[str, Field]:
    """All described fields of a dataclass by name, in the order of declaration."""
    return _fields_of(part_class)


@lru_cache(maxsize=64)
def _fields_of(part_class: type) -> Mapping[str, Field]:
    found = {}
    for item in dataclasses.fields(part_class):
        if "field" in item.metadata:
            found[item.name] = Field(name=item.name, **item.metadata["field"])
    return found
