"""Sequence models of three-winding transformers and autotransformers: a star of three legs.

The inner star point lives in per unit of the first winding's rated voltage, at the principal tap. A leg runs from its
terminal to the star point, with the ratio of its winding's rated voltage (with its tap) to its node's nominal voltage
at the terminal, so again the leakage ohms do not move with the tap. A leg may be negative.
"""

from dataclasses import dataclass

from onelinefault.engine.method import Correction
from onelinefault.engine.sequence_stamps import (
    INNER,
    OPEN,
    BranchStamp,
    Setting,
    Stamps,
    StarPoint,
    admittance,
    earthing_ohm,
    group_of,
    in_unit,
    optional,
    with_x_over_r,
)
from onelinefault.engine.sequence_transformers import DEGREES_PER_HOUR, Winding, clock_sign, with_load_loss
from onelinefault.model.part import Part
from onelinefault.model.quantity import Quantity
from onelinefault.model.transforming import Autotransformer, Transformer3

_HIGH, _MIDDLE, _LOW = 0, 1, 2
_PAIRS = ((_HIGH, _MIDDLE), (_HIGH, _LOW), (_MIDDLE, _LOW))
AUTO_SIDES = ("high", "low", "tertiary")
SIDES = ("high", "medium", "low")
THIN = 1e-7  # of the largest leg: as good as nothing, and the equations can still be solved to as many digits
COMMON = "common"  # the star point that both sides of an autotransformer share

Legs = tuple[complex, complex, complex]
Sides = tuple[str, str, str]
Kilovolts = tuple[float, float, float]


@dataclass(frozen=True, slots=True)
class _ZeroLeg:
    """One leg in the zero sequence: through to the star point, to earth at the terminal, to earth at the star point."""

    series: complex = OPEN
    shunt_terminal: complex = OPEN
    shunt_inner: complex = OPEN
    ratio: float = 1.0


def star_legs(pairs: Legs) -> Legs:
    """Legs of the star from the impedances of the pairs 1-2, 1-3, 2-3, all on one base: Z1 = ½ (Z12 + Z13 − Z23)."""
    z12, z13, z23 = pairs
    return (z12 + z13 - z23) / 2, (z12 + z23 - z13) / 2, (z13 + z23 - z12) / 2


def _without_shorts(part: Part, legs: Legs) -> Legs:
    """A leg that vanishes (10 %, 16 %, 6 %: the middle one does) becomes ``THIN`` of the largest, so 1/z exists."""
    largest = max(abs(z) for z in legs)
    admittance(part, largest)
    z_high, z_middle, z_low = (z if abs(z) > THIN * largest else THIN * largest * 1j for z in legs)
    return z_high, z_middle, z_low


def transformer3_stamps(part: Transformer3, node_kv: tuple[float, float, float], setting: Setting) -> Stamps:
    """Three legs from the pair impedances, each on its own base; in the zero sequence each by its own connection.

    node_kv: nominal voltages of its nodes, high, medium, low. The tap is on the high side.
    """
    group = group_of(part, 3)
    tap = 1 + (in_unit(part, "tap", "pu") if setting.method.taps else 0.0)
    windings = []
    for k, side in enumerate(SIDES):
        rated_kv = in_unit(part, f"{side}_voltage", "kV")
        earthing = earthing_ohm(part, f"neutral_{side}", rated_kv, group.brought_out[k])
        turns_kv = rated_kv * (tap if k == _HIGH else 1.0)
        windings.append(Winding(side, group.connections[k], turns_kv, node_kv[k], earthing))
    pairs, corrections = _pairs3(part, node_kv, setting)
    legs = _without_shorts(part, star_legs(pairs))
    share = in_unit(part, "zero_sequence_impedance", "pu")
    clocks = (0, *group.clocks)
    zero = [
        _zero_leg(part, w, z * share, clock_sign(n), setting)
        for w, z, n in zip(windings, legs, _star_clocks(windings, clocks), strict=True)
    ]
    branches = tuple(
        _leg(part, w, z, zero_leg, n) for w, z, zero_leg, n in zip(windings, legs, zero, clocks, strict=True)
    )
    stars = tuple(StarPoint(w.side, "from", k) for k, w in enumerate(windings) if w.earthed)
    inner_kv = in_unit(part, "high_voltage", "kV")
    return Stamps(branches, star_points=stars, inner_kv=inner_kv, corrections=corrections)


def _star_clocks(windings: list[Winding], clocks: tuple[int, ...]) -> tuple[int, ...]:
    """Clocks as the zero sequence compares them: only those of stars matter, a delta's is of no account."""
    return tuple(n if w.connection == "Y" else 0 for w, n in zip(windings, clocks, strict=True))


