"""Asymmetrical r.m.s. and crest factors: published figures (their source stands in the case file), circuits in time."""

import json
import math
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad

from onelinefault.engine import ieee_c37_asymmetry as ieee

CASES = json.loads((Path(__file__).parents[1] / "authority/ieee_cases.json").read_text("utf-8"))["cases"]
Case = dict[str, Any]


def cases(*calculations: str) -> list[Any]:
    found = [case for case in CASES if case["calc"] in calculations]
    assert found, calculations
    return [pytest.param(case, id=f"{case['id']}-{case['basis']}") for case in found]


def close(case: Case, key: str, found: Any) -> None:
    tolerance = case["tolerance"]
    wanted = case["expected"][key]
    assert float(found) == pytest.approx(wanted, rel=tolerance.get("rel", 0), abs=tolerance.get("abs", 0))


@pytest.mark.parametrize("case", cases("rms_asym"))
def test_rms_factor(case: Case) -> None:
    given = case["inputs"]
    factor = ieee.rms_factor(given["xr"], given["cycles"])
    close(case, "mf", factor)
    if "duty_ka" in case["expected"]:
        close(case, "duty_ka", factor * given["i_sym_ka"])


@pytest.mark.parametrize("case", cases("crest"))
def test_crest_factor(case: Case) -> None:
    ratio = case["inputs"]["xr"]
    close(case, "exact", ieee.crest_factor(ratio))
    if "half_cycle" in case["expected"]:
        close(case, "half_cycle", ieee.half_cycle_crest_factor(ratio))


@pytest.mark.parametrize("case", cases("peak_factor_pf"))
def test_crest_factor_at_the_power_factors_of_the_low_voltage_table(case: Case) -> None:
    pf, ka = case["inputs"]["pf"], case["inputs"]["i_ka"]
    factor = ieee.crest_factor(math.sqrt(1 - pf**2) / pf)
    close(case, "n", factor)
    close(case, "peak_ka", factor * ka)


@pytest.mark.parametrize("case", cases("s_factor"))
def test_direct_share_of_s(case: Case) -> None:
    close(case, "dc_percent", 100 * ieee.direct_share_of_rms_factor(case["inputs"]["s"]))


@pytest.mark.parametrize("case", cases("dc_percent"))
def test_direct_current_of_a_time_constant(case: Case) -> None:
    given, expected = case["inputs"], case["expected"]
    share = ieee.direct_share_of_time_constant(given["t_ms"] / 1000, given["tau_ms"] / 1000)
    found = {"dc_percent": 100 * share, "s_equiv": ieee.rms_factor_of_direct_share(share)}
    found |= {f"xr_{f}": ieee.x_over_r_of_time_constant(given["tau_ms"] / 1000, float(f)) for f in (50, 60)}
    for key in expected:
        close(case, key, found[key])


# --- the circuit itself


def largest(x_over_r: float) -> float:
    """Largest current in time by brute force, closed at voltage zero."""
    phi = math.atan(x_over_r)
    angle = np.linspace(0, 2 * np.pi, 400_001)
    return float(math.sqrt(2) * np.max(np.sin(angle - phi) + math.sin(phi) * np.exp(-angle / x_over_r)))


@pytest.mark.parametrize("x_over_r", [0.05, 0.3, 1.0, 1.5, 3.0, 5.0, 10.0, 40.0, 500.0])
def test_crest_is_the_largest_current_of_the_circuit(x_over_r: float) -> None:
    assert float(ieee.crest_factor(x_over_r)) == pytest.approx(largest(x_over_r), rel=1e-9)


@pytest.mark.parametrize("x_over_r", [1.5, 2.0, 3.0, 5.0, 10.0, 25.0])
def test_approximate_crests_keep_to_their_stated_errors(x_over_r: float) -> None:
    """Half-cycle form low by 2.9 % at most, φ + π/2 form low by 0.6 %, the fitted form high by 0.83 %."""
    exact = largest(x_over_r)
    assert -0.0295 < float(ieee.half_cycle_crest_factor(x_over_r)) / exact - 1 < 0
    assert -0.0065 < float(ieee.quarter_past_crest_factor(x_over_r)) / exact - 1 < 0
    assert -1e-4 < float(ieee.fitted_crest_factor(x_over_r)) / exact - 1 < 0.0084


@pytest.mark.parametrize("x_over_r", [3.0, 17.0])
@pytest.mark.parametrize("cycles", [0.5, 3.0])
def test_rms_factor_is_that_of_the_wave_with_its_direct_part_held(x_over_r: float, cycles: float) -> None:
    direct = math.exp(-2 * math.pi * cycles / x_over_r)
    square, _ = quad(lambda t: 2 * (math.sin(2 * math.pi * t) + direct) ** 2, 0, 1)
    assert float(ieee.rms_factor(x_over_r, cycles)) == pytest.approx(math.sqrt(square), rel=1e-9)


def test_limits_without_resistance_and_without_reactance() -> None:
    ends = np.array([0.0, math.inf])
    assert ieee.crest_factor(ends) == pytest.approx([math.sqrt(2), 2 * math.sqrt(2)], rel=1e-12)
    assert ieee.half_cycle_crest_factor(ends) == pytest.approx([math.sqrt(2), 2 * math.sqrt(2)], rel=1e-12)
    assert ieee.quarter_past_crest_factor(ends) == pytest.approx([math.sqrt(2), 2 * math.sqrt(2)], rel=1e-12)
    assert ieee.fitted_crest_factor(ends) == pytest.approx([math.sqrt(2), 2 * math.sqrt(2)], rel=1e-12)
    assert ieee.rms_factor(ends, 4.0) == pytest.approx([1.0, math.sqrt(3)], rel=1e-12)
    assert list(ieee.direct_share(ends, 0.0)) == [1.0, 1.0]


@settings(max_examples=60, deadline=None)
@given(st.floats(0.0, 200.0), st.floats(0.01, 50.0), st.floats(0.0, 8.0), st.floats(0.0, 4.0))
def test_factors_rise_with_x_over_r_and_fall_with_time(ratio: float, more: float, cycles: float, later: float) -> None:
    for crest in (ieee.crest_factor, ieee.half_cycle_crest_factor, ieee.fitted_crest_factor):
        assert float(crest(ratio)) <= float(crest(ratio + more)) + 1e-9 <= 2 * math.sqrt(2) + 2e-9
    assert float(ieee.rms_factor(ratio, cycles)) <= float(ieee.rms_factor(ratio + more, cycles)) + 1e-12
    assert 1 <= float(ieee.rms_factor(ratio, cycles + later)) <= float(ieee.rms_factor(ratio, cycles)) + 1e-12


@given(st.floats(1.0, math.sqrt(3)))
def test_s_and_direct_share_are_each_other_s_reverse(factor: float) -> None:
    back = ieee.rms_factor_of_direct_share(ieee.direct_share_of_rms_factor(factor))
    assert float(back) == pytest.approx(factor, rel=1e-12)
