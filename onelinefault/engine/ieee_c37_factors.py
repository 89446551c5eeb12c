"""ANSI/IEEE C37: E/X currents, and the factors that turn a symmetrical current into the duty of a breaker or fuse.

Scalars or numpy arrays in; results have the broadcast shape of the arguments (a scalar for scalars); no network.
Nothing of IEC 60909 (c, K) belongs in here. Each docstring names its source and whether it is "confirmed" (a published
page shows it or a figure that it reproduces) or "from memory". What the standards print as curves only, or leave to
the engineer, is an input: local factors, contact parting of two-cycle breakers, motors in NACD, test X/R of fuses.
Duty = factor × symmetrical current. Generator breakers (d.c. current above the a.c. crest) are not covered.
"""

from collections.abc import Sequence
from enum import StrEnum

import numpy as np
from numpy.typing import ArrayLike

from onelinefault.engine.ieee_c37_asymmetry import crest_factor, half_cycle_crest_factor, rms_factor
from onelinefault.engine.network import FloatArray
from onelinefault.errors import StudyError

FLAT_MOMENTARY_FACTOR = 1.6  # r.m.s. of the first cycle, X/R up to 25
FLAT_MOMENTARY_X_OVER_R = 25.0
FLAT_CREST_FACTOR = 2.6  # 60 Hz, X/R up to 17
FLAT_CREST_X_OVER_R = 17.0
LOCAL_REACTANCE_LIMIT = 1.5  # times X″d of the generator

# Defaults that a study must show and let the user change
DEFAULT_RELAY_CYCLES = 0.5
DEFAULT_TWO_CYCLE_PARTING = 1.0  # other texts: 1.5
DEFAULT_DISTRIBUTION_FUSE_X_OVER_R = 15.0
DEFAULT_POWER_FUSE_X_OVER_R = 25.0

_PARTING_CYCLES = {8: 4.0, 5: 3.0, 3: 2.0}  # rated interrupting time → contact parting, relay time included
_S_BY_PARTING = {4.0: 1.0, 3.0: 1.1, 2.0: 1.2, 1.5: 1.3, 1.0: 1.4}
_SIMPLIFIED_TOTAL = {8: 1.0, 5: 1.1, 3: 1.2, 2: 1.4}


# ------------------------------------------------------------------------------------------------------ E/X currents


def symmetrical_ka(line_kv: ArrayLike, z_ohm: ArrayLike) -> FloatArray:
    """E/X or E/Z in kA, shape (...): line_kv/√3 over the reactance or magnitude of the impedance at the fault.

    line_kv: operating voltage before the fault, normally nominal. E/X is on the safe side and enough above low voltage;
    low voltage takes E/Z. Source: IEEE C37.010, C37.13; from memory.
    """
    current: FloatArray = np.asarray(line_kv, np.float64) / (np.sqrt(3.0) * np.asarray(z_ohm))
    return current


def line_to_ground_ka(line_kv: ArrayLike, x1_ohm: ArrayLike, x0_ohm: ArrayLike) -> FloatArray:
    """Line-to-ground 3·E/(2·X1 + X0) in kA, X2 taken equal to X1, shape (...). Source: C37.010; from memory."""
    return 3 * symmetrical_ka(line_kv, 2 * np.asarray(x1_ohm, np.float64) + np.asarray(x0_ohm))


def line_to_ground_x_over_r(x1_ohm: ArrayLike, x0_ohm: ArrayLike, r1_ohm: ArrayLike, r0_ohm: ArrayLike) -> FloatArray:
    """(2·X1 + X0)/(2·R1 + R0), shape (...), each reduced in a network of its own. Source: C37.010; from memory.

    Separate reductions are the rule of C37.010 for every X/R of a d.c. decrement; they lie above the X/R of the complex
    impedance where branches differ.
    """
    x = 2 * np.asarray(x1_ohm, np.float64) + np.asarray(x0_ohm)
    ratio: FloatArray = x / (2 * np.asarray(r1_ohm, np.float64) + np.asarray(r0_ohm))
    return ratio


