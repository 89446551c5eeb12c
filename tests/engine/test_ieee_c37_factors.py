"""Duty factors of the C37 family: published figures (source in the case file), tables of the standards, laws."""

import json
import math
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import brentq

from onelinefault.engine import ieee_c37_factors as ieee
from onelinefault.engine.ieee_c37_asymmetry import rms_factor_of_direct_share
from onelinefault.engine.ieee_c37_machines import DutyNetwork, MachineClass, machine_multiplier
from onelinefault.errors import StudyError

CASES = json.loads((Path(__file__).parents[1] / "authority/ieee_cases.json").read_text("utf-8"))["cases"]
Case = dict[str, Any]


def cases(calculation: str) -> list[Any]:
    found = [case for case in CASES if case["calc"] == calculation]
    assert found, calculation
    return [pytest.param(case, id=f"{case['id']}-{case['basis']}") for case in found]


def close(case: Case, key: str, found: Any) -> None:
    tolerance = case["tolerance"]
    wanted = case["expected"][key]
    assert float(found) == pytest.approx(wanted, rel=tolerance.get("rel", 0), abs=tolerance.get("abs", 0))


@pytest.mark.parametrize("case", cases("lv_mf"))
def test_low_voltage_factors(case: Case) -> None:
    inputs = case["inputs"]
    ratio = inputs["xr"] if "xr" in inputs else ieee.x_over_r_of_power_factor(inputs["pf"])
    tested = ieee.x_over_r_of_power_factor(inputs["test_pf"])
    factor = ieee.tested_device_factor(ratio, tested, inputs["kind"], inputs.get("divisor"))
    close(case, "mf", factor)
    if "duty_ka" in case["expected"]:
        close(case, "duty_ka", factor * inputs["i_sym_ka"])


@pytest.mark.parametrize("case", cases("test_xr"))
def test_x_over_r_of_test_circuits(case: Case) -> None:
    close(case, "xr", ieee.x_over_r_of_power_factor(case["inputs"]["pf"]))


@pytest.mark.parametrize("case", cases("k_breaker"))
def test_capability_of_k_rated_breakers(case: Case) -> None:
    inputs = case["inputs"]
    found = ieee.capability_ka(inputs["v_op_kv"], inputs["v_max_kv"], inputs["k"], inputs["i_rated_ka"])
    close(case, "cap_sym_ka", found)
    if "cl_rms_ka" in case["expected"]:
        close(case, "max_sym_ka", inputs["k"] * inputs["i_rated_ka"])
        close(case, "cl_rms_ka", ieee.FLAT_MOMENTARY_FACTOR * found)


# --- one bus of a plant, reduced by hand: X and R each in a network of its own, the multipliers from the table

KINDS = {
    "utility": MachineClass.UTILITY,
    "generator": MachineClass.GENERATOR,
    "sync_motor": MachineClass.SYNCHRONOUS_MOTOR,
    "ind_large": MachineClass.LARGE_INDUCTION,
    "ind_medium": MachineClass.MEDIUM_INDUCTION,
    "ind_small": MachineClass.SMALL_INDUCTION,
}
(BUS,) = [case for case in CASES if case["calc"] == "ansi_bus"]


def parallel(values: list[complex]) -> complex:
    return 1 / sum(1 / value for value in values)


def reduced(network: DutyNetwork, keep: Any) -> complex:
    """Reduction at the MV bus of what keep(R, X) leaves of each impedance, per unit."""
    at: dict[str, list[complex]] = {"MV": [], "LV": []}
    for _, bus, kind, r, x in BUS["inputs"]["sources"]:
        multiplier = machine_multiplier(KINDS[kind], network)
        if not multiplier.left_out:
            at[bus].append(multiplier.factor * keep(r, x))
    ((_, _, r, x),) = BUS["inputs"]["branches"]
    return parallel([*at["MV"], keep(r, x) + parallel(at["LV"])])


@pytest.mark.parametrize("name, network", [("first", DutyNetwork.COMBINED), ("int", DutyNetwork.INTERRUPTING)])
def test_symmetrical_currents_and_x_over_r_of_one_bus(name: str, network: DutyNetwork) -> None:
    kv = BUS["inputs"]["kv"]
    base_ohm = kv**2 / BUS["inputs"]["base_mva"]
    x, r = reduced(network, lambda r, x: x), reduced(network, lambda r, x: r)
    close(BUS, f"{name}_ex_ka", ieee.symmetrical_ka(kv, x.real * base_ohm))
    close(BUS, f"{name}_ez_ka", ieee.symmetrical_ka(kv, abs(reduced(network, complex)) * base_ohm))
    close(BUS, f"{name}_xr", x.real / r.real)


