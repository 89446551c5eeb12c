"""Sequence models of supplies and converter sources."""

import math

from onelinefault.engine.sequence_stamps import (
    OPEN,
    ConverterStamp,
    Setting,
    ShuntStamp,
    Stamps,
    admittance,
    in_unit,
    left_out,
    needed,
    optional,
    with_x_over_r,
    word,
    zero_sequence_assumed,
)
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.quantity import Quantity
from onelinefault.model.sources import ConverterSource, Supply

SQRT3 = math.sqrt(3)


def supply_stamps(part: Supply, kv: float, setting: Setting) -> Stamps:
    """A network feeder as one impedance in each sequence, Z2 = Z1 (IEC 60909-0, 6.2; classical: c = 1).

    kv: nominal voltage of its node. The impedance is that of the fault level at the supply's own voltage.
    """
    own_kv = in_unit(part, "nominal_voltage", "kV")
    level = setting.case.level
    correction = setting.method.supply(part, own_kv)
    z1 = _positive_ohm(part, own_kv, level, correction.value)
    z0, findings = _zero_ohm(part, own_kv, level, correction.value)
    base_ohm = setting.base_ohm(kv)
    y1 = admittance(part, z1 / base_ohm)
    y0 = OPEN if z0 is None else admittance(part, z0 / base_ohm)
    shunt = ShuntStamp("out", (y1, y1, y0), source=True)
    return Stamps(shunts=(shunt,), findings=findings, corrections=(correction,))


def converter_stamps(part: ConverterSource, kv: float, setting: Setting) -> Stamps:
    """A limited current source; rated current S_r/(√3 U_r) in per unit of S_base/(√3 V_base)."""
    rated_ka = in_unit(part, "rated_power", "MVA") / (SQRT3 * in_unit(part, "rated_voltage", "kV"))
    base_ka = setting.base_mva / (SQRT3 * kv)
    limit = in_unit(part, "current_limit", "pu") * rated_ka / base_ka
    angle_deg = in_unit(part, "fault_angle", "°")
    return Stamps(converters=(ConverterStamp("line", limit, angle_deg, setting.method.constant_converters),))


def supply_level(part: Supply, level: str) -> Quantity:
    """The three-phase fault level in use; the smallest is taken as the largest when it is not given."""
    smallest = part.given("fault_level_min")
    return smallest if level == "min" and isinstance(smallest, Quantity) else needed(part, "fault_level_max")


def _positive_ohm(part: Supply, own_kv: float, level: str, c: float) -> complex:
    """Z1 in ohm; c: factor on the voltage behind a current or an MVA, an impedance is taken as it is."""
    given = supply_level(part, level)
    if given.dimension == "impedance":
        size = given.to("ohm")
    elif given.dimension == "current":
        size = c * (own_kv / (SQRT3 * given.to("kA")))
    else:
        size = c * (own_kv**2 / given.to("MVA"))
    return with_x_over_r(size, in_unit(part, "x_over_r", ""))


def _zero_ohm(part: Supply, own_kv: float, level: str, c: float) -> tuple[complex | None, tuple[Finding, ...]]:
    """Z0 in ohm; None where the supply's network is isolated from earth."""
    if word(part, "star_point") == "isolated":
        return None, ()
    z1 = _positive_ohm(part, own_kv, level, c)
    smallest = part.given("earth_fault_level_min")
    if level == "min" and isinstance(smallest, Quantity):
        return _from_earth_fault(part, "earth_fault_level_min", smallest, own_kv, z1, c)
    largest = part.given("earth_fault_level_max")
    if not isinstance(largest, Quantity):
        return _from_ratio(part, z1)
    z1_max = _positive_ohm(part, own_kv, "max", c)
    z0_max, findings = _from_earth_fault(part, "earth_fault_level_max", largest, own_kv, z1_max, c)
    # the weak state keeps the ratio Z0/Z1 of the strong one when its own earth-fault level is not known
    return z0_max * (abs(z1) / abs(z1_max)), findings


def _from_ratio(part: Supply, z1: complex) -> tuple[complex, tuple[Finding, ...]]:
    ratio = optional(part, "x0_over_x1", "")
    findings = () if ratio is not None else (zero_sequence_assumed(part, "x0_over_x1", "1"),)
    x0 = (1.0 if ratio is None else ratio) * z1.imag
    return complex(in_unit(part, "r0_over_x0", "") * x0, x0), findings


def _from_earth_fault(
    part: Supply, name: str, given: Quantity, own_kv: float, z1: complex, c: float
) -> tuple[complex, tuple[Finding, ...]]:
    """Z0 from abs(2 Z1 + Z0) = 3 c U/(√3 I) and R0 = ρ X0: (1+ρ²) X0² + 4 (ρR1+X1) X0 + 4|Z1|² − K² = 0."""
    rho = in_unit(part, "r0_over_x0", "")
    if given.dimension == "impedance":
        x0 = given.to("ohm") / math.hypot(1.0, rho)
        return complex(rho * x0, x0), ()
    ka = given.to("kA") if given.dimension == "current" else given.to("MVA") / (SQRT3 * own_kv)
    if ka <= 0:
        raise left_out(part, "earth-fault-level", "its earth-fault level is zero", "Choose an isolated neutral.", name)
    loop = c * (SQRT3 * own_kv / ka)
    half_b = 2 * (rho * z1.real + z1.imag)
    rest = 4 * abs(z1) ** 2 - loop**2
    if rest >= 0:
        z0, findings = _from_ratio(part, z1)
        return z0, (*findings, _impossible(part, name, given, c * own_kv, z1))
    # the root that does not lose digits when Z0 is small against Z1
    x0 = -rest / (half_b + math.sqrt(half_b**2 - (1 + rho**2) * rest))
    return complex(rho * x0, x0), ()


def _impossible(part: Supply, name: str, given: Quantity, driving_kv: float, z1: complex) -> Finding:
    limit_ka = 1.5 * driving_kv / (SQRT3 * abs(z1))
    return Finding(
        Severity.ERROR,
        "earth-fault-level",
        f"{part.title}: an earth-fault level of {given.text} would need a negative zero-sequence impedance; the most "
        f"that can be is 1.5 times the three-phase current, {limit_ka:.4g} kA. X0/X1 is used instead.",
        "Check the earth-fault level against the three-phase fault level.",
        (part.id,),
        name,
    )
