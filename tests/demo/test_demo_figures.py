"""The demo plants' figures: as filed beside them, as worked by hand, and as the phase-domain solution gives them."""

import json
import math
from dataclasses import replace
from functools import cache
from pathlib import Path
from typing import Any

import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.results import BusRow
from onelinefault.model.consumers import Bus
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.plant import Plant
from onelinefault.store.plant_file import read_plant
from onelinefault.studies import arrangement_named, prepare, study_of
from tests.demo import by_hand
from tests.oracle.compare import disagreements
from tests.oracle.phase_domain import Oracle

FOLDERS = sorted(path.parent for path in Path(__file__).parents[2].glob("demo_projects/*/*.plant.json"))
NAMES = [folder.name for folder in FOLDERS]
BY_HAND = {"lindermoor_mill": by_hand.mill(), "sorrel_gap_quarry": by_hand.quarry()}
FILED_TO = 1e-4  # figures are filed to five digits
HAND_TO = 1e-4  # the hand work rounds hp to 0.7457 kW, table X/R to three digits, Carson's constants to five


@cache
def plant_of(name: str) -> Plant:
    """The plant in its file."""
    folder = FOLDERS[NAMES.index(name)]
    return read_plant(folder / f"{name}.plant.json").plant


@cache
def filed(name: str) -> list[dict[str, Any]]:
    """The rows of expected.json."""
    rows: list[dict[str, Any]] = json.loads((FOLDERS[NAMES.index(name)] / "expected.json").read_text())["rows"]
    return rows


@cache
def found(name: str, arrangement: str | None, level: str) -> dict[tuple[str, str], BusRow]:
    """All buses and kinds as the engine gives them; arrangement by name."""
    plant = plant_of(name)
    study = study_of(plant, Case(level=level), arrangement_named(plant, arrangement))
    return {(row.bus, row.kind): row for row in study.all_buses()}


def buses_of(plant: Plant) -> list[Bus]:
    """All buses."""
    return [part for part in plant.parts.values() if isinstance(part, Bus)]


@pytest.mark.parametrize("name", NAMES)
def test_the_filed_figures_leave_nothing_out(name: str) -> None:
    plant = plant_of(name)
    states = [(a.name, "max") for a in plant.arrangements] + [(plant.arrangements[0].name, "min")]
    kinds = [kind.value for kind in FaultKind]
    wanted = {(*state, bus.name, kind) for state in states for bus in buses_of(plant) for kind in kinds}
    assert {(r["arrangement"], r["level"], r["bus"], r["kind"]) for r in filed(name)} == wanted
    assert len(filed(name)) == len(wanted)


@pytest.mark.parametrize("name", NAMES)
def test_the_figures_are_as_filed(name: str) -> None:
    for row in filed(name):
        got = found(name, row["arrangement"], row["level"])[row["bus"], row["kind"]]
        where = (row["arrangement"], row["level"], row["bus"], row["kind"])
        assert got.ik_ka == pytest.approx(row["ik_ka"], rel=FILED_TO, abs=1e-9), where
        assert got.peak_ka == pytest.approx(row["peak_ka"], rel=FILED_TO, abs=1e-9), where
        assert got.residual_ka == pytest.approx(row["residual_ka"], rel=FILED_TO, abs=1e-9), where
        assert (got.x_over_r is None) == (row["x_over_r"] is None), where
        if row["x_over_r"] is not None:
            assert got.x_over_r == pytest.approx(row["x_over_r"], rel=FILED_TO), where


@pytest.mark.parametrize("name", NAMES)
def test_the_sheets_show_the_normal_arrangement(name: str) -> None:
    as_drawn = found(name, None, "max")
    assert as_drawn == found(name, plant_of(name).arrangements[0].name, "max")


@pytest.mark.parametrize(("name", "key"), [(name, key) for name, figures in BY_HAND.items() for key in figures])
def test_the_figures_are_those_worked_by_hand(name: str, key: tuple[str, str]) -> None:
    # independent: by_hand works in ohms per phase from the nameplates, step by step
    assert found(name, None, "max")[key].ik_ka == pytest.approx(BY_HAND[name][key], rel=HAND_TO, abs=1e-9)


def test_the_hand_work_covers_every_level_and_both_ways_of_earthing() -> None:
    for name, figures in BY_HAND.items():
        levels = {bus.name: bus.text("nominal_voltage") for bus in buses_of(plant_of(name))}
        assert {levels[bus] for bus, kind in figures if kind == "three-phase"} == set(levels.values())
        assert sum(kind == "line-to-earth" for _, kind in figures) >= 2


@pytest.mark.parametrize(
    ("name", "arrangement", "bus", "resistors_a"),
    [
        ("lindermoor_mill", None, "Board A", (400, 400)),  # T1 and G1
        ("lindermoor_mill", None, "Board B", (400,)),
        ("lindermoor_mill", "11 kV tie closed", "Board B", (400, 400, 400)),
        ("sorrel_gap_quarry", None, "SWGR A", (200,)),
        ("sorrel_gap_quarry", None, "SWGR B", (50,)),
        ("sorrel_gap_quarry", "Tie closed", "SWGR A", (200, 50)),
    ],
)
def test_an_earth_fault_at_medium_voltage_is_what_the_resistors_let_through(
    name: str, arrangement: str | None, bus: str, resistors_a: tuple[int, ...]
) -> None:
    # law: all else in the loop is small against the resistors and stands at right angles to them
    ka = found(name, arrangement, "max")[bus, "line-to-earth"].ik_ka
    assert 0.98 * sum(resistors_a) < 1000 * ka < sum(resistors_a)


