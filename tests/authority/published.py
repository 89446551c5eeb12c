"""Expected values of a file of published cases: each with its source and the tolerance that its digits allow."""

import json
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any


def cases_of(name: str) -> list[dict[str, Any]]:
    """The cases of a file beside this module."""
    cases: list[dict[str, Any]] = json.loads(Path(__file__).with_name(name).read_text("utf-8"))["cases"]
    return cases


@dataclass(frozen=True)
class Line:
    """One expected value of a case. keys: what of it makes a readable id."""

    case: Mapping[str, Any]
    wanted: Mapping[str, Any]
    number: int
    keys: tuple[str, ...] = ()

    @property
    def label(self) -> str:
        """A readable id."""
        words = [str(self.wanted[key]) for key in self.keys if key in self.wanted]
        return "-".join([self.case["id"], f"{self.number:03d}", *words])

    @property
    def tolerance(self) -> float:
        """Largest absolute difference allowed: the absolute one where the file gives one, else the relative one."""
        return float(self.wanted.get("abs_tol", 0.0) or self.wanted["rel_tol"] * abs(self.wanted["value"]))

    def judge(self, found: float) -> str:
        """Empty when the value agrees, else the sentence for the failure."""
        wanted = float(self.wanted["value"])
        if abs(found - wanted) <= self.tolerance:
            return ""
        source = f"{self.case['source']['document']} ({self.wanted['origin']})"
        return f"found {found:.8g} {self.wanted['unit']}, {source} says {wanted:.8g}, tolerance {self.tolerance:.2g}"


def lines_of(cases: list[dict[str, Any]], solver: str, keys: tuple[str, ...]) -> Iterator[Line]:
    """All expected values of the cases of one solver."""
    for case in cases:
        if case["solver"] == solver:
            for number, wanted in enumerate(case["expected"], start=1):
                yield Line(case, wanted, number, keys)
