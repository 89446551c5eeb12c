"""IEC 60909-0: what follows the initial current: peak, d.c. current, breaking current, thermal equivalent.

Scalars or numpy arrays in; results have the broadcast shape of the arguments (a scalar for scalars); no network.
r_over_x is R/X, zero or more; a negative one (a series capacitor's neighbour) counts as zero, which is on the safe
side. Clauses are those of the 2016 edition and pointers only. Each docstring says whether the formula is "confirmed"
(reproduces a figure of a published worked example) or "from memory".

Not here: the factors λ of the steady-state current (clause 11). They are curves over I″kG/IrG and the saturated
reactance, of which no figures are at hand; a method has to ask for them or take Ik = I″k without motors.
"""

import numpy as np
from numpy.typing import ArrayLike

from onelinefault.engine.network import FloatArray

MESHED_MARGIN = 1.15
LOW_VOLTAGE_CAP = 1.8
HIGH_VOLTAGE_CAP = 2.0
MARGIN_FROM_R_OVER_X = 0.3
PEAK_FREQUENCY_RATIO = 0.4  # fc/f for the peak: 20 Hz of 50 Hz, 24 Hz of 60 Hz

# cycles f·t below which the ratio fc/f holds, for the d.c. current of meshed networks
_DIRECT_CURRENT_CYCLES = (1.0, 2.5, 5.0)
_DIRECT_CURRENT_RATIOS = (0.27, 0.15, 0.092, 0.055)

_TIMES_S = np.array([0.02, 0.05, 0.10, 0.25])
_MU = ((0.84, 0.26, 0.26), (0.71, 0.51, 0.30), (0.62, 0.72, 0.32), (0.56, 0.94, 0.38))
_Q = ((1.03, 0.12), (0.79, 0.12), (0.57, 0.12), (0.26, 0.10))
NO_DECAY_UP_TO = 2.0  # machine currents up to twice rated do not decay

TRANSIENT_S = 3.1  # T′ of the thermal factor n, over I′k/Ik
_SUBTRANSIENT_PART = 10.0  # T′/T″


def _upright(r_over_x: ArrayLike) -> FloatArray:
    return np.maximum(np.asarray(r_over_x, np.float64), 0.0)


# --------------------------------------------------------------------------------------------------- peak current


def kappa(r_over_x: ArrayLike) -> FloatArray:
    """κ = 1.02 + 0.98·e^(−3·R/X) of any shape (...): the peak is ip = κ·√2·I″k.

    For a single-fed fault, or each of several single-fed branches whose peaks are added. Source: clause 8; confirmed.
    """
    factor: FloatArray = 1.02 + 0.98 * np.exp(-3.0 * _upright(r_over_x))
    return factor


def kappa_uniform(branches_r_over_x: ArrayLike) -> FloatArray:
    """Method (a), uniform ratio: κ of the smallest R/X along the last axis, shape (..., branches) → (...).

    The branches are all those that carry fault current at the fault's own voltage and the transformers next to it.
    Source: clause 8, method (a); from memory, and editions differ in which branches count.
    """
    return kappa(np.min(np.asarray(branches_r_over_x, np.float64), axis=-1))


def kappa_at_fault(r_over_x: ArrayLike, low_voltage: ArrayLike, branches_above_limit: ArrayLike = True) -> FloatArray:
    """Method (b), R/X at the fault: 1.15·κ, at most 1.8 in low-voltage and 2.0 in high-voltage networks; shape (...).

    low_voltage: whether the fault is at 1 kV or below. branches_above_limit: whether any branch has R/X of 0.3 or
    more; false drops the 1.15 and its limit. The limit is the standard's also where κ itself is above it.
    Source: clause 8, method (b); the factor without 1.15 confirmed, 1.15 and its limits from memory.
    """
    plain = kappa(r_over_x)
    limit = np.where(np.asarray(low_voltage, np.bool_), LOW_VOLTAGE_CAP, HIGH_VOLTAGE_CAP)
    raised = np.minimum(MESHED_MARGIN * plain, limit)
    return np.where(np.asarray(branches_above_limit, np.bool_), raised, plain)


def needs_margin(branches_r_over_x: ArrayLike) -> bool:
    """Whether any branch, of whatever shape (...), has R/X of 0.3 or more, so that method (b) needs its 1.15.

    Source: clause 8, method (b); from memory.
    """
    return bool(np.any(np.asarray(branches_r_over_x, np.float64) >= MARGIN_FROM_R_OVER_X))


