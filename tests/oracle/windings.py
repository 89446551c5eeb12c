"""Transformers as windings on limbs, wired as star, delta or zigzag, with real turns.

The clock number is made the way a factory makes it: by which phase a winding is led out to (roll) and by which of its
ends is led out (flip). Which pair gives the clock number is found by drawing the phasors, not from a formula.
"""

import cmath
import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from onelinefault.model.quantity import Quantity
from onelinefault.model.transforming import Autotransformer, EarthingTransformer, Transformer, Transformer3
from onelinefault.model.values import Neutral, VectorGroup
from tests.oracle.circuit import Circuit, Coil, ComplexArray, Pin
from tests.oracle.ohms import A120, from_size, number, optional, phase_matrix, star_legs, transformer_pu


@dataclass(frozen=True)
class Winding:
    """One three-phase winding. kv: line-to-line with its tap. z1, z0: leakage put here, in ohm of its line side."""

    connection: str
    kv: float
    clock: int
    terminal: list[Pin]
    star: Pin
    z1: complex
    z0: complex


def star_point(
    circuit: Circuit, neutral: Neutral | None, brought_out: bool, kv: float, equal: float = 1.0
) -> tuple[Pin, Pin | None]:
    """A star point with its earthing. Second: a pin that knows the current into the earth, None when isolated.

    equal: how many equal star points stand for one, each with its own earthing.
    """
    star = circuit.pin()
    if neutral is None or not brought_out or not neutral.earthed:
        return star, None
    to_earth = star.twin()
    circuit.coil(to_earth, Pin(None), neutral.z_ohm(kv) / equal)
    return star, to_earth


def wire(circuit: Circuit, limbs: Sequence[int], windings: Sequence[Winding]) -> None:
    """Put all windings on the limbs; clock numbers count from the first one's connection with clock number 0."""
    for winding in windings:
        wire_against(circuit, limbs, windings[0].connection, winding)


def wire_against(circuit: Circuit, limbs: Sequence[int], reference: str, winding: Winding) -> None:
    """Wire one winding so that it lags a winding of the reference connection by its clock number."""
    wanted = cmath.exp(-1j * math.radians(30 * winding.clock)) * _line_phasor(reference, 0, 1)
    for roll in range(3):
        for flip in (1, -1):
            if abs(_line_phasor(winding.connection, roll, flip) - wanted) < 1e-9:
                _wire_one(circuit, limbs, winding, roll, flip)
                return
    raise AssertionError(f"no winding gives clock number {winding.clock}")


def _line_phasor(connection: str, roll: int, flip: int) -> complex:
    """Direction of terminal a's voltage against the neutral point when limbs 0, 1, 2 carry a, b, c."""
    own = {"Y": 1 + 0j, "D": 1 / (1 - A120**2), "Z": 1 - A120**2}[connection]
    return flip * own / abs(own) * A120**roll


def _wire_one(circuit: Circuit, limbs: Sequence[int], winding: Winding, roll: int, flip: int) -> None:
    start = [winding.terminal[(k + roll) % 3] for k in range(3)]
    z = phase_matrix(winding.z1, winding.z1, winding.z0)
    if winding.connection == "Y":
        turns = winding.kv / math.sqrt(3)
        circuit.coils([_flipped(start[k], winding.star, {limbs[k]: turns}, flip) for k in range(3)], z)
    elif winding.connection == "D":
        coils = [_flipped(start[k], start[(k + 1) % 3], {limbs[k]: winding.kv}, flip) for k in range(3)]
        circuit.coils(coils, 3 * z)  # a delta coil carries 1/√3 of the current at √3 of the voltage
    else:
        inner, middle = circuit.pins(), circuit.pins()
        circuit.coils([Coil(start[k], inner[k]) for k in range(3)], z)
        half = winding.kv / 3
        for k in range(3):
            circuit.coils([_flipped(inner[k], middle[k], {limbs[k]: half}, flip)])
            circuit.coils([_flipped(middle[k], winding.star, {limbs[(k + 1) % 3]: -half}, flip)])


def _flipped(p: Pin, q: Pin, turns: dict[int, float], flip: int) -> Coil:
    return Coil(p, q, {limb: flip * n for limb, n in turns.items()})


