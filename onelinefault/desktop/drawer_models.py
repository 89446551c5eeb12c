"""Tables of the drawer as Qt models: the buses with their fault currents, and the findings."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Final

from PySide6.QtCore import QAbstractTableModel, QModelIndex, QPersistentModelIndex, QSize, QSortFilterProxyModel, Qt
from PySide6.QtGui import QColor, QFont, QGuiApplication, QIcon, QPainter, QPalette, QPixmap

from onelinefault.drawing.painter import paint
from onelinefault.drawing.palette import SHEET
from onelinefault.drawing.shapes import Shapes
from onelinefault.drawing.symbols_marks import verdict
from onelinefault.model.caution import CAUTION_SHORT
from onelinefault.model.fault import FaultKind
from onelinefault.model.figures import figure
from onelinefault.model.findings import Finding, Severity

if TYPE_CHECKING:
    from onelinefault.engine.results import BusRow, FaultResult
    from onelinefault.model.plant import Plant

Index = QModelIndex | QPersistentModelIndex
SORT_ROLE: Final = int(Qt.ItemDataRole.UserRole)
PARTS_ROLE: Final = int(Qt.ItemDataRole.UserRole) + 1
_MARKS: Final = {Severity.ERROR: "exceeded", Severity.WARNING: "near", Severity.HINT: "holds"}
_ORDER: Final = (Severity.ERROR, Severity.WARNING, Severity.HINT)
_KIND_WORDS: Final = {
    FaultKind.THREE_PHASE: "3 ph", FaultKind.LINE_TO_LINE: "2 ph",
    FaultKind.TWO_LINES_TO_EARTH: "2 ph–E", FaultKind.LINE_TO_EARTH: "1 ph–E",
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class Cell:
    """What a table shows in one place, and the value it is sorted by."""

    text: str
    order: float | str


def number(value: float | None) -> Cell:
    """A figure; a dash where there is none."""
    return Cell("–", float("-inf")) if value is None else Cell(figure(value), value)


def words(text: str) -> Cell:
    """A text, sorted without regard to case."""
    return Cell(text, text.casefold())


@dataclass(frozen=True, slots=True)
class Head:
    """A heading: short on the screen, full where the table is copied to, explained in a tooltip."""

    short: str
    full: str = ""
    tip: str = ""

    @property
    def copied(self) -> str:
        """The heading for a copy."""
        return self.full or self.short


@dataclass(frozen=True, slots=True)
class TableRow:
    """One row: its cells, and the parts it speaks of."""

    cells: tuple[Cell, ...]
    parts: tuple[str, ...]
    mark: str = ""
    hint: str = ""


def bus_heads(kind: FaultKind) -> tuple[Head, ...]:
    """The headings of the bus table; peak and X/R are of one kind of fault."""
    kinds = tuple(Head(f"I″ {word}", f"I″ {word} kA", _CURRENT_TIP) for word in _KIND_WORDS.values())
    word = _KIND_WORDS[kind]
    return (
        Head("Bus"),
        Head("kV", "nominal kV"),
        *kinds,
        Head(f"peak {word}", f"peak {word} kA", "Largest asymmetrical peak of the kind of fault chosen, kA"),
        Head(f"X/R {word}", tip="Of the impedance that the current of the chosen kind of fault flows through"),
        Head("level MVA", "fault level MVA", "Three-phase fault level: √3 · nominal voltage · I″, MVA"),
        Head("left %", "voltage left %", "Smallest phase-to-earth voltage while the fault stands, % of nominal"),
    )


_CURRENT_TIP: Final = "Initial symmetrical short-circuit current of the largest phase, kA"


def bus_rows(rows: Sequence[BusRow], result: FaultResult | None, kind: FaultKind) -> list[TableRow]:
    """One row a bus. result: the standing fault, for the voltage left; kind: whose peak and X/R are shown."""
    by_bus: dict[str, dict[str, BusRow]] = {}
    for row in rows:
        by_bus.setdefault(row.part, {})[str(row.kind)] = row
    return [_bus_row(part, found, result, kind) for part, found in by_bus.items()]


def _bus_row(part: str, found: dict[str, BusRow], result: FaultResult | None, kind: FaultKind) -> TableRow:
    any_row = next(iter(found.values()))
    chosen, three = found.get(str(kind)), found.get(str(FaultKind.THREE_PHASE))
    cells = (
        words(any_row.bus),
        Cell(f"{any_row.nominal_kv:.4g}", any_row.nominal_kv),
        *(number(found[str(k)].ik_ka if str(k) in found else None) for k in _KIND_WORDS),
        number(chosen.peak_ka if chosen else None),
        number(chosen.x_over_r if chosen else None),
        number(three.fault_level_mva if three else None),
        _left(part, result),
    )
    assumed = "; ".join(dict.fromkeys(text for row in found.values() for text in row.assumed))
    return TableRow(cells, (part,), hint=f"Rests on typical or guessed data: {assumed}" if assumed else "")


def _left(part: str, result: FaultResult | None) -> Cell:
    node = None if result is None else result.network.node_of.get((part, "bar"))
    if result is None or node is None:
        return Cell("", float("-inf"))
    percent = float(result.voltage_left[node]) * 100
    return Cell(f"{percent:.0f}", percent)


FINDING_HEADS: Final = (Head("", "Severity"), Head("Finding"), Head("What to do"), Head("Parts"))


def finding_rows(findings: Sequence[Finding], plant: Plant) -> list[TableRow]:
    """One row a finding, errors first."""
    rows = []
    for finding in sorted(findings, key=lambda f: _ORDER.index(f.severity)):
        names = [plant.parts[key].name or plant.parts[key].title for key in finding.parts if key in plant.parts]
        cells = (
            Cell(finding.severity.value, _ORDER.index(finding.severity)),
            words(finding.message),
            words(finding.remedy),
            words(", ".join(names)),
        )
        rows.append(TableRow(cells, finding.parts, _MARKS[finding.severity], f"{finding.message}. {finding.remedy}"))
    return rows


class TableModel(QAbstractTableModel):
    """A table of rows. mark_column: where the severity is shown as a shape instead of a word.

    row_of: the first row that speaks of a part, by its id.
    """

    def __init__(self, heads: Sequence[Head], mark_column: int = -1) -> None:
        super().__init__()
        self.heads = tuple(heads)
        self.rows: list[TableRow] = []
        self.row_of: dict[str, int] = {}
        self.stale = False
        self._mark_column = mark_column

    def show_rows(self, rows: list[TableRow], heads: Sequence[Head] | None = None) -> None:
        """Show other rows; rows that only changed their figures stay where they are."""
        self.stale = False
        if heads is not None and tuple(heads) != self.heads:
            self.heads = tuple(heads)
            self.headerDataChanged.emit(Qt.Orientation.Horizontal, 0, len(self.heads) - 1)
        if [row.parts for row in rows] == [row.parts for row in self.rows]:
            self.rows = rows
            self._renew()
            return
        self.beginResetModel()
        self.rows = rows
        self.row_of = {part: row for row in reversed(range(len(rows))) for part in rows[row].parts}
        self.endResetModel()

    def show_stale(self) -> None:
        """The figures no longer hold."""
        if not self.stale:
            self.stale = True
            self._renew()

    def _renew(self) -> None:
        if self.rows:
            self.dataChanged.emit(self.index(0, 0), self.index(len(self.rows) - 1, len(self.heads) - 1))

    def rowCount(self, parent: Index = QModelIndex()) -> int:  # noqa: B008 - Qt's own signature
        """How many rows."""
        return 0 if parent.isValid() else len(self.rows)

    def columnCount(self, parent: Index = QModelIndex()) -> int:  # noqa: B008
        """How many columns."""
        return 0 if parent.isValid() else len(self.heads)

    def headerData(self, section: int, orientation: Qt.Orientation, role: int = Qt.ItemDataRole.DisplayRole) -> Any:
        """The headings."""
        if orientation != Qt.Orientation.Horizontal:
            return None
        if role == Qt.ItemDataRole.DisplayRole:
            return self.heads[section].short
        if role == Qt.ItemDataRole.ToolTipRole:
            return self.heads[section].tip or self.heads[section].copied
        if role == Qt.ItemDataRole.TextAlignmentRole:
            return int(Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter)
        return None

    def data(self, index: Index, role: int = Qt.ItemDataRole.DisplayRole) -> Any:
        """Text, order, parts, mark, colour of one cell."""
        row, column = self.rows[index.row()], index.column()
        cell = row.cells[column]
        if role == Qt.ItemDataRole.DisplayRole:
            return "" if column == self._mark_column else cell.text
        if role == SORT_ROLE:
            return cell.order
        if role == PARTS_ROLE:
            return row.parts
        return self._look(row, column, cell, role)

    def _look(self, row: TableRow, column: int, cell: Cell, role: int) -> Any:
        if role == Qt.ItemDataRole.DecorationRole and column == self._mark_column and row.mark:
            return mark_icon(row.mark)
        if role == Qt.ItemDataRole.ForegroundRole and self.stale:
            return QGuiApplication.palette().color(QPalette.ColorGroup.Disabled, QPalette.ColorRole.Text)
        if role == Qt.ItemDataRole.FontRole and column == 0 and self._mark_column < 0:
            font = QFont()
            font.setBold(True)
            return font
        if role == Qt.ItemDataRole.ToolTipRole:
            return row.hint or cell.text
        if role == Qt.ItemDataRole.AccessibleTextRole:
            return cell.text
        return None


class SortedTable(QSortFilterProxyModel):
    """The table sorted by a column and thinned out by a filter line."""

    def __init__(self, model: TableModel) -> None:
        super().__init__()
        self.table = model
        self.setSourceModel(model)
        self.setSortRole(SORT_ROLE)
        self.setFilterKeyColumn(-1)
        self.setFilterCaseSensitivity(Qt.CaseSensitivity.CaseInsensitive)

    def parts_at(self, row: int) -> tuple[str, ...]:
        """The parts that a shown row speaks of."""
        return tuple(self.index(row, 0).data(PARTS_ROLE) or ())

    def row_of(self, part: str) -> int:
        """The shown row of a part, or -1."""
        row = self.table.row_of.get(part)
        return -1 if row is None else self.mapFromSource(self.table.index(row, 0)).row()

    def as_text(self) -> str:
        """What is shown, as lines of cells parted by tabs, with headings and the caution."""
        lines = ["\t".join(head.copied for head in self.table.heads)]
        for row in range(self.rowCount()):
            source = self.mapToSource(self.index(row, 0)).row()
            lines.append("\t".join(cell.text.replace("\t", " ") for cell in self.table.rows[source].cells))
        if self.table.stale:
            lines.append("Stale: the plant has changed since.")
        return "\n".join([*lines, "", CAUTION_SHORT, ""])


_ICONS: dict[tuple[str, float], QIcon] = {}


def mark_icon(mark: str) -> QIcon:
    """The shape of a severity as an icon."""
    ratio = QGuiApplication.primaryScreen().devicePixelRatio() if QGuiApplication.primaryScreen() else 1.0
    if (mark, ratio) not in _ICONS:
        _ICONS[mark, ratio] = QIcon(shapes_pixmap(verdict(mark), QSize(16, 16), ratio))
    return _ICONS[mark, ratio]


def shapes_pixmap(shapes: Shapes, size: QSize, ratio: float = 1.0) -> QPixmap:
    """Shapes round (0, 0) in the middle of a transparent pixmap."""
    pixmap = QPixmap(size * ratio)
    pixmap.setDevicePixelRatio(ratio)
    pixmap.fill(QColor(0, 0, 0, 0))
    painter = QPainter(pixmap)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    painter.translate(size.width() / 2, size.height() / 2)
    paint(painter, shapes, SHEET)
    painter.end()
    return pixmap