def _pairs3(part: Transformer3, node_kv: Kilovolts, setting: Setting) -> tuple[Legs, tuple[Correction, ...]]:
    """Pair impedances in per unit of the plant's base power at rated voltages, with the method's factors."""
    high = in_unit(part, "rated_power_high", "MVA")
    power = (
        high,
        optional(part, "rated_power_medium", "MVA") or high,
        optional(part, "rated_power_low", "MVA") or high,
    )
    own_mva = tuple(
        optional(part, f"base_{SIDES[one]}_{SIDES[other]}", "MVA") or min(power[one], power[other])
        for one, other in _PAIRS
    )
    return _pairs(part, SIDES, own_mva, node_kv, setting)


def _pairs(
    part: Transformer3 | Autotransformer, sides: Sides, own_mva: tuple[float, ...], node_kv: Kilovolts, setting: Setting
) -> tuple[Legs, tuple[Correction, ...]]:
    """Pair impedances and factors; own_mva: base of each pair's rating, node_kv: of the sides' nodes."""
    found, corrections = [], []
    for (one, other), mva in zip(_PAIRS, own_mva, strict=True):
        z = _pair(part, f"{sides[one]}_{sides[other]}", mva, setting.base_mva)
        x_pu = z.imag * mva / setting.base_mva
        kv = min(node_kv[one], node_kv[other])
        corrections.append(setting.method.pair(part, (sides[one], sides[other]), x_pu, kv))
        found.append(corrections[-1].value * z)
    return (found[0], found[1], found[2]), tuple(corrections)


def _pair(part: Transformer3 | Autotransformer, pair: str, own_mva: float, base_mva: float) -> complex:
    """Impedance of a pair in per unit of the plant's base power; R from its own load loss, else from X/R."""
    size = in_unit(part, f"impedance_{pair}", "pu")
    loss = part.given(f"load_loss_{pair}") if isinstance(part, Transformer3) else None
    if isinstance(loss, Quantity):
        return with_load_loss(part, f"load_loss_{pair}", size, loss, own_mva) * base_mva / own_mva
    return with_x_over_r(size * base_mva / own_mva, in_unit(part, "x_over_r", ""))


def _leg(part: Transformer3 | Autotransformer, winding: Winding, z: complex, zero: _ZeroLeg, clock: int) -> BranchStamp:
    """The branch of one leg; the star point turns with the high side, so the leg leads by the winding's lag."""
    t = _rated_ratio(winding)
    y = admittance(part, z)
    return BranchStamp(
        winding.side,
        INNER,
        y=(y, y, zero.series),
        ratio=(t, t, zero.ratio),
        y_a=(OPEN, OPEN, zero.shunt_terminal),
        y_b=(OPEN, OPEN, zero.shunt_inner),
        lead_deg=DEGREES_PER_HOUR * clock,
    )


def _rated_ratio(winding: Winding) -> float:
    """Ratio of the winding in per unit: its voltage with tap over its node's nominal voltage."""
    return winding.turns_kv / winding.node_kv


def _zero_leg(
    part: Transformer3 | Autotransformer, winding: Winding, z0: complex, sign: int, setting: Setting
) -> _ZeroLeg:
    """Closed through an earthed star's 3 Zn, earthed at the star point by a delta, open for a star that is not earthed.

    An earthed zigzag couples with no other winding: it is a shunt at its own terminals.
    """
    t = _rated_ratio(winding)
    if winding.connection == "D":
        return _ZeroLeg(shunt_inner=admittance(part, z0), ratio=t)
    if winding.earthing_ohm is None:
        return _ZeroLeg(ratio=t)
    earth = 3 * winding.earthing_ohm / setting.base_ohm(winding.node_kv)
    if winding.connection == "Z":
        return _ZeroLeg(shunt_terminal=admittance(part, z0 * t**2 + earth), ratio=t)
    return _ZeroLeg(series=admittance(part, z0 + earth / t**2), ratio=sign * t)


