"""Commands of the Fault menu, and how much of the answer the sheet shows."""

from __future__ import annotations

from typing import TYPE_CHECKING

from onelinefault.model.fault import PHASE_CHOICES, FaultKind

if TYPE_CHECKING:
    from onelinefault.desktop.canvas import Canvas
    from onelinefault.desktop.session import Session


class FaultCommands:
    """Does the commands of their names."""

    def __init__(self, session: Session, canvas: Canvas) -> None:
        self._session, self._canvas = session, canvas

    def fault_here(self) -> None:
        """Fault what is under the pointer."""
        self._canvas.fault_here()

    def clear_fault(self) -> None:
        """Take the pin away."""
        self._session.set_fault(None)

    def three_phase(self) -> None:
        """All three phases."""
        self._choose_kind(FaultKind.THREE_PHASE)

    def line_to_line(self) -> None:
        """Two phases."""
        self._choose_kind(FaultKind.LINE_TO_LINE)

    def two_lines_to_earth(self) -> None:
        """Two phases and earth."""
        self._choose_kind(FaultKind.TWO_LINES_TO_EARTH)

    def line_to_earth(self) -> None:
        """One phase and earth."""
        self._choose_kind(FaultKind.LINE_TO_EARTH)

    def next_phases(self) -> None:
        """Other phases of the same kind."""
        choices = self._session.choices
        offered = PHASE_CHOICES[choices.kind]
        now = offered.index(choices.phases) if choices.phases in offered else 0
        self._session.choose(phases=offered[(now + 1) % len(offered)])

    def largest(self) -> None:
        """The strongest supply."""
        self._session.choose(level="max")

    def smallest(self) -> None:
        """The weakest supply."""
        self._session.choose(level="min")

    def detail_1(self) -> None:
        """Ribbons and gauges."""
        self._session.choose(detail=1)

    def detail_2(self) -> None:
        """Main figures too."""
        self._session.choose(detail=2)

    def detail_3(self) -> None:
        """Phases and sequences too."""
        self._session.choose(detail=3)

    def _choose_kind(self, kind: FaultKind) -> None:
        if kind is not self._session.choices.kind:
            self._session.choose(kind=kind, phases="")
