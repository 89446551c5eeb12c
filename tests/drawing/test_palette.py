"""Colours that must be told apart stay apart: in colour, for two kinds of colour blindness, and in grey."""

from __future__ import annotations

from itertools import combinations

import numpy as np
import pytest
from numpy.typing import NDArray

from onelinefault.drawing.palette import LEVELS, PRINT, SHEET, VERDICTS, bar_weight_du, grey, level_role

# Machado, Oliveira, Fernandes (2009), "A physiologically-based model for simulation of color vision deficiency",
# severity 1.0, for linear RGB
DEUTERANOPIA = np.array(
    [[0.367322, 0.860646, -0.227968], [0.280085, 0.672501, 0.047413], [-0.011820, 0.042940, 0.968881]]
)
PROTANOPIA = np.array(
    [[0.152286, 1.052583, -0.204868], [0.114503, 0.786281, 0.099216], [-0.003882, -0.048116, 1.051998]]
)
# IEC 61966-2-1 (sRGB), D65
TO_XYZ = np.array(
    [[0.4124564, 0.3575761, 0.1804375], [0.2126729, 0.7151522, 0.0721750], [0.0193339, 0.1191920, 0.9503041]]
)
WHITE = np.array([0.95047, 1.0, 1.08883])


def linear(colour: str) -> NDArray[np.float64]:
    values = np.array([int(colour[i : i + 2], 16) for i in (1, 3, 5)]) / 255
    return np.where(values <= 0.04045, values / 12.92, ((values + 0.055) / 1.055) ** 2.4)


def lab(rgb: NDArray[np.float64]) -> NDArray[np.float64]:
    """CIE 1976 L*a*b*."""
    ratio = TO_XYZ @ np.clip(rgb, 0, 1) / WHITE
    f = np.where(ratio > 216 / 24389, np.cbrt(ratio), (24389 / 27 * ratio + 16) / 116)
    return np.array([116 * f[1] - 16, 500 * (f[0] - f[1]), 200 * (f[1] - f[2])])


def contrast(one: str, other: str) -> float:
    """Contrast ratio of WCAG 2."""
    bright, dark = sorted((float((TO_XYZ @ linear(c))[1]) + 0.05 for c in (one, other)), reverse=True)
    return bright / dark


@pytest.mark.parametrize("family", [VERDICTS, (*LEVELS, "dead")])
@pytest.mark.parametrize("eye", [np.eye(3), DEUTERANOPIA, PROTANOPIA])
def test_family_stays_apart_for_every_eye(family: tuple[str, ...], eye: NDArray[np.float64]) -> None:
    for one, other in combinations(family, 2):
        distance = np.linalg.norm(lab(eye @ linear(SHEET[one])) - lab(eye @ linear(SHEET[other])))
        assert distance >= 15, (one, other)


@pytest.mark.parametrize("family", [VERDICTS, (*LEVELS, "dead")])
def test_family_stays_apart_in_grey(family: tuple[str, ...]) -> None:
    printed = grey(SHEET)
    for one, other in combinations(family, 2):
        assert abs(lab(linear(printed[one]))[0] - lab(linear(printed[other]))[0]) >= 10, (one, other)


def test_fault_and_gauge_stay_apart() -> None:
    for eye in (np.eye(3), DEUTERANOPIA, PROTANOPIA):
        assert np.linalg.norm(lab(eye @ linear(SHEET["fault"])) - lab(eye @ linear(SHEET["gauge"]))) >= 40


@pytest.mark.parametrize("role", [*LEVELS, "ink", "fault", "gauge", "holds", "exceeded", "muted"])
def test_text_colours_can_be_read_on_paper(role: str) -> None:
    assert contrast(SHEET[role], SHEET["paper"]) >= 4.3  # WCAG 2 asks 4.5 for small text, 3 for large and bold


@pytest.mark.parametrize("role", ["near", "dead", "selection"])
def test_marks_can_be_seen_on_paper(role: str) -> None:
    assert contrast(SHEET[role], SHEET["paper"]) >= 3  # WCAG 2, 1.4.11 graphical objects


def test_paper_is_light_and_white_in_print() -> None:
    assert lab(linear(SHEET["paper"]))[0] > 95
    assert PRINT["paper"] == "#FFFFFF"
    assert {role for role in SHEET if SHEET[role] != PRINT[role]} == {"paper"}


def test_levels_differ_by_weight_too() -> None:
    weights = [bar_weight_du(role) for role in (*LEVELS, "dead")]
    assert weights == sorted(set(weights), reverse=True)


@pytest.mark.parametrize(
    ("kv", "role"),
    [(None, "ink"), (0.42, "level-lv"), (1.0, "level-lv"), (3.3, "level-mv"), (36, "level-mv"), (132, "level-hv")],
)
def test_level_of_a_voltage(kv: float | None, role: str) -> None:
    assert level_role(kv) == role


def test_grey_of_a_colour() -> None:
    # ITU-R BT.601: 0.299 R + 0.587 G + 0.114 B
    assert grey({"x": "#FF0000"})["x"] == "#4C4C4C"
