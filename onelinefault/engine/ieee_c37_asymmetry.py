"""ANSI/IEEE C37: asymmetrical r.m.s. current and crest of a fault current whose a.c. part does not decay.

Scalars or numpy arrays in; results have the broadcast shape of the arguments (a scalar for scalars). x_over_r from 0
(no d.c. current after the first moment) to infinite (d.c. current for ever); cycles: of the system frequency after the
start of the fault at voltage zero. Factors multiply the symmetrical r.m.s. current. The current in the angle θ = ωt::

    i(θ) = √2·I·(sin(θ − φ) + sin φ·e^(−θ/(X/R)))            φ = arctan(X/R)

Source of all: series R-L circuit, in the forms of IEEE C37.010, C37.13 and IEEE 551; "confirmed" where a published
figure was seen that the formula reproduces, else "from memory".
"""

import numpy as np
from numpy.typing import ArrayLike

from onelinefault.engine.network import FloatArray

STANDARD_TIME_CONSTANT_S = 0.045
_ROUNDS_TO_CREST = 24  # each round shortens the error more than eleven times


def direct_share(x_over_r: ArrayLike, cycles: ArrayLike) -> FloatArray:
    """D.c. current over the a.c. crest √2·I, e^(−2π·t/(X/R)), shape (...), 1 at the start. Confirmed."""
    ratio, time = np.asarray(x_over_r, np.float64), np.asarray(cycles, np.float64)
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        share = np.exp(-2 * np.pi * time / ratio)
    return np.where(time == 0, 1.0, share)


def direct_share_of_time_constant(
    time_s: ArrayLike, time_constant_s: ArrayLike = STANDARD_TIME_CONSTANT_S
) -> FloatArray:
    """D.c. current over the a.c. crest e^(−t/τ), shape (...), as breakers are rated; τ 45 ms unless the rating differs.

    Source: IEEE C37.04-1999 and later; confirmed.
    """
    share: FloatArray = np.exp(-np.asarray(time_s, np.float64) / np.asarray(time_constant_s))
    return share


def x_over_r_of_time_constant(time_constant_s: float, frequency_hz: float) -> float:
    """X/R = 2π·f·τ; 45 ms are 17.0 at 60 Hz and 14.1 at 50 Hz. Confirmed."""
    return 2 * np.pi * frequency_hz * time_constant_s


def rms_factor_of_direct_share(share: ArrayLike) -> FloatArray:
    """R.m.s. of a.c. and d.c. current over the a.c. one, √(1 + 2·share²), shape (...); S of a %dc rating. Confirmed."""
    factor: FloatArray = np.sqrt(1 + 2 * np.square(np.asarray(share, np.float64)))
    return factor


def direct_share_of_rms_factor(factor: ArrayLike) -> FloatArray:
    """The reverse: d.c. share √((S² − 1)/2) that a symmetrical-rated breaker with S can break, shape (...).

    S = 1.4 means 69.3 %. Confirmed.
    """
    share: FloatArray = np.sqrt((np.square(np.asarray(factor, np.float64)) - 1) / 2)
    return share


def rms_factor(x_over_r: ArrayLike, cycles: ArrayLike) -> FloatArray:
    """R.m.s. with d.c. current over the symmetrical one, √(1 + 2·e^(−4π·t/(X/R))), shape (...), 1 to √3.

    1.6 at X/R 25 and 1.55 at X/R 17 after half a cycle. Source: IEEE C37.010; 1.6 confirmed, 1.55 from memory.
    """
    return rms_factor_of_direct_share(direct_share(x_over_r, cycles))


def crest_factor(x_over_r: ArrayLike) -> FloatArray:
    """Largest instantaneous current over the symmetrical r.m.s., exact, shape (...), √2 to 2·√2.

    At the crest cos(θ − φ) = cos φ·e^(−θ/(X/R)), found by repeated substitution. Confirmed (1.9495 at X/R 3).
    """
    ratio = np.asarray(x_over_r, np.float64)
    phi = np.arctan(ratio)
    with np.errstate(divide="ignore", over="ignore"):
        decay = 1 / ratio
    angle = phi + np.pi / 2
    for _ in range(_ROUNDS_TO_CREST):
        angle = phi + np.arccos(np.cos(phi) * np.exp(-angle * decay))
    factor: FloatArray = np.sqrt(2.0) * (np.sin(angle - phi) + np.sin(phi) * np.exp(-angle * decay))
    return factor


def half_cycle_crest_factor(x_over_r: ArrayLike) -> FloatArray:
    """√2·(1 + e^(−π/(X/R))), shape (...): the crest as the low-voltage ratio factors define it.

    Up to 3 % low (X/R about 1.5), so not for crests that are stated. Source: IEEE C37.13; confirmed.
    """
    factor: FloatArray = np.sqrt(2.0) * (1 + direct_share(x_over_r, 0.5))
    return factor


def quarter_past_crest_factor(x_over_r: ArrayLike) -> FloatArray:
    """Current at θ = φ + π/2, the crest of its a.c. part: √2·(1 + sin φ·e^(−(φ + π/2)/(X/R))), shape (...).

    Up to 0.6 % low. Source: R-L circuit; common practice, from memory.
    """
    ratio = np.asarray(x_over_r, np.float64)
    phi = np.arctan(ratio)
    with np.errstate(divide="ignore", over="ignore"):
        decay = np.exp(-(phi + np.pi / 2) / ratio)
    factor: FloatArray = np.sqrt(2.0) * (1 + np.sin(phi) * decay)
    return factor


def fitted_crest_factor(x_over_r: ArrayLike) -> FloatArray:
    """√2·(1 + e^(−2π·τ/(X/R))) with τ = 0.49 − 0.1·e^(−(X/R)/3) cycles, shape (...); up to 0.83 % high.

    Source: IEEE 551; from memory.
    """
    tau_cycles = 0.49 - 0.1 * np.exp(-np.asarray(x_over_r, np.float64) / 3)
    factor: FloatArray = np.sqrt(2.0) * (1 + direct_share(x_over_r, tau_cycles))
    return factor
