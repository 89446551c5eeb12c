"""The package's face for scripts: built, saved, opened, solved, read out."""

import math
import subprocess
import sys
from pathlib import Path

import pytest

import onelinefault
from onelinefault import PlantBuilder, check, fault, faults, open_plant, save_plant
from onelinefault.errors import EntryError, FileInUseError, NoSuchPlaceError, StudyError
from onelinefault.model.plant import Plant
from onelinefault.store.locks import lock_plant
from onelinefault.store.plant_file import previous_path

GRID_KA = 900 / (math.sqrt(3) * 33)  # S″ = √3·U·I


def pump_house() -> Plant:
    b = PlantBuilder("Pump house", frequency="50 Hz")
    b.add(
        "supply", "Grid", nominal_voltage="33 kV", fault_level_max="900 MVA", fault_level_min="600 MVA", x_over_r="12"
    )
    b.add("bus", "Intake", nominal_voltage="33 kV")
    b.add("transformer", "T1", rated_power="10 MVA", high_voltage="33 kV", low_voltage="11 kV", impedance="10 %",
          x_over_r="12", vector_group="Dyn11")  # fmt: skip
    b.add("bus", "Board", nominal_voltage="11 kV")
    b.add("cable", "W1", length="500 m", r_per_length="0.1 ohm/km", x_per_length="0.1 ohm/km")
    b.add("bus", "Pumps", nominal_voltage="11 kV")
    b.chain("Grid", "Intake", "T1.high")
    b.chain("T1.low", "Board", "W1", "Pumps")
    return b.plant()


def test_the_bus_table_in_a_few_lines() -> None:
    rows = {row.bus: row for row in faults(pump_house(), kinds=["three-phase"])}
    assert list(rows) == ["Intake", "Board", "Pumps"]
    assert rows["Intake"].ik_ka == pytest.approx(GRID_KA, rel=1e-9)
    # behind the transformer, all X/R equal: 1/S = 1/900 + 1/(10/0.10)
    level = 1 / (1 / 900 + 1 / 100)
    assert rows["Board"].fault_level_mva == pytest.approx(level, rel=1e-9)
    # at the end of the cable: Z = (level's impedance) + 0.05 + j0.05 ohm
    z = 11**2 / level * complex(1, 12) / math.hypot(1, 12) + complex(0.05, 0.05)
    assert rows["Pumps"].ik_ka == pytest.approx(11 / math.sqrt(3) / abs(z), rel=1e-9)


def test_kinds_places_and_levels_can_be_chosen() -> None:
    plant = pump_house()
    rows = faults(plant, "line-to-line", at=["Board", "Intake"])
    assert [(row.bus, row.kind) for row in rows] == [("Board", "line-to-line"), ("Intake", "line-to-line")]
    assert rows[1].ik_ka == pytest.approx(GRID_KA * math.sqrt(3) / 2, rel=1e-9)  # Z1 = Z2
    (weak,) = faults(plant, "three-phase", at="Intake", level="min")
    assert weak.ik_ka == pytest.approx(GRID_KA * 600 / 900, rel=1e-9)
    assert len(faults(plant)) == 3 * 4


def test_terminals_and_impedances() -> None:
    plant = pump_house()
    at_bus, at_terminal, spaced = faults(plant, "three-phase", at=["Board", "T1.low", "T1 low"])
    assert at_terminal.bus == spaced.bus == "T1 low" and at_bus.bus == "Board"
    for row in (at_terminal, spaced):
        assert row.ik_ka == pytest.approx(at_bus.ik_ka, rel=1e-9)
        assert row.phases_deg == pytest.approx(at_bus.phases_deg, abs=1e-6)
        assert row.z1_ohm == pytest.approx(at_bus.z1_ohm, rel=1e-9)
        assert (row.z0_ohm is None) == (at_bus.z0_ohm is None)
    (soft,) = faults(plant, "three-phase", at="Intake", zf_ohm=1)
    z = 33**2 / 900 * complex(1, 12) / math.hypot(1, 12) + 1
    assert soft.ik_ka == pytest.approx(33 / math.sqrt(3) / abs(z), rel=1e-9)
    assert [row.bus for row in faults(plant, "three-phase", zf_ohm=1)] == ["Intake", "Board", "Pumps"]


def test_one_fault_with_all_currents() -> None:
    plant = pump_house()
    halfway = fault(plant, "W1", fraction=0.5)
    level = 1 / (1 / 900 + 1 / 100)
    z = 11**2 / level * complex(1, 12) / math.hypot(1, 12) + complex(0.025, 0.025)
    assert halfway.ik_ka == pytest.approx(11 / math.sqrt(3) / abs(z), rel=1e-9)
    earth = fault(plant, "Board", "line-to-earth", phases="b")
    assert abs(earth.phases_ka[0]) == pytest.approx(0, abs=1e-9) and abs(earth.phases_ka[1]) > 1


def test_mistakes_are_named() -> None:
    plant = pump_house()
    with pytest.raises(EntryError, match="'short' is no kind of fault; use three-phase"):
        faults(plant, "short")
    with pytest.raises(EntryError, match="'most' is no supply level"):
        faults(plant, level="most")
    with pytest.raises(NoSuchPlaceError, match="Intake"):
        faults(plant, at="Intaek")
    with pytest.raises(StudyError, match="no running arrangement called 'Night'; the plant has none"):
        check(plant, arrangement="Night")


def test_findings_of_a_sound_plant_hold_no_error() -> None:
    assert [f for f in check(pump_house()) if f.severity == "error"] == []


def test_saved_and_opened_again(tmp_path: Path) -> None:
    plant = pump_house()
    path = save_plant(plant, tmp_path / "pump-house.plant.json")
    assert open_plant(path) == plant
    other = PlantBuilder("Other").plant()
    save_plant(other, path)
    assert open_plant(path) == other and open_plant(previous_path(path)) == plant
    with lock_plant(path), pytest.raises(FileInUseError):
        save_plant(plant, path)
    assert open_plant(path) == other


def test_every_name_of_the_face_is_there() -> None:
    for name in onelinefault.__all__:
        assert getattr(onelinefault, name) is not None
        assert name in dir(onelinefault)
    with pytest.raises(AttributeError, match="nonsense"):
        onelinefault.nonsense  # noqa: B018


@pytest.mark.parametrize(
    ("statement", "heavy"),
    [
        ("import onelinefault", ("numpy", "scipy", "PySide6", "networkx", "argparse", "json")),
        ("import onelinefault.cli", ("numpy", "scipy", "PySide6", "networkx", "matplotlib")),
        ("from onelinefault import PlantBuilder, save_plant", ("numpy", "scipy", "PySide6", "networkx")),
    ],
)
def test_importing_stays_light(statement: str, heavy: tuple[str, ...]) -> None:
    root = str(Path(__file__).parents[1])
    code = f"import sys; sys.path.insert(0, {root!r})\n{statement}\nprint([m for m in {heavy!r} if m in sys.modules])"
    done = subprocess.run([sys.executable, "-I", "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"