def _group(part: Transformer | Transformer3 | Autotransformer) -> VectorGroup:
    group = part.value("vector_group")
    assert isinstance(group, VectorGroup)
    return group


def _neutral(part: Transformer | Transformer3 | Autotransformer | EarthingTransformer, name: str) -> Neutral | None:
    value = part.value(name)
    assert value is None or isinstance(value, Neutral)
    return value


EarthPins = dict[str, Pin]  # side → pin whose ledger is the current into the earth


def transformer(circuit: Circuit, part: Transformer, high: list[Pin], low: list[Pin]) -> EarthPins:
    """A two-winding transformer; its leakage is in the winding without taps (a zigzag keeps its own Z0)."""
    group = _group(part)
    kv = {"high": number(part, "high_voltage", "kV"), "low": number(part, "low_voltage", "kV")}
    tapped = str(part.value("tap_side"))
    untapped = "low" if tapped == "high" else "high"
    tap = 1 + number(part, "tap", "pu")
    z1, z0 = (z * kv[untapped] ** 2 / number(part, "rated_power", "MVA") for z in transformer_pu(part))
    kv[tapped] *= tap
    windings, earths = [], {}
    for index, (side, terminal) in enumerate((("high", high), ("low", low))):
        star, earth = star_point(
            circuit, _neutral(part, f"neutral_{side}"), group.brought_out[index], number(part, f"{side}_voltage", "kV")
        )
        if earth is not None:
            earths[side] = earth
        here = z1 if side == untapped else 0j
        own_z0 = z0 if side == untapped else 0j
        if group.connections[index] == "Z" and side == tapped:
            own_z0 = z0 * (kv[tapped] / kv[untapped]) ** 2
        clock = 0 if index == 0 else group.clocks[0]
        windings.append(Winding(group.connections[index], kv[side], clock, terminal, star, here, own_z0))
    limbs = circuit.limbs()
    wire(circuit, limbs, windings)
    if part.value("core") == "three-limb" and part.value("magnetising_impedance") is not None and len(earths) == 1:
        own = windings[0 if "high" in earths else 1]
        if own.connection == "Y" and all(w.connection != "D" for w in windings):
            _tank(circuit, limbs, part, kv[untapped], own.z0)
    return earths


def _tank(circuit: Circuit, limbs: Sequence[int], part: Transformer, kv: float, in_series: complex) -> None:
    """The tank of a three-limb core as a closed delta; with what lies in series it makes the star's measured Z0."""
    z0 = 1j * number(part, "magnetising_impedance", "pu") * kv**2 / number(part, "rated_power", "MVA") - in_series
    _wire_one(circuit, limbs, Winding("D", kv, 0, circuit.pins(), circuit.pin(), 0j, z0), 0, 1)


def _legs(part: Transformer3 | Autotransformer, pairs: Sequence[tuple[str, str, float]]) -> tuple[complex, ...]:
    """Star legs per unit of 1 MVA. pairs: field of the impedance, field of its base, base in MVA when not given."""
    x_over_r = number(part, "x_over_r", "")
    return star_legs([from_size(number(part, z, "pu"), x_over_r) / (optional(part, base, "MVA") or other)
                      for z, base, other in pairs])  # fmt: skip


def transformer3(circuit: Circuit, part: Transformer3, ends: dict[str, list[Pin]]) -> EarthPins:
    """A three-winding transformer: leakage legs in the windings; the tap changes the turns of the high winding."""
    group = _group(part)
    mva_h = number(part, "rated_power_high", "MVA")
    mva_m, mva_l = (optional(part, f"rated_power_{side}", "MVA") or mva_h for side in ("medium", "low"))
    legs = _legs(
        part,
        (
            ("impedance_high_medium", "base_high_medium", min(mva_h, mva_m)),
            ("impedance_high_low", "base_high_low", min(mva_h, mva_l)),
            ("impedance_medium_low", "base_medium_low", min(mva_m, mva_l)),
        ),
    )
    share = number(part, "zero_sequence_impedance", "pu")
    windings, earths = [], {}
    for index, side in enumerate(("high", "medium", "low")):
        rated = number(part, f"{side}_voltage", "kV")
        kv = rated * (1 + number(part, "tap", "pu")) if side == "high" else rated
        star, earth = star_point(circuit, _neutral(part, f"neutral_{side}"), group.brought_out[index], rated)
        if earth is not None:
            earths[side] = earth
        clock = 0 if index == 0 else group.clocks[index - 1]
        z1 = legs[index] * kv**2  # the leg lies behind the tap, so it is seen through it
        windings.append(Winding(group.connections[index], kv, clock, ends[side], star, z1, share * z1))
    wire(circuit, circuit.limbs(), windings)
    return earths


