"""Rows of the drawer's tables as values: right figures in right places, made only when they are looked at."""

import pytest

from onelinefault.desktop.drawer_rows import Rows, TableRow, bus_heads, bus_rows, finding_rows, number, words
from onelinefault.engine.case import Case
from onelinefault.engine.results import BusRow
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.plant import Plant
from onelinefault.studies import study_of
from tests.drawing.plants import pump_house


def row(part: str, name: str, kind: FaultKind, ka: float, x_over_r: float | None = 5.0) -> BusRow:
    return BusRow(
        name, part, 11.0, kind.value, ka, (ka, ka, ka), (0, 0, 0), 0.0, x_over_r, 19.05 * ka, 2.2 * ka, None, None, None
    )


ROWS = [
    row("p1", "Bus A", FaultKind.THREE_PHASE, 9.5),
    row("p1", "Bus A", FaultKind.LINE_TO_EARTH, 0.0421, None),
    row("p2", "Bus B", FaultKind.THREE_PHASE, 12.936),
]


def test_one_row_a_bus_with_each_kind_in_its_column() -> None:
    rows = bus_rows(ROWS, None, FaultKind.THREE_PHASE)
    assert [r.parts for r in rows] == [("p1",), ("p2",)]
    texts = [[cell.text for cell in r.cells] for r in rows]
    # Bus, kV, 3 ph, 2 ph, 2 ph-E, 1 ph-E, peak, X/R, level, left: 3 digits each; missing kinds are dashes
    assert texts[0] == ["Bus A", "11", "9.50", "–", "–", "0.0421", "20.9", "5.00", "181", ""]
    assert texts[1] == ["Bus B", "11", "12.9", "–", "–", "–", "28.5", "5.00", "246", ""]


def test_peak_and_ratio_are_of_the_kind_chosen() -> None:
    cells = bus_rows(ROWS, None, FaultKind.LINE_TO_EARTH)[0].cells
    assert [cell.text for cell in cells[6:8]] == ["0.0926", "–"]
    heads = bus_heads(FaultKind.LINE_TO_EARTH)
    assert (heads[6].short, heads[7].short) == ("peak 1 ph–E", "X/R 1 ph–E")
    assert len(heads) == len(cells)


def test_the_table_of_a_real_plant_shows_the_studys_own_figures() -> None:
    plant, ids = pump_house()
    study = study_of(plant, Case())
    result = study.fault(Fault(Place(ids["board"])))
    found = {r.parts[0]: r for r in bus_rows(study.all_buses(), result, FaultKind.THREE_PHASE)}
    assert found.keys() == {ids["intake"], ids["board"]}
    assert found[ids["board"]].cells[2].order == pytest.approx(result.ik_ka)
    assert found[ids["board"]].cells[-1].order == pytest.approx(0, abs=1e-9)  # a bolted fault leaves no voltage
    assert 0 < float(found[ids["intake"]].cells[-1].order) < 100


def test_findings_stand_in_order_of_severity_and_keep_their_order_otherwise() -> None:
    findings = [
        Finding(Severity.HINT, "typical", "X/R assumed", "Enter it.", ("p1",)),
        Finding(Severity.ERROR, "missing", "no rated power", "Enter it.", ("p2",)),
        Finding(Severity.HINT, "typical", "impedance assumed", "Enter it."),
    ]
    rows = finding_rows(findings, Plant())
    assert [row.cells[1].text for row in rows] == ["no rated power", "X/R assumed", "impedance assumed"]
    assert rows.parts == [("p2",), ("p1",), ()]


def test_a_row_is_made_once_and_only_when_looked_at() -> None:
    made: list[int] = []

    def make(index: int) -> TableRow:
        made.append(index)
        return TableRow((words(str(index)), number(float(index))), (f"p{index}",))

    rows = Rows([(f"p{i}",) for i in range(1000)], make)
    assert len(rows) == 1000 and made == []
    assert rows[7].cells[0].text == rows[7].cells[0].text == "7"
    assert made == [7]
    assert [row.parts for row in rows[2:4]] == [("p2",), ("p3",)]
    with pytest.raises(IndexError):
        rows[1000]
    assert len(Rows()) == 0
