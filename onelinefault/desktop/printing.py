"""Commands that put sheets on paper or into files. What is printed is what is seen: the same shapes, the same painter.

The print machinery is loaded when it is first asked for, so that it does not slow the start.
"""

from __future__ import annotations

from math import ceil
from pathlib import Path
from typing import TYPE_CHECKING, Final

from PySide6.QtCore import QMarginsF, QObject, QRectF, QSizeF, Qt
from PySide6.QtGui import QPageLayout, QPageSize, QPaintEngine, QPainter
from PySide6.QtWidgets import QDialog, QFileDialog, QMessageBox, QWidget

from onelinefault.desktop.page_setup import PageSetup
from onelinefault.desktop.settings import OWN_PAPER, TRUE_SCALE
from onelinefault.errors import OutputError
from onelinefault.model.plant import PAPER_MM

if TYPE_CHECKING:
    from PySide6.QtPrintSupport import QPrinter

    from onelinefault.desktop.session import Session
    from onelinefault.desktop.settings import Settings
    from onelinefault.desktop.solver import Solver
    from onelinefault.drawing.export import DrawnSheet

_SAME_MM: Final = 0.5
_TABLE_WRITERS: Final = {".csv": "bus_csv", ".json": "bus_json", ".txt": "bus_text"}


class Printing(QObject):
    """Does the commands of their names for one window."""

    def __init__(self, session: Session, solver: Solver, settings: Settings, window: QWidget) -> None:
        super().__init__(window)
        self._session, self._solver, self._settings, self._window = session, solver, settings, window
        self._printer: QPrinter | None = None
        self.dialog: QDialog | None = None

    def page_setup(self) -> None:
        """Paper of the sheet and of the printer."""
        self._open(PageSetup(self._session, self._settings, self._window))

    def print_preview(self) -> None:
        """See the pages before they are printed."""
        from PySide6.QtPrintSupport import QPrintPreviewDialog  # noqa: PLC0415

        dialog = QPrintPreviewDialog(self.printer(), self._window)
        dialog.setWindowTitle(self.tr("Print preview"))
        dialog.resize(1000, 760)
        dialog.paintRequested.connect(self.paint_pages)
        self._open(dialog)

    def print_sheets(self) -> None:
        """Choose a printer and print."""
        from PySide6.QtPrintSupport import QPrintDialog  # noqa: PLC0415

        dialog = QPrintDialog(self.printer(), self._window)
        dialog.accepted.connect(self._print)
        self._open(dialog)

    def export_drawing(self) -> None:
        """Choose a file and write the sheets."""
        filters = self.tr("PDF, all sheets (*.pdf);;SVG, one file a sheet (*.svg);;PNG, one file a sheet (*.png)")
        dialog = self._file_dialog(self.tr("Export the drawing"), filters, ".pdf")
        dialog.fileSelected.connect(self.write_drawing)
        self._open(dialog)

    def export_table(self) -> None:
        """Choose a file and write the bus table."""
        filters = self.tr("CSV for spreadsheets (*.csv);;JSON (*.json);;Plain text (*.txt)")
        dialog = self._file_dialog(self.tr("Export the bus table"), filters, ".csv")
        dialog.fileSelected.connect(self.write_table)
        self._open(dialog)

    # what the commands are made of

    def printer(self) -> QPrinter:
        """The printer with its page set for the first sheet; one for the whole session, so that it is remembered."""
        from PySide6.QtPrintSupport import QPrinter  # noqa: PLC0415

        if self._printer is None:
            self._printer = QPrinter(QPrinter.PrinterMode.HighResolution)
            self._printer.setFullPage(True)
            self._printer.setCreator("OneLineFault")
        self._printer.setDocName(self._session.plant.document.name or "One-line diagram")
        set_paper(self._printer, self.paper_for(*self._session.plant.sheets[0].size_mm))
        return self._printer

    def sheets(self) -> list[DrawnSheet]:
        """All sheets as they are seen now: with the standing fault, greyed if its figures are old."""
        from onelinefault.report.drawing import drawn_sheet  # noqa: PLC0415 - loads numpy
        from onelinefault.report.overlay_data import roles_of  # noqa: PLC0415

        session, answer = self._session, self._solver.answer
        roles = roles_of(answer.network) if answer is not None and answer.network is not None else {}
        result = answer.result if answer is not None and session.fault is not None else None
        if result is not None and result.fault.place.part not in session.plant.parts:
            result = None
        return [
            drawn_sheet(
                session.plant, sheet, roles, result, detail=session.choices.detail,
                arrangement=session.arrangement_name, stale=self._solver.stale,
            )
            for sheet in session.plant.sheets
        ]  # fmt: skip

    def paper_for(self, width_mm: float, height_mm: float) -> tuple[float, float]:
        """The printer's paper for a sheet, turned the way the sheet lies, mm."""
        paper = self._settings.print_paper
        if paper == OWN_PAPER or paper not in PAPER_MM:
            return width_mm, height_mm
        wide, narrow = PAPER_MM[paper]
        return (wide, narrow) if width_mm >= height_mm else (narrow, wide)

    def paint_pages(self, printer: QPrinter) -> None:
        """Paint all sheets on a printer, fitted to its paper or at true scale over several pages."""
        painter = QPainter()
        true_scale = self._settings.print_scale == TRUE_SCALE
        for sheet in self.sheets():
            paper = turn_paper(printer, self.paper_for(sheet.width_mm, sheet.height_mm))
            for part in page_parts((sheet.width_mm, sheet.height_mm), paper, true_scale):
                if painter.isActive():
                    printer.newPage()
                else:
                    painter.begin(printer)
                paint_page(painter, sheet, paper, part, printer.resolution() / 25.4)
        painter.end()

    def write_drawing(self, name: str) -> None:
        """Write the sheets to a file by its ending."""
        from onelinefault.drawing.export import write_sheets  # noqa: PLC0415 - QtSvg comes with it

        path = Path(name)
        paper = None
        if self._settings.print_paper != OWN_PAPER and self._settings.print_scale != TRUE_SCALE:
            paper = self.paper_for(*self._session.plant.sheets[0].size_mm)
        try:
            written = write_sheets(self.sheets(), path, self._session.plant.document.name or path.stem, paper)
        except OutputError as error:
            self._tell(str(error))
            return
        self._wrote(written)

    def write_table(self, name: str) -> None:
        """Write the bus table to a file by its ending."""
        from onelinefault.report import tables  # noqa: PLC0415 - loads numpy

        session, answer = self._session, self._solver.answer
        if answer is None or self._solver.stale:
            self._tell(self.tr("The figures are being computed anew; try again in a moment."))
            return
        path = Path(name)
        writer = getattr(tables, _TABLE_WRITERS.get(path.suffix.lower(), "bus_csv"))
        table = tables.BusTable(
            session.plant, answer.request.case, answer.rows, answer.findings, session.arrangement_name
        )
        try:
            path.write_text(writer(table), encoding="utf-8", newline="")
        except OSError as error:
            self._tell(self.tr("{0} cannot be written: {1}").format(path, error.strerror or error))
            return
        self._wrote([path])

    def _print(self) -> None:
        assert self._printer is not None
        self.paint_pages(self._printer)
        self._session.said.emit(self.tr("Sent to the printer"))

    def _wrote(self, paths: list[Path]) -> None:
        self._settings.remember_folder(paths[0])
        self._session.said.emit(self.tr("Wrote {0}").format(", ".join(path.name for path in paths)))

    def _file_dialog(self, title: str, filters: str, suffix: str) -> QFileDialog:
        folder = str(self._session.path.parent) if self._session.path else self._settings.folder
        dialog = QFileDialog(self._window, title, folder, filters)
        dialog.setAcceptMode(QFileDialog.AcceptMode.AcceptSave)
        dialog.setFileMode(QFileDialog.FileMode.AnyFile)
        dialog.setDefaultSuffix(suffix)
        dialog.filterSelected.connect(self._follow_filter)
        name = self._session.path.name.split(".")[0] if self._session.path else "plant"
        dialog.selectFile(name + suffix)
        return dialog

    def _follow_filter(self, words: str) -> None:
        if isinstance(self.dialog, QFileDialog) and "*." in words:
            self.dialog.setDefaultSuffix(words.rpartition("*")[2].rstrip(")"))

    def _open(self, dialog: QDialog) -> None:
        dialog.finished.connect(dialog.deleteLater)
        self.dialog = dialog
        dialog.open()

    def _tell(self, words: str) -> None:
        box = QMessageBox(self._window)
        box.setWindowTitle(self.tr("OneLineFault"))
        box.setTextFormat(Qt.TextFormat.PlainText)
        box.setText(words)
        self._open(box)