def r_over_x_from_equivalent_frequency(
    rc_ohm: ArrayLike, xc_ohm: ArrayLike, frequency_ratio: ArrayLike = PEAK_FREQUENCY_RATIO
) -> FloatArray:
    """Method (c): R/X = (Rc/Xc)·(fc/f), shape (...), from the impedance Rc + jXc at the fault at frequency fc.

    All reactances of the network are taken at fc = frequency_ratio·f, resistances unchanged: ratio 0.4 for the peak,
    direct_current_frequency_ratio for the d.c. current. κ is then that of kappa.
    Source: clause 8, method (c); from memory.
    """
    ratio: FloatArray = np.asarray(rc_ohm, np.float64) / np.asarray(xc_ohm) * np.asarray(frequency_ratio)
    return ratio


def peak_ka(ik_ka: ArrayLike, factor: ArrayLike) -> FloatArray:
    """Peak current ip = κ·√2·I″k in kA, shape (...). Source: clause 8; confirmed."""
    peak: FloatArray = np.asarray(factor, np.float64) * np.sqrt(2.0) * np.asarray(ik_ka)
    return peak


# --------------------------------------------------------------------------------------------------- d.c. current


def direct_current_frequency_ratio(frequency_hz: float, time_s: ArrayLike) -> FloatArray:
    """fc/f for the d.c. current of a meshed network at a time, shape (...): 0.27, 0.15, 0.092, 0.055.

    For f·t below 1, 2.5, 5 and 12.5 cycles; the last is kept beyond, where the table ends and hardly any d.c. current
    is left. Source: clause 10; from memory.
    """
    cycles = frequency_hz * np.asarray(time_s, np.float64)
    return np.asarray(_DIRECT_CURRENT_RATIOS)[np.digitize(cycles, _DIRECT_CURRENT_CYCLES)]


def direct_current_ka(ik_ka: ArrayLike, r_over_x: ArrayLike, frequency_hz: float, time_s: ArrayLike) -> FloatArray:
    """Largest d.c. current i_dc = √2·I″k·e^(−2π·f·t·R/X) in kA, shape (...), with true generator resistances.

    Source: clause 10; from memory.
    """
    decay = np.exp(-2 * np.pi * frequency_hz * np.asarray(time_s, np.float64) * _upright(r_over_x))
    current: FloatArray = np.sqrt(2.0) * np.asarray(ik_ka) * decay
    return current


# ----------------------------------------------------------------------------------------------- breaking current


def mu(current_ratio: ArrayLike, time_s: ArrayLike) -> FloatArray:
    """μ = Ib/I″k of a synchronous machine at the smallest time delay, shape (...), at most 1.

    current_ratio: I″kG/IrG at the generator's terminals (for a unit the high-side current times tr), for a motor
    I″kM/IrM; up to 2 there is no decay. time_s: formulas are given for 0.02, 0.05, 0.10 and 0.25 s, straight lines
    between; constant beyond 0.25 s. Before 0.02 s, which the standard does not go into, a straight line from 1 at the
    start, which is above any decaying curve. Source: clause 9; formulas confirmed, straight lines our choice.
    """
    ratio = np.asarray(current_ratio, np.float64)
    tabled = [np.minimum(1.0, a + b * np.exp(-d * ratio)) for a, b, d in _MU]
    return np.where(ratio <= NO_DECAY_UP_TO, 1.0, _between_times(tabled, time_s))


def q(mw_per_pole_pair: ArrayLike, time_s: ArrayLike) -> FloatArray:
    """q of an asynchronous motor at the smallest time delay, shape (...), from 0 to 1.

    mw_per_pole_pair: rated active power of one motor in MW for each pair of poles. Times as for mu.
    Source: clause 9; formulas confirmed, straight lines our choice.
    """
    with np.errstate(divide="ignore"):
        logarithm = np.log(np.maximum(np.asarray(mw_per_pole_pair, np.float64), 0.0))
    return _between_times([np.clip(a + b * logarithm, 0.0, 1.0) for a, b in _Q], time_s)


def motor_decay(current_ratio: ArrayLike, mw_per_pole_pair: ArrayLike, time_s: ArrayLike) -> FloatArray:
    """Ib/I″k = μ·q of an asynchronous motor, shape (...); 1 where I″kM/IrM is not above 2: then q = 1 as well.

    Source: clause 9; confirmed.
    """
    near = np.asarray(current_ratio, np.float64) > NO_DECAY_UP_TO
    return np.where(near, mu(current_ratio, time_s) * q(mw_per_pole_pair, time_s), 1.0)


