"""Which missing ratings of each kind of part can be filled by typical ones, and which defaults count as assumptions.

Only what the network needs is filled. What no table can know (fault levels, rated powers, voltages, lengths) is left
missing: the checks name it.
"""

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from typing import Any

from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor
from onelinefault.model.part import Part, number_in
from onelinefault.model.quantity import Quantity, read_unit, show_unit
from onelinefault.model.sources import ConverterSource, InductionMotor, Supply, SynchronousGenerator, SynchronousMotor
from onelinefault.model.transforming import Autotransformer, EarthingTransformer, Transformer, Transformer3
from onelinefault.model.typical import (
    Resistance,
    Tables,
    cable_reactance,
    conductor_resistance,
    motor_x_over_r,
    transformer_impedance,
    transformer_x_over_r,
    zero_sequence_share,
)
from onelinefault.model.values import Neutral, VectorGroup

COLD_C = 20.0
_TYPICAL_POLE_PAIRS = 2


@dataclass(frozen=True, slots=True)
class Fill:
    """A typical text for a missing rating, with what it is typical for and its source. quiet: needs no hint."""

    field: str
    text: str
    reason: str
    source: str
    quiet: bool = False


@dataclass(frozen=True, slots=True)
class Setting:
    """What the rules know besides the part."""

    tables: Tables
    frequency_hz: float

    @property
    def practice(self) -> Mapping[str, float]:
        """Single coefficients by name."""
        return self.tables.practice


Condition = Callable[[Any], bool]


def earthed(part: Part, name: str) -> bool:
    """Whether a star point is earthed, as typed or by default."""
    value = part.value(name)
    return isinstance(value, Neutral) and value.earthed


def brought_out(part: Part, winding: int) -> bool:
    """Whether the vector group in use brings out the star point of a winding."""
    group = part.value("vector_group")
    return isinstance(group, VectorGroup) and len(group.brought_out) > winding and group.brought_out[winding]


def _supply(part: Supply, _setting: Setting) -> Iterator[Fill]:
    earth_unknown = part.earth_fault_level_max is None and part.x0_over_x1 is None
    if earth_unknown and part.value("star_point") == "earthed":
        reason = "an earthed network; earth faults as strong as three-phase ones"
        yield Fill("x0_over_x1", "1", reason, "common practice")


def _cable(part: Cable, setting: Setting) -> Iterator[Fill]:
    size, material, laid = part.size, str(part.value("material")), str(part.value("construction"))
    r, x = part.r_per_length, part.x_per_length
    if r is None and size is not None:
        found = conductor_resistance(setting.tables, size, material, laid)
        for fill in _resistance(part, found, material, setting):
            r = _typed(fill.text) if fill.field == "r_per_length" else r
            yield fill
    if r is None:
        return
    if x is None:
        typical = cable_reactance(
            setting.tables, size, laid, number_in(part, "rated_voltage", "kV"), setting.frequency_hz
        )
        x = _typed(typical.text)
        yield Fill("x_per_length", typical.text, typical.reason, typical.source)
    yield from _multiples(part, r, x, "cable", setting)


def _resistance(part: Cable, found: Resistance, material: str, setting: Setting) -> Iterator[Fill]:
    """The table's R with its own temperature, or recalculated where the temperature is typed."""
    given_c = number_in(part, "r_temperature", "°C") if part.r_temperature is not None else None
    at = f"{found.temperature_c if given_c is None else given_c:g} °C"
    text = found.text
    if given_c is not None and given_c != found.temperature_c:
        table, b = _typed(found.text), setting.practice[f"zero_resistance_{material}"]
        warm = table.value * (b + given_c) / (b + found.temperature_c)
        text = f"{warm:.4g} {found.text.rpartition(' ')[2]}"
    yield Fill("r_per_length", text, f"{found.reason}, at {at}", found.source)
    if given_c is None and found.temperature_c != COLD_C:
        yield Fill("r_temperature", at, "the table", found.source, quiet=True)


def _busway(part: Busway, setting: Setting) -> Iterator[Fill]:
    if part.r_per_length is not None and part.x_per_length is not None:
        yield from _multiples(part, part.r_per_length, part.x_per_length, "busway", setting)


def _multiples(part: Cable | Busway, r: Quantity, x: Quantity, kind: str, setting: Setting) -> Iterator[Fill]:
    """R0 and X0 as multiples of R and X, in their units."""
    for name, known, base in (("r0", part.r0_per_length, r), ("x0", part.x0_per_length, x)):
        if known is None:
            factor = setting.practice[f"{kind}_{name}"]
            text = f"{base.value * factor:.4g} {show_unit(base.unit)}"
            reason = f"a {kind} ({factor:g} times {name[0].upper()})"
            yield Fill(f"{name}_per_length", text, reason, "common practice")


def _overhead_line(part: OverheadLine, setting: Setting) -> Iterator[Fill]:
    r, x = number_in(part, "r_per_length", "ohm/km"), number_in(part, "x_per_length", "ohm/km")
    if r is None or x is None:
        return
    practice = setting.practice
    if part.r0_per_length is None:
        earth_return = practice["line_earth_return"] * setting.frequency_hz / practice["line_frequency_hz"]
        reason = f"a line without earth wire (R + 3·{earth_return:.3g} Ω/km earth return)"
        yield Fill("r0_per_length", f"{r + 3 * earth_return:.4g} Ω/km", reason, "Carson, common practice")
    if part.x0_per_length is None:
        factor = practice["line_x0"]
        yield Fill("x0_per_length", f"{factor * x:.4g} Ω/km", f"a line ({factor:g} times X)", "common practice")