def set_paper(printer: QPrinter, size_mm: tuple[float, float]) -> None:
    """Give a printer a page of this size without margins (the sheet has its own)."""
    upright = QSizeF(min(size_mm), max(size_mm))
    way = QPageLayout.Orientation.Landscape if size_mm[0] > size_mm[1] else QPageLayout.Orientation.Portrait
    page = QPageSize(upright, QPageSize.Unit.Millimeter, "", QPageSize.SizeMatchPolicy.FuzzyMatch)
    printer.setPageLayout(QPageLayout(page, way, QMarginsF(0, 0, 0, 0), QPageLayout.Unit.Millimeter))


def turn_paper(printer: QPrinter, size_mm: tuple[float, float]) -> tuple[float, float]:
    """Ask a printer for a page of this size, and give the size that it really has, mm.

    A printer may not have the paper, and a preview cannot change it from page to page.
    """
    from PySide6.QtPrintSupport import QPrinter  # noqa: PLC0415

    page = _page_mm(printer)
    same = abs(page[0] - size_mm[0]) < _SAME_MM and abs(page[1] - size_mm[1]) < _SAME_MM
    busy = printer.printerState() == QPrinter.PrinterState.Active
    if not same and (not busy or printer.paintEngine().type() == QPaintEngine.Type.Pdf):
        set_paper(printer, size_mm)
    return _page_mm(printer)