def test_duty_of_one_bus() -> None:
    expected, inputs = BUS["expected"], BUS["inputs"]
    nacd = ieee.nacd_ratio(expected["int_ex_ka"], expected["int_gen_ka"], expected["int_sync_ka"])
    remote = ieee.remote_factor(expected["int_xr"], inputs["c_cycles"], inputs["s"])
    close(BUS, "nacd", nacd)
    close(BUS, "int_mf_remote", remote)
    close(BUS, "int_duty_ka", remote * expected["int_ex_ka"])
    first = ieee.momentary_rms_factor(expected["first_xr"], always_calculated=True)
    close(BUS, "first_rms_asym_ka", first * expected["first_ex_ka"])


# --- medium and high voltage


def test_currents_on_round_numbers() -> None:
    """10 kV behind 1 ohm; line-to-ground with X0 = X1 equals three-phase; its X/R from both networks."""
    assert float(ieee.symmetrical_ka(10.0, 1.0)) == pytest.approx(5.773503, rel=1e-6)
    assert float(ieee.line_to_ground_ka(10.0, 1.0, 1.0)) == pytest.approx(5.773503, rel=1e-6)
    assert float(ieee.line_to_ground_ka(10.0, 1.0, 4.0)) == pytest.approx(5.773503 / 2, rel=1e-6)
    assert float(ieee.line_to_ground_x_over_r(1.0, 4.0, 0.1, 0.2)) == pytest.approx(6 / 0.4)


@pytest.mark.parametrize(
    "parting, s, crossing", [(3.0, 1.1, 16.7), (2.0, 1.2, 16.6), (1.0, 1.4, 17.1), (1.5, 1.3, 17.7)]
)
def test_remote_factor_leaves_one_where_the_rating_s_time_constant_lies(
    parting: float, s: float, crossing: float
) -> None:
    """The X/R where the factor leaves 1, near 17 = 45 ms at 60 Hz; computed independently, printed to 0.1."""
    assert ieee.symmetrical_s(parting) == s
    exact = brentq(lambda ratio: math.sqrt(1 + 2 * math.exp(-4 * math.pi * parting / ratio)) - s, 1, 100)
    assert exact == pytest.approx(crossing, abs=0.051)
    assert float(ieee.remote_factor(exact * 0.999, parting, s)) == 1.0
    assert 1.0 < float(ieee.remote_factor(exact * 1.01, parting, s)) < 1.01


def test_ratings_in_per_cent_of_direct_current_and_in_total() -> None:
    share = math.exp(-50 / 45)  # three cycles at 60 Hz, 45 ms
    assert float(ieee.remote_factor(40.0, 3.0, rms_factor_of_direct_share(share))) == pytest.approx(
        math.sqrt((1 + 2 * math.exp(-12 * math.pi / 40)) / (1 + 2 * share**2)), rel=1e-12
    )
    assert float(ieee.remote_factor_total(40.0, 3.0)) == pytest.approx(1.1 * float(ieee.remote_factor(40.0, 3.0, 1.1)))


@pytest.mark.parametrize("rated, parting, s", [(8, 4.0, 1.0), (5, 3.0, 1.1), (3, 2.0, 1.2), (2, 1.0, 1.4)])
def test_contact_parting_and_s_by_rated_interrupting_time(rated: int, parting: float, s: float) -> None:
    """C37.04-1979 as quoted by a maker's technical note (C and S confirmed); old total factors as remembered."""
    assert ieee.contact_parting_cycles(rated) == parting
    assert ieee.symmetrical_s(parting) == s
    assert ieee.simplified_total_factor(rated) == s  # the figures coincide
    assert ieee.simplified_total_factor(rated, large_generator_bus=True) == pytest.approx(s + 0.1)


def test_two_cycle_breakers_have_an_input() -> None:
    assert ieee.symmetrical_s(ieee.contact_parting_cycles(2, two_cycle_parting=1.5)) == 1.3
    assert ieee.contact_parting_cycles(5, two_cycle_parting=1.5) == 3.0