def _transformer(part: Transformer, setting: Setting) -> Iterator[Fill]:
    mva, high, low = (
        number_in(part, name, unit)
        for name, unit in (("rated_power", "MVA"), ("high_voltage", "kV"), ("low_voltage", "kV"))
    )
    z = number_in(part, "impedance", "pu")
    if mva is not None and z is None:
        typical = transformer_impedance(setting.tables, mva, high, low, setting.frequency_hz)
        z = _typed(typical.text).to("pu")
        yield Fill("impedance", typical.text, typical.reason, typical.source)
    if mva is not None and z is not None and part.x_over_r is None and part.load_loss is None:
        typical = transformer_x_over_r(setting.tables, mva, z, high, low)
        yield Fill("x_over_r", typical.text, typical.reason, typical.source)
    if part.zero_sequence_impedance is None and _has_zero_path(part):
        group = part.value("vector_group")
        assert isinstance(group, VectorGroup)
        typical = zero_sequence_share(setting.tables, group, str(part.value("core")))
        yield Fill("zero_sequence_impedance", typical.text, typical.reason, typical.source)


def _has_zero_path(part: Transformer) -> bool:
    sides = ("neutral_high", "neutral_low")
    return any(brought_out(part, k) and earthed(part, name) for k, name in enumerate(sides))


def _induction_motor(part: InductionMotor, setting: Setting) -> Iterator[Fill]:
    mw, kv = number_in(part, "rated_power", "MW"), number_in(part, "rated_voltage", "kV")
    if part.x_over_r is None and mw is not None and kv is not None:
        pairs = pole_pairs(part, setting.frequency_hz)
        typical = motor_x_over_r(setting.tables, kv, mw / (pairs or _TYPICAL_POLE_PAIRS))
        unsure = "" if pairs or kv <= setting.practice["motor_low_voltage_to_kv"] else "; taken as four-pole"
        yield Fill("x_over_r", typical.text, typical.reason + unsure, typical.source)
    star = part.value("connection") == "star" and earthed(part, "neutral")
    ratio = number_in(part, "locked_rotor_ratio", "")
    if star and part.zero_sequence_reactance is None and ratio:
        text = f"{100 * setting.practice['motor_zero_sequence'] / ratio:.3g} %"
        yield Fill("zero_sequence_reactance", text, "half its locked-rotor reactance", "common practice")


def pole_pairs(part: InductionMotor, frequency_hz: float) -> int | None:
    """Pole pairs from the poles, else the most whose synchronous speed is above the rated speed, else None."""
    if part.poles is not None:
        return max(1, part.poles // 2)
    rpm = number_in(part, "rated_speed", "rpm")
    return max(1, int(60 * frequency_hz / rpm + 1e-9)) if rpm else None


def _typed(text: str) -> Quantity:
    """The quantity in a text that the rules have made themselves: a number, a space, a unit."""
    value, _, unit = text.partition(" ")
    return Quantity(float(value), read_unit(unit) or "", text)


FILLERS: Mapping[type[Part], Callable[[Any, Setting], Iterator[Fill]]] = {
    Supply: _supply,
    Cable: _cable,
    Busway: _busway,
    OverheadLine: _overhead_line,
    Transformer: _transformer,
    InductionMotor: _induction_motor,
}


def _always(_part: Part) -> bool:
    return True


def _active_power(part: Part) -> bool:
    value = part.given("rated_power")
    return isinstance(value, Quantity) and value.dimension == "active power"


def _earthed_star(part: Part) -> bool:
    return part.value("connection") == "star" and earthed(part, "neutral")


def _earthed_network(part: Part) -> bool:
    return part.value("star_point") == "earthed"


def _star(winding: int) -> Condition:
    return lambda part: brought_out(part, winding)


_SYNCHRONOUS: tuple[tuple[str, Condition], ...] = (
    ("power_factor", _active_power),
    ("subtransient_reactance", _always),
    ("x_over_r", _always),
    ("zero_sequence_reactance", _earthed_star),
)

# defaults that stand for something only the nameplate knows, and when they matter
ASSUMED_DEFAULTS: Mapping[type[Part], tuple[tuple[str, Condition], ...]] = {
    Supply: (("x_over_r", _always), ("r0_over_x0", _earthed_network)),
    SynchronousGenerator: _SYNCHRONOUS,
    SynchronousMotor: (("efficiency", _active_power), *_SYNCHRONOUS),
    InductionMotor: (("efficiency", _always), ("power_factor", _always), ("locked_rotor_ratio", _always)),
    ConverterSource: (("current_limit", _always), ("fault_angle", _always)),
    Transformer: (("vector_group", _always), ("neutral_high", _star(0)), ("neutral_low", _star(1))),
    Transformer3: (
        ("vector_group", _always),
        ("x_over_r", _always),
        ("zero_sequence_impedance", _always),
        ("neutral_high", _star(0)),
        ("neutral_medium", _star(1)),
        ("neutral_low", _star(2)),
    ),
    Autotransformer: (
        ("vector_group", _always),
        ("x_over_r", _always),
        ("zero_sequence_impedance", _always),
        ("neutral", _always),
    ),
    EarthingTransformer: (("x0_over_r0", _always), ("neutral", _always)),
    Reactor: (("x_over_r", _always),),
}
