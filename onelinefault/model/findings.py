"""Findings: what the program has to say about the data. The user's mistakes are values, not exceptions."""

from dataclasses import dataclass
from enum import StrEnum


class Severity(StrEnum):
    """An error stops the results that depend on it; a warning asks for a look; a hint informs."""

    ERROR = "error"
    WARNING = "warning"
    HINT = "hint"


@dataclass(frozen=True, slots=True)
class Finding:
    """One remark. code: stable word for tests and filters; parts: ids concerned; remedy: what to do about it."""

    severity: Severity
    code: str
    message: str
    remedy: str
    parts: tuple[str, ...] = ()
    field: str = ""