def test_what_is_not_tabled_is_refused_with_a_remedy() -> None:
    with pytest.raises(StudyError, match=r"7 cycles.*8, 5, 3 or 2"):
        ieee.contact_parting_cycles(7)
    with pytest.raises(StudyError, match=r"2\.5 cycles.*per cent"):
        ieee.symmetrical_s(2.5)
    with pytest.raises(StudyError, match="4 cycles"):
        ieee.simplified_total_factor(4)
    with pytest.raises(StudyError, match="no points"):
        ieee.local_factor(20.0, 1.1, [])
    with pytest.raises(ValueError, match="square"):
        ieee.tested_device_factor(7.0, 6.6, "square")


@pytest.mark.parametrize(
    "ratio, rms, crest", [(5.0, 1.6, 2.6), (17.0, 1.6, 2.6), (25.0, 1.6, None), (30.0, None, None)]
)
def test_close_and_latch_is_flat_up_to_its_limit(ratio: float, rms: float | None, crest: float | None) -> None:
    phi = math.atan(ratio)
    angle = np.linspace(0, 2 * np.pi, 100_001)
    exact = math.sqrt(2) * np.max(np.sin(angle - phi) + math.sin(phi) * np.exp(-angle / ratio))
    calculated = math.sqrt(1 + 2 * math.exp(-2 * math.pi / ratio))
    assert float(ieee.momentary_rms_factor(ratio)) == pytest.approx(rms or calculated)
    assert float(ieee.momentary_rms_factor(ratio, always_calculated=True)) == pytest.approx(calculated)
    assert float(ieee.close_and_latch_crest_factor(ratio)) == pytest.approx(crest or exact, rel=1e-7)
    assert float(ieee.close_and_latch_crest_factor(ratio, always_calculated=True)) == pytest.approx(exact, rel=1e-7)


def test_quick_acceptance() -> None:
    """Shares as remembered from C37.010: all of the capability up to X/R 15, else 80 %, to ground 70 %."""
    ratios = np.array([15.0, 15.1, np.nan])
    assert list(ieee.quick_acceptance_share(ratios)) == [1.0, 0.8, 0.8]
    assert list(ieee.quick_acceptance_share(ratios, line_to_ground=True)) == [1.0, 0.7, 0.7]


def test_quick_acceptance_is_safe_against_the_full_check() -> None:
    """Breakers of 5 cycles and faster: up to X/R 15 none needs a factor, and 0.8 is enough for every X/R up to 45."""
    below, above = np.linspace(1, 15, 30), np.linspace(15.01, 45, 30)
    for parting in (3.0, 2.0, 1.5, 1.0):
        s = ieee.symmetrical_s(parting)
        assert np.all(ieee.remote_factor(below, parting, s) == 1.0)
        assert np.all(ieee.remote_factor(above, parting, s) * ieee.quick_acceptance_share(above) <= 1.0)


def test_a_user_s_curve_is_followed_but_never_above_the_remote_factor() -> None:
    curve = [(60.0, 1.2), (20.0, 1.0), (40.0, 1.1)]  # invented points, in any order
    ratios = np.array([10.0, 30.0, 50.0, 100.0])
    assert ieee.local_factor(ratios, 2.0, curve) == pytest.approx([1.0, 1.05, 1.15, 1.2])
    assert ieee.local_factor(ratios, 1.1, curve) == pytest.approx([1.0, 1.05, 1.1, 1.1])
    assert list(ieee.local_factor(ratios, 1.3)) == [1.3] * 4  # without a curve: as if remote


def test_local_and_remote_generators() -> None:
    """Less than 1.5 X″d away and through one transformer at most."""
    assert ieee.is_local(1.49, 1.0, 1) and ieee.is_local(0.0, 1.0, 0)
    assert not ieee.is_local(1.5, 1.0, 1) and not ieee.is_local(0.1, 1.0, 2)


@settings(max_examples=50, deadline=None)
@given(st.floats(1.0, 120.0), st.sampled_from([4.0, 3.0, 2.0, 1.5, 1.0]), st.floats(0.0, 1.0), st.floats(0.0, 0.5))
def test_weighted_factor_lies_between_local_and_remote(
    ratio: float, parting: float, share: float, lower: float
) -> None:
    remote = float(ieee.remote_factor(ratio, parting, ieee.symmetrical_s(parting)))
    local = float(ieee.local_factor(ratio, remote, [(1.0, remote - lower)]))
    found = float(ieee.weighted_factor(local, remote, share))
    assert local - 1e-12 <= found <= remote + 1e-12
    assert float(ieee.weighted_factor(local, remote)) == pytest.approx(remote)
    assert float(ieee.weighted_factor(local, remote, 0.0)) == local
    assert float(ieee.remote_factor(ratio + 1, parting, 1.0)) >= float(ieee.remote_factor(ratio, parting, 1.0))


