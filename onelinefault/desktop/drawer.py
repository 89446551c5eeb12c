"""The drawer at the bottom: tables of buses and findings; closed it is one line of tabs."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from PySide6.QtCore import QItemSelection, QItemSelectionModel, QSize, Qt, Signal
from PySide6.QtGui import QGuiApplication, QKeySequence, QResizeEvent, QShortcut
from PySide6.QtWidgets import (
    QAbstractItemView,
    QHBoxLayout,
    QHeaderView,
    QLineEdit,
    QStackedWidget,
    QTableView,
    QToolButton,
    QWidget,
)

from onelinefault.desktop.drawer_models import SortedTable, TableModel
from onelinefault.desktop.drawer_rows import FINDING_HEADS, bus_heads, bus_rows, finding_rows
from onelinefault.desktop.style import widget_scale
from onelinefault.desktop.tabs import Tabs
from onelinefault.model.findings import Severity

if TYPE_CHECKING:
    from onelinefault.desktop.session import Session
    from onelinefault.desktop.solver import Solver

BUSES, FINDINGS = 0, 1
_ROW_HEIGHT: Final = 25


class Table(QTableView):
    """A table whose rows stand for parts. picked: the parts of the row that a person chose."""

    picked = Signal(object)

    def __init__(self, name: str, model: TableModel) -> None:
        super().__init__()
        self.sorted = SortedTable(model)
        self._following = self._sharing = self._dragged = False
        self._shares: tuple[int, ...] = ()
        self.setModel(self.sorted)
        self.setAccessibleName(name)
        self.setSelectionBehavior(QAbstractItemView.SelectionBehavior.SelectRows)
        self.setSelectionMode(QAbstractItemView.SelectionMode.SingleSelection)
        self.setEditTriggers(QAbstractItemView.EditTrigger.NoEditTriggers)
        self.setSortingEnabled(True)
        self.sortByColumn(-1, Qt.SortOrder.AscendingOrder)
        self.setShowGrid(False)
        self.setTabKeyNavigation(False)
        self.verticalHeader().hide()
        self.verticalHeader().setDefaultSectionSize(max(_ROW_HEIGHT, self.fontMetrics().height() + 9))
        self.horizontalHeader().setHighlightSections(False)
        self.horizontalHeader().setStretchLastSection(True)
        self.setHorizontalScrollMode(QAbstractItemView.ScrollMode.ScrollPerPixel)
        self.horizontalHeader().sectionResized.connect(self._column_dragged)
        self.selectionModel().selectionChanged.connect(self._selected)

    def set_shares(self, widths: tuple[int, ...]) -> None:
        """Column widths, which grow together where there is more room; what a person has dragged stays."""
        self._shares = tuple(round(width * widget_scale(self)) for width in widths)
        self._share_out()

    def resizeEvent(self, event: QResizeEvent) -> None:
        """More or less room."""
        super().resizeEvent(event)
        if not self._dragged:
            self._share_out()

    def _share_out(self) -> None:
        factor = min(max(self.viewport().width() / max(sum(self._shares), 1), 1.0), 1.7)
        self._sharing = True
        for column, width in enumerate(self._shares):
            self.setColumnWidth(column, int(width * factor))
        self._sharing = False

    def _column_dragged(self, column: int, *_: int) -> None:
        last = column == len(self._shares) - 1  # that one takes up the rest by itself
        self._dragged = self._dragged or not (self._sharing or last)

    def follow(self, parts: frozenset[str]) -> None:
        """Select the row of what is selected on the sheet, without saying so."""
        self._following = True
        known = parts & self.sorted.table.row_of.keys()
        row = self.sorted.row_of(min(known)) if known else -1
        if row < 0:
            self.clearSelection()
        elif row not in {index.row() for index in self.selectionModel().selectedRows()}:
            index = self.sorted.index(row, 0)
            flags = QItemSelectionModel.SelectionFlag
            self.selectionModel().setCurrentIndex(index, flags.ClearAndSelect | flags.Rows)
            self.scrollTo(index)
        self._following = False

    def copy(self) -> None:
        """Put the table on the clipboard as text."""
        QGuiApplication.clipboard().setText(self.sorted.as_text())

    def _selected(self, chosen: QItemSelection, gone: QItemSelection) -> None:
        rows = self.selectionModel().selectedRows()
        if rows and not self._following:
            self.picked.emit(self.sorted.parts_at(rows[0].row()))


class DrawerStrip(QWidget):
    """The drawer's title line: tabs, filter, copy, and the buttons that open and close it."""

    def __init__(self) -> None:
        super().__init__()
        self.tabs = Tabs()
        self.tabs.setUsesScrollButtons(False)
        self.tabs.setAccessibleName(self.tr("Tables"))
        self.filter = QLineEdit()
        self.filter.setPlaceholderText(self.tr("Filter"))
        self.filter.setAccessibleName(self.tr("Filter the table"))
        self.filter.setClearButtonEnabled(True)
        self.filter.setMaximumWidth(170)
        self.copy = _button(self.tr("Copy table"), self.tr("Copy the rows shown, with headings, for a spreadsheet"))
        self.fold = _button("▾", "")
        self.fold.setProperty("part", "quiet")
        row = QHBoxLayout(self)
        row.setContentsMargins(8, 2, 6, 2)
        row.setSpacing(6)
        row.addWidget(self.tabs)
        row.addStretch(1)
        for widget in (self.filter, self.copy, self.fold):
            row.addWidget(widget)

    def show_open(self, is_open: bool) -> None:
        """Filter and copy make sense only for a table that can be seen."""
        self.filter.setVisible(is_open)
        self.copy.setVisible(is_open)
        self.fold.setText("▾" if is_open else "▴")
        words = self.tr("Close the drawer") if is_open else self.tr("Open the drawer")
        self.fold.setToolTip(words)
        self.fold.setAccessibleName(words)


