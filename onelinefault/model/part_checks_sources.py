"""Checks of single supplies, machines and converters."""

import math
from itertools import pairwise

from onelinefault.model.part import Part, number_in
from onelinefault.model.part_checks_common import (
    Findings,
    fails,
    hints,
    neutral_against_connection,
    outside,
    typed,
    warns,
)
from onelinefault.model.quantity import Quantity
from onelinefault.model.sources import ConverterSource, InductionMotor, Supply, SynchronousGenerator, SynchronousMotor

_SQRT3 = math.sqrt(3)
_USUAL_FAULT_KA = (0.1, 200.0)
_LOW_VOLTAGE_KV = 1.0
_LARGEST_LOW_VOLTAGE_MOTOR_MW = 1.5
_EARTH_LIMIT = 1.5  # 3 I0 of a line-to-earth fault reaches 1.5 times the three-phase current when Z0 vanishes


def check_supply(part: Supply) -> Findings:
    """Order and size of the fault levels; an earth-fault level that no network can have."""
    kv = number_in(part, "nominal_voltage", "kV")
    if kv is not None:
        largest, smallest = (_fault_ka(part.given(f"fault_level_{end}"), kv) for end in ("max", "min"))
        if largest is not None and smallest is not None and smallest > largest * (1 + 1e-9):
            message = f"its smallest fault level {part.text('fault_level_min')} is above the largest"
            remedy = "Exchange the two, or check their units"
            yield warns(
                part, "fault-level-order", f"{message} {part.text('fault_level_max')}", remedy, "fault_level_min"
            )
        for field, ka in (("fault_level_max", largest), ("fault_level_min", smallest)):
            if ka is not None and not _USUAL_FAULT_KA[0] <= ka <= _USUAL_FAULT_KA[1]:
                message = f"{part.text(field)} at {kv:g} kV is {ka:.3g} kA, which is unusual"
                yield warns(part, "fault-level-unusual", message, "Check the fault level and its unit", field)
        yield from _earth_fault(part, kv, largest, smallest)
    yield from outside(part, "x_over_r", "", (0.5, 60), "x-over-r")
    if part.value("star_point") == "isolated":
        for field in ("earth_fault_level_max", "earth_fault_level_min", "x0_over_x1"):
            if part.given(field) is not None:
                message = "its network is isolated, so its earth-fault data do not count"
                yield hints(part, "isolated-network", message, "Clear them, or enter an earthed neutral", field)


def _fault_ka(value: object, kv: float) -> float | None:
    if not isinstance(value, Quantity):
        return None
    if value.dimension == "current":
        return value.to("kA")
    if value.dimension == "impedance":
        return kv / (_SQRT3 * value.to("ohm"))
    return value.to("MVA") / (_SQRT3 * kv)


def _earth_fault(part: Supply, kv: float, largest: float | None, smallest: float | None) -> Findings:
    if part.value("star_point") == "isolated":
        return
    for end, three_phase in (("max", largest), ("min", smallest or largest)):
        field = f"earth_fault_level_{end}"
        given = part.given(field)
        if not isinstance(given, Quantity) or given.dimension == "impedance" or three_phase is None:
            continue
        ka = _fault_ka(given, kv) or 0.0
        if ka >= _EARTH_LIMIT * three_phase:
            limit = f"{_EARTH_LIMIT * three_phase:.4g} kA"
            message = (
                f"an earth-fault level of {given.text} cannot be: it stays below 1.5 times the three-phase current"
            )
            remedy = "Check the earth-fault level against the three-phase fault level"
            yield fails(part, "earth-fault-level", f"{message}, {limit}", remedy, field)


def check_synchronous(part: SynchronousGenerator | SynchronousMotor) -> Findings:
    """Reactances in their order and usual size; earthing against winding; time constant and X/R."""
    motor = isinstance(part, SynchronousMotor)
    yield from outside(part, "subtransient_reactance", "%", (5, 50), "reactance-unusual")
    yield from outside(part, "x_over_r", "", (3, 150), "x-over-r")
    yield from outside(part, "armature_time_constant", "ms", (3, 1000), "time-constant")
    yield from outside(part, "power_factor", "", (0.5, 1), "power-factor")
    yield from _order_of_reactances(part)
    yield from neutral_against_connection(part)
    r, x = typed(part, "resistance", "%"), number_in(part, "subtransient_reactance", "%")
    if r is not None and x is not None and r >= x / 2:
        message = f"R {part.text('resistance')} is large against X″d {x:.3g} %"
        yield warns(part, "x-over-r", message, "Check R and its unit", "resistance")
    if motor:
        yield from _efficiency(part)


def _order_of_reactances(part: Part) -> Findings:
    names = ("subtransient_reactance", "transient_reactance", "synchronous_reactance")
    values = [(name, value) for name in names if isinstance(value := part.given(name), Quantity)]
    for (_, smaller), (name, larger) in pairwise(values):
        if smaller.dimension == larger.dimension and smaller.value > larger.to(smaller.unit):
            message = f"its reactances {smaller.text} and {larger.text} are not in the order X″d ≤ X′d ≤ Xd"
            yield warns(part, "reactance-order", message, "Check which is which", name)


def _efficiency(part: Part) -> Findings:
    efficiency, power_factor = number_in(part, "efficiency", "pu"), number_in(part, "power_factor", "")
    if efficiency is None or power_factor is None:
        return
    both = efficiency * power_factor
    if both > 1:
        message = f"efficiency times power factor is {both:.3g}; it cannot exceed 1"
        yield fails(part, "efficiency", message, "Correct efficiency and power factor", "efficiency")
    elif both < 0.5:
        message = f"efficiency times power factor is only {both:.2g}"
        yield warns(part, "efficiency", message, "Check efficiency and power factor", "efficiency")


def check_induction_motor(part: InductionMotor) -> Findings:
    """Efficiency, locked-rotor current, poles against speed, power against voltage, earthing against winding."""
    yield from _efficiency(part)
    yield from outside(part, "locked_rotor_ratio", "", (3, 9), "locked-rotor")
    yield from outside(part, "x_over_r", "", (1, 60), "x-over-r")
    yield from neutral_against_connection(part)
    mw, kv = number_in(part, "rated_power", "MW"), number_in(part, "rated_voltage", "kV")
    if mw is not None and kv is not None and kv <= _LOW_VOLTAGE_KV and mw > _LARGEST_LOW_VOLTAGE_MOTOR_MW:
        message = f"{part.text('rated_power')} is unusual for one motor at {part.text('rated_voltage')}"
        yield warns(part, "power-unusual", message, "Check the power, its unit and the voltage", "rated_power")
    yield from _poles(part)


def _poles(part: InductionMotor) -> Findings:
    if part.poles is None:
        return
    if part.poles % 2:
        message = f"{part.poles} poles cannot be; poles come in pairs"
        yield warns(part, "odd-poles", message, "Enter an even number of poles", "poles")
    rpm = typed(part, "rated_speed", "rpm")
    fastest, slowest = 7200 / part.poles, 0.85 * 6000 / part.poles  # synchronous at 60 Hz; slipping at 50 Hz
    if rpm is not None and not slowest <= rpm <= fastest:
        message = f"{part.text('rated_speed')} does not go with {part.poles} poles at 50 or 60 Hz"
        yield warns(part, "speed-poles", message, "Check speed and poles", "rated_speed")


def check_converter(part: ConverterSource) -> Findings:
    """A current limit that power electronics do not have."""
    yield from outside(part, "current_limit", "pu", (0.8, 3), "current-limit")
