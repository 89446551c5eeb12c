"""Ready pictures on the screen show what the outlines show, to a quarter of a pixel."""

from __future__ import annotations

import numpy as np
import pytest
from numpy.typing import NDArray
from PySide6.QtGui import QColor, QImage, QPainter

from onelinefault.drawing.painter import Painter
from onelinefault.drawing.painter_sprites import LARGEST_PX, SpritePainter
from onelinefault.drawing.palette import SHEET
from onelinefault.drawing.shapes import Shapes
from onelinefault.drawing.symbols import Look, symbol

pytestmark = pytest.mark.usefixtures("qapp")


def grey_picture(
    keeper: Painter | SpritePainter, shapes: Shapes, scale: float, at: float, *, turn: float = 0.0, ratio: float = 1.0
) -> NDArray[np.int16]:
    size = 240
    image = QImage(size, size, QImage.Format.Format_RGB32)
    image.setDevicePixelRatio(ratio)
    image.fill(QColor(SHEET["paper"]))
    brush = QPainter(image)
    brush.setRenderHint(QPainter.RenderHint.Antialiasing)
    brush.translate(at, at)
    brush.rotate(turn)
    brush.scale(scale, scale)
    before = brush.transform()
    keeper.paint(brush, shapes, scale)
    assert brush.transform() == before
    brush.end()
    flat = image.convertToFormat(QImage.Format.Format_Grayscale8)
    return np.frombuffer(flat.constBits(), np.uint8).reshape(size, flat.bytesPerLine())[:, :size].astype(np.int16)


@pytest.mark.parametrize("kind", ["transformer", "breaker", "induction_motor", "cable", "note"])
@pytest.mark.parametrize(("scale", "at", "ratio"), [(1.0, 100.0, 1.0), (0.36, 60.5, 1.0), (1.0, 50.0, 2.0)])
def test_on_half_pixels_the_picture_is_the_same(kind: str, scale: float, at: float, ratio: float) -> None:
    shapes = symbol(kind).shapes
    plain = Painter()
    sprites = grey_picture(SpritePainter(plain), shapes, scale, at, ratio=ratio)
    outlines = grey_picture(plain, shapes, scale, at, ratio=ratio)
    # blending on transparent ground rounds a little differently
    assert np.abs(sprites - outlines).max() <= 6


def middle_of_ink(pixels: NDArray[np.int16]) -> tuple[float, float]:
    ink = 252 - np.minimum(pixels, 252)
    rows, columns = np.indices(ink.shape)
    return float((columns * ink).sum() / ink.sum()), float((rows * ink).sum() / ink.sum())


@pytest.mark.parametrize("at", [60.2, 60.37, 60.74, 60.9])
def test_elsewhere_it_is_off_by_a_quarter_pixel_at_most(at: float) -> None:
    shapes = symbol("transformer").shapes
    plain = Painter()
    sprite = middle_of_ink(grey_picture(SpritePainter(plain), shapes, 0.7, at))
    outline = middle_of_ink(grey_picture(plain, shapes, 0.7, at))
    assert sprite == pytest.approx(outline, abs=0.27)


def test_turned_and_large_symbols_get_their_outlines() -> None:
    plain = Painter()
    keeper = SpritePainter(plain)
    transformer = symbol("transformer").shapes
    assert (
        grey_picture(keeper, transformer, 1, 100, turn=30) == grey_picture(plain, transformer, 1, 100, turn=30)
    ).all()
    bus = symbol("bus", Look(length=LARGEST_PX // 10 + 1)).shapes
    assert (grey_picture(keeper, bus, 1, 30.3) == grey_picture(plain, bus, 1, 30.3)).all()
    assert not keeper._sprites


def test_a_picture_is_made_once() -> None:
    keeper = SpritePainter(Painter())
    for _ in range(3):
        grey_picture(keeper, symbol("breaker").shapes, 0.5, 40)
    assert len(keeper._sprites) == 1
