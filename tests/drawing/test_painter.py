"""The painter on pictures, PDF and SVG: right places, right sizes, real text, and no lost references."""

from __future__ import annotations

import re
import sys
from itertools import combinations, pairwise
from pathlib import Path as FilePath
from xml.etree import ElementTree

import numpy as np
import pypdf
import pytest
from numpy.typing import NDArray
from PySide6.QtCore import QMarginsF, QRectF, QSize, QSizeF
from PySide6.QtGui import QColor, QImage, QPageSize, QPainter, QPdfWriter, QPen
from PySide6.QtSvg import QSvgGenerator

from onelinefault.drawing import painter as painter_module
from onelinefault.drawing.metrics import text_width
from onelinefault.drawing.painter import Painter, load_fonts, overview_paths, paint, resources_root
from onelinefault.drawing.palette import SHEET, grey
from onelinefault.drawing.shapes import MM_PER_DU, Circle, Line, Rect, Shapes, Stroke, Text
from onelinefault.drawing.symbols import KINDS, Look, symbol
from onelinefault.errors import OutputError

pytestmark = pytest.mark.usefixtures("qapp")

MARKS: Shapes = (
    Text(100, 200, "Tarnwick I″k = 12.9 kA ∠ −86°", 12, "bold"),
    Text(400, 300, "offer 11 kV", 10, "regular", "end"),
    Line(100, 100, 500, 100),
)


def picture(shapes: Shapes, size: int = 100, scale: float = 1.0) -> NDArray[np.int16]:
    """Grey values of shapes painted one by one about the middle of a square picture."""
    image = QImage(size, size, QImage.Format.Format_RGB32)
    image.fill(QColor(SHEET["paper"]))
    brush = QPainter(image)
    brush.setRenderHint(QPainter.RenderHint.Antialiasing)
    brush.translate(size / 2, size / 2)
    brush.scale(scale, scale)
    paint(brush, shapes)
    brush.end()
    flat = image.convertToFormat(QImage.Format.Format_Grayscale8)
    return np.frombuffer(flat.constBits(), np.uint8).reshape(size, flat.bytesPerLine())[:, :size].astype(np.int16)


def inked(pixels: NDArray[np.int16], below: int = 128) -> tuple[int, int, int, int]:
    """Left, top, right, bottom of what is darker than a grey value, the last two exclusive."""
    rows, columns = np.nonzero(pixels < below)
    return int(columns.min()), int(rows.min()), int(columns.max()) + 1, int(rows.max()) + 1


def test_fonts_come_with_the_program() -> None:
    assert load_fonts() == "DejaVu Sans"
    assert (resources_root() / "fonts" / "LICENSE").is_file()


