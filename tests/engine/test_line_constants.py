"""Line constants against laws and against integrals; the printed example is in tests/authority."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad

from onelinefault.engine.line_constants import (
    kron,
    primitive_impedances,
    return_depth_m,
    sequence_impedances_ohm_per_km,
    transposed,
)
from onelinefault.errors import StudyError
from onelinefault.model.values import read_line_geometry

MU0 = 4e-7 * math.pi


def carson_ohm_per_km(h1: float, h2: float, x: float, distance: float, *, f: float, rho: float) -> complex:
    """Mutual impedance with earth return by Carson's whole integral, numerically (Carson 1926, equations 25 to 30)."""
    omega = 2 * math.pi * f

    def kernel(u: float) -> complex:
        root = np.sqrt(u * u + 1j * omega * MU0 / rho)
        return complex(np.exp(-u * (h1 + h2)) * np.cos(u * x) / (u + root))

    top = 40 / (h1 + h2)
    earth = sum(factor * quad(lambda u, p=p: p(kernel(u)), 0, top, limit=400)[0]
                for p, factor in ((np.real, 1), (np.imag, 1j)))  # fmt: skip
    image = math.hypot(h1 + h2, x)
    return 1e3 * 1j * omega * MU0 / math.pi * (0.5 * math.log(image / distance) + earth)


def test_return_depth_is_the_published_one() -> None:
    # Kersting 4.1: ln(D_e in ft) = 7.93402 at 60 Hz and 100 ohm·m, from Carson's 0.0386 printed to four decimals
    assert math.log(return_depth_m(60, 100) / 0.3048) == pytest.approx(7.93402, abs=1e-4)
    # IEC 60909-2 and textbooks: D_e = 658 … 659 · sqrt(rho/f) m
    assert return_depth_m(50, 50) == pytest.approx(658.5, rel=1e-3)


@pytest.mark.parametrize("frequency_hz", [50.0, 60.0])
def test_matches_the_whole_integral_for_low_wires(frequency_hz: float) -> None:
    places = np.array([[0.0, 9.0], [1.2, 9.0]])
    z = primitive_impedances(places, np.array([0.2, 0.3]), np.array([0.006, 0.006]), frequency_hz, 1000.0)
    own = 0.2 + carson_ohm_per_km(9, 9, 0, 0.006, f=frequency_hz, rho=1000.0)
    mutual = carson_ohm_per_km(9, 9, 1.2, 1.2, f=frequency_hz, rho=1000.0)
    # the next term of the series is of relative size √2/6·k with k = 2h·sqrt(ω·μ0/ρ) = 0.012: well under one per cent
    assert z[0, 0] == pytest.approx(own, rel=0.01)
    assert z[0, 1] == pytest.approx(mutual, rel=0.01)


def test_positive_sequence_without_earth_wires_is_the_geometric_mean_formula() -> None:
    # no earth wire: earth and depth cancel, X1 = ω·2e-4·ln(GMD/GMR), any textbook
    geometry = read_line_geometry("a 0 10; b 1 10; c 3 11")
    z1, z0 = sequence_impedances_ohm_per_km(geometry, 0.25, 0.005, None, None, 50, 100)
    gmd = (1 * math.hypot(3, 1) * math.hypot(2, 1)) ** (1 / 3)
    assert z1 == pytest.approx(0.25 + 1j * 2e-4 * 100 * math.pi * math.log(gmd / 0.005), rel=1e-12)
    z0_text = 3 * math.log(return_depth_m(50, 100) / (0.005 * gmd**2) ** (1 / 3))
    assert z0 == pytest.approx(0.25 + 3 * math.pi**2 * 50e-4 + 1j * 2e-4 * 100 * math.pi * z0_text, rel=1e-12)


@given(st.permutations(["a 0 9", "b 1.5 9", "c 4 9.5", "n 2 11", "n 3 11"]))
@settings(max_examples=20, deadline=None)
def test_order_of_conductors_does_not_matter(pieces: list[str]) -> None:
    z = sequence_impedances_ohm_per_km(read_line_geometry("; ".join(pieces)), 0.3, 0.006, 0.7, 0.002, 50, 200)
    usual = read_line_geometry("a 0 9; b 1.5 9; c 4 9.5; n 2 11; n 3 11")
    assert z == pytest.approx(sequence_impedances_ohm_per_km(usual, 0.3, 0.006, 0.7, 0.002, 50, 200), rel=1e-12)


@given(st.integers(4, 7), st.integers(0, 10_000))
@settings(max_examples=25, deadline=None)
def test_kron_gives_the_currents_of_the_whole_set(size: int, seed: int) -> None:
    # brute force: solve all conductors with the folded ones at earth, and read the kept currents
    rng = np.random.default_rng(seed)
    half = rng.normal(size=(size, size)) + 1j * rng.normal(size=(size, size))
    z = half + half.T + 3 * size * np.eye(size)
    volts = np.concatenate([rng.normal(size=3), np.zeros(size - 3)])
    amperes = np.linalg.solve(z, volts)[:3]
    assert np.allclose(kron(z) @ amperes, volts[:3], rtol=0, atol=1e-12)


def test_an_earth_wire_lowers_zero_sequence_and_hardly_the_positive() -> None:
    bare = sequence_impedances_ohm_per_km(read_line_geometry("a 0 9; b 1 9; c 2 9"), 0.3, 0.006, None, None, 50, 100)
    wired = read_line_geometry("a 0 9; b 1 9; c 2 9; n 1 11")
    with_wire = sequence_impedances_ohm_per_km(wired, 0.3, 0.006, 0.3, 0.006, 50, 100)
    assert with_wire[1].imag < 0.8 * bare[1].imag
    assert with_wire[0] == pytest.approx(bare[0], rel=0.01)


def test_transposed_of_a_symmetric_line_is_exact() -> None:
    z = np.full((3, 3), 0.1 + 0.2j) + np.eye(3) * (0.3 + 0.4j)
    assert transposed(z) == pytest.approx((0.3 + 0.4j, 0.6 + 1.0j), rel=1e-12)


def test_missing_earth_wire_data_is_named() -> None:
    geometry = read_line_geometry("a 0 9; b 1 9; c 2 9; n 1 11")
    with pytest.raises(StudyError, match="earth wire"):
        sequence_impedances_ohm_per_km(geometry, 0.3, 0.006, 0.4, None, 50, 100)
