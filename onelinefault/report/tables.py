"""Tables for readers and for other programs: the bus table and the findings as text, CSV and JSON.

The caution stands on every one of them. Numbers in CSV and JSON are not rounded; what is open or without limit is empty
in CSV and null in JSON.
"""

import csv
import io
import json
import math
import unicodedata
from collections.abc import Callable, Iterable, Sequence
from dataclasses import asdict, dataclass
from typing import Any, Final

from onelinefault.engine.case import Case
from onelinefault.engine.results import BusRow
from onelinefault.model.caution import CAUTION
from onelinefault.model.figures import figure
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.plant import Plant

FORMATS: Final = ("table", "json", "csv")
_METHODS: Final = {"classical": "classical method", "iec60909": "IEC 60909-0"}
_LEVELS: Final = {"max": "largest supply", "min": "smallest supply"}
_OPEN: Final = "–"
_Column = tuple[str, Callable[[BusRow], str]]


@dataclass(frozen=True)
class BusTable:
    """A bus table with what it was computed for. arrangement: the running arrangement's name."""

    plant: Plant
    case: Case
    rows: tuple[BusRow, ...]
    findings: tuple[Finding, ...] = ()
    arrangement: str = "as drawn"

    @property
    def name(self) -> str:
        """The plant's name."""
        return self.plant.document.name or "Plant without a name"


def _ohm(pair: tuple[float, float] | None) -> str:
    if pair is None:
        return _OPEN
    r, x = pair
    return f"{figure(r)}{'−' if x < 0 else '+'}j{figure(abs(x))}"


def _without_dust(value: float, beside: float) -> float:
    """Zero where a value is only what rounding left of the difference of larger ones."""
    return 0.0 if abs(value) <= 1e-9 * abs(beside) else value


def _ratio(value: float | None) -> str:
    return _OPEN if value is None else figure(value)


_TEXT_COLUMNS: Final[tuple[_Column, ...]] = (
    ("Bus", lambda row: row.bus),
    ("Un kV", lambda row: f"{row.nominal_kv:.4g}"),
    ("Fault", lambda row: row.kind),
    ("I″k kA", lambda row: figure(row.ik_ka, 4) + ("*" if row.assumed else "")),
    ("3I0 kA", lambda row: figure(_without_dust(row.residual_ka, row.ik_ka), 4)),
    ("X/R", lambda row: _ratio(row.x_over_r)),
    ("S″k MVA", lambda row: figure(row.fault_level_mva, 4)),
    ("Peak kA", lambda row: figure(row.peak_ka, 4)),
    ("Z1 Ω", lambda row: _ohm(row.z1_ohm)),
    ("Z2 Ω", lambda row: _ohm(row.z2_ohm)),
    ("Z0 Ω", lambda row: _ohm(row.z0_ohm)),
)
_WORDS: Final = ("Bus", "Fault")  # columns set flush left


def bus_text(table: BusTable) -> str:
    """The bus table for people: aligned columns with units, what it rests on, the caution."""
    titles = [title for title, _ in _TEXT_COLUMNS]
    lines = aligned(titles, [[cell(row) for _, cell in _TEXT_COLUMNS] for row in table.rows], _WORDS)
    assumed = list(dict.fromkeys(name for row in table.rows for name in row.assumed))
    notes = [f"* rests on typical or guessed data of {_listed(assumed)}."] if assumed else []
    notes += _counted(table.findings)
    return "\n".join([_headline(table), "", *lines, "", *notes, CAUTION]) + "\n"


def _headline(table: BusTable) -> str:
    method = _METHODS.get(table.case.method, table.case.method)
    level = _LEVELS.get(table.case.level, table.case.level)
    about = (method, level, f"{table.plant.document.frequency_hz:g} Hz", f"arrangement {table.arrangement}")
    return f"{table.name}: {', '.join(about)}"


def _listed(names: Sequence[str], most: int = 12) -> str:
    rest = len(names) - most
    return ", ".join(names[:most]) + (f" and {rest} more" if rest > 0 else "")


def _counted(findings: Iterable[Finding]) -> list[str]:
    counts = {severity: sum(f.severity is severity for f in findings) for severity in Severity}
    said = [f"{n} {severity}{'s' if n > 1 else ''}" for severity, n in counts.items() if n]
    return [f"The data have {', '.join(said)}: the command check lists them."] if said else []


def aligned(titles: Sequence[str], rows: Sequence[Sequence[str]], words: Sequence[str]) -> list[str]:
    """Lines of a table with a rule below the titles; the columns named in words are set left, the others right."""
    one_line = [[" ".join(cell.split()) for cell in row] for row in rows]
    widths = [max(map(_width, column)) for column in zip(titles, *one_line, strict=True)]
    left = [title in words for title in titles]

    def line(cells: Sequence[str]) -> str:
        spaced = (
            cell + " " * (width - _width(cell)) if to_left else " " * (width - _width(cell)) + cell
            for cell, width, to_left in zip(cells, widths, left, strict=True)
        )
        return "  ".join(spaced).rstrip()

    return [line(titles), "  ".join("-" * width for width in widths), *map(line, one_line)]