class Drawer(QStackedWidget):
    """Shows the solver's tables. picked: parts to select and bring into view; opened: whether the tables are shown."""

    picked = Signal(object)
    opened = Signal(bool)

    def __init__(self, session: Session, solver: Solver) -> None:
        super().__init__()
        self._session, self._solver = session, solver
        self.setAccessibleName(self.tr("Drawer of tables"))
        self.is_open = True
        self._known_errors: frozenset[tuple[str, tuple[str, ...], str]] = frozenset()
        self._known_parts: frozenset[str] = frozenset()
        self.strip = DrawerStrip()
        self.buses = Table(self.tr("Buses"), TableModel(bus_heads(session.choices.kind)))
        self.findings = Table(self.tr("Findings"), TableModel(FINDING_HEADS, mark_column=0))
        for table in self.tables:
            self.addWidget(table)
            self.strip.tabs.addTab(table.accessibleName())
            table.picked.connect(self.picked)
        self._set_columns()
        self._connect()
        self.set_open(False)

    @property
    def tables(self) -> tuple[Table, Table]:
        """All tables in the order of their tabs."""
        return self.buses, self.findings

    @property
    def table(self) -> Table:
        """The table that is shown."""
        return self.tables[self.currentIndex()]

    def _set_columns(self) -> None:
        self.buses.set_shares((112, 52, 60, 60, 76, 76, 90, 84, 78, 58))
        self.findings.set_shares((34, 420, 380, 140))
        self.findings.horizontalHeader().setSectionResizeMode(0, QHeaderView.ResizeMode.Fixed)

    def _connect(self) -> None:
        strip = self.strip
        strip.tabs.tabBarClicked.connect(self.open_tab)
        strip.tabs.currentChanged.connect(self._turn_to)
        strip.filter.textChanged.connect(self._filter)
        strip.copy.clicked.connect(self.copy)
        strip.fold.clicked.connect(self.toggle)
        self._solver.changed.connect(self.refresh)
        self._session.selection_changed.connect(self._follow)
        self._session.choices_changed.connect(self.refresh)
        for table in self.tables:
            keys = QShortcut(QKeySequence.StandardKey.Copy, table)
            keys.setContext(Qt.ShortcutContext.WidgetShortcut)
            keys.activated.connect(self.copy)

    def minimumSizeHint(self) -> QSize:
        """Two rows."""
        return QSize(200, 80 if self.is_open else 0)

    def sizeHint(self) -> QSize:
        """Six rows."""
        return QSize(600, 175)

    def open_tab(self, index: int) -> None:
        """Show one table."""
        if 0 <= index < self.count():
            self.strip.tabs.setCurrentIndex(index)
            self.set_open(True)

    def toggle(self) -> None:
        """Open or close."""
        self.set_open(not self.is_open)

    def set_open(self, is_open: bool) -> None:
        """Show the tables, or only the line of tabs."""
        if is_open == self.is_open:
            return
        self.is_open = is_open
        self.setVisible(is_open)
        self.strip.show_open(is_open)
        self._fill()
        self.opened.emit(is_open)

    def copy(self) -> None:
        """Copy the table that is shown."""
        self.table.copy()
        self._session.said.emit(self.tr("Copied {0} rows").format(self.table.sorted.rowCount()))

    def refresh(self) -> None:
        """Show the answer as it is now; old figures are greyed."""
        answer = self._solver.answer
        if answer is None:
            return
        if self._solver.stale:
            for table in self.tables:
                table.sorted.table.show_stale()
            return
        self._show_counts(len({row.part for row in answer.rows}), len(answer.findings))
        self._fill()
        self._open_for_new_errors()

    def _fill(self) -> None:
        """Fill the tables, unless nobody can see them."""
        answer, kind = self._solver.answer, self._session.choices.kind
        if answer is None or self._solver.stale or not self.is_open:
            return
        result = answer.result if self._session.fault is not None else None
        self.buses.sorted.table.show_rows(bus_rows(answer.rows, result, kind), bus_heads(kind))
        self.findings.sorted.table.show_rows(finding_rows(answer.findings, self._session.plant))
        self._follow()

    def _show_counts(self, *counts: int) -> None:
        for index, (table, count) in enumerate(zip(self.tables, counts, strict=True)):
            name = table.accessibleName()
            self.strip.tabs.setTabText(index, f"{name} {count}" if count else name)

    def _open_for_new_errors(self) -> None:
        """Open by itself only for an error that stands in the way of a fault that is asked for."""
        answer = self._solver.answer
        assert answer is not None
        found = frozenset((f.code, f.parts, f.field) for f in answer.findings if f.severity is Severity.ERROR)
        fresh = [parts for _, parts, _ in found - self._known_errors]
        broken = any(self._known_parts.issuperset(parts) for parts in fresh)  # a part just placed is not broken
        self._known_errors, self._known_parts = found, frozenset(self._session.plant.parts)
        if self._session.fault is not None and (broken or (fresh and answer.trouble)):
            self.open_tab(FINDINGS)

    def _turn_to(self, index: int) -> None:
        self.setCurrentIndex(index)
        self._filter(self.strip.filter.text())

    def _filter(self, text: str) -> None:
        for table in self.tables:
            table.sorted.setFilterFixedString(text if table is self.table else "")
        self._follow()

    def _follow(self) -> None:
        if self.is_open:
            for table in self.tables:
                table.follow(self._session.selection)


def _button(words: str, tip: str) -> QToolButton:
    button = QToolButton()
    button.setText(words)
    button.setProperty("part", "plain")
    button.setToolTip(tip)
    button.setStatusTip(tip)
    button.setAccessibleName(words)
    button.setFocusPolicy(Qt.FocusPolicy.TabFocus)
    return button
