"""Plain values of a parsed file, taken with their types checked: every surprise names its place and what was expected.

``where`` is a phrase for people: "part T1 (p3), x".
"""

import json
from collections.abc import Mapping, Sequence
from typing import Any, Final

from onelinefault.errors import PlantFileError

LARGEST_COORDINATE: Final = 100_000  # modules; 250 m of paper
LONGEST_TEXT: Final = 10_000
_SHOWN_LENGTH: Final = 60


def shown(value: object) -> str:
    """A value for a message: one line, cut short."""
    text = json.dumps(value, ensure_ascii=True, default=str)
    return text if len(text) <= _SHOWN_LENGTH else text[: _SHOWN_LENGTH - 3] + "..."


def one_line(words: str) -> str:
    """Words for a message with everything that would break the line turned into spaces."""
    return " ".join("".join(letter if letter.isprintable() else " " for letter in words).split())


def mapping(value: object, where: str) -> Mapping[str, Any]:
    """A JSON object. Raises PlantFileError when it is something else."""
    if not isinstance(value, dict):
        raise PlantFileError(f"{where}: expected an object in braces, found {shown(value)}")
    return value


def sequence(value: object, where: str, most: int) -> Sequence[Any]:
    """A JSON list of at most so many entries. Raises PlantFileError when it is something else."""
    if not isinstance(value, list):
        raise PlantFileError(f"{where}: expected a list in brackets, found {shown(value)}")
    if len(value) > most:
        raise PlantFileError(f"{where}: {len(value)} entries are too many; at most {most} can be opened")
    return value


def text(value: object, where: str, longest: int = LONGEST_TEXT) -> str:
    """A text of sensible length that can be written again. Raises PlantFileError when it is something else."""
    if not isinstance(value, str):
        raise PlantFileError(f"{where}: expected a text in quotes, found {shown(value)}")
    if len(value) > longest:
        raise PlantFileError(f"{where}: a text of {len(value)} letters is too long; at most {longest}")
    if any("\ud800" <= letter <= "\udfff" or letter == "\0" for letter in value):
        raise PlantFileError(f"{where}: {shown(value)} holds a letter that no text may hold; remove it")
    return value


def whole(value: object, where: str, least: int = -LARGEST_COORDINATE, most: int = LARGEST_COORDINATE) -> int:
    """A whole number within limits. Raises PlantFileError when it is something else."""
    if isinstance(value, bool) or not isinstance(value, int):
        raise PlantFileError(f"{where}: expected a whole number, found {shown(value)}")
    if not least <= value <= most:
        raise PlantFileError(f"{where}: {shown(value)} is out of range; it must lie between {least} and {most}")
    return value


def flag(value: object, where: str) -> bool:
    """True or false. Raises PlantFileError when it is something else."""
    if not isinstance(value, bool):
        raise PlantFileError(f"{where}: expected true or false, found {shown(value)}")
    return value


def need(record: Mapping[str, Any], key: str, where: str) -> Any:
    """An entry that must be there. Raises PlantFileError when it is missing."""
    if key not in record:
        raise PlantFileError(f'{where}: "{key}" is missing')
    return record[key]