def _between_times(tabled: list[FloatArray], time_s: ArrayLike) -> FloatArray:
    """Values at the tabled times, each of shape (...), joined by straight lines from 1 at t = 0."""
    time, *values = np.broadcast_arrays(np.asarray(time_s, np.float64), *tabled)
    knots = np.concatenate([[0.0], _TIMES_S])
    levels = [np.ones_like(time), *values]
    found = levels[0]
    for early, late, before, after in zip(knots[:-1], knots[1:], levels[:-1], levels[1:], strict=True):
        share = np.clip((time - early) / (late - early), 0.0, 1.0)
        found = np.where(time > early, before + share * (after - before), found)
    return found


# --------------------------------------------------------------------------------------------- thermal equivalent


def m(frequency_hz: float, duration_s: ArrayLike, factor: ArrayLike) -> FloatArray:
    """m, the heat of the d.c. current over that of I″k, shape (...), from 0 (κ = 1) to 2 (κ = 2).

    (e^(4·f·Tk·ln(κ − 1)) − 1)/(2·f·Tk·ln(κ − 1)); factor: κ, held between 1 and 2.
    Source: clause on the Joule integral and annex A; from memory, equal to the integral.
    """
    decay = np.clip(np.asarray(factor, np.float64) - 1.0, 0.0, 1.0)
    cycles = np.asarray(frequency_hz * np.asarray(duration_s, np.float64))
    with np.errstate(divide="ignore", invalid="ignore"):
        exponent = 4 * cycles * np.log(decay)
        value = 2 * np.expm1(exponent) / exponent
    return np.where(exponent == 0, 2.0, np.where(np.isneginf(exponent), 0.0, value))


def n(decay_ratio: ArrayLike, duration_s: ArrayLike) -> FloatArray:
    """n, the heat of the a.c. current over that of a constant I″k, shape (...), from 0 to 1.

    decay_ratio: I″k/Ik, one or more; 1 far from generators and in most networks. The integral of the squared current
    (Ik″ − Ik′)·e^(−t/T″) + (Ik′ − Ik)·e^(−t/T′) + Ik with Ik′/Ik = r/(0.88 + 0.17·r), T′ = 3.1 s·Ik/Ik′, T″ = T′/10.
    Ik′ is taken no smaller than Ik (r below 1.06), so that n runs into 1 at r = 1: our addition.
    Source: annex A; from memory, equal to the integral.
    """
    r = np.maximum(np.asarray(decay_ratio, np.float64), 1.0)
    time = np.asarray(duration_s, np.float64)
    transient = np.maximum(r / (0.88 + 0.17 * r), 1.0)
    first, second = r - transient, transient - 1.0
    share = TRANSIENT_S / transient / time  # T′/Tk

    def heat(rate: float) -> FloatArray:
        """∫e^(−rate·t/T′) dt/Tk over the duration."""
        value: FloatArray = -np.expm1(-rate / share) * share / rate
        return value

    fast = _SUBTRANSIENT_PART
    squares = 1 + first**2 * heat(2 * fast) + second**2 * heat(2)
    mixed = 2 * first * heat(fast) + 2 * second * heat(1) + 2 * first * second * heat(fast + 1)
    value: FloatArray = (squares + mixed) / r**2
    return value


def thermal_equivalent_ka(ik_ka: ArrayLike, m_factor: ArrayLike, n_factor: ArrayLike = 1.0) -> FloatArray:
    """Ith = I″k·√(m + n) in kA, shape (...). Source: clause on the Joule integral; from memory."""
    current: FloatArray = np.asarray(ik_ka, np.float64) * np.sqrt(np.asarray(m_factor) + np.asarray(n_factor))
    return current


def thermal_equivalent_of_repeated_ka(thermal_ka: ArrayLike, durations_s: ArrayLike) -> FloatArray:
    """Ith of several short circuits in quick succession, √(Σ Ith²·Tk/Σ Tk) in kA over the last axis, shape (..., n).

    It belongs to the sum of the durations. Source: clause on the Joule integral; from memory.
    """
    durations = np.asarray(durations_s, np.float64)
    heat = np.sum(np.asarray(thermal_ka, np.float64) ** 2 * durations, axis=-1)
    current: FloatArray = np.sqrt(heat / np.sum(durations, axis=-1))
    return current
