"""Buses, passive consumers and notes."""

from dataclasses import dataclass
from typing import ClassVar

from onelinefault.model.fields import choice, rating, words
from onelinefault.model.part import Part, Terminal
from onelinefault.model.quantity import (
    APPARENT_POWER,
    CURRENT,
    FAULT_CURRENT,
    NUMBER,
    REACTIVE_POWER,
    TIME,
    VOLTAGE,
    Quantity,
)


@dataclass(frozen=True, kw_only=True)
class Bus(Part):
    """A busbar: a terminal with a length. A length of 0 is a joint, drawn as a dot.

    length: modules from the origin to the far end, in the direction of the turn. Wires end on it at whole modules.
    """

    kind: ClassVar[str] = "bus"
    label: ClassVar[str] = "Bus"
    letter: ClassVar[str] = "B"
    terminals: ClassVar[tuple[Terminal, ...]] = (Terminal("bar", 0, 0),)

    length: int = 12
    nominal_voltage: Quantity | None = rating(
        "Nominal voltage", VOLTAGE, help="Line to line. Carried along from the supply when not given."
    )
    rated_current: Quantity | None = rating("Rated current", CURRENT)
    peak_withstand_current: Quantity | None = rating("Peak withstand current", FAULT_CURRENT)
    short_time_current: Quantity | None = rating("Short-time withstand current", FAULT_CURRENT)
    short_time: Quantity | None = rating("… for", TIME)


@dataclass(frozen=True, kw_only=True)
class Load(Part):
    """A passive consumer; left out of the classical fault calculation."""

    kind: ClassVar[str] = "load"
    label: ClassVar[str] = "Load"
    letter: ClassVar[str] = "LD"
    terminals: ClassVar[tuple[Terminal, ...]] = (Terminal("line", 0, -2),)

    rated_power: Quantity | None = rating("Rated power", APPARENT_POWER)
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE)
    power_factor: Quantity | None = rating("Power factor", NUMBER, default="0.9", at_most=1)
    connection: str | None = choice("Connection", ("star, neutral earthed", "star", "delta"), default="delta")


@dataclass(frozen=True, kw_only=True)
class Capacitor(Part):
    """A shunt capacitor bank; left out of the classical fault calculation."""

    kind: ClassVar[str] = "capacitor"
    label: ClassVar[str] = "Capacitor"
    letter: ClassVar[str] = "C"
    terminals: ClassVar[tuple[Terminal, ...]] = (Terminal("line", 0, -3),)

    rated_power: Quantity | None = rating("Rated power", REACTIVE_POWER)
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE)
    connection: str | None = choice("Connection", ("star, neutral earthed", "star", "delta"), default="star")


@dataclass(frozen=True, kw_only=True)
class Note(Part):
    """Words on the sheet. width: modules."""

    kind: ClassVar[str] = "note"
    label: ClassVar[str] = "Note"
    letter: ClassVar[str] = "N"

    width: int = 16
    note: str | None = words("Text")