def quick_acceptance_share(x_over_r: ArrayLike, line_to_ground: bool = False) -> FloatArray:
    """Share of the symmetrical capability that E/X may take up without a factor, shape (...): for a remark only.

    1 for X/R up to 15, else (also where X/R is unknown, not-a-number) 0.8, for a line-to-ground fault 0.7.
    Source: C37.010; from memory.
    """
    return np.where(np.asarray(x_over_r, np.float64) <= 15, 1.0, 0.7 if line_to_ground else 0.8)


# ------------------------------------------------------------------ medium and high voltage: close and latch, momentary


def momentary_rms_factor(x_over_r: ArrayLike, always_calculated: bool = False) -> FloatArray:
    """First-cycle r.m.s. with d.c. current over I, shape (...): 1.6 up to X/R 25, else √(1 + 2·e^(−2π/(X/R))).

    always_calculated: the formula below 25 too (lower than 1.6). For K-rated and total-rated breakers.
    Source: C37.010, C37.5; 1.6 at 25 confirmed.
    """
    calculated = rms_factor(x_over_r, 0.5)
    flat = np.asarray(x_over_r, np.float64) <= FLAT_MOMENTARY_X_OVER_R
    return np.where(flat & (not always_calculated), FLAT_MOMENTARY_FACTOR, calculated)


def close_and_latch_crest_factor(x_over_r: ArrayLike, always_calculated: bool = False) -> FloatArray:
    """First-cycle crest over I, shape (...): 2.6 up to X/R 17 (60 Hz), else the exact crest.

    For breakers rated at constant kA. At 50 Hz calculate always: their 2.5 goes with X/R 14 only.
    Source: C37.04-1999, C37.010; from memory.
    """
    flat = np.asarray(x_over_r, np.float64) <= FLAT_CREST_X_OVER_R
    return np.where(flat & (not always_calculated), FLAT_CREST_FACTOR, crest_factor(x_over_r))


# -------------------------------------------------------------------------- medium and high voltage: interrupting


def contact_parting_cycles(rated_cycles: int, two_cycle_parting: float = DEFAULT_TWO_CYCLE_PARTING) -> float:
    """C, contact parting after the start of the fault for a rated interrupting time of 8, 5, 3 or 2 cycles.

    Opening time and half a cycle of relay; a slower relay adds its excess over DEFAULT_RELAY_CYCLES. two_cycle_parting:
    1 or 1.5, texts differ. Raises StudyError for another rating. Source: C37.04-1979, C37.010; confirmed, 1.5 from
    memory.
    """
    parting = {**_PARTING_CYCLES, 2: two_cycle_parting}
    if rated_cycles not in parting:
        raise StudyError(
            f"A rated interrupting time of {rated_cycles} cycles has no usual contact parting time;"
            " enter 8, 5, 3 or 2 cycles, or the contact parting time itself."
        )
    return parting[rated_cycles]


def symmetrical_s(rated_parting_cycles: float) -> float:
    """S of a symmetrical-rated breaker by its rated contact parting: 4 → 1.0, 3 → 1.1, 2 → 1.2, 1.5 → 1.3, 1 → 1.4.

    S stays that of the rating when a slow relay parts the contacts later. Raises StudyError for another time.
    Source: C37.04-1979, C37.010; confirmed, 1.3 at 1.5 cycles from memory.
    """
    if rated_parting_cycles not in _S_BY_PARTING:
        raise StudyError(
            f"No asymmetry factor S is tabled for contact parting at {rated_parting_cycles:g} cycles;"
            " enter 4, 3, 2, 1.5 or 1 cycles, or the breaker's d.c. rating in per cent."
        )
    return _S_BY_PARTING[rated_parting_cycles]


