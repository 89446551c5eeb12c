"""The command line: outputs, exit codes, one clear line for every mistake."""

import csv
import io
import json
import math
import os
import subprocess
import sys
from pathlib import Path
from typing import Any

import pypdf
import pytest

import onelinefault
from onelinefault.cli import DONE, ERRORS_FOUND, NOT_DRAWN, REFUSED, main
from onelinefault.model.building import PlantBuilder
from onelinefault.model.caution import CAUTION
from onelinefault.model.plant import Arrangement, Plant
from onelinefault.report import outputs, screen
from onelinefault.store.plant_file import write_plant

ROOT = Path(__file__).parents[2]
GRID_KA = 900 / (math.sqrt(3) * 33)  # S″ = √3·U·I
PROMISED = {
    "bus", "nominal_kv", "kind", "ik_ka", "phases_ka", "phases_deg", "residual_ka", "x_over_r", "fault_level_mva",
    "peak_ka", "z1_ohm", "z2_ohm", "z0_ohm",
}  # fmt: skip
KINDS = ["three-phase", "line-to-line", "two-lines-to-earth", "line-to-earth"]


def plant() -> Plant:
    b = PlantBuilder("Pump house")
    b.add(
        "supply", "Grid", nominal_voltage="33 kV", fault_level_max="900 MVA", fault_level_min="600 MVA", x_over_r="12"
    )
    b.add("bus", "Intake ″Ω", nominal_voltage="33 kV")
    b.add("transformer", "T1", rated_power="10 MVA", high_voltage="33 kV", low_voltage="11 kV", impedance="10 %",
          x_over_r="12", vector_group="Dyn11")  # fmt: skip
    b.add("bus", "Board", nominal_voltage="11 kV")
    b.add("breaker", "Q1")
    b.add("bus", "Pumps", nominal_voltage="11 kV")
    b.add("cable", "W1", length="500 m", r_per_length="0.1 ohm/km", x_per_length="0.1 ohm/km")
    b.add("bus", "Far", nominal_voltage="11 kV")
    b.chain("Grid", "Intake ″Ω", "T1.high")
    b.chain("T1.low", "Board", "Q1", "Pumps", "W1", "Far")
    made = b.plant()
    q1 = next(part.id for part in made.parts.values() if part.name == "Q1")
    return Plant(**{**made.__dict__, "arrangements": (Arrangement("a90", "Pumps off", {q1: False}),)})


@pytest.fixture(autouse=True)
def no_screen(monkeypatch: pytest.MonkeyPatch) -> None:
    """What a command tells Qt about the screen does not outlive its test."""
    monkeypatch.setenv("QT_QPA_PLATFORM", "offscreen")


@pytest.fixture
def file(tmp_path: Path) -> str:
    path = tmp_path / "pump-house.plant.json"
    write_plant(plant(), path)
    return str(path)


