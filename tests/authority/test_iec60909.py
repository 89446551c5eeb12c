"""Every value of the IEC 60909 cases, through plants in natural units and a study. Sources in the file of cases."""

import math
from collections.abc import Callable, Mapping
from dataclasses import replace
from functools import lru_cache
from typing import Any

import pytest

from onelinefault.engine import iec60909_decay as decay
from onelinefault.engine import iec60909_factors as factors
from onelinefault.engine.case import Case
from onelinefault.engine.iec60909_figures import IecFigures
from onelinefault.engine.results import FaultResult
from onelinefault.engine.study import Study
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.authority.iec60909 import CASES, Built, Line, built, lines, unit_plant

KINDS = {"3ph": FaultKind.THREE_PHASE, "2ph": FaultKind.LINE_TO_LINE, "1ph": FaultKind.LINE_TO_EARTH}
PAIRS = {"HVMV": "K_T high-medium", "HVLV": "K_T high-low", "MVLV": "K_T medium-low"}


def ids(line: Line) -> str:
    return line.label


@lru_cache(maxsize=32)
def study_of(case_id: str, case: Case) -> Study:
    return Study(built(case_id).plant, case)


def study_for(line: Line) -> Study:
    wanted = line.wanted
    case = Case(
        method="iec60909",
        level=wanted.get("kind", "max"),
        lv_tolerance_percent=line.case["network"].get("lv_tolerance_pct", 6),
        minimum_time_delay_s=wanted.get("tmin_s", 0.1),
        duration_s=wanted.get("Tk_s", 1.0),
        peak_method=wanted.get("kappa_method", "c"),
    )
    return study_of(line.case["id"], case)


def fault_at(line: Line, kind: FaultKind = FaultKind.THREE_PHASE) -> FaultResult:
    return study_for(line).fault(Fault(Place(*built(line.case["id"]).buses[line.wanted["bus"]]), kind))


def figures_at(line: Line) -> IecFigures:
    figures = fault_at(line).figures
    assert isinstance(figures, IecFigures)
    return figures


def impedance(line: Line) -> float:
    z = fault_at(line).z_ohm[0 if "1" in line.wanted["quantity"] else 2]
    assert z is not None
    return z.real if line.wanted["quantity"].startswith("R") else z.imag


def two_lines_to_earth(line: Line) -> float:
    # the sound line is a, so L2 is b and L3 is c
    result = fault_at(line, FaultKind.TWO_LINES_TO_EARTH)
    place = {"Ikss_2phE_L2": 1, "Ikss_2phE_L3": 2}.get(line.wanted["quantity"])
    return abs(result.residual_ka) if place is None else float(abs(result.phases_ka[place]))


def partial_current(line: Line) -> float:
    """Of one machine unless the file says how many: the plant draws equal machines as one group."""
    network, element = line.case["network"], line.wanted["element"]
    motors = {motor["id"]: motor["count"] for motor in network["asynchronous_motors"]}
    whole = abs(fault_at(line).terminal_ka[built(line.case["id"]).ids[element], "line"][0])
    return float(whole) / motors.get(element, 1) * line.wanted.get("times", 1)


def without_motors(line: Line) -> float:
    case = built(line.case["id"])
    study = Study(case.plant, replace(study_for(line).case, motors=False))
    return study.fault(Fault(Place(*case.buses[line.wanted["bus"]]))).ik_ka


def correction(line: Line) -> float:
    wanted, case = line.wanted, built(line.case["id"])
    name = PAIRS[wanted["pair"]] if wanted["quantity"] == "K_T3" else wanted["quantity"]
    found = [
        c.value for c in study_for(line).network.corrections if (c.part, c.name) == (case.ids[wanted["element"]], name)
    ]
    assert len(found) == 1
    return found[0]


READ: Mapping[str, Callable[[Line], float]] = {
    **{f"Ikss_{kind}": lambda line: fault_at(line, KINDS[line.wanted["quantity"][5:]]).ik_ka for kind in KINDS},
    **dict.fromkeys(("Ikss_2phE_L2", "Ikss_2phE_L3", "Ikss_E2E"), two_lines_to_earth),
    **dict.fromkeys(("R1_ohm", "X1_ohm", "R0_ohm", "X0_ohm"), impedance),
    **dict.fromkeys(("K_T", "K_T3", "K_G", "K_S", "K_SO"), correction),
    "Ikss_partial": partial_current,
    "Ikss_3ph_without_motors": without_motors,
    "ip_b_plain": lambda line: figures_at(line).peaks["b-plain"].ip_ka,
    "ip_b": lambda line: figures_at(line).peaks["b"].ip_ka,
    "ip_c": lambda line: figures_at(line).peaks["c"].ip_ka,
    "Ib_meshed": lambda line: figures_at(line).ib_meshed_ka,
    "Ib_nonmeshed": lambda line: figures_at(line).ib_apart_ka,
    "Ik_simplified": lambda line: figures_at(line).ik_steady_ka,
    "Ith": lambda line: figures_at(line).ith_ka,
    "motors_negligible": lambda line: float(figures_at(line).motors_negligible),
}  # fmt: skip


@pytest.mark.parametrize("line", list(lines("iec_network")), ids=ids)
def test_networks(line: Line) -> None:
    assert line.judge(READ[line.wanted["quantity"]](line)) == ""


