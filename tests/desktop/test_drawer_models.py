"""Tables of the drawer: right figures in right places, sorted as numbers, copied with headings and the caution."""

from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from onelinefault.desktop.drawer_models import SORT_ROLE, SortedTable, TableModel, mark_icon
from onelinefault.desktop.drawer_rows import FINDING_HEADS, bus_heads, bus_rows, finding_rows, number
from onelinefault.engine.results import BusRow
from onelinefault.model.caution import CAUTION_SHORT
from onelinefault.model.fault import FaultKind
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.plant import Plant


def row(part: str, name: str, kind: FaultKind, ka: float, x_over_r: float | None = 5.0) -> BusRow:
    return BusRow(
        name, part, 11.0, kind.value, ka, (ka, ka, ka), (0, 0, 0), 0.0, x_over_r, 19.05 * ka, 2.2 * ka, None, None, None
    )


ROWS = [
    row("p1", "Bus A", FaultKind.THREE_PHASE, 9.5),
    row("p1", "Bus A", FaultKind.LINE_TO_EARTH, 0.0421, None),
    row("p2", "Bus B", FaultKind.THREE_PHASE, 12.936),
]


def shown(table: SortedTable) -> list[list[str]]:
    return [
        [table.index(r, c).data() for c in range(table.columnCount())] for r in range(table.rowCount())
    ]  # fmt: skip


def test_figures_sort_as_numbers_not_as_words(qtbot: QtBot) -> None:
    table = SortedTable(TableModel(bus_heads(FaultKind.THREE_PHASE)))
    table.table.show_rows(bus_rows(ROWS, None, FaultKind.THREE_PHASE))
    table.sort(2, Qt.SortOrder.DescendingOrder)
    assert [line[0] for line in shown(table)] == ["Bus B", "Bus A"]  # 12.9 before 9.50
    table.sort(5, Qt.SortOrder.DescendingOrder)
    assert [line[0] for line in shown(table)] == ["Bus A", "Bus B"]  # no figure comes last
    assert number(None).order < number(-1e9).order
    assert table.index(0, 2).data(SORT_ROLE) == 9.5


def test_the_filter_line_thins_out(qtbot: QtBot) -> None:
    table = SortedTable(TableModel(bus_heads(FaultKind.THREE_PHASE)))
    table.table.show_rows(bus_rows(ROWS, None, FaultKind.THREE_PHASE))
    table.setFilterFixedString("bus b")
    assert [line[0] for line in shown(table)] == ["Bus B"]
    assert table.row_of("p2") == 0
    assert table.row_of("p1") == -1


def test_a_copy_has_headings_figures_and_the_caution(qtbot: QtBot) -> None:
    table = SortedTable(TableModel(bus_heads(FaultKind.THREE_PHASE)))
    table.table.show_rows(bus_rows(ROWS, None, FaultKind.THREE_PHASE))
    lines = table.as_text().splitlines()
    assert lines[0].split("\t")[:3] == ["Bus", "nominal kV", "I″ 3 ph kA"]
    assert lines[2].split("\t")[2] == "12.9"
    assert CAUTION_SHORT in lines
    table.table.show_stale()
    assert any(line.startswith("Stale") for line in table.as_text().splitlines())


def test_stale_figures_are_greyed(qtbot: QtBot) -> None:
    model = TableModel(bus_heads(FaultKind.THREE_PHASE))
    model.show_rows(bus_rows(ROWS, None, FaultKind.THREE_PHASE))
    role = Qt.ItemDataRole.ForegroundRole
    assert model.data(model.index(0, 2), role) is None
    model.show_stale()
    assert model.data(model.index(0, 2), role) is not None
    model.show_rows(bus_rows(ROWS, None, FaultKind.THREE_PHASE))
    assert model.data(model.index(0, 2), role) is None


def test_rows_that_only_change_figures_are_not_reset(qtbot: QtBot) -> None:
    model = TableModel(bus_heads(FaultKind.THREE_PHASE))
    model.show_rows(bus_rows(ROWS, None, FaultKind.THREE_PHASE))
    resets: list[None] = []
    model.modelReset.connect(lambda: resets.append(None))
    model.show_rows(bus_rows([*ROWS[:2], row("p2", "Bus B", FaultKind.THREE_PHASE, 13.0)], None, FaultKind.THREE_PHASE))
    assert resets == []
    assert model.rows[1].cells[2].text == "13.0"


def test_findings_stand_in_order_of_severity_with_their_shapes(qtbot: QtBot) -> None:
    findings = [
        Finding(Severity.HINT, "typical", "X/R assumed", "Enter it.", ("p1",)),
        Finding(Severity.ERROR, "missing", "no rated power", "Enter it.", ("p2",)),
        Finding(Severity.WARNING, "odd", "looks odd", "Check it."),
    ]
    rows = finding_rows(findings, Plant())
    assert [r.cells[1].text for r in rows] == ["no rated power", "looks odd", "X/R assumed"]
    assert [r.mark for r in rows] == ["exceeded", "near", "holds"]
    assert rows[0].parts == ("p2",)
    model = TableModel(FINDING_HEADS, mark_column=0)
    model.show_rows(rows)
    pictures = [mark_icon(r.mark).pixmap(16, 16).toImage() for r in rows]
    assert pictures[0] != pictures[1] != pictures[2] != pictures[0]
    assert model.data(model.index(0, 0)) == ""  # the shape stands for the word ...
    assert model.data(model.index(0, 0), Qt.ItemDataRole.AccessibleTextRole) == "error"  # ... which is still told