def _width(text: str) -> int:
    """Columns of a terminal that a text takes: two for wide East Asian letters, none for combining marks."""
    wide = sum(unicodedata.east_asian_width(letter) in "WF" for letter in text)
    return len(text) + wide - sum(unicodedata.combining(letter) > 0 for letter in text)


_CSV_TITLES: Final = (
    "bus", "nominal_kv", "kind", "ik_ka", "ia_ka", "ib_ka", "ic_ka", "ia_deg", "ib_deg", "ic_deg", "residual_ka",
    "x_over_r", "fault_level_mva", "peak_ka", "r1_ohm", "x1_ohm", "r2_ohm", "x2_ohm", "r0_ohm", "x0_ohm", "assumed",
)  # fmt: skip


def bus_csv(table: BusTable) -> str:
    """The bus table as CSV (RFC 4180), unrounded; the caution is the only cell of the last row."""
    rows = []
    for row in table.rows:
        ohms = [value for pair in (row.z1_ohm, row.z2_ohm, row.z0_ohm) for value in pair or (None, None)]
        rows.append(
            [row.bus, row.nominal_kv, row.kind, row.ik_ka, *row.phases_ka, *row.phases_deg, row.residual_ka,
             row.x_over_r, row.fault_level_mva, row.peak_ka, *ohms, "; ".join(row.assumed)]
        )  # fmt: skip
    return _csv(_CSV_TITLES, rows)


def _csv(titles: Sequence[str], rows: Iterable[Sequence[object]]) -> str:
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\r\n")
    writer.writerow(titles)
    writer.writerows(["" if cell is None or _endless(cell) else cell for cell in row] for row in rows)
    writer.writerow([CAUTION])
    return out.getvalue()


def _endless(value: object) -> bool:
    return isinstance(value, float) and not math.isfinite(value)


def bus_json(table: BusTable) -> str:
    """The bus table as one JSON object: the caution, what was computed, the findings, and ``rows``."""
    return _json(
        {
            "caution": CAUTION,
            "plant": table.name,
            "method": table.case.method,
            "level": table.case.level,
            "moment": table.case.moment,
            "frequency_hz": table.plant.document.frequency_hz,
            "prefault_pu": table.plant.document.prefault_pu,
            "arrangement": table.arrangement,
            "findings": [_finding_record(table.plant, finding) for finding in table.findings],
            "rows": [_row_record(row) for row in table.rows],
        }
    )


def _row_record(row: BusRow) -> dict[str, Any]:
    """A row; the method's own figures only where it has some."""
    return {key: value for key, value in asdict(row).items() if key != "figures" or value is not None}


def _json(value: object) -> str:
    return json.dumps(_finite(value), indent=2, allow_nan=False) + "\n"


def _finite(value: Any) -> Any:
    """The value with everything that JSON has no number for replaced by null."""
    if isinstance(value, dict):
        return {key: _finite(inner) for key, inner in value.items()}
    if isinstance(value, (list, tuple)):
        return [_finite(inner) for inner in value]
    return None if _endless(value) else value


def _finding_record(plant: Plant, finding: Finding) -> dict[str, Any]:
    parts = [{"id": key, "name": plant.parts[key].name if key in plant.parts else ""} for key in finding.parts]
    return {**asdict(finding), "severity": str(finding.severity), "parts": parts}


def findings_text(plant: Plant, findings: Sequence[Finding]) -> str:
    """Findings for people: one line each, and what to do about it below."""
    name = plant.document.name or "Plant without a name"
    if not findings:
        return f"{name}: nothing to remark.\n\n{CAUTION}\n"
    lines = []
    for finding in findings:
        lines.append(f"{finding.severity!s:8} {finding.message}")
        if finding.remedy:
            lines.append(f"{'':8} → {finding.remedy}")
    counts = {severity: sum(f.severity is severity for f in findings) for severity in Severity}
    total = ", ".join(f"{n} {severity}{'s' if n > 1 else ''}" for severity, n in counts.items() if n)
    return "\n".join([f"{name}: {total}", "", *lines, "", CAUTION]) + "\n"


def findings_csv(plant: Plant, findings: Sequence[Finding]) -> str:
    """Findings as CSV; the caution is the only cell of the last row."""
    rows = [
        [str(f.severity), f.code, f.message, f.remedy, "; ".join(_names(plant, f)), f.field] for f in findings
    ]  # fmt: skip
    return _csv(("severity", "code", "message", "remedy", "parts", "field"), rows)


def _names(plant: Plant, finding: Finding) -> list[str]:
    return [plant.parts[key].name or key for key in finding.parts if key in plant.parts]


def findings_json(plant: Plant, findings: Sequence[Finding]) -> str:
    """Findings as one JSON object."""
    listed = [_finding_record(plant, finding) for finding in findings]
    return _json({"caution": CAUTION, "plant": plant.document.name or "", "findings": listed})