def remote_factor(x_over_r: ArrayLike, parting_cycles: ArrayLike, rated_asymmetry: ArrayLike) -> FloatArray:
    """Remote factor (no a.c. decay) of a symmetrical-rated breaker, at least 1, shape (...).

    √(1 + 2·e^(−4π·C/(X/R)))/S. rated_asymmetry: S (symmetrical_s), or for a breaker rated in %dc
    rms_factor_of_direct_share(%dc/100). Source: C37.010 (remote, NACD); from memory.
    """
    factor: FloatArray = np.maximum(rms_factor(x_over_r, parting_cycles) / np.asarray(rated_asymmetry), 1.0)
    return factor


def remote_factor_total(x_over_r: ArrayLike, parting_cycles: ArrayLike) -> FloatArray:
    """Remote factor of a total-rated breaker, √(1 + 2·e^(−4π·C/(X/R))), shape (...); the duty is total r.m.s.

    Source: C37.5; from memory.
    """
    return rms_factor(x_over_r, parting_cycles)


def simplified_total_factor(rated_cycles: int, large_generator_bus: bool = False) -> float:
    """Old factor on E/X for total-rated breakers: 8 cycles 1.0, 5 1.1, 3 1.2, 2 1.4; 0.1 more on a generator bus.

    large_generator_bus: on a bus with generators and above 500 MVA. Raises StudyError for another rating.
    Source: C37.5; from memory.
    """
    if rated_cycles not in _SIMPLIFIED_TOTAL:
        raise StudyError(
            f"No simplified factor is known for a rated interrupting time of {rated_cycles} cycles;"
            " enter 8, 5, 3 or 2 cycles."
        )
    return _SIMPLIFIED_TOTAL[rated_cycles] + (0.1 if large_generator_bus else 0.0)


def local_factor(
    x_over_r: ArrayLike, remote: ArrayLike, curve: Sequence[tuple[float, float]] | None = None
) -> FloatArray:
    """Local factor (a.c. decay of near generators), shape (...), never above the remote one.

    remote: the remote factor at the same X/R and C. curve: points (X/R, factor) read off the standard for this C by its
    owner, in any order; straight lines between, constant outside. The standards print curves only, so without them the
    remote factor is returned, which is on the safe side. Raises StudyError for a curve without points.
    Source: C37.010, C37.5 curves (not reproduced).
    """
    ratio, highest = np.broadcast_arrays(np.asarray(x_over_r, np.float64), np.asarray(remote, np.float64))
    if curve is None:
        return highest.copy()
    if not curve:
        raise StudyError("The local-decay curve has no points; enter pairs of X/R and factor, or none of it at all.")
    ratios, factors = zip(*sorted(curve), strict=True)
    limited: FloatArray = np.minimum(np.interp(ratio, ratios, factors), highest)
    return limited


def is_local(external_x_ohm: float, subtransient_x_ohm: float, transformations: int) -> bool:
    """Whether a generator's contribution is local: through at most one transformation and less than 1.5·X″d.

    external_x_ohm: reactance between generator and fault, on the same base as X″d (ohm at one voltage, or per unit).
    A utility is remote always. Source: C37.010; from memory.
    """
    return transformations <= 1 and external_x_ohm < LOCAL_REACTANCE_LIMIT * subtransient_x_ohm


def nacd_ratio(
    total_ka: ArrayLike, local_generators_ka: ArrayLike, motors_ka: ArrayLike = 0.0, motors_are_remote: bool = True
) -> FloatArray:
    """Share of the fault current without a.c. decay, remote contributions over the total E/X, shape (...), 0 to 1.

    motors_are_remote: texts differ; as remote (their decay is in the multipliers) is the higher duty and the default,
    with false motors_ka counts as local. Source: C37.010, IEEE 551; from memory.
    """
    total = np.asarray(total_ka, np.float64)
    local = np.asarray(local_generators_ka, np.float64)
    if not motors_are_remote:
        local = local + np.asarray(motors_ka)
    return np.clip(1 - local / total, 0.0, 1.0)


