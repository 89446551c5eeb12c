"""Nameplates read as ohms, a second time and apart from the engine: what each part is between its own terminals.

All impedances in ohm at the part's own voltage, as (Z1, Z2, Z0). The plant is complete: every value needed is there.
"""

import math
from collections.abc import Sequence

import numpy as np

from onelinefault.engine.case import Case
from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor
from onelinefault.model.part import Part
from onelinefault.model.quantity import Quantity
from onelinefault.model.sources import InductionMotor, Supply, SynchronousGenerator, SynchronousMotor
from onelinefault.model.transforming import Transformer
from tests.oracle.circuit import ComplexArray

A120 = complex(-0.5, math.sqrt(3) / 2)


def phase_matrix(z1: complex, z2: complex, z0: complex) -> ComplexArray:
    """The 3×3 matrix of phases a, b, c of three alike coils with these sequence impedances.

    Alike to the last digit: an unevenness of 1e-16 would already drive a residual current that lifts a network held
    only by its capacitance to earth.
    """
    own = (z0 + z1 + z2) / 3
    ahead, behind = (z0 + A120 * z1 + A120**2 * z2) / 3, (z0 + A120**2 * z1 + A120 * z2) / 3
    if z1 == z2:
        ahead = behind = (z0 - z1) / 3
    return np.array([[own, ahead, behind], [behind, own, ahead], [ahead, behind, own]])


def number(part: Part, name: str, unit: str) -> float:
    """A value that must be there, in a unit."""
    value = part.value(name)
    assert isinstance(value, Quantity), f"{part.title} has no {name}"
    return value.to(unit)


def optional(part: Part, name: str, unit: str) -> float | None:
    """A value in a unit, or None."""
    return number(part, name, unit) if part.value(name) is not None else None


def from_size(z: float, x_over_r: float) -> complex:
    """An impedance of this magnitude and X/R."""
    r = z / math.hypot(1, x_over_r)
    return complex(r, r * x_over_r)


def supply(part: Supply, case: Case) -> tuple[complex, complex, complex]:
    """Z1, Z2, Z0 of a network feeder behind its fault level; Z0 means nothing where the network is isolated."""
    kv = number(part, "nominal_voltage", "kV")
    smallest = case.level == "min" and part.value("fault_level_min") is not None
    level = part.value("fault_level_min" if smallest else "fault_level_max")
    assert isinstance(level, Quantity)
    z1 = from_size(_level_ohm(level, kv), number(part, "x_over_r", ""))
    earth = part.value("earth_fault_level_min" if smallest else "earth_fault_level_max")
    r0_over_x0 = number(part, "r0_over_x0", "")
    if isinstance(earth, Quantity):
        z0 = _z0_of_earth_fault(z1, 3 * _level_ohm(earth, kv), r0_over_x0)
    else:
        x0 = z1.imag * number(part, "x0_over_x1", "")
        z0 = complex(r0_over_x0 * x0, x0)
    return z1, z1, z0


def _level_ohm(level: Quantity, kv: float) -> float:
    if level.dimension == "impedance":
        return level.to("ohm")
    if level.dimension == "current":
        return kv / math.sqrt(3) / level.to("kA")
    return kv**2 / level.to("MVA")


def _z0_of_earth_fault(z1: complex, loop_ohm: float, r0_over_x0: float) -> complex:
    """Z0 with |2 Z1 + Z0| = loop_ohm, by halving the interval of X0 (no formula shared with the engine)."""
    low, high = 0.0, loop_ohm
    for _ in range(200):
        x0 = (low + high) / 2
        if abs(2 * z1 + complex(r0_over_x0, 1) * x0) < loop_ohm:
            low = x0
        else:
            high = x0
    return complex(r0_over_x0, 1) * high


def synchronous(
    part: SynchronousGenerator | SynchronousMotor, case: Case, frequency_hz: float
) -> tuple[complex, complex, complex]:
    """Z1, Z2, Z0 of a synchronous machine, without its star point's earthing."""
    kv = number(part, "rated_voltage", "kV")
    rated = part.value("rated_power")
    assert isinstance(rated, Quantity)
    if rated.dimension == "apparent power":
        mva = rated.to("MVA")
    else:
        mva = rated.to("MW") / number(part, "power_factor", "")
        if isinstance(part, SynchronousMotor):
            mva /= number(part, "efficiency", "pu")
    base = kv**2 / mva

    def ohm(name: str) -> float | None:
        value = part.value(name)
        if not isinstance(value, Quantity):
            return None
        return value.to("ohm") if value.dimension == "impedance" else value.to("pu") * base

    subtransient = ohm("subtransient_reactance")
    assert subtransient is not None
    moment = {"transient": "transient_reactance", "steady": "synchronous_reactance"}.get(case.moment)
    x1 = (ohm(moment) if moment else None) or subtransient
    x2 = ohm("negative_sequence_reactance") or subtransient
    x0 = ohm("zero_sequence_reactance") or 0.0
    r = ohm("resistance")
    constant_s = optional(part, "armature_time_constant", "s")
    if r is None and part.given("x_over_r") is None and constant_s is not None:
        r = x2 / (2 * math.pi * frequency_hz * constant_s)
    if r is None:
        r = subtransient / number(part, "x_over_r", "")
    return complex(r, x1), complex(r, x2), complex(r, x0)


