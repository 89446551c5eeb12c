"""IEC 60909-0: voltage factor, impedances of feeders and motors, correction factors K, motors that may be left out.

Scalars in, scalars out; no network. kV line to line, kA, MVA, MW, ohm. Angles are not needed: sin_phi is the sine of
the rated power-factor angle, reactances `*_pu` are on the part's own rating. Clauses are those of the 2016 edition and
pointers only. Each docstring says how sure the formula is: "confirmed" where it reproduces a figure of a published
worked example, "from memory" where no published figure was at hand. What depends on time is in iec60909_decay.
"""

import math
from collections.abc import Sequence
from enum import StrEnum

from onelinefault.errors import StudyError

LOW_VOLTAGE_KV = 1.0  # low voltage ends at 1 kV (IEC 60038)
LARGE_GENERATOR_MVA = 100.0
LARGE_MOTOR_MW_PER_PAIR = 1.0
NEGLIGIBLE_MOTOR_SHARE = 0.05
NEGLIGIBLE_RATED_SHARE = 0.01
METAL_ALPHA_PER_K = 0.004

# voltage tolerance of a low-voltage network in % → largest and smallest c
_LOW_VOLTAGE_C = {6.0: (1.05, 0.95), 10.0: (1.10, 0.90)}
_HIGH_VOLTAGE_C = (1.10, 1.00)


class Level(StrEnum):
    """Which short-circuit current is asked for: the largest (ratings) or the smallest (protection)."""

    MAX = "max"
    MIN = "min"


def voltage_factor(nominal_kv: float, level: Level | str, lv_tolerance_percent: float = 6.0) -> float:
    """Voltage factor c for the nominal voltage of a bus.

    lv_tolerance_percent: 6 or 10, looked at up to 1 kV only. Below 0.1 kV the table is silent and its lowest row is
    kept. c·Un should not exceed the highest voltage for equipment; that is the caller's to watch. The 2001 edition has
    c_min = 0.95 for both tolerances. Raises StudyError for another tolerance, ValueError for another level.
    Source: table 1; largest c confirmed, smallest from memory.
    """
    place = 0 if Level(level) is Level.MAX else 1
    if nominal_kv > LOW_VOLTAGE_KV:
        return _HIGH_VOLTAGE_C[place]
    try:
        return _LOW_VOLTAGE_C[float(lv_tolerance_percent)][place]
    except KeyError:
        raise StudyError(
            f"The voltage tolerance {lv_tolerance_percent:g} % of the low-voltage network at {nominal_kv:g} kV has no"
            " voltage factor c in IEC 60909-0; set it to 6 % or 10 %."
        ) from None


def feeder_impedance_ohm(c: float, nominal_kv: float, ik_ka: float, r_over_x: float = 0.1) -> complex:
    """Z_Q = c·UnQ/(√3·I″kQ) at the feeder's own voltage, split by R/X; c is that of the feeder's bus.

    Source: 6.2, equations for Z_Q and X_Q = Z_Q/√(1 + (R/X)²); confirmed.
    """
    return split_by_r_over_x(c * nominal_kv / (math.sqrt(3) * ik_ka), r_over_x)


def split_by_r_over_x(size_ohm: float, r_over_x: float) -> complex:
    """R + jX of the given magnitude in ohm with the given R/X. Source: R-L circuit, used in 6.2 and 6.10; confirmed."""
    reactance_ohm = size_ohm / math.hypot(1.0, r_over_x)
    return complex(r_over_x * reactance_ohm, reactance_ohm)


def hot_resistance_ohm(at_20_ohm: float, end_c: float, alpha_per_k: float = METAL_ALPHA_PER_K) -> float:
    """R at the end of the short circuit, R20·(1 + α·(θe − 20 °C)), for the smallest current; R1 and R0 alike.

    alpha_per_k: 0.004 for copper, aluminium and its alloys. Source: 7.1 (smallest current); from memory.
    """
    return at_20_ohm * (1 + alpha_per_k * (end_c - 20.0))


# ----------------------------------------------------------------------------------------------------- transformers


def transformer_factor(c_max: float, x_pu: float) -> float:
    """K_T = 0.95·c_max/(1 + 0.6·x_T) of a transformer in the network, the same for largest and smallest currents.

    c_max: of the network at the low-voltage side. x_pu: the reactance x_T = X_T/(UrT²/SrT), not u_kr. A
    three-winding transformer takes it once for each pair, with x_T on that pair's rating, before the star is made.
    It multiplies R, X, R0 and X0, never 3·ZN; not for the unit transformer of a power station unit.
    Source: 6.3.3, two and three windings; confirmed.
    """
    return 0.95 * c_max / (1 + 0.6 * x_pu)


