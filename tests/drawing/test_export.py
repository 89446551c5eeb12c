"""Files: vector, searchable, of the right size; a failure leaves an older file whole."""

from pathlib import Path

import pypdf
import pytest
from PySide6.QtGui import QImage

from onelinefault.drawing.export import DrawnSheet, write_sheets
from onelinefault.drawing.page import Stamp, page_shapes
from onelinefault.drawing.sheet import sheet_picture
from onelinefault.errors import OutputError
from onelinefault.model.plant import Sheet
from tests.drawing.plants import pump_house

PLANT, _ = pump_house()


@pytest.fixture
def drawn(qapp: object) -> DrawnSheet:
    sheet = PLANT.sheets[0]
    shapes = (*page_shapes(PLANT, sheet, Stamp()), *sheet_picture(PLANT, "s1", {}).shapes())
    return DrawnSheet(shapes, *sheet.size_mm)


def test_a_pdf_has_the_paper_size_and_searchable_words(drawn: DrawnSheet, tmp_path: Path) -> None:
    file = tmp_path / "sheet.pdf"
    write_sheets([drawn, drawn], file, "Pump house")
    reader = pypdf.PdfReader(file)
    assert len(reader.pages) == 2
    box = reader.pages[0].mediabox
    # ISO 216: A4 is 297 mm x 210 mm; a point is 1/72 inch
    assert float(box.width) == pytest.approx(297 / 25.4 * 72, abs=1.0)
    assert float(box.height) == pytest.approx(210 / 25.4 * 72, abs=1.0)
    words = " ".join(reader.pages[0].extract_text().split())
    assert "Board A" in words and "lock-out" in words
    assert "/Image" not in str(reader.pages[0].get("/Resources"))


def test_a_sheet_can_be_fitted_to_another_paper(drawn: DrawnSheet, tmp_path: Path) -> None:
    file = tmp_path / "fit.pdf"
    write_sheets([drawn], file, paper_mm=(431.8, 279.4))
    box = pypdf.PdfReader(file).pages[0].mediabox
    # ANSI/ASME Y14.1: size B is 17 in x 11 in
    assert float(box.width) == pytest.approx(17 * 72, abs=1.0)


def test_an_svg_keeps_words_as_words(drawn: DrawnSheet, tmp_path: Path) -> None:
    write_sheets([drawn], tmp_path / "sheet.svg")
    text = (tmp_path / "sheet.svg").read_text(encoding="utf-8")
    assert ">Board A<" in text and "DejaVu Sans" in text


def test_pictures_of_several_sheets_get_numbers(drawn: DrawnSheet, tmp_path: Path) -> None:
    written = write_sheets([drawn, drawn], tmp_path / "sheet.png")
    assert [p.name for p in written] == ["sheet.png", "sheet-2.png"]
    image = QImage(str(written[0]))
    assert image.width() == round(297 / 25.4 * 150)


def test_an_unknown_ending_is_refused(drawn: DrawnSheet, tmp_path: Path) -> None:
    with pytest.raises(OutputError, match=r"\.pdf, \.svg or \.png"):
        write_sheets([drawn], tmp_path / "sheet.docx")


def test_a_folder_that_is_not_there_is_said_and_leaves_nothing(drawn: DrawnSheet, tmp_path: Path) -> None:
    with pytest.raises(OutputError, match="cannot be written"):
        write_sheets([drawn], tmp_path / "missing" / "sheet.pdf")
    assert list(tmp_path.iterdir()) == []


def test_upright_paper(qapp: object, tmp_path: Path) -> None:
    sheet = Sheet("s1", paper="A3", upright=True)
    write_sheets([DrawnSheet(page_shapes(PLANT, PLANT.sheets[0], Stamp()), *sheet.size_mm)], tmp_path / "a3.pdf")
    box = pypdf.PdfReader(tmp_path / "a3.pdf").pages[0].mediabox
    assert float(box.height) == pytest.approx(420 / 25.4 * 72, abs=1.0)