def induction(part: InductionMotor, case: Case) -> tuple[complex, complex, complex] | None:
    """Z1, Z2, Z0 of the running motors together; None when none runs, or when their field has died away.

    Z0 means nothing without an earthed star.
    """
    kv = number(part, "rated_voltage", "kV")
    each = number(part, "rated_power", "MW") / number(part, "efficiency", "pu") / number(part, "power_factor", "")
    mva = each * running(part)
    if mva == 0 or case.moment == "steady":
        return None
    z = from_size(kv**2 / mva / number(part, "locked_rotor_ratio", ""), number(part, "x_over_r", ""))
    x0 = part.value("zero_sequence_reactance")
    z0 = z
    if isinstance(x0, Quantity):
        z0 = complex(z.real, x0.to("ohm") if x0.dimension == "impedance" else x0.to("pu") * kv**2 / mva)
    return z, z, z0


def running(part: InductionMotor) -> float:
    """How many motors of the group run."""
    count = part.value("count")
    assert isinstance(count, int)
    return count * number(part, "running_share", "pu")


def length(part: Cable | OverheadLine | Busway, case: Case) -> tuple[complex, complex, complex]:
    """Series Z1, Z2, Z0 of the whole length, all parallel runs together."""
    km = number(part, "length", "km") / _runs(part)
    heat = _heating(part, case)
    z1 = complex(number(part, "r_per_length", "ohm/km") * heat, number(part, "x_per_length", "ohm/km")) * km
    z0 = complex(number(part, "r0_per_length", "ohm/km") * heat, number(part, "x0_per_length", "ohm/km")) * km
    return z1, z1, z0


def capacitance_uf(part: Cable | OverheadLine | Busway) -> tuple[float, float]:
    """Phase and zero-sequence capacitance of the whole length in µF."""
    if isinstance(part, Busway) or part.value("capacitance") is None:
        return 0.0, 0.0
    km = number(part, "length", "km") * _runs(part)
    c1 = number(part, "capacitance", "uF/km")
    c0 = optional(part, "zero_sequence_capacitance", "uF/km")
    return c1 * km, (c1 if c0 is None else c0) * km


def _runs(part: Cable | OverheadLine | Busway) -> int:
    if isinstance(part, Cable) and part.size is not None and part.size.runs > 1:
        return part.size.runs
    runs = part.value("parallel")
    assert isinstance(runs, int)
    return runs


def _heating(part: Cable | OverheadLine | Busway, case: Case) -> float:
    """Resistance over that given: at 20 °C for the largest current, hot for the smallest (IEC 60949's R ~ β + θ)."""
    beta = {"copper": 234.5, "aluminium": 228.0}[str(part.value("material"))]
    wanted = 20.0 if case.level == "max" else number(part, "hot_temperature", "°C")
    return (beta + wanted) / (beta + number(part, "r_temperature", "°C"))


def reactor(part: Reactor, node_kv: float) -> tuple[complex, complex, complex]:
    """Series Z1, Z2, Z0 of a reactor."""

    def ohm(name: str) -> float | None:
        value = part.value(name)
        if not isinstance(value, Quantity):
            return None
        if value.dimension == "impedance":
            return value.to("ohm")
        kv = optional(part, "rated_voltage", "kV") or node_kv
        return value.to("pu") * kv / math.sqrt(3) / number(part, "rated_current", "kA")

    x = ohm("reactance")
    assert x is not None
    x0 = ohm("zero_sequence_reactance")
    z1 = complex(x / number(part, "x_over_r", ""), x)
    return z1, z1, z1 if x0 is None else complex(z1.real, x0)


def transformer_pu(part: Transformer) -> tuple[complex, complex]:
    """Leakage Z1 and Z0 in parts of U²/S of the rated values."""
    size = number(part, "impedance", "pu")
    if part.given("x_over_r") is not None or part.value("load_loss") is None:
        z1 = from_size(size, number(part, "x_over_r", ""))
    else:
        loss = part.value("load_loss")
        assert isinstance(loss, Quantity)
        r = loss.to("pu") if loss.dimension == "ratio" else loss.to("MW") / number(part, "rated_power", "MVA")
        z1 = complex(r, math.sqrt(size**2 - r**2))
    x0_over_r0 = optional(part, "x0_over_r0", "") or z1.imag / z1.real
    return z1, from_size(size * number(part, "zero_sequence_impedance", "pu"), x0_over_r0)


def star_legs(pairs: Sequence[complex]) -> tuple[complex, complex, complex]:
    """Legs of the star for three pair impedances 1-2, 1-3, 2-3 on one base."""
    z12, z13, z23 = pairs
    return (z12 + z13 - z23) / 2, (z12 + z23 - z13) / 2, (z13 + z23 - z12) / 2