def test_missing_font_is_told(tmp_path: FilePath, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(painter_module, "resources_root", lambda: tmp_path)
    with pytest.raises(OutputError, match=r"DejaVuSans\.ttf"):
        load_fonts.__wrapped__()


def test_line_has_its_width_and_place() -> None:
    assert inked(picture((Line(-20, 0, 20, 0),))) == (29, 49, 71, 51)  # 2 du wide, round ends of 1 du


def test_paper_hides_what_is_behind() -> None:
    pixels = picture((Line(-40, 0, 40, 0), Circle(0, 0, 17, fill="paper")))
    assert pixels[50, 50] > 245
    assert pixels[50, 15] < 60


def test_capitals_stand_in_the_middle_and_are_as_wide_as_measured() -> None:
    left, top, right, bottom = inked(picture((Text(0, 0, "HHH", 100, "bold", "middle", "middle"),), 400, 1.0))
    assert (left + right) / 2 == pytest.approx(200, abs=1.5)
    assert (top + bottom) / 2 == pytest.approx(200, abs=1)
    assert bottom - top == pytest.approx(72.9, abs=1)  # cap height 1493/2048 em
    # H has bearings of 0.0918 em on both sides in the bold font
    assert right - left == pytest.approx(text_width("HHH", 100, True) - 2 * 9.18, abs=1.5)


@pytest.mark.parametrize("halo", ["outline", "box"])
def test_halo_parts_text_from_a_line(halo: str) -> None:
    line = Line(-50, 0, 50, 0, Stroke("ink", 6))
    plain = picture((line, Text(0, 0, "I", 30, "bold", "middle", "middle")))
    clear = picture((line, Text(0, 0, "I", 30, "bold", "middle", "middle", halo=halo)))  # type: ignore[arg-type]
    beside = slice(46, 47)  # the stem of the bold I begins at 47.2, the halo 2 du before
    assert plain[50, beside].max() < 128
    assert clear[50, beside].max() > 240
    assert clear[50, 50] < 128  # the letter itself is there


def test_small_text_is_left_out_at_low_detail() -> None:
    image = QImage(100, 100, QImage.Format.Format_RGB32)
    for lod, expected in ((0.3, False), (1.0, True)):
        image.fill(QColor("white"))
        brush = QPainter(image)
        Painter().paint(brush, (Text(10, 50, "MMMM", 10),), lod)
        brush.end()
        assert any(image.pixelColor(x, 46).lightness() < 128 for x in range(100)) == expected


def test_painting_leaves_the_transformation_alone() -> None:
    image = QImage(50, 50, QImage.Format.Format_RGB32)
    brush = QPainter(image)
    brush.scale(0.5, 0.5)
    before = brush.transform()
    paint(brush, (*MARKS, Text(0, 0, "x", halo="outline")))
    assert brush.transform() == before
    brush.end()


def test_dashes_are_in_du() -> None:
    pixels = picture((Line(-40, 0, 40, 0, Stroke("ink", 2.0, (10.0, 10.0))),))
    # a dash of 10 du and its round ends of 1 du, then a gap of 8
    row = pixels[49, 10:90] < 128
    edges = np.flatnonzero(np.diff(row.astype(int)))
    assert np.diff(edges)[1:3].tolist() in ([8, 12], [12, 8])


@pytest.mark.parametrize("kind", KINDS)
def test_grouped_painting_is_the_picture_of_shape_by_shape(kind: str) -> None:
    look = (
        Look(length=5)
        if kind == "bus"
        else Look(count=3, parallel=3, connections=("YN", "YN", "D"), neutrals=("solid",) * 3)
    )
    if kind == "earthing_transformer":
        look = Look()
    shapes = symbol(kind, look).shapes
    one_by_one = QImage(300, 300, QImage.Format.Format_RGB32)
    one_by_one.fill(QColor(SHEET["paper"]))
    brush = QPainter(one_by_one)
    brush.setRenderHint(QPainter.RenderHint.Antialiasing)
    brush.translate(150, 150)
    brush.scale(2, 2)
    for shape in shapes:
        paint(brush, (shape,))
    brush.end()
    flat = one_by_one.convertToFormat(QImage.Format.Format_Grayscale8)
    expected = np.frombuffer(flat.constBits(), np.uint8).reshape(300, flat.bytesPerLine())[:, :300].astype(np.int16)
    # where two edges meet in one pixel, blending twice and blending once differ by less than half of the ink
    different = np.abs(picture(shapes, 300, 2.0) - expected)
    assert different.max() < 110
    assert (different > 40).sum() < 30


def test_a_known_list_is_not_built_again(monkeypatch: pytest.MonkeyPatch) -> None:
    keeper = Painter()
    image = QImage(50, 50, QImage.Format.Format_RGB32)
    brush = QPainter(image)
    shapes = symbol("transformer").shapes
    keeper.paint(brush, shapes)
    monkeypatch.setattr(painter_module, "grouped", lambda _: pytest.fail("built again"))
    keeper.paint(brush, shapes)
    brush.end()


def test_unknown_role_is_an_error() -> None:
    image = QImage(10, 10, QImage.Format.Format_RGB32)
    brush = QPainter(image)
    with pytest.raises(KeyError, match="no-such-role"):
        paint(brush, (Line(0, 0, 1, 1, Stroke("no-such-role")),))
    brush.end()


def test_overview_has_one_path_for_each_colour() -> None:
    look = Look(level=(("high", "level-hv"), ("low", "level-lv")))
    paths = overview_paths(symbol("transformer", look).shapes)
    assert set(paths) == {"level-hv", "level-lv"}
    assert paths["level-hv"].boundingRect().top() == pytest.approx(-40)
    assert paths["level-lv"].boundingRect().bottom() == pytest.approx(40)


@pytest.fixture
def pdf(tmp_path: FilePath) -> pypdf.PageObject:
    """A page of 200 mm by 150 mm with MARKS in true scale."""
    file = str(tmp_path / "page.pdf")
    writer = QPdfWriter(file)
    writer.setResolution(1200)
    writer.setPageSize(QPageSize(QSizeF(200, 150), QPageSize.Unit.Millimeter))
    writer.setPageMargins(QMarginsF(0, 0, 0, 0))
    brush = QPainter(writer)
    brush.scale(1200 / 25.4 * MM_PER_DU, 1200 / 25.4 * MM_PER_DU)
    paint(brush, MARKS)
    brush.end()
    return pypdf.PdfReader(file).pages[0]


def product(m: list[float], n: list[float]) -> list[float]:
    """Product of two PDF matrices, m applied first."""
    first, second = (np.array([[a[0], a[1], 0], [a[2], a[3], 0], [a[4], a[5], 1]]) for a in (m, n))
    both = first @ second
    return [*both[0, :2], *both[1, :2], *both[2, :2]]


def test_pdf_text_is_searchable_and_at_its_place_and_size(pdf: pypdf.PageObject) -> None:
    found: dict[str, tuple[float, float, float]] = {}

    def note(text: str, cm: list[float], tm: list[float], font: object, size: float) -> None:
        if text.strip():
            where = product(tm, cm)
            found.setdefault(text.strip(), (where[4], where[5], size * (where[0] ** 2 + where[1] ** 2) ** 0.5))

    words = " ".join(pdf.extract_text(visitor_text=note).split())  # Qt writes the space as a tab in its letter table
    assert "Tarnwick I″k = 12.9 kA ∠ −86°" in words
    assert "offer 11 kV" in words  # no ligature that would spoil the search
    point = MM_PER_DU * 72 / 25.4
    height = float(pdf.mediabox.height)
    (x, y, size) = next(place for text, place in found.items() if text.startswith("Tarnwick"))
    assert (x, y) == pytest.approx((100 * point, height - 200 * point), abs=0.1)
    assert size == pytest.approx(12 * point, rel=0.01)
    (x, y, size) = next(place for text, place in found.items() if text.startswith("offer"))
    assert x == pytest.approx((400 - text_width("offer 11 kV", 10)) * point, abs=0.1)
    assert size == pytest.approx(10 * point, rel=0.01)


def test_pdf_embeds_the_shipped_fonts(pdf: pypdf.PageObject) -> None:
    names = []
    for font in pdf["/Resources"]["/Font"].values():  # type: ignore[index]
        descendant = font.get_object()["/DescendantFonts"][0].get_object()
        assert "/FontFile2" in descendant["/FontDescriptor"]
        names.append(str(descendant["/BaseFont"]))
    assert sorted(name.rsplit("+")[-1].lstrip("/") for name in names) == ["DejaVuSans", "DejaVuSans-Bold"]


def test_pdf_line_has_its_length(pdf: pypdf.PageObject) -> None:
    matrices: list[list[float]] = []
    ends: list[tuple[float, float]] = []

    def see(operator: bytes, operands: list[float], cm: list[float], tm: list[float]) -> None:
        if operator in (b"m", b"l"):
            numbers = [float(n) for n in operands]
            matrices.append([float(n) for n in cm])
            ends.append((numbers[0], numbers[1]))

    pdf.extract_text(visitor_operand_before=see)
    placed = [
        (m[0] * x + m[2] * y + m[4], m[1] * x + m[3] * y + m[5]) for m, (x, y) in zip(matrices, ends, strict=True)
    ]
    lines = [(a, b) for a, b in pairwise(placed) if abs(a[1] - b[1]) < 0.01 and a[0] != b[0]]
    # 400 du = 100 mm
    assert any(b[0] - a[0] == pytest.approx(100 * 72 / 25.4, abs=0.1) for a, b in lines)


def test_svg_keeps_text_and_sizes(tmp_path: FilePath) -> None:
    file = tmp_path / "page.svg"
    generator = QSvgGenerator()
    generator.setFileName(str(file))
    generator.setSize(QSize(800, 600))
    generator.setViewBox(QRectF(0, 0, 800, 600))
    brush = QPainter(generator)
    paint(brush, MARKS)
    brush.end()
    root = ElementTree.parse(file).getroot()
    name = "{http://www.w3.org/2000/svg}"
    parents = {child: parent for parent in root.iter() for child in parent}
    found = {}
    for node in root.iter(f"{name}text"):
        matrix = [float(n) for n in re.findall(r"[-\d.e]+", parents[node].attrib["transform"].removeprefix("matrix"))]
        x, y, size = (float(node.attrib[key]) for key in ("x", "y", "font-size"))
        found[(node.text or "").strip()] = (x * matrix[0] + matrix[4], y * matrix[3] + matrix[5], size * matrix[0])
        assert node.attrib["font-family"] == "DejaVu Sans"
    assert found["Tarnwick I″k = 12.9 kA ∠ −86°"] == pytest.approx((100, 200, 12), abs=0.05)
    assert found["offer 11 kV"] == pytest.approx((400 - text_width("offer 11 kV", 10), 300, 10), abs=0.05)


def icon(kind: str, look: Look) -> NDArray[np.int16]:
    """A symbol in a square of 16 pixels, black and white printing."""
    drawn = symbol(kind, look)
    image = QImage(16, 16, QImage.Format.Format_RGB32)
    image.fill(QColor("white"))
    brush = QPainter(image)
    brush.setRenderHint(QPainter.RenderHint.Antialiasing)
    scale = 16 / max(drawn.box.width, drawn.box.height)
    brush.translate(8, 8)
    brush.scale(scale, scale)
    brush.translate(-drawn.box.centre[0], -drawn.box.centre[1])
    paint(brush, drawn.shapes, grey(SHEET))
    brush.end()
    flat = image.convertToFormat(QImage.Format.Format_Grayscale8)
    return np.frombuffer(flat.constBits(), np.uint8).reshape(16, flat.bytesPerLine())[:, :16].astype(np.int16)


def test_silhouettes_differ_at_16_pixels_without_colour() -> None:
    icons = {kind: icon(kind, Look()) for kind in KINDS}
    icons |= {f"{kind}, open": icon(kind, Look(closed=False)) for kind in ("breaker", "switch", "fuse")}
    for one, other in combinations(icons, 2):
        # at least eight pixels change by a fifth of the way from paper to ink
        assert (np.abs(icons[one] - icons[other]) > 40).sum() >= 8, (one, other)


def test_painting_loses_no_reference_to_none() -> None:
    # a broken binding drops one reference a call and kills the interpreter after some thousands of them
    image = QImage(20, 20, QImage.Format.Format_RGB32)
    brush = QPainter(image)
    pen = QPen(QColor("black"))
    before = sys.getrefcount(None)
    for _ in range(2000):
        brush.setPen(pen)
    assert abs(sys.getrefcount(None) - before) < 50
    shapes = (*MARKS, Rect(0, 0, 5, 5, 1, fill="paper"))
    paint(brush, shapes)
    before = sys.getrefcount(None)
    for _ in range(500):
        paint(brush, shapes)
    assert abs(sys.getrefcount(None) - before) < 50
    brush.end()
