"""Sequence models of cables, overhead lines, busways and series reactors.

Between nodes of one nominal voltage the ratio is 1. Where the nominal voltages of the ends differ (a finding says so),
the ratio V_b/V_a keeps the volts at both ends the same, as a conductor does.
"""

import math
from dataclasses import dataclass

from onelinefault.engine.line_constants import sequence_impedances_ohm_per_km
from onelinefault.engine.sequence_stamps import (
    NOTHING,
    BranchStamp,
    Setting,
    Stamps,
    Triple,
    admittance,
    count,
    in_unit,
    left_out,
    needed,
    optional,
    word,
    zero_sequence_assumed,
)
from onelinefault.errors import StudyError
from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.quantity import Quantity
from onelinefault.model.values import ConductorSize, LineGeometry

Line = Cable | OverheadLine | Busway

COLD_C = 20.0
# constants b of R2 = R1 (b + T2)/(b + T1), in °C (IEC 60949)
RESISTANCE_ZERO_C = {"copper": 234.5, "aluminium": 228.0}
# when nothing better is known: Z0 = 3.5 Z1, the middle of what is usual for overhead lines and cables
ASSUMED_ZERO_RATIO = 3.5


@dataclass(frozen=True, slots=True)
class _PerKm:
    """Impedances of one conductor set in ohm/km."""

    z1: complex
    z0: complex
    findings: tuple[Finding, ...] = ()


def line_stamps(part: Line, a_kv: float, b_kv: float, setting: Setting) -> Stamps:
    """Series impedances by length over the number in parallel; half the charging at each end when asked for."""
    length_km = in_unit(part, "length", "km")
    sets = parallel_count(part)
    per_km = _per_km(part, setting)
    base_ohm = setting.base_ohm(b_kv)
    y1 = admittance(part, per_km.z1 * length_km / sets / base_ohm)
    y0 = admittance(part, per_km.z0 * length_km / sets / base_ohm)
    half, charging = _half_charging(part, length_km * sets, setting)
    t = b_kv / a_kv
    branch = BranchStamp(
        "a",
        "b",
        y=(y1, y1, y0),
        ratio=(t, t, t),
        y_a=_times(half, setting.base_ohm(a_kv)),
        y_b=_times(half, base_ohm),
    )
    return Stamps(branches=(branch,), findings=per_km.findings + charging)


def parallel_count(part: Line) -> int:
    """Equal conductor sets side by side: as the size says ("2x240 mm²"), else the count."""
    size = part.given("size") if isinstance(part, Cable) else None
    if isinstance(size, ConductorSize) and size.runs > 1:
        return size.runs
    return count(part, "parallel")


def temperature_factor(part: Line, level: str) -> float:
    """R in use over R given: at 20 °C for the largest current, with the conductor hot for the smallest."""
    b = RESISTANCE_ZERO_C[word(part, "material")]
    wanted = in_unit(part, "hot_temperature", "°C") if level == "min" else COLD_C
    return (b + wanted) / (b + in_unit(part, "r_temperature", "°C"))


def _per_km(part: Line, setting: Setting) -> _PerKm:
    warmth = setting.method.warmth(part)
    if warmth is None:
        warmth = temperature_factor(part, setting.case.level)
    by_geometry = isinstance(part, OverheadLine) and (part.r_per_length is None or part.x_per_length is None)
    if by_geometry and isinstance(part.geometry, LineGeometry):  # type: ignore[union-attr]
        return _from_geometry(part, warmth, setting)  # type: ignore[arg-type]
    z1 = complex(in_unit(part, "r_per_length", "ohm/km") * warmth, in_unit(part, "x_per_length", "ohm/km"))
    r0, x0 = optional(part, "r0_per_length", "ohm/km"), optional(part, "x0_per_length", "ohm/km")
    if r0 is not None and x0 is not None:
        return _PerKm(z1, complex(r0 * warmth, x0))
    missing = "r0_per_length" if r0 is None else "x0_per_length"
    taken = zero_sequence_assumed(part, missing, f"{ASSUMED_ZERO_RATIO:g} times the positive-sequence value")
    guess = ASSUMED_ZERO_RATIO * z1
    z0 = complex(guess.real if r0 is None else r0 * warmth, guess.imag if x0 is None else x0)
    return _PerKm(z1, z0, (taken,))


