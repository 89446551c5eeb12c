"""Published short-circuit examples, every printed value, through plants in natural units. Sources in the case file."""

import math
from collections.abc import Mapping
from functools import lru_cache
from typing import Any

import numpy as np
import pytest

from onelinefault.engine.asymmetry import asymmetrical_rms_ka
from onelinefault.engine.case import Case
from onelinefault.engine.line_constants import kron, primitive_impedances
from onelinefault.engine.results import FaultResult
from onelinefault.engine.study import Study, device_duty_ka
from onelinefault.model.fault import Fault, Place
from onelinefault.model.values import read_line_geometry
from tests.authority.textbook import CASES, KINDS, Built, Line, built, lines
from tests.oracle.sketch import Sketch, TerminalKey

KM_PER_MILE = 1.609344


def ids(line: Line) -> str:
    return line.label


@lru_cache(maxsize=32)
def study_of(case_id: str) -> Study:
    return Study(built(case_id).plant, Case())


def found_value(line: Line) -> float:
    """The value that the program gives, in the unit of the source."""
    case, wanted = built(line.case["id"]), line.wanted
    if wanted["quantity"] == "I_breaker_kA":
        return device_duty_ka(study_of(line.case["id"]), case.breakers[wanted["behind"]], KINDS[wanted["fault"]])
    result = study_of(line.case["id"]).fault(case.fault(wanted))
    value = _complex_value(case, wanted, result, line.case["id"])
    if wanted["unit"] == "pu":
        value /= _base(case, wanted)
    return {"re": value.real, "im": value.imag}.get(wanted.get("part", "abs"), abs(value))


def _complex_value(case: Built, wanted: Mapping[str, Any], result: FaultResult, case_id: str) -> complex:
    quantity = wanted["quantity"].removesuffix("_kA")
    if quantity in ("I1", "I2", "I0"):
        return complex(result.sequence_ka[("I1", "I2", "I0").index(quantity)])
    if quantity in ("Z1", "Z2", "Z0"):
        z = result.z_ohm[("Z1", "Z2", "Z0").index(quantity)]
        assert z is not None
        return z
    if quantity == "In":
        return result.residual_ka
    if quantity == "V_phase":
        node = result.network.node_of[case.buses[wanted["at"]]]
        return complex(result.voltages_kv[node]["abc".index(wanted["phase"])])
    if quantity == "I_machine_phase":
        return complex(result.terminal_ka[_contribution(case, wanted, case_id)]["abc".index(wanted["phase"])])
    return complex(result.phases_ka["abc".index(quantity[1])])


def _contribution(case: Built, wanted: Mapping[str, Any], case_id: str) -> TerminalKey:
    """Where a machine's contribution is read so that the shift the source speaks of lies between there and the fault.

    The generator of TB-GLOVER-138 and the fault are both behind deltas: +30° is on the 138 kV line, 0° at the machine.
    """
    if case_id == "TB-GLOVER-138" and wanted["shift_deg"] == 30:
        return case.transformers["T1"], "high"
    return case.machines[wanted["machine"]], "line"


def _base(case: Built, wanted: Mapping[str, Any]) -> float:
    quantity, bus = wanted["quantity"], wanted["bus"]
    if quantity.startswith("Z"):
        return case.base_ohm(bus)
    if quantity == "V_phase":
        return case.kv[wanted["at"]] / math.sqrt(3)
    if quantity == "I_machine_phase":
        there = {("G", 30): "H1", ("G", 0): "1", ("S", -30): "HV"}[wanted["machine"], wanted["shift_deg"]]
        return case.base_ka(there)
    return case.base_ka(bus)


def test_no_case_of_the_file_is_left_out() -> None:
    assert {case["solver"] for case in CASES} == {"sequence_pu", "rl_asymmetry", "carson"}
    assert {line.wanted["quantity"] for line in lines("carson")} == {"Zabc", "Z012"}