def autotransformer_stamps(part: Autotransformer, node_kv: tuple[float, float, float], setting: Setting) -> Stamps:
    """Three legs; in the zero sequence the common neutral's impedance is shared out over them.

    node_kv: nominal voltages of its nodes, high, low, tertiary. The tap is on the high side (the series winding).

    With ideal windings and the star point at V_N, per phase and seen from the low side (a = U_H/U_X, currents into the
    terminals, leg impedances and Zn in ohm on the low side, i_H = a·I_H the high side's current in its measure):

        V_N = 3 Zn (I_H + I_X) = 3 Zn (i_H/a + I_X)
        (V_H − V_N)/a = Z_H i_H + V_m        V_X − V_N = Z_X I_X + V_m        V_m = Z_T (i_H + I_X)

    where the tertiary delta shorts its leg. Sorted by currents,

        V_H/a = (Z_H + Z_T + 3Zn/a²) i_H + (Z_T + 3Zn/a) I_X        V_X = (Z_T + 3Zn/a) i_H + (Z_X + Z_T + 3Zn) I_X

    and the star with these three coefficients has the legs

        Z_H − 3Zn (a − 1)/a²        Z_X + 3Zn (a − 1)/a        Z_T + 3Zn/a

    Without a delta the tertiary leg is open; the same legs hold, as i_H = −I_X then takes only V_H/a − V_X.
    """
    group = group_of(part, 3)
    tap = 1 + (in_unit(part, "tap", "pu") if setting.method.taps else 0.0)
    rated = [in_unit(part, f"{side}_voltage", "kV") for side in AUTO_SIDES]
    earthing = earthing_ohm(part, "neutral", rated[_MIDDLE])
    windings = [
        Winding(side, "Y" if k < _LOW else group.connections[_LOW], u * (1.0, tap)[k == _HIGH], v, None)
        for k, (side, u, v) in enumerate(zip(AUTO_SIDES, rated, node_kv, strict=True))
    ]
    pairs, corrections = _pairs_auto(part, node_kv, setting)
    legs = _without_shorts(part, star_legs(pairs))
    share = in_unit(part, "zero_sequence_impedance", "pu")
    z0 = (legs[0] * share, legs[1] * share, legs[2] * share)
    if earthing is None:
        zero = _auto_floating(part, windings, z0)
    else:
        zero = _auto_earthed(part, windings, z0, 3 * earthing / setting.base_ohm(rated[_MIDDLE]))
    branches = tuple(
        _leg(part, w, z, zero_leg, n)
        for w, z, zero_leg, n in zip(windings, legs, zero, (0, *group.clocks), strict=True)
    )
    stars = () if earthing is None else (StarPoint(COMMON, "from", _HIGH), StarPoint(COMMON, "from", _MIDDLE))
    return Stamps(branches, star_points=stars, inner_kv=rated[_HIGH], corrections=corrections)


def _pairs_auto(part: Autotransformer, node_kv: Kilovolts, setting: Setting) -> tuple[Legs, tuple[Correction, ...]]:
    """Pair impedances in per unit of the plant's base power at rated voltages, with the method's factors."""
    rated_mva = in_unit(part, "rated_power", "MVA")
    own_mva = tuple(
        optional(part, f"base_{AUTO_SIDES[one]}_{AUTO_SIDES[other]}", "MVA") or rated_mva for one, other in _PAIRS
    )
    return _pairs(part, AUTO_SIDES, own_mva, node_kv, setting)


def _auto_earthed(part: Autotransformer, windings: list[Winding], z0: Legs, earth: complex) -> list[_ZeroLeg]:
    """Legs of the derivation above; earth: 3 Zn in per unit at the low side's rated voltage."""
    high, low, tertiary = windings
    a = high.turns_kv / low.turns_kv
    z_high, z_low, _ = _without_shorts(
        part, (z0[_HIGH] - earth * (a - 1) / a**2, z0[_MIDDLE] + earth * (a - 1) / a, z0[_LOW] + earth / a)
    )
    legs = [
        _ZeroLeg(series=admittance(part, z_high), ratio=_rated_ratio(high)),
        _ZeroLeg(series=admittance(part, z_low), ratio=_rated_ratio(low)),
    ]
    if tertiary.connection != "D":
        return [*legs, _ZeroLeg(ratio=_rated_ratio(tertiary))]
    y_inner = admittance(part, z0[_LOW] + earth / a)
    return [*legs, _ZeroLeg(shunt_inner=y_inner, ratio=_rated_ratio(tertiary))]


def _auto_floating(part: Autotransformer, windings: list[Winding], z0: Legs) -> list[_ZeroLeg]:
    """Common star point isolated: I_X = −I_H, and with a delta the windings are a plain impedance from high to low.

    From the equations above with V_N free: V_H − V_X = (Z_H + Z_X/a² + Z_T (1 − 1/a)²) I_H, in ohm on the high side.
    The current passes without being transformed, so both halves of it have the ratio that keeps the volts.
    """
    high, low, tertiary = windings
    if tertiary.connection != "D":
        return [_ZeroLeg(ratio=_rated_ratio(w)) for w in windings]
    a, inner_kv = high.turns_kv / low.turns_kv, in_unit(part, "high_voltage", "kV")
    tap_squared = (high.turns_kv / inner_kv) ** 2
    through = (z0[_HIGH] + z0[_MIDDLE] / a**2 + z0[_LOW] * (1 - 1 / a) ** 2) * tap_squared
    y_half = admittance(part, through / 2)
    return [
        _ZeroLeg(series=y_half, ratio=inner_kv / high.node_kv),
        _ZeroLeg(series=y_half, ratio=inner_kv / low.node_kv),
        _ZeroLeg(ratio=_rated_ratio(tertiary)),
    ]
