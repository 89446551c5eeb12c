"""The table of all buses where a method calculates faults in several views: each row is that of the single fault."""

from dataclasses import replace

import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.study import Study
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.engine.power_station import station
from tests.oracle.sketch import Sketch

STATION = station()


def with_drive() -> Sketch:
    """The station with a regenerating drive on its 6 kV board, a dead bus, and a bus out of service."""
    s = Sketch()
    s.parts, s.wires = dict(STATION.plant.parts), dict(STATION.plant.wires)
    s.document = STATION.plant.document
    s.hang(
        "induction_motor", STATION.at["6"], rated_power="900 kW", rated_voltage="6 kV", drive="regenerating converter"
    )
    s.bus(6.0, "Spare")
    second = s.bus(6.0, "Board 6 too")
    s.hang("breaker", STATION.at["6"], second, closed="yes")
    off, _ = s.bus(6.0, "Off")
    s.parts[off] = replace(s.parts[off], in_service=False)
    return s


@pytest.mark.parametrize("level", ["max", "min"])
def test_rows_are_those_of_single_faults(level: str) -> None:
    plant = with_drive().plant
    study = Study(plant, Case("iec60909", level=level))
    rows = study.all_buses()
    buses = [part for part in plant.parts.values() if part.kind == "bus"]
    assert [(row.part, row.kind) for row in rows] == [(bus.id, kind.value) for bus in buses for kind in FaultKind]
    for row in rows:
        if row.bus in ("Spare", "Off"):
            assert row.ik_ka == 0 and row.figures is None
            continue
        single = study.fault(Fault(Place(row.part), FaultKind(row.kind)))
        assert row.ik_ka == pytest.approx(single.ik_ka, rel=1e-9)
        assert row.peak_ka == pytest.approx(single.peak_ka, rel=1e-9) and row.figures is not None
        assert row.residual_ka == pytest.approx(abs(single.residual_ka), rel=1e-9, abs=1e-9)
        assert row.assumed == study.assumed.get(int(study.network.island[single.node]), ())


def test_the_drive_is_in_three_phase_rows_only() -> None:
    plant, plain = with_drive().plant, STATION.plant
    for kind in (FaultKind.THREE_PHASE, FaultKind.LINE_TO_LINE):
        more, less = (
            {row.part: row.ik_ka for row in Study(p, Case("iec60909")).all_buses((kind,))} for p in (plant, plain)
        )
        board = STATION.at["6"][0]
        if kind is FaultKind.THREE_PHASE:
            assert more[board] > less[board] * 1.01
        else:
            assert more[board] == pytest.approx(less[board], rel=1e-9)


def test_the_classical_table_has_no_figures() -> None:
    assert {row.figures for row in Study(STATION.plant, Case()).all_buses()} == {None}