def transformer_factor_in_operation(
    c_max: float, x_pu: float, nominal_kv: float, operating_kv: float, current_share: float, sin_phi: float
) -> float:
    """K_T = (Un/Ub)·c_max/(1 + x_T·(IbT/IrT)·sinφbT) where the state before the fault is known for certain.

    operating_kv: highest voltage Ub before the fault; current_share: IbT/IrT, largest; sin_phi: of that current.
    Source: 6.3.3 (operating data known); from memory.
    """
    return nominal_kv / operating_kv * c_max / (1 + x_pu * current_share * sin_phi)


def pair_factors(c_max: Sequence[float], x_pu: Sequence[float]) -> tuple[float, ...]:
    """K_T of the pairs of a three-winding transformer, in the order given (say AB, AC, BC).

    c_max: of the network at the lower-voltage side of each pair; x_pu: of each pair, on its own rated power.
    Raises ValueError for sequences of unequal length. Source: 6.3.3; confirmed where c_max is 1.1 everywhere.
    """
    return tuple(transformer_factor(c, x) for c, x in zip(c_max, x_pu, strict=True))


# ------------------------------------------------------------------------------ generators and power station units


def generator_factor(
    c_max: float, x_pu: float, sin_phi: float, nominal_kv: float, rated_kv: float, above_rated_pu: float = 0.0
) -> float:
    """K_G = Un/(UrG·(1 + pG))·c_max/(1 + x″d·sinφrG) of a generator right on the network; multiplies R + jX″d.

    above_rated_pu: pG, for a terminal voltage that is permanently above the rated one; synchronous motors and
    compensators alike. Source: 6.6.1, confirmed; with pG from memory.
    """
    return nominal_kv / (rated_kv * (1 + above_rated_pu)) * c_max / (1 + x_pu * sin_phi)


def unit_factor_with_tap_changer(
    c_max: float,
    x_generator_pu: float,
    x_transformer_pu: float,
    sin_phi: float,
    nominal_kv: float,
    generator_kv: float,
    high_kv: float,
    low_kv: float,
) -> float:
    """K_S = (UnQ/UrG)²·(UrTLV/UrTHV)²·c_max/(1 + abs(x″d − x_T)·sinφrG): one factor on generator and transformer.

    For faults on the high side or beyond, Z_S = K_S·(tr²·Z_G + Z_THV) with the rated tr = high_kv/low_kv, without
    K_G and K_T. nominal_kv: of the network at the high side. Source: 6.7.1; confirmed.
    """
    voltages = (nominal_kv / generator_kv) ** 2 * (low_kv / high_kv) ** 2
    return voltages * c_max / (1 + abs(x_generator_pu - x_transformer_pu) * sin_phi)


def unit_factor_without_tap_changer(
    c_max: float,
    x_generator_pu: float,
    sin_phi: float,
    nominal_kv: float,
    generator_kv: float,
    high_kv: float,
    low_kv: float,
    above_rated_pu: float = 0.0,
    tap_pu: float = 0.0,
) -> float:
    """K_SO = UnQ/(UrG·(1 + pG))·(UrTLV/UrTHV)·(1 + pT)·c_max/(1 + x″d·sinφrG); x″d alone stands in it.

    above_rated_pu: pG, permanent voltage range of the generator. tap_pu: pT with its sign, only for an off-load tap
    that is used permanently. Source: 6.7.2; confirmed, the factor with pT from memory.
    """
    voltages = nominal_kv / (generator_kv * (1 + above_rated_pu)) * low_kv / high_kv
    return voltages * (1 + tap_pu) * c_max / (1 + x_generator_pu * sin_phi)


def generator_factor_inside_unit(c_max: float, x_pu: float, sin_phi: float, above_rated_pu: float = 0.0) -> float:
    """K_G,S = c_max/(1 + x″d·sinφrG) for a fault between generator and unit transformer: I″kG = c·UrG/(√3·K_G,S·Z_G).

    above_rated_pu: pG of a unit without on-load tap changer (then K_G,SO), zero with one. Source: 7.2.2; confirmed.
    """
    return c_max / (1 + x_pu * sin_phi) / (1 + above_rated_pu)


