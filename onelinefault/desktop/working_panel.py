"""The main figures of the fault that stands: impedances, currents, peak, and what each source gives."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QGridLayout, QLabel, QScrollArea, QVBoxLayout, QWidget

from onelinefault.model.figures import angle_text, current_text, figure, voltage_text

if TYPE_CHECKING:
    from collections.abc import Sequence

    from onelinefault.desktop.session import Session
    from onelinefault.desktop.solver import Solver
    from onelinefault.engine.results import FaultResult
    from onelinefault.model.plant import Plant

_LEAST_SHARE: Final = 0.0005


@dataclass(frozen=True, slots=True)
class Line:
    """One line of the panel; a line without a value is a heading."""

    name: str
    value: str = ""


def fault_lines(plant: Plant, result: FaultResult) -> list[Line]:
    """The figures of a fault in words and numbers."""
    return [
        Line("Voltage before the fault", _against(result.prefault_kv, result.nominal_kv)),
        *(Line(name, impedance_text(z)) for name, z in zip(("Z1", "Z2", "Z0"), result.z_ohm, strict=True)),
        Line("Currents at the fault"),
        *(Line(f"I″ {name}", _phasor(ka)) for name, ka in zip("abc", result.phases_ka, strict=True)),
        Line("3I0", _phasor(result.residual_ka)),
        *(Line(name, _phasor(ka)) for name, ka in zip(("I1", "I2", "I0"), result.sequence_ka, strict=True)),
        Line("Peak", current_text(result.peak_ka)),
        Line("X/R", figure(result.x_over_r)),
        Line("Fault level", f"{figure(result.fault_level_mva)} MVA"),
        *_source_lines(plant, result),
    ]


def _source_lines(plant: Plant, result: FaultResult) -> list[Line]:
    shares = sorted(result.sources, key=lambda share: -share.share)
    lines = [Line("Where it comes from")] if shares else []
    for share in shares:
        if abs(share.share) >= _LEAST_SHARE:
            part = plant.parts.get(share.part)
            name = (part.name or part.title) if part else share.part
            lines.append(Line(name, f"{share.share * 100:.1f} %  {current_text(abs(share.at_fault_ka))}"))
    return lines


def impedance_text(z: complex | None) -> str:
    """An impedance in ohm as R + jX; "open" where no current can flow."""
    if z is None:
        return "open"
    sign = "−" if z.imag < 0 else "+"
    return f"{figure(z.real, 4)} {sign} j{figure(abs(z.imag), 4)} Ω"


def _phasor(ka: complex) -> str:
    value = complex(ka)
    return f"{current_text(abs(value))}  {angle_text(value)}" if abs(value) > 5e-7 else "0"


def _against(kv: float, nominal_kv: float) -> str:
    share = f" ({kv / nominal_kv * 100:.4g} %)" if nominal_kv else ""
    return f"{voltage_text(kv)}{share}"


class WorkingPanel(QWidget):
    """Shows the solver's answer for the standing fault. titled: (heading, muted words)."""

    titled = Signal(str, str)

    def __init__(self, session: Session, solver: Solver) -> None:
        super().__init__()
        self.setAccessibleName(self.tr("Working"))
        self._session, self._solver = session, solver
        self._labels: list[tuple[QLabel, QLabel]] = []
        self._shown: list[Line] = []
        self._stale = False
        self.note = _plain_label("muted")
        self.note.setWordWrap(True)
        self.note.setTextInteractionFlags(Qt.TextInteractionFlag.TextSelectableByMouse)
        self._lay_out()
        solver.changed.connect(self.refresh)
        session.fault_changed.connect(self.refresh)

    def _lay_out(self) -> None:
        inner, self._figures = QWidget(), QWidget()
        self._grid = QGridLayout(self._figures)
        self._grid.setContentsMargins(0, 0, 0, 0)
        self._grid.setHorizontalSpacing(10)
        self._grid.setVerticalSpacing(5)
        self._grid.setColumnStretch(1, 1)
        column = QVBoxLayout(inner)
        column.setContentsMargins(16, 4, 12, 10)
        column.setSpacing(8)
        column.addWidget(self.note)
        column.addWidget(self._figures)
        column.addStretch(1)
        scroll = QScrollArea()
        scroll.setWidget(inner)
        scroll.setWidgetResizable(True)
        scroll.setAccessibleName(self.tr("Figures of the standing fault"))
        whole = QVBoxLayout(self)
        whole.setContentsMargins(0, 0, 0, 0)
        whole.addWidget(scroll)

    @property
    def lines(self) -> list[Line]:
        """What is shown."""
        return list(self._shown)

    def refresh(self) -> None:
        """Show the answer as it is now; an old one is greyed."""
        answer, session = self._solver.answer, self._session
        result = answer.result if answer is not None and session.fault is not None else None
        trouble = answer.trouble if answer is not None and not self._solver.stale else ""
        if result is None:
            self._show([], False)
            self._say(trouble or self._invitation())
            self.titled.emit(self.tr("Working"), "")
            return
        from onelinefault.report.overlay_data import fault_words  # noqa: PLC0415 - loads numpy; it is loaded by now

        self.titled.emit(self.tr("Working"), fault_words(session.plant, result))
        self._show(fault_lines(session.plant, result), self._solver.stale)
        if self._solver.stale:
            self._say(self.tr("Computing anew …"))
        else:
            self._say_what_it_rests_on(result)

    def _invitation(self) -> str:
        if self._session.fault is not None:
            return self.tr("Computing …")
        return self.tr("Click a bus to fault it; the figures appear here.")

    def _say(self, words: str, tip: str = "") -> None:
        self.note.setText(words)
        self.note.setToolTip(tip)
        self.note.setVisible(bool(words))

    def _say_what_it_rests_on(self, result: FaultResult) -> None:
        rests = "\n".join(finding.message for finding in result.findings)
        self._say(self.tr("△ rests on typical or guessed data") if rests else "", rests)

    def _show(self, lines: list[Line], stale: bool) -> None:
        if lines == self._shown and stale == self._stale:
            return
        self._shown, self._stale = lines, stale
        self._figures.setEnabled(not stale)
        self._make_room(len(lines))
        for (name, value), line in zip(self._labels, lines, strict=False):
            head = not line.value
            _dress(name, "caps" if head else "label")
            name.setText(line.name.upper() if head else line.name)
            value.setText(line.value)
        for pair in self._labels[len(lines) :]:
            _hide(pair)

    def _make_room(self, count: int) -> None:
        while len(self._labels) < count:
            name, value = _plain_label("label"), _plain_label("value")
            value.setTextInteractionFlags(Qt.TextInteractionFlag.TextSelectableByMouse)
            row = len(self._labels)
            self._grid.addWidget(name, row, 0)
            self._grid.addWidget(value, row, 1)
            self._labels.append((name, value))
        for name, value in self._labels[:count]:
            name.show()
            value.show()


def _plain_label(part: str) -> QLabel:
    label = QLabel()
    label.setTextFormat(Qt.TextFormat.PlainText)
    label.setProperty("part", part)
    return label


def _dress(label: QLabel, part: str) -> None:
    if label.property("part") != part:
        label.setProperty("part", part)
        label.style().unpolish(label)
        label.style().polish(label)


def _hide(pair: Sequence[QLabel]) -> None:
    for label in pair:
        label.hide()
