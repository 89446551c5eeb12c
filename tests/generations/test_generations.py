"""Every version of the file format ever released still opens; one file for each is kept here."""

from pathlib import Path

import pytest

from onelinefault.model.conductors import Cable
from onelinefault.model.fields import Basis
from onelinefault.model.parts import PART_CLASSES
from onelinefault.store.file_format import plant_text
from onelinefault.store.migrate import CURRENT_VERSION
from onelinefault.store.plant_file import read_plant

HERE = Path(__file__).parent


@pytest.mark.parametrize("version", range(1, CURRENT_VERSION + 1))
def test_every_version_opens_without_a_remark(version: int) -> None:
    opened = read_plant(HERE / f"version_{version}.plant.json")
    assert opened.findings == ()
    assert {part.kind for part in opened.plant.parts.values()} == {part_class.kind for part_class in PART_CLASSES}


def test_todays_version_is_written_as_it_was_read() -> None:
    path = HERE / f"version_{CURRENT_VERSION}.plant.json"
    assert plant_text(read_plant(path).plant) == path.read_text(encoding="utf-8")


def test_version_1_means_what_it_meant() -> None:
    plant = read_plant(HERE / "version_1.plant.json").plant
    assert (plant.document.name, plant.document.frequency_hz, plant.document.base_mva) == ("Generation one", 60, 10)
    assert [(s.id, s.title, s.paper, s.upright) for s in plant.sheets] == [
        ("s1", "Main", "A3", False),
        ("s45", "Low voltage", "ANSI B", True),
    ]
    supply = plant.parts["p2"]
    assert supply.text("earth_fault_level_max") == "1 250 MVA"
    assert supply.basis_of("fault_level_max") is Basis.DRAWING
    assert supply.basis_of("nominal_voltage") is Basis.NAMEPLATE
    cable = plant.parts["p11"]
    assert isinstance(cable, Cable) and cable.length is not None
    assert len(plant.wires) == 18 and plant.wires["w21"].corners == ((22, 9),) and plant.wires["w21"].b.at == 21
    assert plant.arranged("a39").parts["p3"].in_service is False
    assert plant.tags == {"fault": (3, -4), "p3": (-2, 5)} and plant.next_number == 46
