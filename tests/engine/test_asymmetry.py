"""The asymmetrical r.m.s. against the R-L circuit solved and averaged numerically."""

import math

import numpy as np
import pytest
from scipy.integrate import quad, solve_ivp

from onelinefault.engine.asymmetry import asymmetrical_rms_ka, direct_share


def test_first_moment_is_root_three() -> None:
    assert asymmetrical_rms_ka(1.0, 25.0, 0.0) == pytest.approx(math.sqrt(3), rel=1e-14)


@pytest.mark.parametrize("x_over_r", [2.0, 8.0, 40.0])
def test_direct_part_is_that_of_the_differential_equation(x_over_r: float) -> None:
    # di/dθ = (e − R i)/X with the fault at the worst moment; i minus its steady part is the direct current
    z_angle = math.atan(x_over_r)
    size = math.hypot(1 / x_over_r, 1)
    solution = solve_ivp(
        lambda angle, i: math.sqrt(2) * size * math.sin(angle + z_angle - math.pi / 2) - i / x_over_r,
        (0, 6 * math.pi), [0.0], rtol=1e-10, atol=1e-12, dense_output=True,
    )  # fmt: skip
    for cycles in (0.5, 1.0, 3.0):
        steady = math.sqrt(2) * math.sin(2 * math.pi * cycles - math.pi / 2)
        direct = solution.sol(2 * math.pi * cycles)[0] - steady
        assert direct / math.sqrt(2) == pytest.approx(direct_share(x_over_r, cycles), rel=1e-6)


@pytest.mark.parametrize("cycles", [0.0, 1.5, 5.0])
def test_rms_is_that_of_the_wave_with_its_direct_part_held(cycles: float) -> None:
    direct = math.sqrt(2) * direct_share(15.0, cycles)
    square, _ = quad(lambda t: (math.sqrt(2) * np.sin(2 * math.pi * t) + direct) ** 2, 0, 1)
    assert asymmetrical_rms_ka(1.0, 15.0, cycles) == pytest.approx(math.sqrt(square), rel=1e-10)


def test_limits() -> None:
    assert asymmetrical_rms_ka(2.0, math.inf, 30.0) == pytest.approx(2 * math.sqrt(3), rel=1e-14)
    assert asymmetrical_rms_ka(2.0, 0.0, 0.01) == 2.0