def autotransformer(circuit: Circuit, part: Autotransformer, ends: dict[str, list[Pin]]) -> EarthPins:
    """Series and common windings on one neutral, and a closed delta. Taps are in the series winding.

    The measured star legs H, L, T become own and mutual leakage of the two galvanically joined windings.
    """
    group = _group(part)
    mva = number(part, "rated_power", "MVA")
    pairs = ("high_low", "high_tertiary", "low_tertiary")
    leg_h, leg_l, leg_t = _legs(part, [(f"impedance_{pair}", f"base_{pair}", mva) for pair in pairs])
    share = number(part, "zero_sequence_impedance", "pu")
    kv_h = number(part, "high_voltage", "kV") * (1 + number(part, "tap", "pu"))
    kv_l, kv_t = number(part, "low_voltage", "kV"), number(part, "tertiary_voltage", "kV")
    star, earth = star_point(circuit, _neutral(part, "neutral"), True, kv_l)
    z_h, z_l = leg_h * kv_h**2, leg_l * kv_l**2
    limbs, (high, low) = circuit.limbs(), (ends["high"], ends["low"])
    series = [Coil(high[k], low[k], {limbs[k]: (kv_h - kv_l) / math.sqrt(3)}) for k in range(3)]
    common = [Coil(low[k], star, {limbs[k]: kv_l / math.sqrt(3)}) for k in range(3)]
    circuit.coils([*series, *common], _joined_leakage(z_h, z_l, share))
    z_t = leg_t * kv_t**2
    tertiary = Winding("D", kv_t, group.clocks[1], ends["tertiary"], circuit.pin(), z_t, share * z_t)
    wire_against(circuit, limbs, "Y", tertiary)
    return {"common": earth} if earth is not None else {}


def _joined_leakage(z_h: complex, z_l: complex, share: float) -> ComplexArray:
    """6×6 for three series, then three common coils: V_H = e·N_H + Z_H·I_H and V_L = e·N_L + Z_L·I_L hold.

    With I_series = I_H and I_common = I_H + I_L (neutral earthed) these two lines give the entries.
    """
    high, low = phase_matrix(z_h, z_h, share * z_h), phase_matrix(z_l, z_l, share * z_l)
    joined: ComplexArray = np.block([[high + low, -low], [-low, low]])
    return joined


def earthing_transformer(circuit: Circuit, part: EarthingTransformer, line: list[Pin]) -> EarthPins:
    """Zigzag windings, or a star with a closed delta: open but for the zero sequence."""
    kv = number(part, "rated_voltage", "kV")
    given = part.value("zero_sequence_impedance")
    assert isinstance(given, Quantity)
    size = given.to("ohm") if given.dimension == "impedance" else math.sqrt(3) * kv / given.to("kA")
    z0 = from_size(size, number(part, "x0_over_r0", ""))
    star, earth = star_point(circuit, _neutral(part, "neutral"), True, kv)
    limbs = circuit.limbs()
    if part.value("connection") == "zigzag":
        _wire_one(circuit, limbs, Winding("Z", kv, 0, line, star, 0j, z0), 0, 1)
    else:
        _wire_one(circuit, limbs, Winding("Y", kv, 0, line, star, 0j, z0), 0, 1)
        loose = circuit.pins()  # the delta leads nowhere
        _wire_one(circuit, limbs, Winding("D", kv, 0, loose, star, 0j, 0j), 0, 1)
    return {"line": earth} if earth is not None else {}
