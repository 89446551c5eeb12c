"""Page setup changes nothing before OK, and the sheet's paper is one step."""

from pathlib import Path

from pytestqt.qtbot import QtBot

from onelinefault.desktop.page_setup import PageSetup, paper_words
from onelinefault.desktop.settings import OWN_PAPER, TRUE_SCALE
from onelinefault.model.editing import add_sheet
from onelinefault.model.plant import PAPER_MM
from tests.desktop.windows import pump_session, settings_in


def test_papers_of_both_standards_are_offered_with_their_size(qtbot: QtBot, tmp_path: Path) -> None:
    session, _ = pump_session()
    setup = PageSetup(session, settings_in(tmp_path))
    qtbot.addWidget(setup)
    offered = [setup.paper.itemData(i) for i in range(setup.paper.count())]
    assert offered == list(PAPER_MM)
    assert paper_words("ANSI B") == "ANSI B, 431.8 × 279.4 mm"
    assert setup.paper.currentData() == session.plant.sheets[0].paper
    assert setup.printer.currentData() == OWN_PAPER


def test_ok_takes_everything_and_undo_brings_the_paper_back(qtbot: QtBot, tmp_path: Path) -> None:
    session, _ = pump_session()
    settings = settings_in(tmp_path)
    session.apply(add_sheet(session.plant))
    before = session.plant
    setup = PageSetup(session, settings)
    qtbot.addWidget(setup)
    setup.paper.setCurrentIndex(setup.paper.findData("A1"))
    setup.upright.setChecked(True)
    setup.all_sheets.setChecked(True)
    setup.printer.setCurrentIndex(setup.printer.findData("A3"))
    setup.scale.setCurrentIndex(setup.scale.findData(TRUE_SCALE))
    assert session.plant is before
    setup.accept()
    assert [(sheet.paper, sheet.upright) for sheet in session.plant.sheets] == [("A1", True)] * 2
    assert (settings.print_paper, settings.print_scale) == ("A3", TRUE_SCALE)
    session.undo()
    assert session.plant is before


def test_cancel_takes_nothing_and_one_sheet_can_be_changed_alone(qtbot: QtBot, tmp_path: Path) -> None:
    session, _ = pump_session()
    session.apply(add_sheet(session.plant))
    before = session.plant
    for finish in ("reject", "accept"):
        setup = PageSetup(session, settings_in(tmp_path))
        qtbot.addWidget(setup)
        setup.paper.setCurrentIndex(setup.paper.findData("A2"))
        getattr(setup, finish)()
        if finish == "reject":
            assert session.plant is before
    assert [sheet.paper for sheet in session.plant.sheets] == ["A2", before.sheets[1].paper]


def test_ok_without_a_change_is_no_step(qtbot: QtBot, tmp_path: Path) -> None:
    session, _ = pump_session()
    setup = PageSetup(session, settings_in(tmp_path))
    qtbot.addWidget(setup)
    setup.accept()
    assert session.history.done == ()
