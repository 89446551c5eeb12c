"""The annotated sheet as a file: the expected current can be found in the PDF by its words."""

from pathlib import Path

import pypdf
import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.study import Study
from onelinefault.errors import OutputError
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.figures import current_text
from onelinefault.report.drawing import write_drawing
from tests.drawing.plants import pump_house

PLANT, IDS = pump_house()


@pytest.mark.parametrize("kind", FaultKind)
def test_the_pdf_holds_current_fault_and_caution(kind: FaultKind, tmp_path: Path, qapp: object) -> None:
    study = Study(PLANT, Case())
    result = study.fault(Fault(Place(IDS["board"]), kind))
    write_drawing(PLANT, study.network, result, tmp_path / "out.pdf")
    words = " ".join(pypdf.PdfReader(tmp_path / "out.pdf").pages[0].extract_text().split())
    assert current_text(result.ik_ka) in words
    assert "Board A" in words and "classical method" in words
    assert "lock-out" in words


def test_a_plain_diagram_has_no_figures(tmp_path: Path, qapp: object) -> None:
    write_drawing(PLANT, Study(PLANT, Case()).network, None, tmp_path / "plain.svg")
    text = (tmp_path / "plain.svg").read_text(encoding="utf-8")
    assert "one-line diagram" in text and "peak" not in text


def test_a_sheet_that_does_not_exist_is_refused(tmp_path: Path, qapp: object) -> None:
    with pytest.raises(OutputError, match="no sheet s9"):
        write_drawing(PLANT, Study(PLANT, Case()).network, None, tmp_path / "x.pdf", sheet_ids=("s9",))
