"""Sequence models of rotating machines: synchronous generators and motors, induction motors."""

import math

from onelinefault.engine.sequence_stamps import (
    OPEN,
    Setting,
    ShuntStamp,
    Stamps,
    StarPoint,
    admittance,
    count,
    earthing_ohm,
    in_unit,
    needed,
    optional,
    with_x_over_r,
    word,
    zero_sequence_assumed,
)
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part import describe
from onelinefault.model.quantity import Quantity
from onelinefault.model.sources import InductionMotor, SynchronousGenerator, SynchronousMotor

Synchronous = SynchronousGenerator | SynchronousMotor

_REACTANCE_AT = {
    "subtransient": "subtransient_reactance",
    "transient": "transient_reactance",
    "steady": "synchronous_reactance",
}
MEDIUM_VOLTAGE_KV = 1.0  # low voltage ends at 1 kV (IEC 60038)
TYPICAL_POLE_PAIRS = 2


def synchronous_mva(part: Synchronous) -> float:
    """Rated apparent power: as given, or from active power; a motor's active power is that at its shaft."""
    power = needed(part, "rated_power")
    if power.dimension == "apparent power":
        return power.to("MVA")
    efficiency = in_unit(part, "efficiency", "pu") if isinstance(part, SynchronousMotor) else 1.0
    return power.to("MW") / (efficiency * in_unit(part, "power_factor", ""))


def synchronous_stamps(part: Synchronous, kv: float, setting: Setting) -> Stamps:
    """Z1 = R + jX (X″d, X′d or Xd by the moment), Z2 = R + jX2, Z0 = R + jX0 + 3 Zn.

    A method's factor is on all of them, but not on 3 Zn (IEC 60909-0, 6.6; classical: no factor).
    """
    own_kv = in_unit(part, "rated_voltage", "kV")
    own_ohm = own_kv**2 / synchronous_mva(part)
    base_ohm = setting.base_ohm(kv)
    machine = setting.method.synchronous(part, subtransient_ohm(part, own_ohm) / own_ohm, kv)
    k = machine.correction.value
    x1, findings = _positive_ohm(part, own_ohm, _REACTANCE_AT[machine.moment or setting.case.moment])
    x2 = _negative_ohm(part, own_ohm)
    r = _resistance_ohm(part, own_ohm, setting.frequency_hz)
    earthing = earthing_ohm(part, "neutral", own_kv) if word(part, "connection") == "star" else None
    y0 = OPEN
    if earthing is not None:
        z0 = k * complex(r, _ohm(needed(part, "zero_sequence_reactance"), own_ohm)) + 3 * earthing
        y0 = admittance(part, z0 / base_ohm)
    y = (admittance(part, k * complex(r, x1) / base_ohm), admittance(part, k * complex(r, x2) / base_ohm), y0)
    shunt = ShuntStamp("line", y, source=True)
    return Stamps((), (shunt,), (), _star_point(earthing), findings=findings, corrections=(machine.correction,))


def subtransient_ohm(part: Synchronous, own_ohm: float) -> float:
    """X″d in ohm; own_ohm: U²/S of the machine. Raises PartLeftOutError when it is missing."""
    return _ohm(needed(part, "subtransient_reactance"), own_ohm)


def _positive_ohm(part: Synchronous, own_ohm: float, name: str) -> tuple[float, tuple[Finding, ...]]:
    """Reactance of the moment; X″d in its place when it is not given, which errs to the larger current."""
    given = part.value(name)
    if isinstance(given, Quantity):
        return _ohm(given, own_ohm), ()
    label = describe(type(part), name).label
    message = f"{part.title}: {label} is not given; X″d is taken in its place, so its current comes out too large."
    remark = Finding(
        Severity.WARNING, "reactance-assumed", message, f"Enter {label} of {part.title}.", (part.id,), name
    )
    return subtransient_ohm(part, own_ohm), (remark,)


def _ohm(reactance: Quantity, own_ohm: float) -> float:
    return reactance.to("ohm") if reactance.dimension == "impedance" else reactance.to("pu") * own_ohm


def _negative_ohm(part: Synchronous, own_ohm: float) -> float:
    given = part.value("negative_sequence_reactance")
    return _ohm(given if isinstance(given, Quantity) else needed(part, "subtransient_reactance"), own_ohm)


