"""The find line over the sheet: part of a name, then Enter from one hit to the next, on any sheet."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import Qt, Signal
from PySide6.QtGui import QKeyEvent
from PySide6.QtWidgets import QFrame, QHBoxLayout, QLabel, QLineEdit, QToolButton

if TYPE_CHECKING:
    from onelinefault.desktop.session import Session
    from onelinefault.model.plant import Plant


def hits(plant: Plant, typed: str) -> list[str]:
    """Ids of the parts whose name holds the typed letters: equal names first, then those that begin so."""
    wanted = typed.strip().casefold()
    if not wanted:
        return []
    ranked = []
    for place, part in enumerate(plant.parts.values()):
        name = part.name.casefold()
        if wanted in name:
            rank = 0 if name == wanted else 1 if name.startswith(wanted) else 2
            ranked.append((rank, place, part.id))
    return [part_id for _, _, part_id in sorted(ranked)]


class FindBar(QFrame):
    """found: (part id) is to be shown."""

    found = Signal(str)
    closed = Signal()

    def __init__(self, session: Session) -> None:
        super().__init__()
        self._session = session
        self._at = -1
        self.setProperty("part", "notice")
        self.line = QLineEdit()
        self.line.setPlaceholderText(self.tr("Part of a name"))
        self.line.setAccessibleName(self.tr("Find by name"))
        self.line.setMaximumWidth(260)
        self.count = QLabel()
        self.count.setProperty("part", "muted")
        before, after, close = (self._button(*words) for words in self._words())
        row = QHBoxLayout(self)
        row.setContentsMargins(14, 5, 8, 5)
        for widget in (self.line, before, after, self.count):
            row.addWidget(widget)
        row.addStretch(1)
        row.addWidget(close)
        self.line.textChanged.connect(self._typed)
        self.line.returnPressed.connect(self.next)
        before.clicked.connect(self.previous)
        after.clicked.connect(self.next)
        close.clicked.connect(self.give_up)
        self.hide()

    def _words(self) -> list[tuple[str, str]]:
        return [
            ("‹", self.tr("The hit before")),
            ("›", self.tr("The next hit (Enter)")),
            ("×", self.tr("Close the find line (Escape)")),
        ]

    def _button(self, words: str, tip: str) -> QToolButton:
        button = QToolButton()
        button.setText(words)
        button.setToolTip(tip)
        button.setAccessibleName(tip)
        button.setProperty("part", "quiet" if words == "×" else "plain")
        return button

    def start(self) -> None:
        """Open and wait for letters."""
        self.show()
        self.line.selectAll()
        self.line.setFocus()

    def next(self) -> None:
        """Show the next hit."""
        self._step(1)

    def previous(self) -> None:
        """Show the hit before."""
        self._step(-1)

    def give_up(self) -> None:
        """Close."""
        self.hide()
        self.closed.emit()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Escape closes."""
        if event.key() == Qt.Key.Key_Escape:
            self.give_up()
        else:
            super().keyPressEvent(event)

    def _typed(self, text: str) -> None:
        self._at = -1
        self._step(1)

    def _step(self, by: int) -> None:
        ids = hits(self._session.plant, self.line.text())
        if not ids:
            self.count.setText(self.tr("no part of this name") if self.line.text().strip() else "")
            return
        self._at = (self._at + by) % len(ids)
        self.count.setText(self.tr("{0} of {1}").format(self._at + 1, len(ids)))
        self.found.emit(ids[self._at])