def test_no_current_flows_to_earth_where_there_is_no_neutral() -> None:
    # law: the quarry's pumps stand behind a delta winding, nothing there is earthed
    rows = found("sorrel_gap_quarry", None, "max")
    assert rows["Pumps", "line-to-earth"].ik_ka == 0
    two = rows["Pumps", "two-lines-to-earth"].ik_ka
    assert two == pytest.approx(rows["Pumps", "line-to-line"].ik_ka, rel=1e-12)


@pytest.mark.parametrize("name", NAMES)
def test_the_readme_shows_the_filed_figures(name: str) -> None:
    states = [a.name for a in plant_of(name).arrangements]
    rows = {(r["arrangement"], r["bus"], r["kind"]): r for r in filed(name) if r["level"] == "max"}
    lines = (FOLDERS[NAMES.index(name)] / "README.md").read_text(encoding="utf-8").splitlines()
    shown = {
        cells[1]: cells[2:-1] for cells in ([c.strip() for c in line.split("|")] for line in lines) if len(cells) == 10
    }
    for bus in buses_of(plant_of(name)):
        wanted = [rows[states[0], bus.name, kind.value]["ik_ka"] for kind in FaultKind]
        wanted.append(rows[states[0], bus.name, "three-phase"]["peak_ka"])
        wanted += [rows[state, bus.name, "three-phase"]["ik_ka"] for state in states[1:]]
        for text, value in zip(shown[bus.name], wanted, strict=True):
            assert float(text) == pytest.approx(value, rel=5e-3, abs=1e-9), bus.name


def test_what_the_readmes_say_of_the_ties_is_so() -> None:
    # with the tie closed the boards would see more than the 16 kA and 25 kA that their busbars withstand
    for name, tie, bus, withstand_ka in (
        ("lindermoor_mill", "11 kV tie closed", "Board A", 16),
        ("sorrel_gap_quarry", "Tie closed", "SWGR A", 25),
    ):
        assert plant_of(name).named(bus)[0].text("short_time_current") == f"{withstand_ka} kA"
        assert found(name, None, "max")[bus, "three-phase"].ik_ka < withstand_ka
        assert found(name, tie, "max")[bus, "three-phase"].ik_ka > withstand_ka


def known_to_the_oracle(plant: Plant) -> Plant:
    """The plant without converters (their current is no linear matter) and with its line's impedances typed in."""
    parts = dict(plant.parts)
    for part_id, part in plant.parts.items():
        if part.kind == "converter_source":
            parts[part_id] = replace(part, in_service=False)
        if part.name == "L2":
            parts[part_id] = _with_typed_impedances(part)
        if part.name == "TL3":  # in delta on both sides: no zero-sequence current, whatever its impedance
            parts[part_id] = part.with_text("zero_sequence_impedance", "100 %")
    return replace(plant, parts=parts)


def _with_typed_impedances(line: Any) -> Any:
    z1, z0 = (z / (3200 * 0.3048 / 1000) for z in by_hand.pit_line_ohm())
    typed = line.with_text("r_temperature", "20 °C")
    for field, ohm_per_km in (("r_per", z1.real), ("x_per", z1.imag), ("r0_per", z0.real), ("x0_per", z0.imag)):
        typed = typed.with_text(f"{field}_length", f"{ohm_per_km:.9f} ohm/km")
    return typed


@pytest.mark.parametrize("kind", FaultKind)
@pytest.mark.parametrize("name", NAMES)
def test_the_phase_domain_solution_agrees_everywhere(name: str, kind: FaultKind) -> None:
    # independent: tests/oracle solves phases a, b, c with coils on limbs, in volts and ohms
    _compare(name, None, kind)


@pytest.mark.parametrize(("name", "number"), [(name, number) for name in NAMES for number in (1, 2)])
def test_the_phase_domain_solution_agrees_in_the_other_arrangements(name: str, number: int) -> None:
    # two lines to earth: its currents rest on all three sequences
    _compare(name, plant_of(name).arrangements[number].id, FaultKind.TWO_LINES_TO_EARTH)


def _compare(name: str, arrangement: str | None, kind: FaultKind) -> None:
    plant = known_to_the_oracle(plant_of(name))
    completed, _ = prepare(plant, arrangement)
    study, oracle = study_of(plant, Case(), arrangement), Oracle(completed, Case())
    for bus in buses_of(plant):
        fault = Fault(Place(bus.id), kind)
        assert disagreements(study.fault(fault), oracle.fault(fault)) == [], bus.name


def test_the_winder_adds_its_limit_at_a_bus_without_voltage() -> None:
    # law: into a dead short the drive feeds 1.5 times its rated current, a quarter period behind; the rest is linear
    with_it = found("lindermoor_mill", None, "max")["MCC 2", "three-phase"]
    without = study_of(known_to_the_oracle(plant_of("lindermoor_mill")), Case()).all_buses((FaultKind.THREE_PHASE,))
    row = next(row for row in without if row.bus == "MCC 2")
    assert row.z1_ohm is not None
    linear = 0.42 / math.sqrt(3) / complex(*row.z1_ohm)
    assert with_it.ik_ka == pytest.approx(abs(linear - 1.5j * 0.63 / (math.sqrt(3) * 0.42)), rel=1e-9)