@pytest.fixture
def no_window(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(screen, "window_trouble", lambda _: "no window: there is no display here")


def refused(capsys: pytest.CaptureFixture[str], words: list[str], code: int = REFUSED) -> str:
    """The one line that a refused command says."""
    assert main(words) == code
    said = capsys.readouterr()
    assert said.err.startswith("onelinefault: ") and said.err.count("\n") == 1 and "Traceback" not in said.err
    return said.err


def text_of(pdf: Path) -> str:
    """The words of a PDF with single spaces between them."""
    return " ".join(" ".join(page.extract_text() for page in pypdf.PdfReader(pdf).pages).split())


def rows_of(capsys: pytest.CaptureFixture[str], *words: str) -> list[dict[str, Any]]:
    assert main(["faults", *words, "--format", "json"]) == DONE
    rows: list[dict[str, Any]] = json.loads(capsys.readouterr().out)["rows"]
    return rows


def test_the_table_of_all_buses(file: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["faults", file]) == DONE
    said = capsys.readouterr()
    assert said.out.count("three-phase") == 4 and "15.75" in said.out and CAUTION in said.out
    assert said.err == ""


def test_json_holds_what_is_promised(file: str, capsys: pytest.CaptureFixture[str]) -> None:
    rows = rows_of(capsys, file)
    assert [(row["bus"], row["kind"]) for row in rows] == [
        (bus, kind) for bus in ("Intake ″Ω", "Board", "Pumps", "Far") for kind in KINDS
    ]
    assert all(row.keys() >= PROMISED for row in rows)
    assert rows[0]["ik_ka"] == pytest.approx(GRID_KA, rel=1e-9)
    assert rows[0]["phases_ka"] == pytest.approx([GRID_KA] * 3, rel=1e-9)
    assert rows[0]["z1_ohm"] == pytest.approx([1.21 / math.hypot(1, 12), 12 * 1.21 / math.hypot(1, 12)], rel=1e-9)


def test_rows_are_chosen_by_place_and_kind(file: str, capsys: pytest.CaptureFixture[str]) -> None:
    rows = rows_of(capsys, file, "--at", "board", "--at", "T1.high", "--kind", "line-to-line")
    assert [(row["bus"], row["kind"]) for row in rows] == [("Board", "line-to-line"), ("T1 high", "line-to-line")]
    (row,) = rows_of(capsys, file, "--at", "Intake ″Ω", "--kind", "three-phase", "--level", "min")
    assert row["ik_ka"] == pytest.approx(GRID_KA * 600 / 900, rel=1e-9)


@pytest.mark.parametrize(("zf", "ohm"), [("1", 1), ("0.5+2j", 0.5 + 2j), ("800 mohm", 0.8), ("1,5 Ω", 1.5)])
def test_impedances_of_the_fault(file: str, zf: str, ohm: complex, capsys: pytest.CaptureFixture[str]) -> None:
    (row,) = rows_of(capsys, file, "--at", "Intake ″Ω", "--kind", "three-phase", "--zf", zf)
    z = 1.21 * complex(1, 12) / math.hypot(1, 12) + ohm
    assert row["ik_ka"] == pytest.approx(33 / math.sqrt(3) / abs(z), rel=1e-9)


def test_an_arrangement(file: str, capsys: pytest.CaptureFixture[str]) -> None:
    rows = rows_of(capsys, file, "--arrangement", "pumps off", "--at", "Pumps", "--kind", "three-phase")
    assert rows[0]["ik_ka"] == 0 and rows[0]["z1_ohm"] is None and rows[0]["x_over_r"] is None


def test_csv_and_output_to_a_file(file: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    out = tmp_path / "table.csv"
    assert main(["faults", file, "--format", "csv", "-o", str(out)]) == DONE
    assert capsys.readouterr().out == ""
    assert out.read_bytes().count(b"\r\n") == 18
    rows = list(csv.DictReader(io.StringIO(out.read_text(encoding="utf-8"), newline="")))
    assert rows[0]["bus"] == "Intake ″Ω" and float(rows[0]["ik_ka"]) == pytest.approx(GRID_KA)
    assert "cannot be written" in refused(capsys, ["faults", file, "-o", str(tmp_path / "no" / "x.csv")])


MISTAKES: list[tuple[list[str], str]] = [
    (["faults", "FILE", "--at", "Bord"], "nothing called 'Bord' to put a fault on; near it: Board"),
    (["faults", "FILE", "--at", "T1.middle"], "T1"),
    (["faults", "FILE", "--zf", "soft"], "expected a number with a unit"),
    (["faults", "FILE", "--zf", "nan"], "an impedance of a fault is a number of ohms"),
    (["faults", "FILE", "--zf", "5 kV"], "not a unit of impedance"),
    (["faults", "FILE", "--arrangement", "Night"], "no running arrangement called 'Night'; the plant has Pumps off"),
    (["draw", "FILE", "--fault", "W1", "--along", "1.5", "-o", "x.pdf"], "must lie between 0 and 1"),
    (["draw", "FILE", "--fault", "Board", "--along", "0.5", "-o", "x.pdf"], "Board"),
    (["draw", "FILE", "--fault", "Board", "--phases", "ax", "-o", "x.pdf"], "ax"),
    (["draw", "FILE", "--sheet", "Cellar", "-o", "x.pdf"], "no sheet called 'Cellar'; the plant has One-line diagram"),
    (["draw", "FILE", "-o", "x.docx"], "ending in .pdf, .svg or .png"),
    (["draw", "FILE", "-o", "no-such-folder/x.pdf"], "cannot be written"),
    (["faults", "none.plant.json"], "there is no file none.plant.json"),
    (["check", "none.plant.json"], "there is no file none.plant.json"),
    (["draw", "none.plant.json", "-o", "x.pdf"], "there is no file none.plant.json"),
    (["none.plant.json"], "there is no file none.plant.json"),
    (["fautls"], "there is no file fautls"),
]


@pytest.mark.usefixtures("no_window")
@pytest.mark.parametrize(("words", "message"), MISTAKES)
def test_mistakes_are_one_clear_line(
    file: str, words: list[str], message: str, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(Path(file).parent)
    assert message in refused(capsys, [file if word == "FILE" else word for word in words])
    assert not Path("x.pdf").exists()


@pytest.mark.parametrize(
    "words",
    [["faults"], ["faults", "x", "--kind", "short"], ["faults", "x", "--format", "xml"], ["draw", "x"], ["--nonsense"]],
)
def test_wrong_use_ends_with_two(words: list[str], capsys: pytest.CaptureFixture[str]) -> None:
    with pytest.raises(SystemExit) as ended:
        main(words)
    assert ended.value.code == REFUSED
    assert "usage: onelinefault" in capsys.readouterr().err


def test_help_and_version(capsys: pytest.CaptureFixture[str]) -> None:
    for words in (["--help"], ["faults", "--help"], ["draw", "-h"], ["check", "-h"], ["open", "-h"]):
        with pytest.raises(SystemExit) as ended:
            main(words)
        assert ended.value.code == DONE
    said = capsys.readouterr().out
    assert "exit codes: 0 done; 1 check found errors" in said and all(f'"{key}"' in said for key in PROMISED)
    with pytest.raises(SystemExit):
        main(["--version"])
    assert capsys.readouterr().out.strip() == f"onelinefault {onelinefault.__version__}"


def test_check_counts_errors_in_its_exit_code(file: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check", file]) == DONE
    assert CAUTION in capsys.readouterr().out
    bad = tmp_path / "bad.plant.json"
    bad.write_text(Path(file).read_text(encoding="utf-8").replace('"10 %"', '"10 precent"'), encoding="utf-8")
    assert main(["check", str(bad)]) == ERRORS_FOUND
    said = capsys.readouterr().out
    assert "T1" in said and "10 precent" in said
    assert main(["check", str(bad), "--format", "json"]) == ERRORS_FOUND
    findings = json.loads(capsys.readouterr().out)["findings"]
    assert findings[0]["severity"] == "error"
    assert {"code": "unreadable-value", "field": "impedance"}.items() <= findings[0].items()
    assert main(["check", str(bad), "--format", "csv"]) == ERRORS_FOUND
    assert list(csv.reader(io.StringIO(capsys.readouterr().out)))[-1] == [CAUTION]
    # the rest is computed all the same
    assert rows_of(capsys, str(bad), "--at", "Intake ″Ω", "--kind", "three-phase")[0]["ik_ka"] == pytest.approx(GRID_KA)


@pytest.mark.parametrize("ending", ["pdf", "svg", "png"])
def test_the_annotated_sheet(file: str, tmp_path: Path, ending: str, capsys: pytest.CaptureFixture[str]) -> None:
    out = tmp_path / f"out.{ending}"
    assert main(["draw", file, "--fault", "W1", "--along", "40 %", "--kind", "line-to-earth", "-o", str(out)]) == DONE
    assert capsys.readouterr().out.strip() == f"Written: {out}"
    assert out.stat().st_size > 1000
    if ending == "pdf":
        text = text_of(out)
        assert "Pump house" in text and "line-to-earth" in text and "qualified" in text


def test_a_sheet_without_a_fault(file: str, tmp_path: Path) -> None:
    out = tmp_path / "plain.pdf"
    assert main(["draw", file, "--sheet", "one-line diagram", "--paper", "A4", "--detail", "3", "-o", str(out)]) == DONE
    (page,) = pypdf.PdfReader(out).pages
    millimetres = sorted(float(side) / 72 * 25.4 for side in (page.mediabox.width, page.mediabox.height))
    assert millimetres == pytest.approx([210, 297], abs=0.5)


@pytest.mark.usefixtures("no_window")
def test_without_a_display_the_table_and_the_sheet(file: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert main([file]) == DONE
    said = capsys.readouterr()
    beside = Path(file).with_name("pump-house.pdf")
    assert "15.75" in said.out and CAUTION in said.out
    assert f"No window: there is no display here. The annotated sheets are in {beside}." in said.out
    text = text_of(beside)
    assert "15.7 kA" in text and "three-phase fault" in text


@pytest.mark.usefixtures("no_window")
def test_without_a_display_where_asked(file: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    out = tmp_path / "elsewhere.svg"
    assert main(["-o", str(out), file]) == DONE
    assert out.exists() and not Path(file).with_name("pump-house.pdf").exists()
    assert "cannot be written" in refused(capsys, ["open", file, "-o", str(tmp_path / "no" / "x.pdf")])


@pytest.mark.usefixtures("no_window")
def test_beside_a_file_that_takes_nothing_the_sheet_comes_here(
    file: str, tmp_path: Path, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    here = tmp_path / "here"
    here.mkdir()
    monkeypatch.chdir(here)
    Path(file).with_name("pump-house.pdf").mkdir()  # nothing can be written under that name
    assert main([file]) == DONE
    said = capsys.readouterr()
    assert "cannot be written" in said.err and "in pump-house.pdf." in said.out
    assert (here / "pump-house.pdf").is_file()


@pytest.mark.usefixtures("no_window")
def test_a_plant_without_a_source_is_drawn_without_figures(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    b = PlantBuilder("Dead")
    b.add("bus", "Alone", nominal_voltage="11 kV")
    write_plant(b.plant(), tmp_path / "dead.plant.json")
    assert main([str(tmp_path / "dead.plant.json")]) == DONE
    assert "Alone" in capsys.readouterr().out and (tmp_path / "dead.pdf").exists()
    write_plant(Plant(), tmp_path / "empty.plant.json")
    assert main([str(tmp_path / "empty.plant.json")]) == DONE


@pytest.mark.usefixtures("no_window")
def test_missing_libraries_are_named_after_the_table(
    file: str, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    def cannot(*_: object) -> None:
        raise ImportError("libEGL.so.1: cannot open shared object file: No such file or directory")

    monkeypatch.setattr(outputs.Outputs, "draw", cannot)
    assert main([file]) == NOT_DRAWN
    said = capsys.readouterr()
    assert "15.75" in said.out and said.err.count("\n") == 1 and "libegl1" in said.err
    assert "libegl1" in refused(capsys, ["draw", file, "-o", "x.pdf"], NOT_DRAWN)


@pytest.mark.usefixtures("no_window")
def test_no_file_and_no_display(capsys: pytest.CaptureFixture[str]) -> None:
    assert "name a plant file" in refused(capsys, [])


def test_with_a_display_the_window_opens(file: str, monkeypatch: pytest.MonkeyPatch) -> None:
    from onelinefault.desktop import app

    opened: list[str | None] = []

    def run(path: str | None = None) -> int:
        opened.append(path)
        return 0

    monkeypatch.setattr(screen, "window_trouble", lambda _: "")
    monkeypatch.setattr(app, "run", run)
    assert main([file]) == DONE and main(["open", file]) == DONE and main([]) == DONE
    assert opened == [file, file, None]


def environment(**more: str) -> dict[str, str]:
    kept = {key: value for key, value in os.environ.items() if key not in ("DISPLAY", "WAYLAND_DISPLAY")}
    return {**kept, "PYTHONPATH": str(ROOT), **more}


def test_as_a_program_of_its_own(file: str) -> None:
    command = [sys.executable, "-m", "onelinefault", file]
    done = subprocess.run(command, env=environment(), capture_output=True, text=True, encoding="utf-8", check=False)
    assert (done.returncode, done.stderr) == (DONE, "")
    assert "15.75" in done.stdout and Path(file).with_name("pump-house.pdf").exists()


def test_a_terminal_with_few_letters(file: str) -> None:
    command = [sys.executable, "-m", "onelinefault", "faults", file]
    done = subprocess.run(command, env=environment(PYTHONIOENCODING="ascii"), capture_output=True, check=False)
    assert done.returncode == DONE
    assert 'I"k kA' in done.stdout.decode("ascii") and "Z1 ohm" in done.stdout.decode("ascii")


def test_a_reader_that_stops_early(file: str) -> None:
    command = [sys.executable, "-m", "onelinefault", "faults", file, "--format", "json"]
    with subprocess.Popen(command, env=environment(), stdout=subprocess.PIPE, stderr=subprocess.PIPE) as process:
        assert process.stdout is not None and process.stderr is not None
        process.stdout.close()
        assert process.stderr.read() == b""
    assert process.returncode == DONE


def test_the_method_is_chosen_named_and_never_mixed(capsys: pytest.CaptureFixture[str]) -> None:
    """IEC 60909-0 puts c = 1.1 on the source above 1 kV (table 1): more than the classical current at the intake."""
    file = str(ROOT / "demo_projects" / "lindermoor_mill" / "lindermoor_mill.plant.json")
    seen = {}
    for method in ("classical", "iec60909"):
        assert (
            main(["faults", file, "--at", "Intake B", "--kind", "three-phase", "--method", method, "--format", "json"])
            == 0
        )
        table = json.loads(capsys.readouterr().out)
        assert table["method"] == method
        seen[method] = table["rows"][0]
    assert "figures" not in seen["classical"]
    figures = seen["iec60909"]["figures"]
    assert figures["c"] == 1.1
    assert seen["iec60909"]["peak_ka"] == pytest.approx(figures["peaks"][figures["peak_method"]]["ip_ka"])
    # a supply by itself gives its own fault level whatever c is (IEC 60909-0, 6.2: Z_Q = c U / (√3 I″kQ))
    assert seen["iec60909"]["ik_ka"] >= seen["classical"]["ik_ka"]
