"""Sheets on paper and in files: PDF, SVG and PNG from the same shapes as the screen."""

import os
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from PySide6.QtCore import QBuffer, QByteArray, QIODevice, QMarginsF, QRectF, QSize, QSizeF
from PySide6.QtGui import QColor, QGuiApplication, QImage, QImageWriter, QPageLayout, QPageSize, QPainter, QPdfWriter

from onelinefault.drawing.painter import load_fonts, paint
from onelinefault.drawing.palette import PRINT, SHEET
from onelinefault.drawing.shapes import MM_PER_DU, Shapes
from onelinefault.errors import OutputError

PDF_DPI: Final = 1200
PNG_DPI: Final = 150
FORMATS: Final = (".pdf", ".svg", ".png")


@dataclass(frozen=True, slots=True)
class DrawnSheet:
    """One finished sheet: its shapes in du and its size in mm."""

    shapes: Shapes
    width_mm: float
    height_mm: float


def ensure_application() -> None:
    """Qt needs an application object for fonts; make one without a screen when there is none.

    Where no display answers, Qt's own "offscreen" platform serves.
    """
    if QGuiApplication.instance() is None:
        if os.name == "posix" and not (os.environ.get("DISPLAY") or os.environ.get("WAYLAND_DISPLAY")):
            os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
        _held.append(QGuiApplication(["onelinefault"]))
    load_fonts()


_held: list[QGuiApplication] = []  # Qt destroys an application that nobody holds


def write_sheets(
    sheets: Sequence[DrawnSheet], path: Path, title: str = "", paper_mm: tuple[float, float] | None = None
) -> list[Path]:
    """Write sheets to a file by its ending; a PDF holds all pages, SVG and PNG one file a sheet (NAME-2.svg, ...).

    paper_mm: fit each sheet to a page of this size instead of its own. Returns the files written.
    Raises OutputError for an unknown ending, or when the file cannot be written; an older file then stays whole.
    """
    if path.suffix.lower() not in FORMATS:
        raise OutputError(f"{path.name}: write to a file ending in .pdf, .svg or .png")
    ensure_application()
    if path.suffix.lower() == ".pdf":
        _replace(path, _pdf(sheets, title, paper_mm))
        return [path]
    make = _svg if path.suffix.lower() == ".svg" else _png
    written = []
    for number, sheet in enumerate(sheets, 1):
        target = path if number == 1 else path.with_name(f"{path.stem}-{number}{path.suffix}")
        _replace(target, make(sheet, title))
        written.append(target)
    return written


def _replace(path: Path, content: bytes) -> None:
    """Put the finished content in place in one step, so that a failure leaves the older file whole."""
    part = path.with_name(path.name + ".part")
    try:
        part.write_bytes(content)
        part.replace(path)
    except OSError as error:
        part.unlink(missing_ok=True)
        reason = error.strerror or type(error).__name__
        raise OutputError(f"{path} cannot be written: {reason}. Choose another folder or file name.") from None


def _pdf(sheets: Sequence[DrawnSheet], title: str, paper_mm: tuple[float, float] | None) -> bytes:
    data = QByteArray()
    buffer = QBuffer(data)
    buffer.open(QIODevice.OpenModeFlag.WriteOnly)
    writer = QPdfWriter(buffer)
    writer.setResolution(PDF_DPI)
    writer.setTitle(title)
    writer.setCreator("OneLineFault")
    painter = QPainter()
    for number, sheet in enumerate(sheets):
        set_page(writer, paper_mm or (sheet.width_mm, sheet.height_mm))
        if number == 0:
            painter.begin(writer)
        else:
            writer.newPage()
        _draw(painter, sheet, paper_mm, PDF_DPI / 25.4)
    painter.end()
    buffer.close()
    return bytes(data.data())


def set_page(device: QPdfWriter, size_mm: tuple[float, float]) -> None:
    """Give a paged device a page of this size without margins (the sheet has its own)."""
    upright = QSizeF(min(size_mm), max(size_mm))
    way = QPageLayout.Orientation.Landscape if size_mm[0] > size_mm[1] else QPageLayout.Orientation.Portrait
    page = QPageSize(upright, QPageSize.Unit.Millimeter)
    device.setPageLayout(QPageLayout(page, way, QMarginsF(0, 0, 0, 0), QPageLayout.Unit.Millimeter))


def _draw(painter: QPainter, sheet: DrawnSheet, paper_mm: tuple[float, float] | None, dots_per_mm: float) -> None:
    """Paint a sheet at true scale, or fitted to the middle of another paper."""
    painter.save()
    if paper_mm is not None:
        scale = min(paper_mm[0] / sheet.width_mm, paper_mm[1] / sheet.height_mm)
        rest = (paper_mm[0] - sheet.width_mm * scale, paper_mm[1] - sheet.height_mm * scale)
        painter.translate(rest[0] / 2 * dots_per_mm, rest[1] / 2 * dots_per_mm)
        painter.scale(scale, scale)
    painter.scale(dots_per_mm * MM_PER_DU, dots_per_mm * MM_PER_DU)
    paint(painter, sheet.shapes, PRINT)
    painter.restore()


def _svg(sheet: DrawnSheet, title: str) -> bytes:
    from PySide6.QtSvg import QSvgGenerator  # noqa: PLC0415 - only where an SVG is asked for

    data = QByteArray()
    buffer = QBuffer(data)
    buffer.open(QIODevice.OpenModeFlag.WriteOnly)
    generator = QSvgGenerator()
    generator.setOutputDevice(buffer)
    generator.setResolution(96)
    dots_per_mm = 96 / 25.4
    width, height = sheet.width_mm * dots_per_mm, sheet.height_mm * dots_per_mm
    generator.setSize(QSize(round(width), round(height)))
    generator.setViewBox(QRectF(0, 0, width, height))
    generator.setTitle(title)
    generator.setDescription("One-line diagram")
    painter = QPainter(generator)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    _draw(painter, sheet, None, dots_per_mm)
    painter.end()
    buffer.close()
    return bytes(data.data())


def sheet_image(sheet: DrawnSheet, dpi: float = PNG_DPI, *, paper_colour: bool = False) -> QImage:
    """A sheet as a picture. paper_colour: on the screen's warm paper instead of white."""
    dots_per_mm = dpi / 25.4
    size = QSize(round(sheet.width_mm * dots_per_mm), round(sheet.height_mm * dots_per_mm))
    image = QImage(size, QImage.Format.Format_RGB32)
    palette = SHEET if paper_colour else PRINT
    image.fill(QColor(palette["paper"]))
    painter = QPainter(image)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    painter.setRenderHint(QPainter.RenderHint.TextAntialiasing)
    painter.scale(dots_per_mm * MM_PER_DU, dots_per_mm * MM_PER_DU)
    paint(painter, sheet.shapes, palette)
    painter.end()
    image.setDotsPerMeterX(round(dpi / 0.0254))
    image.setDotsPerMeterY(round(dpi / 0.0254))
    return image


def _png(sheet: DrawnSheet, title: str) -> bytes:
    image = sheet_image(sheet)
    image.setText("Title", title)
    data = QByteArray()
    buffer = QBuffer(data)
    buffer.open(QIODevice.OpenModeFlag.WriteOnly)
    QImageWriter(buffer, QByteArray(b"png")).write(image)
    buffer.close()
    return bytes(data.data())
