"""Checks of single transformers."""

import math

from onelinefault.model.findings import Finding
from onelinefault.model.part import Part, number_in
from onelinefault.model.part_checks_common import (
    Findings,
    fails,
    hints,
    neutral_against_winding,
    outside,
    typed,
    vector_group_checks,
    warns,
)
from onelinefault.model.transforming import Autotransformer, EarthingTransformer, Transformer, Transformer3
from onelinefault.model.values import Neutral

_LOW_VOLTAGE_KV = 1.0
_LARGEST_LOW_VOLTAGE_KA = 7.5
_LEAST_X_OVER_R = 0.4  # the smallest distribution units, by their permitted losses
_SMALL_LEG = 0.2  # a negative leg up to this share of the largest one is a common thing
_SIDES3 = ("high", "medium", "low")
_SIDES_AUTO = ("high", "low", "tertiary")


def check_transformer(part: Transformer) -> Findings:
    """Two windings: voltages, impedance, losses, vector group against earthing, tap, size against voltage."""
    yield from _highest_first(part, "low_voltage")
    yield from outside(part, "impedance", "%", (2, 25), "impedance-unusual")
    yield from outside(part, "x_over_r", "", (_LEAST_X_OVER_R, 80), "x-over-r")
    yield from outside(part, "tap", "%", (-15, 15), "tap-unusual")
    yield from outside(part, "zero_sequence_impedance", "%", (5, 300), "zero-sequence-unusual")
    yield from _load_loss(part)
    yield from vector_group_checks(part, 2)
    yield from neutral_against_winding(part, "neutral_high", 0)
    yield from neutral_against_winding(part, "neutral_low", 1)
    yield from _low_voltage_current(part)
    if part.magnetising_impedance is not None and part.value("core") != "three-limb":
        message = f"a {part.value('core')} core has no such magnetising path; the magnetising Z0 does not count"
        yield hints(part, "core", message, "Clear it, or choose the three-limb core", "magnetising_impedance")


def _highest_first(part: Part, *others: str) -> Findings:
    high = number_in(part, "high_voltage", "kV")
    for field in others:
        kv = number_in(part, field, "kV")
        if high is not None and kv is not None and kv > high * (1 + 1e-9):
            message = (
                f"its rated voltage {part.text(field)} is above that of the high side, {part.text('high_voltage')}"
            )
            yield warns(part, "voltage-order", message, "Exchange the voltages, or turn the part round", field)


def _load_loss(part: Transformer) -> Findings:
    z = number_in(part, "impedance", "pu")
    loss = typed(part, "load_loss", "pu")
    mw, mva = typed(part, "load_loss", "MW"), number_in(part, "rated_power", "MVA")
    if mw is not None and mva:
        loss = mw / mva
    if loss is None or part.x_over_r is not None or z is None:
        return
    if loss > z:
        message = f"its load loss of {part.text('load_loss')} alone would be more than its impedance"
        remedy = "Correct the load loss or the impedance, or enter X/R instead"
        yield fails(part, "load-loss", message, remedy, "load_loss")
    elif not z / 80 <= loss <= z / math.hypot(1, _LEAST_X_OVER_R):
        message = f"a load loss of {part.text('load_loss')} is {100 * loss:.2g} % of rated power, which is unusual"
        yield warns(part, "load-loss-unusual", message, "Check the load loss and its unit", "load_loss")


def _low_voltage_current(part: Transformer) -> Findings:
    mva, kv = number_in(part, "rated_power", "MVA"), number_in(part, "low_voltage", "kV")
    if mva is None or kv is None or kv > _LOW_VOLTAGE_KV:
        return
    ka = mva / (math.sqrt(3) * kv)
    if ka > _LARGEST_LOW_VOLTAGE_KA:
        message = f"{part.text('rated_power')} at {part.text('low_voltage')} is {ka:.3g} kA, which is unusual"
        yield warns(part, "power-unusual", message, "Check the rated power, its unit and the voltages", "rated_power")


def check_transformer3(part: Transformer3) -> Findings:
    """Three windings: voltages, pair impedances, vector group against earthing."""
    yield from _highest_first(part, "medium_voltage", "low_voltage")
    yield from outside(part, "x_over_r", "", (3, 120), "x-over-r")
    yield from vector_group_checks(part, 3)
    for winding, side in enumerate(_SIDES3):
        yield from neutral_against_winding(part, f"neutral_{side}", winding)
    high = number_in(part, "rated_power_high", "MVA")
    powers = [number_in(part, f"rated_power_{side}", "MVA") or high for side in _SIDES3]
    if all(powers):
        bases = {(i, j): min(powers[i] or 0, powers[j] or 0) for i, j in ((0, 1), (0, 2), (1, 2))}
        yield from _negative_leg(part, _SIDES3, bases)


def check_autotransformer(part: Autotransformer) -> Findings:
    """Voltages, pair impedances, vector group."""
    yield from _highest_first(part, "low_voltage", "tertiary_voltage")
    yield from outside(part, "x_over_r", "", (5, 150), "x-over-r")
    yield from vector_group_checks(part, 3)
    power = number_in(part, "rated_power", "MVA")
    if power:
        yield from _negative_leg(part, _SIDES_AUTO, dict.fromkeys(((0, 1), (0, 2), (1, 2)), power))


def _negative_leg(part: Part, sides: tuple[str, str, str], bases: dict[tuple[int, int], float]) -> Findings:
    """A leg of the star that is more negative than pair impedances usually make it."""
    pairs = []
    for (i, j), base in bases.items():
        z = number_in(part, f"impedance_{sides[i]}_{sides[j]}", "pu")
        own = number_in(part, f"base_{sides[i]}_{sides[j]}", "MVA") or base
        if z is None:
            return
        pairs.append(z / own)
    z12, z13, z23 = pairs
    legs = ((z12 + z13 - z23) / 2, (z12 + z23 - z13) / 2, (z13 + z23 - z12) / 2)
    for side, leg in zip(sides, legs, strict=True):
        if leg < -_SMALL_LEG * max(legs):
            yield _leg(part, side, leg / max(legs))


def _leg(part: Part, side: str, share: float) -> Finding:
    message = (
        f"the {side} leg of its star is {share:.2g} times the largest one; a small negative leg is usual, not such"
    )
    remedy = "Check the pair impedances and the base of each"
    return hints(part, "negative-leg", message, remedy, f"impedance_{'medium_low' if side == 'medium' else 'high_low'}")


def check_earthing_transformer(part: EarthingTransformer) -> Findings:
    """An earthing transformer that earths nothing."""
    yield from outside(part, "x0_over_r0", "", (0.5, 100), "x-over-r")
    neutral = part.value("neutral")
    if isinstance(neutral, Neutral) and not neutral.earthed:
        message = "its neutral is isolated, so it earths nothing"
        yield warns(part, "neutral-isolated", message, "Enter how its neutral is earthed", "neutral")