def transformer_factor_inside_unit(c_max: float, x_pu: float, sin_phi: float, above_rated_pu: float = 0.0) -> float:
    """K_T,S = c_max/(1 − x_T·sinφrG), with a minus, for a fault between generator and unit transformer.

    above_rated_pu: pG of a unit without on-load tap changer (then K_T,SO), zero with one. Raises StudyError where
    x_T·sinφ reaches 1, which no transformer does. Source: 7.2.2; from memory.
    """
    if x_pu * sin_phi >= 1:
        raise StudyError(
            f"The unit transformer's reactance of {x_pu:g} per unit leaves no correction factor K_T,S;"
            " enter its short-circuit voltage in per cent of its own rating."
        )
    return c_max / (1 - x_pu * sin_phi) / (1 + above_rated_pu)


def fictitious_resistance_ohm(x_ohm: float, rated_kv: float, rated_mva: float) -> float:
    """R_Gf of a generator for the peak current only, never for the d.c. current: 0.05, 0.07 or 0.15 times X″d.

    0.15 up to 1 kV, else 0.05 from 100 MVA and 0.07 below. Source: 6.6.1; from memory (the published test network
    keeps its true resistances).
    """
    if rated_kv <= LOW_VOLTAGE_KV:
        return 0.15 * x_ohm
    return (0.05 if rated_mva >= LARGE_GENERATOR_MVA else 0.07) * x_ohm


# ------------------------------------------------------------------------------------------------ asynchronous motors


def motor_mva(shaft_mw: float, efficiency: float, power_factor: float) -> float:
    """Rated apparent power SrM = PrM/(η·cosφ) of one motor. Source: 6.10; confirmed."""
    return shaft_mw / (efficiency * power_factor)


def motor_r_over_x(rated_kv: float, mw_per_pole_pair: float) -> float:
    """R/X of one motor (X/Z 0.995, 0.989, 0.922): 0.10 from 1 MW a pole pair, 0.15 below, 0.42 up to 1 kV with cables.

    mw_per_pole_pair: of one motor, however many run in parallel. Source: 6.10, equations for X_M/Z_M; confirmed.
    """
    if rated_kv <= LOW_VOLTAGE_KV:
        return 0.42
    return 0.10 if mw_per_pole_pair >= LARGE_MOTOR_MW_PER_PAIR else 0.15


def motor_impedance_ohm(rated_kv: float, rated_mva: float, locked_rotor_ratio: float, r_over_x: float) -> complex:
    """Z_M = (UrM²/SrM)/(ILR/IrM) of one motor, in the positive and negative sequence; n equal ones have Z_M/n.

    A reversible converter drive counts as a motor with ILR/IrM = 3 and R/X = 0.10, for three-phase faults, I″k and ip
    only (6.11, from memory). Source: 6.10; confirmed.
    """
    return split_by_r_over_x(rated_kv**2 / rated_mva / locked_rotor_ratio, r_over_x)


def motors_add_little(ik_with_ka: float, ik_without_ka: float) -> bool:
    """Whether all motors together add no more than 5 % to the I″k found without them, and may be left out.

    Source: 6.10; from memory.
    """
    return ik_with_ka - ik_without_ka <= NEGLIGIBLE_MOTOR_SHARE * ik_without_ka


def rated_currents_add_little(rated_ka: Sequence[float], ik_without_ka: float) -> bool:
    """Whether ΣIrM ≤ 0.01·I″k without motors: low-voltage motors that may be left out unseen.

    rated_ka: rated currents of the motors (empty: nothing to leave out, true). Source: 6.10; from memory.
    """
    return sum(rated_ka) <= NEGLIGIBLE_RATED_SHARE * ik_without_ka


def motors_behind_transformers_limit(c: float, transformers_mva: float, nominal_kv: float, ik_ka: float) -> float:
    """Largest ΣPrM/ΣSrT of motors behind network transformers that may be left out for a fault at the feeder's bus Q.

    The limit is 0.8/abs(c·100·ΣSrT/(√3·UnQ·I″kQ) − 0.3) in MW per MVA, infinite where the difference is zero.
    transformers_mva: ΣSrT of the transformers in parallel that feed the motors; ik_ka: I″kQ without motors.
    Source: 6.10; from memory.
    """
    difference = c * 100 * transformers_mva / (math.sqrt(3) * nominal_kv * ik_ka) - 0.3
    return 0.8 / abs(difference) if difference else math.inf


def motors_behind_transformers_add_little(
    motors_mw: float, transformers_mva: float, c: float, nominal_kv: float, ik_ka: float
) -> bool:
    """Whether ΣPrM/ΣSrT keeps below the limit above, so that the motors may be left out. Source: 6.10; from memory."""
    limit = motors_behind_transformers_limit(c, transformers_mva, nominal_kv, ik_ka)
    return motors_mw <= limit * transformers_mva