def weighted_factor(local: ArrayLike, remote: ArrayLike, nacd: ArrayLike = 1.0) -> FloatArray:
    """Factor between the local and the remote one, MF_L + NACD·(MF_R − MF_L), shape (...); all remote by default.

    Source: IEEE 551-2006; from memory.
    """
    low = np.asarray(local, np.float64)
    factor: FloatArray = low + np.asarray(nacd) * (np.asarray(remote) - low)
    return factor


def capability_ka(
    operating_kv: float, highest_kv: float, k: float, rated_ka: float, line_to_ground: bool = False
) -> float:
    """Symmetrical capability in kA: rated·Vmax/V, at most K·rated; K = 1: rated at any voltage; 0 above Vmax.

    line_to_ground: 1.15 times as much for K-rated breakers, within K·rated. Source: C37.04-1979, C37.010; confirmed,
    line-to-ground from memory.
    """
    if operating_kv > highest_kv:
        return 0.0
    more = 1.15 if line_to_ground and k > 1 else 1.0
    return min(rated_ka * highest_kv / operating_kv * more, k * rated_ka)


# ------------------------------------------------------------------------------------------------ low voltage, fuses


class FactorForm(StrEnum):
    """What a device was tested for: the crest (unfused breakers) or the r.m.s. of the first half cycle (fuses)."""

    CREST = "crest"
    RMS = "rms"


def x_over_r_of_power_factor(power_factor: ArrayLike) -> FloatArray:
    """X/R of a test circuit of a power factor, √(1/pf² − 1), shape (...): 15 % 6.6, 20 % 4.9, 30 % 3.18, 50 % 1.73.

    Confirmed.
    """
    ratio: FloatArray = np.sqrt(1 / np.square(np.asarray(power_factor, np.float64)) - 1)
    return ratio


def moulded_case_test_power_factor(rating_ka: float) -> float:
    """Test power factor of moulded- and insulated-case breakers by interrupting rating: the X/R that asks for most.

    Up to 10 kA 0.50, up to 20 kA 0.30, above 0.20 (bands 45-50 %, 25-30 %, 15-20 %). Power breakers: 0.15 unfused, 0.20
    fused; low-voltage fuses 0.20. Source: C37.13, UL 489; confirmed.
    """
    if rating_ka <= 10:
        return 0.50
    return 0.30 if rating_ka <= 20 else 0.20


def tested_device_factor(
    x_over_r: ArrayLike, tested_x_over_r: ArrayLike, form: FactorForm | str, divisor: ArrayLike | None = None
) -> FloatArray:
    """First-cycle factor of a device that was tested at a known X/R, at least 1, shape (...).

    CREST: (1 + e^(−π/(X/R)))/(same at the test); RMS: √(1 + 2·e^(−2π/(X/R)))/(same at the test). divisor: the rounded
    denominator that C37.13-2008 prints (2.29 for √2·(...) at 15 %, 2.159 at 20 %, 1.25 for r.m.s. at 20 %) in place
    of the calculated one. High-voltage fuses: RMS with a test X/R of 15 (distribution) or 25 (power) by default.
    Raises ValueError for another form. Source: C37.13; confirmed, high-voltage fuses from memory.
    """
    shape = half_cycle_crest_factor if FactorForm(form) is FactorForm.CREST else _first_half_cycle_rms
    tested = shape(tested_x_over_r) if divisor is None else np.asarray(divisor, np.float64)
    above = np.asarray(x_over_r, np.float64) > np.asarray(tested_x_over_r)
    return np.where(above, np.maximum(shape(x_over_r) / tested, 1.0), 1.0)


def _first_half_cycle_rms(x_over_r: ArrayLike) -> FloatArray:
    return rms_factor(x_over_r, 0.5)
