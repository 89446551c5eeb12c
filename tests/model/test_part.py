"""What every part has: ratings with their basis, and a place that turns and mirrors."""

import cmath

import pytest
from hypothesis import given
from hypothesis import strategies as st

from onelinefault.errors import EntryError
from onelinefault.model.fields import Basis
from onelinefault.model.part import describe, number_in, place_of
from onelinefault.model.sources import SynchronousGenerator
from onelinefault.model.transforming import Transformer

COORDINATES = st.integers(-50, 50)


@given(x=COORDINATES, y=COORDINATES, turn=st.integers(0, 7), mirrored=st.booleans(), dx=COORDINATES, dy=COORDINATES)
def test_places_turn_like_complex_numbers(x: int, y: int, turn: int, mirrored: bool, dx: int, dy: int) -> None:
    part = Transformer(id="p1", x=x, y=y, turn=turn, mirrored=mirrored)
    local = complex(-dx if mirrored else dx, dy)
    expected = complex(x, y) + local * cmath.exp(1j * cmath.pi / 2 * turn)  # y downwards: +90° is clockwise on paper
    assert complex(*place_of(part, dx, dy)) == pytest.approx(expected)


def test_a_typed_rating_keeps_text_and_basis() -> None:
    part = Transformer(id="p1").with_text("impedance", "10 %", Basis.LETTER)
    assert part.text("impedance") == "10 %" and part.basis_of("impedance") is Basis.LETTER
    assert part.with_text("impedance", "11 %").basis_of("impedance") is Basis.NAMEPLATE
    cleared = part.with_text("impedance", "")
    assert cleared.given("impedance") is None and cleared.basis_of("impedance") is None and not cleared.basis


def test_a_default_counts_as_typical() -> None:
    part = SynchronousGenerator(id="p1")
    assert part.given("x_over_r") is None
    assert part.value("x_over_r") is not None and part.basis_of("x_over_r") is Basis.TYPICAL


def test_typing_does_not_touch_the_part_before() -> None:
    part = Transformer(id="p1")
    part.with_text("impedance", "10 %", Basis.LETTER)
    assert part == Transformer(id="p1")


def test_an_unknown_rating_is_named() -> None:
    with pytest.raises(EntryError, match="Transformer has no rating colour; it has rated_power"):
        describe(Transformer, "colour")


def test_ratings_as_numbers() -> None:
    part = SynchronousGenerator(id="p1").with_text("rated_power", "5000 kVA")
    assert number_in(part, "rated_power", "MVA") == 5
    assert number_in(part, "rated_power", "MW") is None  # of another dimension
    assert number_in(part, "x_over_r", "") == 20  # by default
    assert number_in(part, "rated_voltage", "kV") is None and number_in(part, "connection", "kV") is None


def test_titles() -> None:
    assert Transformer(id="p7").title == "transformer p7"
    assert Transformer(id="p7", name="T1").title == "transformer T1"
