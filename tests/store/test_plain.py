"""Typed access to parsed JSON."""

import pytest

from onelinefault.errors import PlantFileError
from onelinefault.store import plain


def test_values_in_messages_stay_short_and_on_one_line() -> None:
    assert plain.shown("a\nb") == '"a\\nb"'
    assert len(plain.shown("x" * 10_000)) == 60
    assert plain.shown({"a": [1]}) == '{"a": [1]}'


@pytest.mark.parametrize("value", [True, 1.0, "1", None])
def test_whole_numbers_are_not_guessed(value: object) -> None:
    with pytest.raises(PlantFileError, match="here: expected a whole number"):
        plain.whole(value, "here")


def test_limits_are_inclusive() -> None:
    assert plain.whole(100_000, "x") == 100_000
    with pytest.raises(PlantFileError):
        plain.whole(100_001, "x")


@pytest.mark.parametrize("letter", ["\ud800", "\udfff", "\0"])
def test_letters_that_cannot_be_written_are_refused(letter: str) -> None:
    with pytest.raises(PlantFileError, match="no text may hold"):
        plain.text(f"a{letter}b", "name")
