"""The dark line at the bottom: what was done or can be done, and how the figures came about."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QLabel, QSizePolicy, QStatusBar

from onelinefault.model.fields import text_of
from onelinefault.model.findings import Severity
from onelinefault.model.quantity import quantity

if TYPE_CHECKING:
    from onelinefault.desktop.session import Session
    from onelinefault.desktop.solver import Solver

_AT_FIRST = (
    "Drag a part from the shelf, or press A and type its name. Click a bus to fault it; keys 1–4 choose the kind."
)


class StatusLine(QStatusBar):
    """Left: the last sentence, or the tip of what is under the pointer. Right: the solver."""

    def __init__(self, session: Session, solver: Solver) -> None:
        super().__init__()
        self._session, self._solver = session, solver
        self.setSizeGripEnabled(False)
        self.said = QLabel(self.tr(_AT_FIRST))
        self.said.setTextFormat(Qt.TextFormat.PlainText)
        self.said.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Preferred)
        self.said.setAccessibleName(self.tr("Message"))
        self.solved = QLabel()
        self.solved.setAccessibleName(self.tr("State of the calculation"))
        self.solved.setAlignment(Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter)
        self.addWidget(self.said, 1)
        self.addPermanentWidget(self.solved)
        session.said.connect(self.say)
        session.plant_changed.connect(self.refresh)
        solver.changed.connect(self.refresh)
        self.refresh()

    def say(self, sentence: str) -> None:
        """Show a sentence until there is another."""
        self.clearMessage()
        self.said.setText(sentence)
        self.said.setToolTip(sentence)

    def refresh(self, *_: object) -> None:
        """How the figures came about."""
        base = text_of(
            self._session.plant.document.base_power or quantity(self._session.plant.document.base_mva, "MVA")
        )
        caution = self.tr("calculated prospective values, for checking by a qualified engineer")
        self.solved.setText(" · ".join((*self._state(), self.tr("base {0}").format(base), caution)))

    def _state(self) -> tuple[str, ...]:
        answer = self._solver.answer
        if answer is None:
            return ()
        if self._solver.stale:
            return (self.tr("computing …"),)
        if answer.trouble and answer.network is None:
            return (answer.trouble,)
        errors = sum(finding.severity is Severity.ERROR for finding in answer.findings)
        words = [self.tr("solved in {0} ms").format(max(round(answer.milliseconds), 1))]
        words.append(self.tr("1 node") if answer.nodes == 1 else self.tr("{0} nodes").format(answer.nodes))
        if errors:
            words.append(self.tr("1 error") if errors == 1 else self.tr("{0} errors").format(errors))
        return tuple(words)