def _resistance_ohm(part: Synchronous, own_ohm: float, frequency_hz: float) -> float:
    """Stator resistance: as given, else from X″d/R as given, else from Ta (R = X2/(2πf·Ta)), else typical."""
    given = part.given("resistance")
    if isinstance(given, Quantity):
        return _ohm(given, own_ohm)
    time_constant = part.given("armature_time_constant")
    if isinstance(time_constant, Quantity) and part.given("x_over_r") is None:
        return _negative_ohm(part, own_ohm) / (2 * math.pi * frequency_hz * time_constant.to("s"))
    return subtransient_ohm(part, own_ohm) / in_unit(part, "x_over_r", "")


def induction_mva(part: InductionMotor) -> float:
    """Rated apparent power of one motor: S = P/(η·cosφ)."""
    shaft_mw = in_unit(part, "rated_power", "MW")
    return shaft_mw / (in_unit(part, "efficiency", "pu") * in_unit(part, "power_factor", ""))


def running_count(part: InductionMotor) -> float:
    """How many motors of the group run when the fault happens."""
    return count(part, "count") * in_unit(part, "running_share", "pu")


def pole_pairs(part: InductionMotor, frequency_hz: float) -> int:
    """Pole pairs from the poles, else the largest whose synchronous speed is above the rated speed, else two."""
    poles = part.given("poles")
    if isinstance(poles, int):
        return max(1, poles // 2)
    rpm = optional(part, "rated_speed", "rpm")
    return max(1, int(60 * frequency_hz / rpm + 1e-9)) if rpm else TYPICAL_POLE_PAIRS


def induction_x_over_r(part: InductionMotor, frequency_hz: float) -> float:
    """X/R as given, else R/X = 0.10 from 1 MW per pole pair, 0.15 below, 0.42 at low voltage (IEC 60909-0, 6.10)."""
    given = optional(part, "x_over_r", "")
    if given is not None:
        return given
    if in_unit(part, "rated_voltage", "kV") <= MEDIUM_VOLTAGE_KV:
        return 1 / 0.42
    per_pair_mw = in_unit(part, "rated_power", "MW") / pole_pairs(part, frequency_hz)
    return 1 / (0.10 if per_pair_mw >= 1 else 0.15)


def induction_stamps(part: InductionMotor, kv: float, setting: Setting) -> Stamps:
    """Z_M = (I_rM/I_LR)·U²/S_rM in the positive and negative sequence, divided by the motors running.

    In the steady state an induction motor feeds no fault: its field has died away (IEC 60909-0, clause 11).
    """
    running, machine = running_count(part), setting.method.induction(part)
    if running == 0 or (machine.moment or setting.case.moment) == "steady":
        return Stamps()
    own_kv = in_unit(part, "rated_voltage", "kV")
    own_ohm = own_kv**2 / induction_mva(part)
    locked_rotor_ratio = machine.locked_rotor_ratio or in_unit(part, "locked_rotor_ratio", "")
    x_over_r = machine.x_over_r or induction_x_over_r(part, setting.frequency_hz)
    z1 = machine.correction.value * with_x_over_r(own_ohm / locked_rotor_ratio, x_over_r)
    earthing = earthing_ohm(part, "neutral", own_kv) if word(part, "connection") == "star" else None
    base_ohm = setting.base_ohm(kv)
    y1, y0 = running * admittance(part, z1 / base_ohm), OPEN
    findings: tuple[Finding, ...] = ()
    if earthing is not None:
        z0, findings = _zero_ohm(part, z1, own_ohm * machine.correction.value)
        y0 = running * admittance(part, (z0 + 3 * earthing) / base_ohm)
    shunt = ShuntStamp("line", (y1, y1, y0), source=True)
    return Stamps((), (shunt,), (), _star_point(earthing), findings=findings, corrections=(machine.correction,))


def _zero_ohm(part: InductionMotor, z1: complex, own_ohm: float) -> tuple[complex, tuple[Finding, ...]]:
    given = part.value("zero_sequence_reactance")
    if isinstance(given, Quantity):
        return complex(z1.real, _ohm(given, own_ohm)), ()
    return z1, (zero_sequence_assumed(part, "zero_sequence_reactance", "its locked-rotor reactance"),)


def _star_point(earthing: complex | None) -> tuple[StarPoint, ...]:
    return () if earthing is None else (StarPoint("line", "shunt"),)
