"""Devices that join or part two nodes."""

from dataclasses import dataclass
from typing import ClassVar

from onelinefault.model.fields import choice, flag, rating
from onelinefault.model.part import Part, Terminal
from onelinefault.model.quantity import CURRENT, FAULT_CURRENT, TIME, VOLTAGE, Quantity

_ENDS = (Terminal("a", 0, -2), Terminal("b", 0, 2))


@dataclass(frozen=True, kw_only=True)
class Breaker(Part):
    """A circuit breaker."""

    kind: ClassVar[str] = "breaker"
    label: ClassVar[str] = "Breaker"
    letter: ClassVar[str] = "Q"
    terminals: ClassVar[tuple[Terminal, ...]] = _ENDS

    closed: bool | None = flag("Closed", default=True, group="Position")
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE)
    rated_current: Quantity | None = rating("Rated current", CURRENT)
    breaking_current: Quantity | None = rating("Short-circuit breaking current", FAULT_CURRENT)
    making_current: Quantity | None = rating("Short-circuit making current, peak", FAULT_CURRENT)
    short_time_current: Quantity | None = rating("Short-time withstand current", FAULT_CURRENT)
    short_time: Quantity | None = rating("… for", TIME)


@dataclass(frozen=True, kw_only=True)
class Switch(Part):
    """A switch, disconnector or contactor: not rated to break a fault."""

    kind: ClassVar[str] = "switch"
    label: ClassVar[str] = "Switch"
    letter: ClassVar[str] = "S"
    terminals: ClassVar[tuple[Terminal, ...]] = _ENDS

    closed: bool | None = flag("Closed", default=True, group="Position")
    form: str | None = choice(
        "Form", ("switch", "disconnector", "switch-disconnector", "contactor"), default="switch-disconnector"
    )
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE)
    rated_current: Quantity | None = rating("Rated current", CURRENT)
    making_current: Quantity | None = rating("Fault-making current, peak", FAULT_CURRENT)
    short_time_current: Quantity | None = rating("Short-time withstand current", FAULT_CURRENT)
    short_time: Quantity | None = rating("… for", TIME)


@dataclass(frozen=True, kw_only=True)
class Fuse(Part):
    """A fuse; "closed" means its links are in and intact."""

    kind: ClassVar[str] = "fuse"
    label: ClassVar[str] = "Fuse"
    letter: ClassVar[str] = "F"
    terminals: ClassVar[tuple[Terminal, ...]] = _ENDS

    closed: bool | None = flag("Links in", default=True, group="Position")
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE)
    rated_current: Quantity | None = rating("Rated current", CURRENT)
    breaking_current: Quantity | None = rating("Breaking capacity", FAULT_CURRENT)
