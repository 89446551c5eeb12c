"""The fault asked for: where, which kind, which phases, through what."""

from dataclasses import dataclass
from enum import StrEnum


class FaultKind(StrEnum):
    """The four kinds of short circuit (IEC 60909-0, figure 1)."""

    THREE_PHASE = "three-phase"
    LINE_TO_LINE = "line-to-line"
    TWO_LINES_TO_EARTH = "two-lines-to-earth"
    LINE_TO_EARTH = "line-to-earth"


# the phases a kind joins when nothing else is said; the first listed is the usual textbook choice
PHASE_CHOICES: dict[FaultKind, tuple[str, ...]] = {
    FaultKind.THREE_PHASE: ("abc",),
    FaultKind.LINE_TO_LINE: ("bc", "ca", "ab"),
    FaultKind.TWO_LINES_TO_EARTH: ("bc", "ca", "ab"),
    FaultKind.LINE_TO_EARTH: ("a", "b", "c"),
}


@dataclass(frozen=True, slots=True)
class Place:
    """Where the fault is: at a terminal of a part (of a bus: "bar"), or at a fraction along a cable, line or busway.

    at: where along a bus bar the pin was put, in modules (for the picture only). fraction: 0 at terminal "a", 1 at "b".
    """

    part: str
    terminal: str = "bar"
    at: int | None = None
    fraction: float | None = None


@dataclass(frozen=True, slots=True)
class Fault:
    """A fault. phases: "abc", "bc", "a", ...; empty: the usual choice of the kind.

    zf_ohm: in each faulted phase (line-to-line: the whole impedance between the two lines). zg_ohm: common, to earth.
    """

    place: Place
    kind: FaultKind = FaultKind.THREE_PHASE
    phases: str = ""
    zf_ohm: complex = 0j
    zg_ohm: complex = 0j

    @property
    def faulted_phases(self) -> str:
        """The phases in use."""
        return self.phases or PHASE_CHOICES[self.kind][0]
