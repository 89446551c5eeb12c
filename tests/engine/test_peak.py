import numpy as np
import pytest
from scipy.integrate import quad

from onelinefault.engine.peak import fault_level_mva, peak_ka, x_over_r


def test_x_over_r_of_usual_pure_and_open_impedances() -> None:
    found = x_over_r(np.array([1 + 10j, 5j, complex(np.inf), 2 - 4j, 1e-19 + 5j]))
    assert found[0] == pytest.approx(10)
    assert found[1] == np.inf and np.isnan(found[2])
    assert found[3] == pytest.approx(-2)
    assert found[4] == np.inf  # a resistance that is nothing but rounding


@pytest.mark.parametrize("ratio", [1.0, 5.0, 20.0])
def test_the_peak_is_what_the_circuit_gives_half_a_cycle_after_closing_at_voltage_zero(ratio: float) -> None:
    """R-L circuit closed where the steady current would be at its crest, integrated by a general-purpose library: the
    d.c. part then decays with L/R while the steady part swings to its other crest."""
    omega, R = 2 * np.pi * 50, 1.0
    X = ratio * R
    impedance = np.hypot(R, X)
    angle = np.arctan2(X, R)

    def voltage(t):  # crest −√2·I/|Z| of the steady current at t = 0
        return np.sqrt(2) * np.cos(omega * t + np.pi + angle)

    decay = R * omega / X
    half = np.pi / omega
    integral = quad(lambda t: voltage(t) * np.exp(decay * (t - half)), 0, half, epsabs=1e-12)[0]
    instant = integral * omega / X  # current at half a cycle, from zero
    assert peak_ka(np.array([1 / impedance]), np.array([complex(R, X)]))[0] == pytest.approx(instant, rel=1e-9)


def test_peak_limits() -> None:
    found = peak_ka(np.ones(4), np.array([1j, 1 + 0j, 1 - 5j, complex(np.inf)]))
    assert found == pytest.approx(np.sqrt(2) * np.array([2, 1, 1, 1]), rel=1e-14)


def test_fault_level_of_a_hand_case() -> None:
    """25 kA at 11 kV is 476 MVA (√3 · 11 · 25)."""
    assert fault_level_mva(np.array(25.0), np.array(11.0)) == pytest.approx(476.31, rel=1e-5)
