"""Bus table, findings and sheets of one plant in one state."""

from pathlib import Path

import pytest

from onelinefault.engine.case import Case
from onelinefault.errors import OutputError, StudyError
from onelinefault.model.building import PlantBuilder
from onelinefault.model.fault import FaultKind
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.plant import Arrangement, Plant
from onelinefault.report.outputs import Outputs
from onelinefault.studies import Asked


def two_boards() -> Plant:
    b = PlantBuilder("Two boards")
    b.add("supply", "Grid", nominal_voltage="11 kV", fault_level_max="200 MVA", x_over_r="10")
    b.add("bus", "Near", nominal_voltage="11 kV")
    b.add("breaker", "Q1")
    b.add("cable", "W1", length="2 km", r_per_length="0.1 ohm/km", x_per_length="0.1 ohm/km")
    b.add("bus", "Far", nominal_voltage="11 kV")
    b.chain("Grid", "Near", "Q1", "W1", "Far")
    plant = b.plant()
    q1 = next(part.id for part in plant.parts.values() if part.name == "Q1")
    return Plant(**{**plant.__dict__, "arrangements": (Arrangement("a90", "Far off", {q1: False}),)})


def test_the_state_is_the_one_asked_for() -> None:
    drawn, off = Outputs(two_boards(), Case()), Outputs(two_boards(), Case(), "far off")
    assert (drawn.arrangement, off.arrangement) == ("as drawn", "Far off")
    currents = [[row.ik_ka > 0 for row in one.table(Asked((FaultKind.THREE_PHASE,))).rows] for one in (drawn, off)]
    assert currents == [[True, True], [True, False]]
    assert off.table().arrangement == "Far off"
    with pytest.raises(StudyError, match="Night"):
        Outputs(two_boards(), Case(), "Night")


def test_the_largest_three_phase_fault_is_found() -> None:
    outputs = Outputs(two_boards(), Case())
    result = outputs.largest(outputs.table())
    assert result is not None
    assert outputs.plant.parts[result.fault.place.part].name == "Near"
    assert result.fault_level_mva == pytest.approx(200)
    nothing = Outputs(Plant(), Case())
    assert nothing.largest(nothing.table()) is None


def test_what_the_file_said_is_among_the_findings() -> None:
    noticed = Finding(Severity.ERROR, "unreadable-value", "unreadable", "type it anew")
    assert Outputs(two_boards(), Case(), None, (noticed,)).findings[0] == noticed


def test_sheets_are_chosen_by_title(tmp_path: Path) -> None:
    outputs = Outputs(two_boards(), Case())
    assert outputs.draw(None, tmp_path / "x.svg", ["s1"]) == [tmp_path / "x.svg"]
    with pytest.raises(OutputError, match="no sheet called 'Two'; the plant has One-line diagram"):
        outputs.draw(None, tmp_path / "y.svg", ["Two"])
    assert not (tmp_path / "y.svg").exists()