@given(st.floats(0.0, 10.0), st.floats(0.0, 5.0))
def test_motors_as_remote_give_the_higher_share(local: float, motors: float) -> None:
    total = 20.0
    remote = float(ieee.nacd_ratio(total, local, motors))
    assert remote == pytest.approx((total - local) / total)
    assert float(ieee.nacd_ratio(total, total, motors)) == 0.0
    as_local = float(ieee.nacd_ratio(total, local, motors, motors_are_remote=False))
    assert as_local == pytest.approx((total - local - motors) / total, abs=1e-12) and as_local <= remote


def test_capability_by_voltage() -> None:
    """ANSI C37.06-1987, 15 kV 500 MVA class: 18 kA at 15 kV, K 1.3; K = 1 keeps its rating; nothing above Vmax."""
    kv = (15.5, 15.0, 13.0, 15 / 1.3, 5.0)
    assert [ieee.capability_ka(v, 15.0, 1.3, 18.0) for v in kv] == pytest.approx([0, 18, 18 * 15 / 13, 23.4, 23.4])
    assert [ieee.capability_ka(v, 15.0, 1.0, 40.0) for v in kv] == pytest.approx([0, 40, 40, 40, 40])
    assert ieee.capability_ka(15.0, 15.0, 1.3, 18.0, line_to_ground=True) == pytest.approx(18 * 1.15)
    assert ieee.capability_ka(12.0, 15.0, 1.3, 18.0, line_to_ground=True) == pytest.approx(23.4)
    assert ieee.capability_ka(12.0, 15.0, 1.0, 40.0, line_to_ground=True) == pytest.approx(40.0)


# --- low voltage and fuses


@pytest.mark.parametrize("rating, x_over_r", [(10.0, 1.73), (10.1, 3.18), (20.0, 3.18), (20.1, 4.9), (65.0, 4.9)])
def test_test_circuits_of_moulded_case_breakers(rating: float, x_over_r: float) -> None:
    """UL 489 and C37.13 as quoted by a paper of the US services: smallest X/R of the band."""
    pf = ieee.moulded_case_test_power_factor(rating)
    assert float(ieee.x_over_r_of_power_factor(pf)) == pytest.approx(x_over_r, abs=0.01)


@pytest.mark.parametrize("pf, form, divisor", [(0.15, "crest", 2.29), (0.2, "crest", 2.159), (0.2, "rms", 1.25)])
def test_published_divisors_are_the_calculated_ones_rounded(pf: float, form: str, divisor: float) -> None:
    """C37.13-2008 prints them with three or four figures; the calculated factor is the same within 0.3 %."""
    tested = ieee.x_over_r_of_power_factor(pf)
    assert float(ieee.tested_device_factor(20.0, tested, form, divisor)) == pytest.approx(
        float(ieee.tested_device_factor(20.0, tested, form)), rel=3e-3
    )


@settings(max_examples=50, deadline=None)
@given(st.floats(0.1, 100.0), st.floats(0.1, 100.0), st.floats(0.0, 30.0), st.sampled_from(list(ieee.FactorForm)))
def test_tested_device_factor_is_one_up_to_the_test_and_rises_after(
    ratio: float, tested: float, more: float, form: ieee.FactorForm
) -> None:
    found = float(ieee.tested_device_factor(ratio, tested, form))
    assert found >= 1 and (ratio > tested or found == 1)
    assert float(ieee.tested_device_factor(ratio + more, tested, form)) >= found - 1e-12
    assert found <= (2 if form is ieee.FactorForm.CREST else math.sqrt(3))


def test_high_voltage_fuses_by_the_default_tests() -> None:
    """R.m.s. with d.c. current at X/R 25 is 1.5986, at the distribution class's 15 it is 1.5217: 1.0505 times."""
    tests = [ieee.DEFAULT_DISTRIBUTION_FUSE_X_OVER_R, ieee.DEFAULT_POWER_FUSE_X_OVER_R]
    assert ieee.tested_device_factor(25.0, tests, "rms") == pytest.approx([1.0505, 1.0], abs=1e-4)
