"""Surroundings: readable in light and dark, scaled with the system's text, the sheet's palette left alone."""

import re

import pytest
from PySide6.QtGui import QPalette
from PySide6.QtWidgets import QApplication, QLabel

from onelinefault.desktop.style import (
    DARK,
    LIGHT,
    Surroundings,
    qt_palette,
    stylesheet,
    symbol_palette,
    text_scale,
    widget_scale,
)
from onelinefault.drawing.palette import SHEET
from tests.desktop.windows import dressed


def luminance(colour: str) -> float:
    """Relative luminance, WCAG 2.1 definition."""
    channels = [int(colour[i : i + 2], 16) / 255 for i in (1, 3, 5)]
    red, green, blue = (c / 12.92 if c <= 0.03928 else ((c + 0.055) / 1.055) ** 2.4 for c in channels)
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue


def contrast(a: str, b: str) -> float:
    high, low = sorted((luminance(a), luminance(b)), reverse=True)
    return (high + 0.05) / (low + 0.05)


def test_contrast_is_computed_as_the_standard_does() -> None:
    assert contrast("#FFFFFF", "#000000") == pytest.approx(21)  # WCAG 2.1, 1.4.3: black on white is 21:1


@pytest.mark.parametrize("colours", [LIGHT, DARK], ids=["light", "dark"])
def test_all_words_can_be_read(colours: Surroundings) -> None:
    pairs = [
        (colours.ink, colours.panel), (colours.ink, colours.field), (colours.muted, colours.panel),
        (colours.muted, colours.field), (colours.ink, colours.tile), (colours.on_chosen, colours.chosen),
        (colours.ink, colours.accent_tint), (colours.trouble, colours.panel), (colours.on_status, colours.status),
        (colours.on_status_muted, colours.status), (colours.ink, colours.hover),
    ]  # fmt: skip
    for front, ground in pairs:
        assert contrast(front, ground) >= 4.5, (front, ground)  # WCAG 2.1, 1.4.3, level AA
    assert contrast(colours.focus, colours.panel) >= 3  # 1.4.11: what shows the focus


@pytest.mark.parametrize("colours", [LIGHT, DARK], ids=["light", "dark"])
def test_every_name_in_the_style_sheet_is_filled_in(colours: Surroundings) -> None:
    text = stylesheet(colours)
    assert "@" not in text
    assert text.count("{") == text.count("}")


def test_text_grows_with_the_system() -> None:
    assert text_scale(9) == 1
    assert text_scale(20) > 1.5
    assert text_scale(200) == 2.5
    small = re.search(r'QLabel\[part="heading"\] { font-size: ([\d.]+)pt', stylesheet(LIGHT))
    large = re.search(r'QLabel\[part="heading"\] { font-size: ([\d.]+)pt', stylesheet(LIGHT, 2))
    assert small is not None and large is not None
    assert float(large.group(1)) == pytest.approx(2 * float(small.group(1)))


def test_sizes_in_pixels_follow_the_text(qapp: QApplication) -> None:
    label = QLabel()
    font = label.font()
    for points, scale in ((8, 1), (9, 1), (13.5, 1.5), (40, 1.6)):
        font.setPointSizeF(points)
        label.setFont(font)
        assert widget_scale(label) == pytest.approx(scale, rel=0.02)


def test_the_surroundings_change_and_the_paper_does_not(qapp: QApplication) -> None:
    with dressed(qapp) as style:
        style.dress(dark=True)
        assert qapp.palette().color(QPalette.ColorRole.Window).name() == DARK.panel.lower()
        style.dress(dark=False)
        assert qapp.palette().color(QPalette.ColorRole.Window).name() == LIGHT.panel.lower()
    assert SHEET["paper"] == "#FCFBF7"


def test_symbols_on_tiles_stand_out_from_their_tile() -> None:
    for colours in (LIGHT, DARK):
        palette = symbol_palette(qt_palette(colours))
        assert contrast(palette["ink"], palette["paper"]) >= 7
        assert set(palette) == set(SHEET)
