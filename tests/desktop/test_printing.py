"""Sheets on paper: right number of pages, right size, real text, the figures that are on the screen."""

from collections.abc import Iterator
from pathlib import Path

import pytest
from pypdf import PdfReader
from PySide6.QtCore import QRectF
from PySide6.QtPrintSupport import QPrinter, QPrintPreviewDialog, QPrintPreviewWidget
from PySide6.QtWidgets import QFileDialog, QMessageBox
from pytestqt.qtbot import QtBot

from onelinefault.desktop.main_window import MainWindow
from onelinefault.desktop.printing import page_parts
from onelinefault.desktop.settings import FITTED, TRUE_SCALE
from onelinefault.model.editing import add_sheet, set_paper, set_text
from onelinefault.model.fault import Fault, Place
from onelinefault.model.figures import current_text
from tests.desktop.windows import open_window, wait_solved

MM = 25.4 / 72  # a PDF point


@pytest.fixture
def window(qtbot: QtBot, tmp_path: Path) -> Iterator[MainWindow]:
    with open_window(qtbot, tmp_path) as window:
        yield window


def fault_board(window: MainWindow, qtbot: QtBot) -> float:
    window.session.set_fault(Fault(Place(window.session.plant.named("Board A")[0].id)))
    wait_solved(qtbot, window.solver)
    assert window.solver.answer is not None and window.solver.answer.result is not None
    return window.solver.answer.result.ik_ka


def printed(window: MainWindow, path: Path) -> PdfReader:
    printer = window.printing.printer()
    printer.setOutputFormat(QPrinter.OutputFormat.PdfFormat)
    printer.setOutputFileName(str(path))
    window.printing.paint_pages(printer)
    return PdfReader(path)


def sizes_mm(pdf: PdfReader) -> list[tuple[int, int]]:
    return [(round(float(p.mediabox.width) * MM), round(float(p.mediabox.height) * MM)) for p in pdf.pages]


def words(pdf: PdfReader, page: int = 0) -> str:
    return " ".join(pdf.pages[page].extract_text().split())


def test_a_print_has_the_figures_the_title_block_and_the_caution(
    window: MainWindow, qtbot: QtBot, tmp_path: Path
) -> None:
    ka = fault_board(window, qtbot)
    pdf = printed(window, tmp_path / "out.pdf")
    text = words(pdf)
    assert current_text(ka) in text
    assert "three-phase fault, Board A" in text
    assert "qualified" in text
    assert sizes_mm(pdf) == [(297, 210)]  # ISO 216: A4 lying


def test_each_sheet_is_a_page_of_its_own_size(window: MainWindow, tmp_path: Path) -> None:
    session = window.session
    session.apply(add_sheet(session.plant, "Boards"))
    session.apply(set_paper(session.plant, session.plant.sheets[1].id, "A3", upright=True))
    session.apply(add_sheet(session.plant, "Drives", "ANSI B", False))
    pdf = printed(window, tmp_path / "out.pdf")
    assert sizes_mm(pdf) == [(297, 210), (297, 420), (432, 279)]  # ISO 216; ANSI/ASME Y14.1: 17 x 11 in
    assert "Boards" in words(pdf, 1)


def test_a_large_sheet_is_fitted_or_tiled(window: MainWindow, tmp_path: Path) -> None:
    session = window.session
    session.apply(set_paper(session.plant, session.plant.sheets[0].id, "A2"))
    window.settings.print_paper = "A4"
    fitted = printed(window, tmp_path / "fit.pdf")
    assert sizes_mm(fitted) == [(297, 210)]
    window.settings.print_scale = TRUE_SCALE
    tiled = printed(window, tmp_path / "true.pdf")
    assert sizes_mm(tiled) == [(297, 210)] * 4  # ISO 216: A2 is four A4
    window.settings.print_scale = FITTED


def test_the_pieces_of_a_sheet_cover_it_once() -> None:
    assert page_parts((297, 210), (297, 210), True) == [QRectF(0, 0, 297, 210)]
    assert page_parts((594, 420), (297, 210), False) == [QRectF(0, 0, 594, 420)]
    parts = page_parts((594, 420), (279.4, 215.9), True)
    assert len(parts) == 6  # 3 across, 2 down
    assert sum(
        (part & QRectF(0, 0, 594, 420)).width() * (part & QRectF(0, 0, 594, 420)).height() for part in parts
    ) == (pytest.approx(594 * 420))


def test_old_figures_are_marked_on_paper(window: MainWindow, qtbot: QtBot, tmp_path: Path) -> None:
    fault_board(window, qtbot)
    t1 = window.session.plant.named("T1")[0].id
    window.session.apply(set_text(window.session.plant, [t1], "impedance", "12 %"))
    assert window.solver.stale
    assert "STALE" in words(printed(window, tmp_path / "stale.pdf"))
    wait_solved(qtbot, window.solver)
    assert "STALE" not in words(printed(window, tmp_path / "fresh.pdf"))


def test_the_preview_paints_all_pages(window: MainWindow, qtbot: QtBot) -> None:
    session = window.session
    session.apply(add_sheet(session.plant, "Boards", "A3", True))
    window.printing.print_preview()
    dialog = window.printing.dialog
    assert isinstance(dialog, QPrintPreviewDialog)
    pages = dialog.findChildren(QPrintPreviewWidget)[0].pageCount
    qtbot.waitUntil(lambda: pages() == 2, timeout=5000)
    dialog.close()


def test_drawings_are_exported_in_three_formats(window: MainWindow, qtbot: QtBot, tmp_path: Path) -> None:
    ka = fault_board(window, qtbot)
    said: list[str] = []
    window.session.said.connect(said.append)
    for ending in ("pdf", "svg", "png"):
        window.printing.write_drawing(str(tmp_path / f"plant.{ending}"))
        assert (tmp_path / f"plant.{ending}").stat().st_size > 1000
        assert said[-1] == f"Wrote plant.{ending}"
    assert current_text(ka) in words(PdfReader(tmp_path / "plant.pdf"))
    assert current_text(ka) in (tmp_path / "plant.svg").read_text(encoding="utf-8")


def test_an_impossible_file_is_told(window: MainWindow, tmp_path: Path) -> None:
    window.printing.write_drawing(str(tmp_path / "nowhere" / "plant.pdf"))
    assert isinstance(window.printing.dialog, QMessageBox)
    assert "cannot be written" in window.printing.dialog.text()


def test_the_bus_table_is_exported_once_it_is_fresh(window: MainWindow, qtbot: QtBot, tmp_path: Path) -> None:
    window.printing.write_table(str(tmp_path / "early.csv"))
    assert not (tmp_path / "early.csv").exists()
    assert isinstance(window.printing.dialog, QMessageBox)
    fault_board(window, qtbot)
    for ending in ("csv", "json", "txt"):
        window.printing.write_table(str(tmp_path / f"buses.{ending}"))
        text = (tmp_path / f"buses.{ending}").read_text(encoding="utf-8")
        assert "Board A" in text and "qualified" in text


def test_export_dialogs_wait_and_name_the_plant(window: MainWindow) -> None:
    for command, ending in ((window.printing.export_drawing, ".pdf"), (window.printing.export_table, ".csv")):
        command()
        dialog = window.printing.dialog
        assert isinstance(dialog, QFileDialog)
        assert dialog.selectedFiles()[0].endswith(ending)
        dialog.reject()
