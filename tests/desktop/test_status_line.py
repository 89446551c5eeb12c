"""The status line: the last sentence on the left, how the figures came about on the right."""

from pytestqt.qtbot import QtBot

from onelinefault.desktop.status_line import StatusLine
from onelinefault.model.editing import set_document, set_text
from tests.desktop.windows import pump_session, solver_for, wait_solved


def test_it_says_what_was_done_and_how_it_was_solved(qtbot: QtBot) -> None:
    session, ids = pump_session()
    with solver_for(session) as solver:
        line = StatusLine(session, solver)
        qtbot.addWidget(line)
        assert "shelf" in line.said.text()
        assert "qualified engineer" in line.solved.text()  # the caution is always there
        solver.refresh()
        wait_solved(qtbot, solver)
        assert solver.answer is not None
        assert f"{solver.answer.nodes} nodes" in line.solved.text()
        assert "ms" in line.solved.text() and "base 100 MVA" in line.solved.text()
        session.apply(set_document(session.plant, "base_power", "20 MVA"))
        assert "base 20 MVA" in line.solved.text() and "computing" in line.solved.text()
        assert line.said.text() == "Set Base power to 20 MVA"
        session.apply(set_text(session.plant, [ids["t1"]], "rated_power", ""))
        wait_solved(qtbot, solver)
        assert "error" in line.solved.text()
