"""Figures that a method derives from a fault's currents, in a form that tables and prints can show of any method."""

from dataclasses import dataclass
from typing import Protocol


@dataclass(frozen=True, slots=True)
class Figure:
    """One figure: its sign in the standard, what it is, value and unit ("" for a plain number), and a remark."""

    symbol: str
    label: str
    value: float
    unit: str = ""
    note: str = ""


class Figures(Protocol):
    """What a method derives for one fault."""

    @property
    def peak_ka(self) -> float:
        """The peak current that goes before the classical one, kA."""

    def rows(self) -> tuple[Figure, ...]:
        """All figures in the order of the standard."""