def test_no_case_of_the_file_is_left_out() -> None:
    assert {case["solver"] for case in CASES} == {"iec_network", "iec_psu_internal", "iec_function"}
    assert sum(len(case["expected"]) for case in CASES) == 332


@pytest.mark.parametrize(
    ("case_id", "bus", "apart"),
    [("IEC-TN-3PH", "2", False), ("IEC-TN-3PH", "6", False), ("IEC-MV-MOTORS", "F", True), ("IEC-LV400", "F1", True)],
)
def test_the_rule_for_the_breaking_current_follows_from_the_network(case_id: str, bus: str, apart: bool) -> None:
    # TR 60909-4 takes the test network as meshed, and the motor example as one of single-fed branches
    figures = study_of(case_id, Case(method="iec60909")).fault(Fault(Place(*built(case_id).buses[bus]))).figures
    assert isinstance(figures, IecFigures)
    assert figures.apart is apart
    assert figures.ib_ka == (figures.ib_apart_ka if apart else figures.ib_meshed_ka)


@pytest.mark.parametrize("case_id", ["IEC-TN-3PH", "IEC-LV400", "IEC-MV-MOTORS", "IEC-PLANT-MAX"])
def test_the_table_of_all_buses_has_the_same_figures_as_single_faults(case_id: str) -> None:
    study = study_of(case_id, Case(method="iec60909", lv_tolerance_percent=10))
    sketched = {key[0]: key for key in built(case_id).buses.values()}
    for row in study.all_buses():
        if row.part not in sketched:
            continue
        single = study.fault(Fault(Place(*sketched[row.part]), FaultKind(row.kind)))
        one, other = row.figures, single.figures
        assert isinstance(one, IecFigures) and isinstance(other, IecFigures)
        assert row.peak_ka == pytest.approx(single.peak_ka, rel=1e-9) and row.peak_ka == one.peak_ka
        for field in ("c", "lines_ka", "earth_ka", "idc_ka", "ib_ka", "ik_steady_ka", "ith_ka", "m", "motor_share"):
            assert getattr(one, field) == pytest.approx(getattr(other, field), rel=1e-9, abs=1e-9), (row.bus, field)
        for method, peak in one.peaks.items():
            assert peak.ip_ka == pytest.approx(other.peaks[method].ip_ka, rel=1e-9)


# ------------------------------------------------------------------------------------------------ power station units


@lru_cache(maxsize=2)
def unit_results(case_id: str) -> dict[str, float]:
    """What the program gives for a unit on a feeder: its factors, its impedance, faults on both its sides."""
    case: Built = unit_plant(next(c for c in CASES if c["id"] == case_id)["network"])
    study = Study(case.plant, Case(method="iec60909"))
    outside = study.fault(Fault(Place(*case.buses["Q"])))
    inside = study.fault(Fault(Place(*case.buses["S"])))
    feeder = replace(case.plant.parts[case.ids["Q"]], in_service=False)
    alone = replace(case.plant, parts={**case.plant.parts, feeder.id: feeder})
    z = Study(alone, Case(method="iec60909")).fault(Fault(Place(*case.buses["Q"]))).z_ohm[0]
    assert z is not None and isinstance(inside.figures, IecFigures)
    k = {c.name.removesuffix("O"): c.value for c in (*outside.network.corrections, *inside.network.corrections)}
    generator, transformer = inside.figures.partials
    return {
        "K_S": k["K_S"], "K_G_S": k["K_G,S"], "K_T_S": k["K_T,S"], "re": z.real, "im": z.imag,
        "IkssS_HV_kA": abs(outside.terminal_ka[case.ids["S"], "high"][0]),
        "IkssG_kA": generator.ik_ka, "IkssT_kA": transformer.ik_ka, "IkssF2_sum_kA": inside.ik_ka,
    }  # fmt: skip


@pytest.mark.parametrize("line", list(lines("iec_psu_internal")), ids=ids)
def test_power_station_units(line: Line) -> None:
    found = unit_results(line.case["id"])
    assert line.judge(found[line.wanted.get("part", line.wanted["quantity"])]) == ""


# ---------------------------------------------------------------------------------------------------------- functions


def motor(mw: float, kv: float, cosine: float, eta: float, ratio: float, pairs: int) -> complex:
    r_over_x = factors.motor_r_over_x(kv, mw / pairs)
    return factors.motor_impedance_ohm(kv, factors.motor_mva(mw, eta, cosine), ratio, r_over_x)


FUNCTIONS: Mapping[str, Callable[..., Any]] = {
    "kappa": decay.kappa, "mu": decay.mu, "q": decay.q, "m": decay.m, "n": decay.n,
    "c_factor": factors.voltage_factor, "K_T": factors.transformer_factor, "r_hot": factors.hot_resistance_ohm,
    "abs_z_motor": lambda *args: abs(motor(*args)), "re_z_motor": lambda *args: motor(*args).real,
    "im_z_motor": lambda *args: motor(*args).imag,
    "re_z_feeder": lambda *args: factors.feeder_impedance_ohm(*args).real,
    "im_z_feeder": lambda *args: factors.feeder_impedance_ohm(*args).imag,
}  # fmt: skip


@pytest.mark.parametrize("line", list(lines("iec_function")), ids=ids)
def test_functions(line: Line) -> None:
    found = float(FUNCTIONS[line.wanted["quantity"]](*line.wanted["args"]))
    assert math.isfinite(found) and line.judge(found) == ""
