"""Impedances of an overhead line from where its conductors hang.

Carson's series cut after its first terms ("modified Carson equations"), with the constants in SI instead of their
printed roundings: earth return adds π²·f·10⁻⁴ ohm/km, and the depth of the fictitious return conductor is
D_e = 2·exp(1/2 − γ)·sqrt(ρ / (ω·μ0)) ≈ 658.9·sqrt(ρ/f) m (γ is Euler's constant). Earth wires and neutrals are
earthed all along (Kron reduction), and the line counts as ideally transposed.

Sources: J. R. Carson, Wave propagation in overhead wires with ground return, 1926; the reduction and the sequence
values as in W. H. Kersting, Distribution System Modeling and Analysis, chapter 4.
"""

import math

import numpy as np

from onelinefault.engine.network import ComplexArray, FloatArray
from onelinefault.errors import StudyError
from onelinefault.model.values import LineGeometry

_MU0 = 4e-7 * math.pi  # H/m; X = ω·μ0/2π·ln(...), so 2·10⁻⁴ H/km stands before every logarithm
_H_PER_KM = 2e-4


def return_depth_m(frequency_hz: float, rho_ohm_m: float) -> float:
    """Depth in m of the fictitious conductor that carries the earth's return current (Carson's first terms)."""
    return 2 * math.exp(0.5 - float(np.euler_gamma)) * math.sqrt(rho_ohm_m / (2 * math.pi * frequency_hz * _MU0))


def primitive_impedances(
    places_m: FloatArray, r_ohm_per_km: FloatArray, gmr_m: FloatArray, frequency_hz: float, rho_ohm_m: float
) -> ComplexArray:
    """Series impedances in ohm/km of n conductors with earth return, shape (n, n), before any reduction.

    places_m: x and height of each conductor, shape (n, 2); r_ohm_per_km and gmr_m: shape (n,).
    """
    steps = places_m[:, None, :] - places_m[None, :, :]
    distance_m = np.hypot(steps[..., 0], steps[..., 1])
    np.fill_diagonal(distance_m, gmr_m)
    earth_r = math.pi**2 * frequency_hz * 1e-4
    x = 2 * math.pi * frequency_hz * _H_PER_KM * np.log(return_depth_m(frequency_hz, rho_ohm_m) / distance_m)
    z: ComplexArray = earth_r + np.diag(r_ohm_per_km) + 1j * x
    return z


def kron(z: ComplexArray, kept: int = 3) -> ComplexArray:
    """Fold the conductors after the first ``kept`` into them: they are at earth potential everywhere.

    z: shape (n, n) in any unit of impedance; the result has shape (kept, kept).
    """
    if z.shape[0] == kept:
        return z
    across = z[:kept, kept:]
    reduced: ComplexArray = z[:kept, :kept] - across @ np.linalg.solve(z[kept:, kept:], across.T)
    return reduced


def transposed(z: ComplexArray) -> tuple[complex, complex]:
    """Z1 and Z0 of an ideally transposed line from its phase impedances, shape (3, 3); same unit as z."""
    own = complex(np.trace(z)) / 3
    mutual = complex(np.sum(z) - np.trace(z)) / 6
    return own - mutual, own + 2 * mutual


def sequence_impedances_ohm_per_km(
    geometry: LineGeometry,
    phase_r_ohm_per_km: float,
    phase_gmr_m: float,
    neutral_r_ohm_per_km: float | None,
    neutral_gmr_m: float | None,
    frequency_hz: float,
    rho_ohm_m: float,
) -> tuple[complex, complex]:
    """Z1 and Z0 in ohm/km of an overhead line, transposed, with its earth wires earthed along the way.

    The phase values are those of one conductor; the neutral values may be None when the geometry has no "n".
    Raises StudyError when it has one and they are missing.
    """
    order = sorted(geometry.points, key=lambda point: "abcn".index(point[0]))
    earth_wires = len(order) - 3
    if earth_wires and (neutral_r_ohm_per_km is None or neutral_gmr_m is None):
        raise StudyError("the line's geometry has an earth wire: give the earth wire's resistance and GMR as well")
    places = np.array([(x, y) for _, x, y in order])
    r = np.array([phase_r_ohm_per_km] * 3 + [neutral_r_ohm_per_km or 0.0] * earth_wires)
    gmr = np.array([phase_gmr_m] * 3 + [neutral_gmr_m or 0.0] * earth_wires)
    return transposed(kron(primitive_impedances(places, r, gmr, frequency_hz, rho_ohm_m)))
