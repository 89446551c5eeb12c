"""The drawer: opens by itself only for an error, follows the sheet's selection and leads it."""

from collections.abc import Iterator
from dataclasses import dataclass

import pytest
from PySide6.QtGui import QGuiApplication
from pytestqt.qtbot import QtBot

from onelinefault.desktop.drawer import BUSES, FINDINGS, Drawer
from onelinefault.desktop.session import Session
from onelinefault.desktop.solver import Solver
from onelinefault.drawing.painter import load_fonts
from onelinefault.model.caution import CAUTION_SHORT
from onelinefault.model.editing import place, set_text
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.desktop.windows import pump_session, solver_for, wait_solved


@dataclass
class Bench:
    session: Session
    ids: dict[str, str]
    solver: Solver
    drawer: Drawer


@pytest.fixture
def bench(qtbot: QtBot) -> Iterator[Bench]:
    load_fonts()
    session, ids = pump_session()
    with solver_for(session) as solver:
        drawer = Drawer(session, solver)
        qtbot.addWidget(drawer)
        qtbot.addWidget(drawer.strip)
        drawer.resize(900, 200)
        solver.refresh()
        wait_solved(qtbot, solver)
        yield Bench(session, ids, solver, drawer)


def test_it_is_closed_at_first_and_counts_what_it_holds(bench: Bench) -> None:
    assert not bench.drawer.is_open
    assert bench.drawer.strip.tabs.tabText(BUSES) == "Buses 2"
    assert bench.drawer.strip.tabs.tabText(FINDINGS).startswith("Findings")


def test_a_fault_alone_does_not_open_it_an_error_does(bench: Bench, qtbot: QtBot) -> None:
    bench.session.set_fault(Fault(Place(bench.ids["board"])))
    wait_solved(qtbot, bench.solver)
    assert not bench.drawer.is_open
    bench.session.apply(set_text(bench.session.plant, [bench.ids["t1"]], "rated_power", ""))
    wait_solved(qtbot, bench.solver)
    assert bench.drawer.is_open
    assert bench.drawer.table is bench.drawer.findings


def test_a_closed_drawer_is_filled_when_it_is_opened(bench: Bench) -> None:
    assert bench.drawer.buses.sorted.rowCount() == 0
    bench.drawer.set_open(True)
    assert bench.drawer.buses.sorted.rowCount() == 2


def test_a_part_just_placed_is_no_reason_to_open(bench: Bench, qtbot: QtBot) -> None:
    bench.session.set_fault(Fault(Place(bench.ids["board"])))
    wait_solved(qtbot, bench.solver)
    bench.session.apply(place(bench.session.plant, "transformer", "s1", 80, 20))
    wait_solved(qtbot, bench.solver)
    assert bench.solver.answer is not None
    assert any(finding.severity == "error" for finding in bench.solver.answer.findings)
    assert not bench.drawer.is_open


def test_without_a_fault_errors_only_count(bench: Bench, qtbot: QtBot) -> None:
    bench.session.apply(set_text(bench.session.plant, [bench.ids["t1"]], "rated_power", ""))
    wait_solved(qtbot, bench.solver)
    assert not bench.drawer.is_open


def test_old_figures_are_greyed_until_new_ones_come(bench: Bench, qtbot: QtBot) -> None:
    bench.drawer.set_open(True)
    bench.session.apply(set_text(bench.session.plant, [bench.ids["t1"]], "impedance", "12 %"))
    assert bench.drawer.buses.sorted.table.stale
    wait_solved(qtbot, bench.solver)
    assert not bench.drawer.buses.sorted.table.stale


def test_sheet_and_table_follow_each_other_without_echo(bench: Bench) -> None:
    bench.drawer.set_open(True)
    picked: list[tuple[str, ...]] = []
    bench.drawer.picked.connect(picked.append)
    table = bench.drawer.buses
    bench.session.select(frozenset({bench.ids["board"]}))
    rows = [index.row() for index in table.selectionModel().selectedRows()]
    assert [table.sorted.parts_at(row) for row in rows] == [(bench.ids["board"],)]
    assert picked == []
    table.selectRow(table.sorted.row_of(bench.ids["intake"]))
    assert picked == [(bench.ids["intake"],)]
    bench.session.select(frozenset())
    assert table.selectionModel().selectedRows() == []


def test_headings_follow_the_kind_and_left_voltage_a_fault(bench: Bench, qtbot: QtBot) -> None:
    bench.drawer.set_open(True)
    model = bench.drawer.buses.sorted.table
    bench.session.choose(kind=FaultKind.LINE_TO_EARTH)
    bench.session.set_fault(Fault(Place(bench.ids["board"]), FaultKind.LINE_TO_EARTH))
    wait_solved(qtbot, bench.solver)
    assert model.heads[6].short == "peak 1 ph–E"
    assert all(row.cells[-1].text for row in model.rows)
    bench.session.set_fault(None)
    wait_solved(qtbot, bench.solver)
    assert not any(row.cells[-1].text for row in model.rows)


def test_copy_puts_the_shown_table_on_the_clipboard(bench: Bench) -> None:
    bench.drawer.open_tab(BUSES)
    bench.drawer.strip.filter.setText("board")
    bench.drawer.strip.copy.click()
    text = QGuiApplication.clipboard().text()
    assert "Board A" in text and "Intake" not in text
    assert CAUTION_SHORT in text


def test_open_close_and_tabs(bench: Bench) -> None:
    said: list[bool] = []
    bench.drawer.opened.connect(said.append)
    bench.drawer.toggle()
    bench.drawer.strip.tabs.tabBarClicked.emit(FINDINGS)
    assert bench.drawer.table is bench.drawer.findings
    bench.drawer.strip.fold.click()
    assert said == [True, False]
