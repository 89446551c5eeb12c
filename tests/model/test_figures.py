"""Figures as people read them. Authority: the general float formatting of the language, read back."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from onelinefault.model.figures import current_text, figure, voltage_text


@given(st.floats(1e-3, 9e5), st.booleans(), st.integers(2, 5))
def test_a_figure_keeps_its_significant_digits(size: float, minus: bool, digits: int) -> None:
    value = -size if minus else size
    shown = figure(value, digits)
    assert "e" not in shown and "-" not in shown  # a true minus sign
    read = float(shown.replace("−", "-"))
    assert read == pytest.approx(value, rel=0.5001 * 10.0 ** (1 - digits))


@pytest.mark.parametrize(
    ("value", "shown"),
    [
        (0, "0"),
        (12.936, "12.9"),
        (0.40251, "0.403"),
        (0.4, "0.400"),
        (1590.4, "1590"),
        (99.96, "100"),
        (-0.5, "−0.500"),
        (math.inf, "∞"),
        (math.nan, "–"),
        (1.5e-7, "1.50e−07"),
        (2.5e8, "2.50e+08"),
    ],
)
def test_figures(value: float, shown: str) -> None:
    assert figure(value) == shown


@pytest.mark.parametrize(
    ("ka", "shown"), [(12.936, "12.9 kA"), (0.0421, "42.1 A"), (0.1, "0.100 kA"), (0, "0 A"), (-0.02, "−20.0 A")]
)
def test_currents(ka: float, shown: str) -> None:
    assert current_text(ka) == shown


@pytest.mark.parametrize(("kv", "shown"), [(33, "33 kV"), (0.415, "0.415 kV"), (11.5, "11.5 kV"), (400, "400 kV")])
def test_voltages(kv: float, shown: str) -> None:
    assert voltage_text(kv) == shown
