"""Tables of the drawer as Qt models: sorted, filtered, copied."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, Final

from PySide6.QtCore import QAbstractTableModel, QModelIndex, QPersistentModelIndex, QSize, QSortFilterProxyModel, Qt
from PySide6.QtGui import QColor, QFont, QGuiApplication, QIcon, QPainter, QPalette, QPixmap

from onelinefault.desktop.drawer_rows import Cell, Head, Rows, TableRow
from onelinefault.drawing.painter import paint
from onelinefault.drawing.palette import SHEET
from onelinefault.drawing.shapes import Shapes
from onelinefault.drawing.symbols_marks import verdict
from onelinefault.model.caution import CAUTION_SHORT

Index = QModelIndex | QPersistentModelIndex
SORT_ROLE: Final = int(Qt.ItemDataRole.UserRole)
PARTS_ROLE: Final = int(Qt.ItemDataRole.UserRole) + 1
_ROLE = Qt.ItemDataRole
_ROLES: Final = (
    _ROLE.DisplayRole, SORT_ROLE, PARTS_ROLE, _ROLE.DecorationRole, _ROLE.ForegroundRole, _ROLE.FontRole,
    _ROLE.ToolTipRole, _ROLE.AccessibleTextRole,
)  # fmt: skip


class TableModel(QAbstractTableModel):
    """A table of rows. mark_column: where the severity is shown as a shape instead of a word.

    row_of: the first row that speaks of a part, by its id.
    """

    def __init__(self, heads: Sequence[Head], mark_column: int = -1) -> None:
        super().__init__()
        self.heads = tuple(heads)
        self.rows = Rows()
        self.row_of: dict[str, int] = {}
        self.stale = False
        self._mark_column = mark_column

    def show_rows(self, rows: Rows, heads: Sequence[Head] | None = None) -> None:
        """Show other rows; rows that only changed their figures stay where they are."""
        self.stale = False
        if heads is not None and tuple(heads) != self.heads:
            self.heads = tuple(heads)
            self.headerDataChanged.emit(Qt.Orientation.Horizontal, 0, len(self.heads) - 1)
        if rows.parts == self.rows.parts:
            self.rows = rows
            self._renew()
            return
        self.beginResetModel()
        self.rows = rows
        self.row_of = {part: row for row in reversed(range(len(rows))) for part in rows.parts[row]}
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
        if role not in _ROLES:
            return None
        if role == PARTS_ROLE:
            return self.rows.parts[index.row()]
        row, column = self.rows[index.row()], index.column()
        cell = row.cells[column]
        if role == Qt.ItemDataRole.DisplayRole:
            return "" if column == self._mark_column else cell.text
        if role == SORT_ROLE:
            return cell.order
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