def _from_geometry(part: OverheadLine, warmth: float, setting: Setting) -> _PerKm:
    geometry = part.geometry
    assert geometry is not None
    neutral_r = optional(part, "neutral_resistance", "ohm/km")
    try:
        z1, z0 = sequence_impedances_ohm_per_km(
            geometry,
            in_unit(part, "conductor_resistance", "ohm/km") * warmth,
            in_unit(part, "conductor_gmr", "m"),
            None if neutral_r is None else neutral_r * warmth,
            optional(part, "neutral_gmr", "m"),
            setting.frequency_hz,
            in_unit(part, "earth_resistivity", "ohm·m"),
        )
    except StudyError as error:
        if type(error) is not StudyError:
            raise
        reason, remedy = str(error), "Enter the earth wire's resistance and GMR, or R, X, R0 and X0 per length."
        raise left_out(part, "missing-rating", reason, remedy, "neutral_resistance") from None
    return _PerKm(z1, z0)


def _half_charging(part: Line, total_km: float, setting: Setting) -> tuple[Triple, tuple[Finding, ...]]:
    """½ jωC of the whole line in siemens for each sequence, when charging is asked for."""
    if not (setting.case.charging and setting.method.charging) or isinstance(part, Busway):
        return NOTHING, ()
    c1 = optional(part, "capacitance", "uF/km")
    c0 = optional(part, "zero_sequence_capacitance", "uF/km")
    if c1 is None and c0 is None:
        message = f"{part.title}: its capacitance is not given, so it has no charging current."
        remedy = f"Enter the capacitance of {part.title}, or calculate without charging."
        return NOTHING, (Finding(Severity.WARNING, "no-capacitance", message, remedy, (part.id,), "capacitance"),)
    half = 0.5j * 2 * math.pi * setting.frequency_hz * 1e-6 * total_km
    positive, zero = half * (c1 or 0.0), half * (c0 if c0 is not None else c1 or 0.0)
    return (positive, positive, zero), ()


def _times(y_siemens: Triple, base_ohm: float) -> Triple:
    return y_siemens[0] * base_ohm, y_siemens[1] * base_ohm, y_siemens[2] * base_ohm


def reactor_stamps(part: Reactor, a_kv: float, b_kv: float, setting: Setting) -> Stamps:
    """jX with R from X/R, alike in all sequences unless X0 is given; per cent on U/(√3·I) of its ratings."""
    x1 = _reactor_ohm(part, "reactance", needed(part, "reactance"), a_kv)
    r = x1 / in_unit(part, "x_over_r", "")
    given = part.value("zero_sequence_reactance")
    x0 = _reactor_ohm(part, "zero_sequence_reactance", given, a_kv) if isinstance(given, Quantity) else x1
    base_ohm = setting.base_ohm(b_kv)
    y1, y0 = admittance(part, complex(r, x1) / base_ohm), admittance(part, complex(r, x0) / base_ohm)
    t = b_kv / a_kv
    return Stamps(branches=(BranchStamp("a", "b", y=(y1, y1, y0), ratio=(t, t, t)),))


def _reactor_ohm(part: Reactor, name: str, reactance: Quantity, node_kv: float) -> float:
    if reactance.dimension == "impedance":
        return reactance.to("ohm")
    rated_kv = optional(part, "rated_voltage", "kV") or node_kv
    return reactance.to("pu") * rated_kv / (math.sqrt(3) * in_unit(part, "rated_current", "kA"))
