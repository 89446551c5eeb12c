"""Bus tables and findings as text, CSV and JSON."""

import csv
import io
import json
import math
from dataclasses import replace
from typing import Any

import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.results import BusRow
from onelinefault.model.caution import CAUTION
from onelinefault.model.consumers import Bus
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.plant import Document, Plant
from onelinefault.report.tables import (
    BusTable,
    aligned,
    bus_csv,
    bus_json,
    bus_text,
    findings_csv,
    findings_json,
    findings_text,
)

PLANT = Plant(Document(name="Mill"), {"p1": Bus(id="p1", name='Board "A", east'), "p2": Bus(id="p2")})
ROW = BusRow(
    'Board "A", east', "p1", 11.0, "three-phase", 14.434, (14.434, 14.434, 14.434), (-85.9, 154.1, 34.1), 1e-15,
    13.94, 275.0, 36.69, (0.0315, 0.439), (0.0335, -0.458), None, ("T1", "M2"),
)  # fmt: skip
DEAD = BusRow("Spare", "p2", 11.0, "line-to-earth", 0, (0, 0, 0), (0, 0, 0), 0, None, 0, 0, None, None, None)
FINDINGS = (
    Finding(Severity.ERROR, "voltages", "Two voltages meet at Board A.", "Correct one of them.", ("p1",), "voltage"),
    Finding(Severity.WARNING, "dead", "Nothing feeds Spare.", "", ("p2", "p99")),
    Finding(Severity.WARNING, "other", "Something else.", "See to it."),
)
TABLE = BusTable(PLANT, Case(), (ROW, DEAD), FINDINGS)


def test_the_text_is_aligned_and_says_what_it_rests_on() -> None:
    lines = bus_text(TABLE).splitlines()
    assert lines[0] == "Mill: classical method, largest supply, 50 Hz, arrangement as drawn"
    titles, rule, first, second = lines[2:6]
    assert titles.split()[:4] == ["Bus", "Un", "kV", "Fault"] and set(rule) == {"-", " "}
    assert "I″k kA" in titles and "S″k MVA" in titles and "Z0 Ω" in titles
    assert first.split("  ")[0] == 'Board "A", east'
    assert first.split()[-9:] == [
        "three-phase",
        "14.43*",
        "0",
        "13.9",
        "275.0",
        "36.69",
        "0.0315+j0.439",
        "0.0335−j0.458",
        "–",
    ]
    assert second.split() == ["Spare", "11", "line-to-earth", "0", "0", "–", "0", "0", "–", "–", "–"]
    assert first.index("14.43") + 5 == second.index(" 0 ") + 1  # figures stand under each other: right
    assert lines[-3:] == [
        "* rests on typical or guessed data of T1, M2.",
        "The data have 1 error, 2 warnings: the command check lists them.",
        CAUTION,
    ]


def test_a_sound_plant_gets_the_caution_alone() -> None:
    table = BusTable(Plant(), Case(level="min"), (DEAD,), (), "Tie closed")
    lines = bus_text(table).splitlines()
    assert lines[0] == "Plant without a name: classical method, smallest supply, 50 Hz, arrangement Tie closed"
    assert lines[-2:] == ["", CAUTION]


def test_a_table_without_rows_has_its_titles() -> None:
    assert bus_text(BusTable(PLANT, Case(), ())).splitlines()[2].startswith("Bus")


def test_wide_letters_keep_the_columns() -> None:
    lines = aligned(["Bus", "kA"], [["泵站", "1"], ["Süd", "12"], ["e\u0301\n2", "3"]], ["Bus"])
    assert lines == ["Bus   kA", "----  --", "泵站   1", "Süd   12", "e\u0301 2    3"]


def refuse(word: str) -> Any:
    raise AssertionError(f"{word} is no JSON")


def test_json_is_strict_and_complete() -> None:
    endless = replace(ROW, x_over_r=math.inf, peak_ka=math.nan, z1_ohm=(0.0, math.inf))
    text = bus_json(replace(TABLE, rows=(ROW, endless)))
    record = json.loads(text, parse_constant=refuse)
    assert text.isascii()
    assert record["caution"] == CAUTION
    assert (record["plant"], record["method"], record["level"], record["frequency_hz"]) == (
        "Mill",
        "classical",
        "max",
        50,
    )
    row, odd = record["rows"]
    # the keys that the command promises
    assert row == {
        "bus": 'Board "A", east', "part": "p1", "nominal_kv": 11.0, "kind": "three-phase", "ik_ka": 14.434,
        "phases_ka": [14.434] * 3, "phases_deg": [-85.9, 154.1, 34.1], "residual_ka": 1e-15, "x_over_r": 13.94,
        "fault_level_mva": 275.0, "peak_ka": 36.69, "z1_ohm": [0.0315, 0.439], "z2_ohm": [0.0335, -0.458],
        "z0_ohm": None, "assumed": ["T1", "M2"],
    }  # fmt: skip
    assert odd["x_over_r"] is None and odd["peak_ka"] is None and odd["z1_ohm"] == [0.0, None]
    assert [f["severity"] for f in record["findings"]] == ["error", "warning", "warning"]
    assert record["findings"][1]["parts"] == [{"id": "p2", "name": ""}, {"id": "p99", "name": ""}]


def test_csv_reads_back() -> None:
    text = bus_csv(TABLE)
    assert text.count("\r\n") == text.count("\n") == 4
    titles, first, second, last = csv.reader(io.StringIO(text, newline=""))
    row = dict(zip(titles, first, strict=True))
    assert row["bus"] == 'Board "A", east' and float(row["ik_ka"]) == 14.434 and float(row["ib_deg"]) == 154.1
    assert float(row["x2_ohm"]) == -0.458 and row["r0_ohm"] == row["x0_ohm"] == "" and row["assumed"] == "T1; M2"
    assert dict(zip(titles, second, strict=True))["x_over_r"] == ""
    assert last == [CAUTION]


def test_findings_as_text() -> None:
    lines = findings_text(PLANT, FINDINGS).splitlines()
    assert lines[0] == "Mill: 1 error, 2 warnings"
    assert lines[2:5] == [
        "error    Two voltages meet at Board A.",
        "         → Correct one of them.",
        "warning  Nothing feeds Spare.",
    ]
    assert lines[-1] == CAUTION
    assert findings_text(PLANT, ()).splitlines() == ["Mill: nothing to remark.", "", CAUTION]


def test_findings_for_programs() -> None:
    record = json.loads(findings_json(PLANT, FINDINGS))
    assert record["caution"] == CAUTION and [f["code"] for f in record["findings"]] == ["voltages", "dead", "other"]
    rows = list(csv.reader(io.StringIO(findings_csv(PLANT, FINDINGS), newline="")))
    assert rows[1] == ["error", "voltages", "Two voltages meet at Board A.", "Correct one of them.",
                       'Board "A", east', "voltage"]  # fmt: skip
    assert rows[-1] == [CAUTION] and len(rows) == 5


@pytest.mark.parametrize("write", [bus_text, bus_csv, bus_json])
def test_the_caution_is_on_every_output(write: Any) -> None:
    assert CAUTION in write(BusTable(Plant(), Case(), ()))