def _page_mm(printer: QPrinter) -> tuple[float, float]:
    page = printer.pageLayout().fullRect(QPageLayout.Unit.Millimeter)
    return page.width(), page.height()


def page_parts(sheet_mm: tuple[float, float], paper_mm: tuple[float, float], true_scale: bool) -> list[QRectF]:
    """The pieces of a sheet (mm) that go on a page each: the whole sheet, or tiles of the paper at true scale."""
    width, height = sheet_mm
    fits = width <= paper_mm[0] + _SAME_MM and height <= paper_mm[1] + _SAME_MM
    if not true_scale or fits:
        return [QRectF(0, 0, width, height)]
    across, down = ceil((width - _SAME_MM) / paper_mm[0]), ceil((height - _SAME_MM) / paper_mm[1])
    return [
        QRectF(i * paper_mm[0], j * paper_mm[1], *paper_mm) for j in range(down) for i in range(across)
    ]  # fmt: skip


def paint_page(
    painter: QPainter, sheet: DrawnSheet, paper_mm: tuple[float, float], part: QRectF, dots_per_mm: float
) -> None:
    """Paint one piece of a sheet on a page: fitted and centred when it is the whole sheet, else at true scale."""
    from onelinefault.drawing.painter import paint  # noqa: PLC0415
    from onelinefault.drawing.palette import PRINT  # noqa: PLC0415
    from onelinefault.drawing.shapes import MM_PER_DU  # noqa: PLC0415

    whole = part.width() >= sheet.width_mm and part.height() >= sheet.height_mm
    scale = min(paper_mm[0] / sheet.width_mm, paper_mm[1] / sheet.height_mm) if whole else 1.0
    scale = 1.0 if abs(scale - 1) < _SAME_MM / sheet.width_mm else scale
    painter.save()
    if whole:
        painter.translate(
            (paper_mm[0] - sheet.width_mm * scale) / 2 * dots_per_mm,
            (paper_mm[1] - sheet.height_mm * scale) / 2 * dots_per_mm,
        )
    painter.scale(scale * dots_per_mm, scale * dots_per_mm)
    painter.translate(-part.left(), -part.top())
    painter.scale(MM_PER_DU, MM_PER_DU)
    paint(painter, sheet.shapes, PRINT)
    painter.restore()
