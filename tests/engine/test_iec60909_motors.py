"""The rules for leaving motors out, on plants where each can be worked out by hand."""

import math

import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.iec60909_motors import motor_rules
from onelinefault.engine.study import Study
from onelinefault.errors import StudyError
from onelinefault.model.fault import Place
from tests.authority.iec60909 import built
from tests.engine.power_station import station
from tests.oracle.sketch import Sketch

SQRT3 = math.sqrt(3)


def test_the_station_with_two_transformers_and_motors() -> None:
    # case IEC-MV-MOTORS: seen from 33 kV, ΣPrM/ΣSrT = 8/30 = 0.267 exceeds 0.8/|1.1·100·30/(√3·33·13.12) − 0.3|
    case = built("IEC-MV-MOTORS")
    study = Study(case.plant, Case("iec60909"))
    rules = motor_rules(study, Place(*case.buses["Q"]))
    (group,) = rules.behind
    assert (group.motors_mw, group.transformers_mva) == (8.0, 30.0)
    assert group.limit == pytest.approx(0.8 / abs(1.1 * 100 * 30 / (SQRT3 * 33 * 13.121597) - 0.3), rel=1e-6)
    assert group.limit == pytest.approx(0.195, abs=5e-4) and not group.negligible
    assert set(group.motors) == {case.ids["M1"], case.ids["M2"]}
    assert set(group.transformers) == {case.ids["T1"], case.ids["T2"]}
    assert rules.rated_negligible is None and rules.rated_ka == 0
    at_motors = motor_rules(study, Place(*case.buses["F"]))
    assert (at_motors.with_ka, at_motors.without_ka) == (
        pytest.approx(19.55449, rel=1e-4),
        pytest.approx(14.7786, rel=1e-4),
    )
    assert not at_motors.negligible and at_motors.behind == ()
    rated = 5 / (0.97 * 0.86) / (SQRT3 * 6) + 3 / (0.94 * 0.83) / (SQRT3 * 6)
    assert at_motors.rated_ka == pytest.approx(rated, rel=1e-12)


@pytest.mark.parametrize(("kw", "negligible"), [(5, True), (60, False)])
def test_low_voltage_motors_up_to_one_per_cent_of_the_current_without_them(kw: float, negligible: bool) -> None:
    s = Sketch()
    bus = s.bus(0.4)
    s.hang("supply", bus, nominal_voltage="0.4 kV", fault_level_max="10 kA", x0_over_x1="1")
    for _ in range(2):
        s.hang(
            "induction_motor",
            bus,
            rated_power=f"{kw} kW",
            rated_voltage="0.4 kV",
            efficiency="80 %",
            power_factor="0.8",
        )
    rules = motor_rules(Study(s.plant, Case("iec60909")), Place(*bus))
    assert rules.rated_ka == pytest.approx(2 * kw / 640 / (SQRT3 * 0.4), rel=1e-12)
    assert rules.rated_negligible is negligible is (rules.rated_ka <= 0.1)
    assert rules.without_ka == pytest.approx(10, rel=1e-9)


def test_pieces_with_another_source_are_no_groups_of_motors() -> None:
    s = station()
    rules = motor_rules(s.study(), Place(*s.at["Q"]))
    assert rules.behind == () and rules.negligible and rules.with_ka > rules.without_ka
    board = motor_rules(s.study(), Place(*s.at["6"]))
    assert [group.motors for group in board.behind] == [(s.ids["ML"],)]


@pytest.mark.parametrize(
    "case", [{"method": "classical"}, {"level": "min"}, {"motors": False}, {"leave_out_small_motors": True}]
)
def test_other_cases_are_refused(case: dict[str, str | bool]) -> None:
    s = station()
    study = Study(s.plant, Case(**{"method": "iec60909", **case}))  # type: ignore[arg-type]
    with pytest.raises(StudyError, match="largest currents"):
        motor_rules(study, Place(*s.at["Q"]))