@pytest.mark.parametrize("line", list(lines("sequence_pu")), ids=ids)
def test_printed_faults(line: Line) -> None:
    assert line.judge(found_value(line)) == ""


@pytest.mark.parametrize("line", list(lines("rl_asymmetry")), ids=ids)
def test_printed_asymmetrical_currents(line: Line) -> None:
    # one phase of the circuit is a supply with the line voltage √3 times the printed one
    network = line.case["network"]
    size, x_over_r = math.hypot(network["R_ohm"], network["X_ohm"]), network["X_ohm"] / network["R_ohm"]
    sketch = Sketch(frequency=f"{network['frequency_Hz']} Hz")
    kv = math.sqrt(3) * network["V_kV"]
    bus = sketch.bus(kv)
    sketch.hang(
        "supply", bus, nominal_voltage=f"{kv!r} kV", fault_level_max=f"{size!r} ohm", x_over_r=repr(x_over_r),
        x0_over_x1="1",
    )  # fmt: skip
    result = Study(sketch.plant, Case()).fault(Fault(Place(*bus)))
    found = result.ik_ka
    if line.wanted["quantity"] == "Irms_asym":
        found = asymmetrical_rms_ka(result.ik_ka, result.x_over_r, line.wanted["cycles"])
    assert line.judge(found) == ""


@pytest.mark.parametrize("line", [x for x in lines("carson") if x.wanted["quantity"] == "Zabc"], ids=ids)
def test_printed_phase_impedances(line: Line) -> None:
    network = line.case["network"]
    points = read_line_geometry(geometry(network)).points
    r, gmr = (np.array([c[key] for c in network["conductors"]]) for key in ("r", "gmr_ft"))
    z = primitive_impedances(
        np.array([(x, y) for _, x, y in points]), r / KM_PER_MILE, gmr * 0.3048, network["frequency_Hz"],
        network["rho_ohm_m"],
    )  # fmt: skip
    entry = complex(kron(z)[line.wanted["i"], line.wanted["j"]]) * KM_PER_MILE
    assert line.judge({"re": entry.real, "im": entry.imag}[line.wanted["part"]]) == ""


@pytest.mark.parametrize("line", [x for x in lines("carson") if x.wanted["quantity"] == "Z012"], ids=ids)
def test_printed_sequence_impedances_of_a_line_in_a_plant(line: Line) -> None:
    # what a mile of the line adds between a bus before and a bus behind it; the file's order is zero, positive
    network = line.case["network"]
    phase, earth_wire = network["conductors"][0], network["conductors"][3]
    sketch = Sketch(frequency=f"{network['frequency_Hz']} Hz")
    near, far = sketch.bus(12.47), sketch.bus(12.47)
    sketch.hang("supply", near, nominal_voltage="12.47 kV", fault_level_max="200 MVA", x_over_r="8", x0_over_x1="1")
    sketch.hang(
        "overhead_line", near, far, length="1 mi", geometry=geometry(network), r_temperature="20 °C",
        conductor_resistance=f"{phase['r']} ohm/mi", conductor_gmr=f"{phase['gmr_ft']} ft",
        neutral_resistance=f"{earth_wire['r']} ohm/mi", neutral_gmr=f"{earth_wire['gmr_ft']} ft",
        earth_resistivity=f"{network['rho_ohm_m']} ohm·m",
    )  # fmt: skip
    study = Study(sketch.plant, Case())
    which = {0: 2, 1: 0}[line.wanted["i"]]
    before, behind = (study.fault(Fault(Place(*bus))).z_ohm[which] for bus in (near, far))
    assert before is not None and behind is not None
    added = behind - before
    assert line.judge({"re": added.real, "im": added.imag}[line.wanted["part"]]) == ""


def geometry(network: dict[str, Any]) -> str:
    """Conductor places as an engineer types them."""
    return "; ".join([*(f"{c['id']} {c['x_ft']} {c['y_ft']}" for c in network["conductors"]), "ft"])
