"""Text widths against Qt's own measuring of the shipped fonts."""

from __future__ import annotations

import pytest
from PySide6.QtGui import QFontMetricsF
from PySide6.QtWidgets import QApplication

from onelinefault.drawing import metrics
from onelinefault.drawing.metrics import text_width, wrapped
from onelinefault.drawing.painter import text_font

TEXTS = (
    "12.9 kA ∠ −86°",
    "Transformer T1",
    "I″k = 1.1 · 1.050 / |Z₁| → 0.0981 pu",
    "√3 ⋅ κ ≥ 1.02 × I₀² ∥ ΣΔφμΩ′ ₂ ³",
    "AVAVA To Ty fi ffl",
    "Größe Łódź São Ελλάδα Подстанция",
)


@pytest.mark.parametrize("bold", [False, True])
@pytest.mark.parametrize("text", TEXTS)
def test_width_of_lines_is_that_of_qt(qapp: QApplication, text: str, bold: bool) -> None:
    # the painter's font is set at ten times the size, 100 du here
    assert text_width(text, 100, bold) == pytest.approx(
        QFontMetricsF(text_font(100, bold)).horizontalAdvance(text) / 10, rel=0.002
    )


@pytest.mark.parametrize("bold", [False, True])
def test_every_letter_of_the_table_is_that_of_qt(qapp: QApplication, bold: bool) -> None:
    measured = QFontMetricsF(text_font(100, bold))
    wrong = {
        chr(code): (text_width(chr(code), 100, bold), measured.horizontalAdvance(chr(code)) / 10)
        for code in metrics._WIDTHS[bold]
        if code != 0xAD  # the soft hyphen, which Qt does not show
        and abs(text_width(chr(code), 100, bold) - measured.horizontalAdvance(chr(code)) / 10) > 0.1
    }
    assert wrong == {}


def test_vertical_measures_are_those_of_qt(qapp: QApplication) -> None:
    measured = QFontMetricsF(text_font(100, False))
    assert pytest.approx(measured.capHeight() / 1000, abs=0.002) == metrics.CAP_HEIGHT_EM
    assert pytest.approx(measured.xHeight() / 1000, abs=0.002) == metrics.X_HEIGHT_EM
    assert pytest.approx(measured.ascent() / 1000, abs=0.002) == metrics.ASCENT_EM
    assert pytest.approx(measured.descent() / 1000, abs=0.002) == metrics.DESCENT_EM


def test_width_grows_with_size_and_adds_up() -> None:
    assert text_width("kA", 20) == pytest.approx(2 * text_width("kA", 10))
    assert text_width("12 kA", 10) == pytest.approx(sum(text_width(letter, 10) for letter in "12 kA"))
    assert text_width("", 10) == 0


def test_unknown_letters_have_a_likely_width() -> None:
    assert text_width("電", 10) == 10
    assert 4 < text_width("ა", 10) < 8


def test_wrapping_keeps_words_and_fits() -> None:
    text = "Spare way, see relay sheet four\n\nand the rest"
    lines = wrapped(text, 80, 10)
    assert " ".join(lines).split() == text.split()
    assert all(text_width(line, 10) <= 80 for line in lines)
    assert "" in lines  # the empty line of the text
    # no line could have taken the first word of the next one
    first, second = lines[0], lines[1]
    assert text_width(f"{first} {second.split()[0]}", 10) > 80


def test_a_long_word_keeps_its_own_line() -> None:
    assert wrapped("a Transformatorenstation b", 30, 10) == ("a", "Transformatorenstation", "b")
