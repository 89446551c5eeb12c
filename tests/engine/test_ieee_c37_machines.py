"""Machine multipliers against the published table and figures (source in the case file)."""

import json
import math
from pathlib import Path
from typing import Any

import pytest

from onelinefault.engine import ieee_c37_machines as ieee
from onelinefault.engine.ieee_c37_machines import DutyNetwork, MachineClass, Reactance

CASES = json.loads((Path(__file__).parents[1] / "authority/ieee_cases.json").read_text("utf-8"))["cases"]
OUT = math.inf

# IEEE 551-2006 table 9-1 and IEEE 141-1993 tables 4-1 and 4-2, typed from there: class, reactance, first, combined,
# interrupting (the columns that published pages confirm)
PUBLISHED = [
    (MachineClass.UTILITY, Reactance.SYSTEM, 1.0, 1.0, 1.0),
    (MachineClass.GENERATOR, Reactance.SUBTRANSIENT, 1.0, 1.0, 1.0),
    (MachineClass.HYDRO_WITHOUT_DAMPERS, Reactance.TRANSIENT, 0.75, 0.75, 0.75),
    (MachineClass.SYNCHRONOUS_MOTOR, Reactance.SUBTRANSIENT, 1.0, 1.0, 1.5),
    (MachineClass.LARGE_INDUCTION, Reactance.SUBTRANSIENT, 1.0, 1.0, 1.5),
    (MachineClass.MEDIUM_INDUCTION, Reactance.SUBTRANSIENT, 1.2, 1.2, 3.0),
    (MachineClass.SMALL_INDUCTION, Reactance.SUBTRANSIENT, OUT, 1.67, OUT),
]
COLUMNS = (DutyNetwork.FIRST_CYCLE, DutyNetwork.COMBINED, DutyNetwork.INTERRUPTING)


def cases(calculation: str) -> list[Any]:
    found = [case for case in CASES if case["calc"] == calculation]
    assert found, calculation
    return [pytest.param(case, id=f"{case['id']}-{case['basis']}") for case in found]


def within(case: dict[str, Any], key: str) -> Any:
    tolerance = case["tolerance"]
    return pytest.approx(case["expected"][key], rel=tolerance.get("rel", 0), abs=tolerance.get("abs", 0))


@pytest.mark.parametrize("machine, of, first, combined, interrupting", PUBLISHED, ids=lambda v: getattr(v, "name", ""))
def test_published_columns(
    machine: MachineClass, of: Reactance, first: float, combined: float, interrupting: float
) -> None:
    found = [ieee.machine_multiplier(machine, column) for column in COLUMNS]
    assert [m.factor for m in found] == [first, combined, interrupting]
    assert {m.of for m in found} == {of}
    assert [m.left_out for m in found] == [value == OUT for value in (first, combined, interrupting)]


def test_thirty_cycles_leave_generators_on_their_transient_reactance_and_no_motors() -> None:
    """Column as remembered: utility 1, generators X′d or larger (an input), motors omitted."""
    found = {machine: ieee.machine_multiplier(machine, DutyNetwork.THIRTY_CYCLE, 1.25) for machine in MachineClass}
    motors = {machine for machine in MachineClass if machine.name.endswith(("MOTOR", "INDUCTION"))}
    assert len(motors) == 4 and all(found[machine].left_out for machine in motors)
    assert found[MachineClass.UTILITY] == ieee.Multiplier(1.0, Reactance.SYSTEM)
    for machine in (MachineClass.GENERATOR, MachineClass.HYDRO_WITHOUT_DAMPERS):
        assert found[machine] == ieee.Multiplier(1.25, Reactance.TRANSIENT)
        assert ieee.machine_multiplier(machine, DutyNetwork.THIRTY_CYCLE).factor == 1.0


@pytest.mark.parametrize(
    "hp, rpm, wanted",
    [
        (1001, 1780, MachineClass.LARGE_INDUCTION),
        (1000, 1800, MachineClass.MEDIUM_INDUCTION),
        (251, 3560, MachineClass.LARGE_INDUCTION),
        (250, 3600, MachineClass.MEDIUM_INDUCTION),
        (251, 1780, MachineClass.MEDIUM_INDUCTION),
        (251, 2980, MachineClass.LARGE_INDUCTION),  # two poles at 50 Hz
        (50, 1780, MachineClass.MEDIUM_INDUCTION),
        (49.9, 3560, MachineClass.SMALL_INDUCTION),
    ],
)
def test_induction_classes_at_their_limits(hp: float, rpm: float, wanted: MachineClass) -> None:
    assert ieee.induction_class(hp, rpm) is wanted


@pytest.mark.parametrize("case", cases("motor_group"))
def test_current_of_a_motor_group(case: dict[str, Any]) -> None:
    assert ieee.times_rated_current(case["inputs"]["x_percent"] / 100) == within(case, "times_fla")


@pytest.mark.parametrize("case", cases("motor_mix"))
def test_current_of_a_mixed_group(case: dict[str, Any]) -> None:
    parts = {times: share for share, times in case["inputs"]["parts"]}
    found = ieee.group_times_rated_current(parts)
    assert found == within(case, "times_fla") and found == pytest.approx(3.9)
    assert round(found) == ieee.LOW_VOLTAGE_GROUP_TIMES_RATED


@pytest.mark.parametrize("case", cases("unit_sub"))
def test_motors_of_a_unit_substation_give_four_times_its_rated_current(case: dict[str, Any]) -> None:
    """480 V secondary unit substations with as much motor load as the transformer is rated."""
    given = case["inputs"]
    rated_a = given["kva"] / (math.sqrt(3) * given["kv"])
    if "fla_a" in case["expected"]:
        assert rated_a == within(case, "fla_a")
        return
    motors_a = ieee.LOW_VOLTAGE_GROUP_TIMES_RATED * rated_a
    assert motors_a == within(case, "motor_a")
    source_pu = given["kva"] / 1000 / given["source_mva"] if given["source_mva"] else 0.0
    transformer_a = rated_a * ieee.times_rated_current(given["z_percent"] / 100 + source_pu)
    assert transformer_a == within(case, "transformer_a")
    assert transformer_a + motors_a == within(case, "total_a")


def test_bases_and_locked_rotor_reactances() -> None:
    """IEEE 141-1993 errata: kVA = hp, 0.8 hp at power factor 1. IEEE 551: 16.7 % by default, times 1.2 about 20.8 %."""
    assert ieee.motor_kva_base(500.0) == 500.0 and ieee.motor_kva_base(500.0, unity_power_factor=True) == 400.0
    assert ieee.locked_rotor_reactance_pu() == pytest.approx(0.167, abs=5e-4)
    medium = ieee.machine_multiplier(MachineClass.MEDIUM_INDUCTION, DutyNetwork.FIRST_CYCLE).factor
    assert medium * ieee.locked_rotor_reactance_pu() == pytest.approx(0.20, abs=0.01)
