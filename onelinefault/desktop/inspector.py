"""The inspector: the ratings of what is selected, in natural units; the title block when nothing is."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from PySide6.QtCore import Qt, QTimer, Signal
from PySide6.QtWidgets import QHBoxLayout, QLabel, QPushButton, QScrollArea, QStackedWidget, QVBoxLayout, QWidget

from onelinefault.desktop.basis_legend import BasisLegend
from onelinefault.desktop.inspector_rows import Row, row_widget
from onelinefault.desktop.inspector_state import (
    RATING,
    RowState,
    document_rows,
    heading,
    part_rows,
    row_edit,
    sheet_rows,
)
from onelinefault.errors import OneLineFaultError
from onelinefault.model.editing import set_basis
from onelinefault.model.fields import Basis

if TYPE_CHECKING:
    from onelinefault.desktop.session import Session
    from onelinefault.model.part import Part

_PAGES_KEPT: Final = 24
_MOST_COMPLETED: Final = 100  # typical values of more parts at once would keep the sheet waiting


class RowPage(QWidget):
    """The rows of one kind of selection under their group headings."""

    def __init__(self, states: list[RowState], inspector: Inspector) -> None:
        super().__init__()
        self.rows: list[Row] = []
        column = QVBoxLayout(self)
        column.setContentsMargins(12, 2, 14, 8)
        column.setSpacing(5)
        group = ""
        for state in states:
            if state.group not in (group, ""):
                group = state.group
                if self.rows:
                    column.addSpacing(5)
                    column.addWidget(_caps(group))
            row = row_widget(state)
            row.entered.connect(inspector.enter)
            row.marked.connect(inspector.mark)
            self.rows.append(row)
            column.addWidget(row)
        column.addStretch(1)

    def show_states(self, states: list[RowState]) -> None:
        """Show other values in the same rows."""
        for row, state in zip(self.rows, states, strict=True):
            row.show_state(state)


class Inspector(QWidget):
    """Shows the selection's rows and turns what is typed into edits. titled: (heading, muted words)."""

    titled = Signal(str, str)

    def __init__(self, session: Session) -> None:
        super().__init__()
        self.setAccessibleName(self.tr("Inspector"))
        self._session = session
        self._ids: tuple[str, ...] = ()
        self._sheet = session.sheet_id
        self._pages: dict[tuple[object, ...], RowPage] = {}
        self.page: RowPage | None = None
        self._stack = QStackedWidget()
        self._empty = QLabel()
        self._empty.setProperty("part", "muted")
        self._empty.setWordWrap(True)
        self._empty.setContentsMargins(16, 8, 16, 8)
        self._stack.addWidget(self._empty)
        self.legend = BasisLegend()
        self.fill = QPushButton()
        self.fill.setToolTip(self.tr("Type the typical values shown in grey into their rows, marked as typical"))
        self.fill.setStatusTip(self.fill.toolTip())
        self.fill.clicked.connect(self.fill_typical)
        self._timer = QTimer(self)
        self._timer.setSingleShot(True)
        self._timer.timeout.connect(self.refresh)
        self._lay_out()
        session.plant_changed.connect(self._soon)
        session.selection_changed.connect(self._switch)
        session.sheet_changed.connect(self._switch)

    def _lay_out(self) -> None:
        scroll = QScrollArea()
        scroll.setWidgetResizable(True)
        scroll.setWidget(self._stack)
        scroll.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        self._scroll = scroll
        whole = QVBoxLayout(self)
        whole.setContentsMargins(0, 0, 0, 0)
        whole.setSpacing(0)
        whole.addWidget(scroll)
        foot = QHBoxLayout()
        foot.setContentsMargins(14, 4, 14, 2)
        foot.addWidget(self.fill)
        foot.addStretch(1)
        whole.addLayout(foot)
        whole.addWidget(self.legend)
        self.setMinimumWidth(260)

    def _soon(self, *_: object) -> None:
        self._timer.start(0)

    def _switch(self) -> None:
        """Something else is selected: what was typed belongs to what was selected before."""
        self.take_pending()
        self._timer.start(0)

    def take_pending(self) -> None:
        """Take what is typed in a row and not yet taken."""
        if self.page is not None:
            for row in self.page.rows:
                row.take_pending()

    def refresh(self) -> None:
        """Show what is selected now."""
        parts = self._selected()
        self._ids = tuple(part.id for part in parts)
        self._sheet = self._session.sheet_id
        self.fill.setVisible(bool(parts) and self.fill.isVisible())
        plant = self._session.plant
        if parts:
            completed = self._completed(parts)
            words, states = heading(parts), part_rows(parts, completed)
        elif self._session.selection:
            words, states = self._wire_words(), []
        else:
            sheet = plant.sheet(self._sheet)
            words = (self.tr("Plant"), self.tr("nothing selected"))
            states = [*document_rows(plant), *(sheet_rows(sheet) if sheet else ())]
        self.titled.emit(*words)
        self._show(states)

    def row(self, key: str) -> Row:
        """The row of a field. Raises KeyError when it is not shown."""
        for row in self.page.rows if self.page is not None else ():
            if row.state.key == key:
                return row
        raise KeyError(key)

    def take_keyboard(self) -> bool:
        """Put the cursor into the first row that lacks something, else the first rating; whether there was one."""
        self.refresh()
        rows = self.page.rows if self.page is not None else []
        ratings = [row for row in rows if row.state.scope == RATING] or rows
        for row in [*(row for row in ratings if row.state.missing), *ratings]:
            row.editor.setFocus(Qt.FocusReason.TabFocusReason)
            self._scroll.ensureWidgetVisible(row)
            return True
        return False

    def enter(self, row: Row, text: str, left: bool) -> None:
        """Take a typed text; a refused one is told under its row, and the old value stays."""
        state = row.state
        if text.strip() == state.text.strip():
            if left and row.trouble.text():
                row.put_back()
            elif not left:
                row.say("")
            return
        try:
            edit = row_edit(self._session.plant, self._ids, self._sheet, state, text)
        except OneLineFaultError as error:
            row.say(_sentence(str(error), state.text, left))
            if left:
                row.put_back()
            return
        row.say("")
        if edit.empty or not self._session.apply(edit):
            row.put_back()

    def mark(self, row: Row, basis: str) -> None:
        """Say how a value is known."""
        self._session.apply(set_basis(self._session.plant, self._ids, row.state.key, Basis(basis)))

    def fill_typical(self) -> None:
        """Type the typical values that stand in for what is not typed, marked as typical, as one step."""
        from onelinefault.desktop.typical_values import fill_in  # noqa: PLC0415 - see _completed

        self._session.apply(fill_in(self._session.plant, self._selected()))

    def _completed(self, parts: list[Part]) -> list[Part]:
        """The parts with typical values filled in; offers to type them where there are any."""
        from onelinefault.desktop.typical_values import completed_parts, offered  # noqa: PLC0415 - not at the start

        if len(parts) > _MOST_COMPLETED:
            self.fill.hide()
            return []
        completed = completed_parts(self._session.plant, parts)
        fields = {name for part, full in zip(parts, completed, strict=True) for name in offered(part, full)}
        self.fill.setVisible(bool(fields))
        self.fill.setText(self.tr("Fill in typical values ({0})").format(len(fields)))
        return completed

    def _selected(self) -> list[Part]:
        plant = self._session.plant
        return [part for key, part in plant.parts.items() if key in self._session.selection]

    def _wire_words(self) -> tuple[str, str]:
        plant = self._session.plant
        wires = [plant.wires[key] for key in self._session.selection if key in plant.wires]
        if len(wires) != 1:
            return self.tr("{0} wires").format(len(wires)), ""
        names = [plant.parts[end.part].name or plant.parts[end.part].label for end in wires[0].ends]
        return self.tr("Wire"), " – ".join(names)

    def _show(self, states: list[RowState]) -> None:
        self.legend.setVisible(any(state.scope == RATING for state in states))
        if not states:
            self._empty.setText(self.tr("A wire has no ratings. Drag one of its pieces to set its corners."))
            self._stack.setCurrentWidget(self._empty)
            self.page = None
            return
        signature = tuple(state.identity for state in states)
        page = self._pages.get(signature)
        if page is None:
            page = self._pages[signature] = RowPage(states, self)
            self._stack.addWidget(page)
            self._forget_old(page)
        page.show_states(states)
        if page is not self.page:
            self.page = page
            self._stack.setCurrentWidget(page)
            self._scroll.verticalScrollBar().setValue(0)

    def _forget_old(self, newest: RowPage) -> None:
        if len(self._pages) > _PAGES_KEPT:
            signature = next(iter(self._pages))
            old = self._pages.pop(signature)
            self._stack.removeWidget(old)
            old.deleteLater()


def _sentence(error: str, kept: str, left: bool) -> str:
    if not left:
        return error
    return f"{error}. Kept: {kept}." if kept else f"{error}. Nothing was entered."


def _caps(words: str) -> QLabel:
    label = QLabel(words.upper())
    label.setProperty("part", "caps")
    return label
