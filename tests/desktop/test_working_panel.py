"""The main figures of the standing fault, as the study gives them."""

import pytest
from pytestqt.qtbot import QtBot

from onelinefault.desktop.working_panel import WorkingPanel, fault_lines, impedance_text
from onelinefault.drawing.painter import load_fonts
from onelinefault.engine.case import Case
from onelinefault.model.editing import set_text
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.figures import current_text
from onelinefault.studies import study_of
from tests.desktop.windows import pump_session, solver_for, wait_solved
from tests.drawing.plants import pump_house


def test_impedances_are_written_as_people_do() -> None:
    assert impedance_text(0.0041 + 0.0804j) == "0.004100 + j0.08040 Ω"
    assert impedance_text(1 - 0.5j) == "1.000 − j0.5000 Ω"
    assert impedance_text(None) == "open"


def test_the_lines_hold_what_the_study_found() -> None:
    plant, ids = pump_house()
    result = study_of(plant, Case()).fault(Fault(Place(ids["board"]), FaultKind.LINE_TO_EARTH, "b"))
    lines = {line.name: line.value for line in fault_lines(plant, result)}
    assert lines["I″ a"] == lines["I″ c"] == "0"
    assert lines["I″ b"].startswith(current_text(result.ik_ka))
    assert lines["3I0"].startswith(current_text(abs(result.residual_ka)))
    assert lines["Z0"] == impedance_text(result.z_ohm[2])
    assert lines["Peak"] == current_text(result.peak_ka)
    assert lines["Fault level"].endswith("MVA")


def test_shares_stand_by_size_and_name_their_sources() -> None:
    plant, ids = pump_house()
    result = study_of(plant, Case()).fault(Fault(Place(ids["board"])))
    lines = fault_lines(plant, result)
    start = next(i for i, line in enumerate(lines) if line.name == "Where it comes from")
    names = [line.name for line in lines[start + 1 :]]
    assert names == ["Grid", "G1", "Pumps"]
    shares = [float(line.value.split(" %")[0]) for line in lines[start + 1 :]]
    assert shares == sorted(shares, reverse=True)
    assert sum(shares) == pytest.approx(100, abs=0.2)  # each is rounded to a tenth


def test_the_panel_invites_shows_greys_and_clears(qtbot: QtBot) -> None:
    load_fonts()
    session, ids = pump_session()
    titles: list[str] = []
    with solver_for(session) as solver:
        panel = WorkingPanel(session, solver)
        qtbot.addWidget(panel)
        panel.titled.connect(lambda heading, aside: titles.append(aside))
        panel.refresh()
        assert "Click a bus" in panel.note.text()
        session.set_fault(Fault(Place(ids["board"])))
        assert panel.lines == []
        wait_solved(qtbot, solver)
        assert panel.lines and "Board A" in titles[-1]
        session.apply(set_text(session.plant, [ids["t1"]], "impedance", "12 %"))
        assert panel.lines and "anew" in panel.note.text()
        old = panel.lines
        wait_solved(qtbot, solver)
        assert panel.lines != old
        session.set_fault(None)
        assert panel.lines == []


def test_trouble_is_told_in_place_of_figures(qtbot: QtBot) -> None:
    load_fonts()
    session, ids = pump_session()
    with solver_for(session) as solver:
        panel = WorkingPanel(session, solver)
        qtbot.addWidget(panel)
        session.set_fault(Fault(Place(ids["board"], "no such terminal")))
        wait_solved(qtbot, solver)
        assert solver.answer is not None
        assert panel.note.text() == solver.answer.trouble != ""
