"""What a lookup in the inspector offers to fill in: standard sizes and typical machines, each with its source.

What is taken over is marked typical; the texts are those that a person would type.
"""

import math
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from typing import Any

from onelinefault.model.conductors import Cable, OverheadLine
from onelinefault.model.part import Part, number_in
from onelinefault.model.sources import InductionMotor, SynchronousGenerator, SynchronousMotor
from onelinefault.model.switching import Breaker
from onelinefault.model.transforming import Transformer
from onelinefault.model.typical import (
    Machine,
    Tables,
    cable_reactance,
    conductor_resistance,
    line_reactance_ohm_per_km,
    transformer_impedance,
)
from onelinefault.model.values import read_conductor_size


@dataclass(frozen=True, slots=True)
class Offer:
    """One line of a lookup: what it is, the texts it fills in by field name, and where they come from."""

    label: str
    texts: Mapping[str, str]
    source: str


def offers(part: Part, tables: Tables, frequency_hz: float = 50.0) -> tuple[Offer, ...]:
    """What can be filled in for a part as it stands; empty for kinds of parts that no table knows."""
    build = _OFFERS.get(type(part))
    return tuple(build(part, tables, frequency_hz)) if build else ()


def _cables(part: Cable, tables: Tables, frequency_hz: float) -> Iterator[Offer]:
    material, laid = str(part.value("material")), str(part.value("construction"))
    metric = [f"{area:g} mm²" for area in tables.conductors[material]]
    american = [key if "kcmil" in key else f"{key} AWG" for key in tables.conduits]
    kv = number_in(part, "rated_voltage", "kV")
    for text in (american + metric) if frequency_hz >= 55 else (metric + american):
        size = read_conductor_size(text)
        r = conductor_resistance(tables, size, material, laid)
        x = cable_reactance(tables, size, laid, kv, frequency_hz)
        temperature = {} if r.temperature_c == 20 else {"r_temperature": f"{r.temperature_c:g} °C"}
        texts = {"size": text, "r_per_length": r.text, "x_per_length": x.text, **temperature}
        yield Offer(f"{text} {material}, {laid}", texts, f"R {r.source}; X {x.source}")


def _lines(part: OverheadLine, tables: Tables, frequency_hz: float) -> Iterator[Offer]:
    material = str(part.value("material"))
    for area in tables.line_areas_mm2:
        r = tables.practice[f"resistivity_{material}"] / area
        x = line_reactance_ohm_per_km(tables, area, frequency_hz)
        texts = {"r_per_length": f"{r:.3g} Ω/km", "x_per_length": f"{x:.3g} Ω/km"}
        yield Offer(f"{area:g} mm² {material}, medium voltage", texts, tables.sources["line_spacing"].source)


def _machines(part: Part, tables: Tables, _frequency_hz: float) -> Iterator[Offer]:
    motor = isinstance(part, SynchronousMotor)
    for machine in tables.machines:
        for_motors = "motor" in machine.label or "condenser" in machine.label
        if motor == for_motors:
            source = tables.sources[machine.table]
            yield Offer(machine.label, _reactances(machine), f"{source.source} ({source.status})")


def _reactances(machine: Machine) -> dict[str, str]:
    values = {
        "subtransient_reactance": machine.subtransient,
        "transient_reactance": machine.transient,
        "synchronous_reactance": machine.synchronous,
        "negative_sequence_reactance": machine.negative,
        "zero_sequence_reactance": machine.zero,
    }
    return {name: f"{100 * value:g} %" for name, value in values.items() if value is not None}


def _code_letters(part: InductionMotor, tables: Tables, _frequency_hz: float) -> Iterator[Offer]:
    """Locked-rotor current by code letter: the upper end of its range over the motor's own apparent power."""
    hp, mw = number_in(part, "rated_power", "hp"), number_in(part, "rated_power", "MW")
    efficiency, power_factor = number_in(part, "efficiency", "pu"), number_in(part, "power_factor", "")
    if hp is None or mw is None or not efficiency or not power_factor:
        return
    rated_kva = 1000 * mw / (efficiency * power_factor)
    for letter, (low, high) in tables.code_letters.items():
        ratio = (high or low) * hp / rated_kva
        if 1 < ratio <= 20:
            label = f"code letter {letter}, {low:g} to {high:g} kVA/hp" if high else f"code letter {letter}"
            yield Offer(label, {"locked_rotor_ratio": f"{ratio:.3g}"}, tables.sources["nema_code_letters"].source)


def _transformers(_part: Transformer, tables: Tables, _frequency_hz: float) -> Iterator[Offer]:
    """European units: their losses go with the impedances of IEC 60076-5, whatever the plant's frequency."""
    for kva, watt in tables.load_loss_w:
        z = transformer_impedance(tables, kva / 1000, None, None, 50)
        texts = {"rated_power": f"{kva:g} kVA", "impedance": z.text, "load_loss": f"{watt / 1000:g} kW"}
        source = f"Z {z.source}; load loss {tables.sources['eu_548_2014_load_loss'].source}"
        yield Offer(f"{kva:g} kVA distribution transformer, {z.text}", texts, source)


def _breakers(_part: Breaker, tables: Tables, frequency_hz: float) -> Iterator[Offer]:
    factor = min(tables.making_factors.items(), key=lambda item: abs(math.log(item[0] / frequency_hz)))[1]
    for ka in tables.breaking_ka:
        texts = {
            "breaking_current": f"{ka:g} kA",
            "making_current": f"{factor * ka:g} kA",
            "short_time_current": f"{ka:g} kA",
        }
        yield Offer(
            f"{ka:g} kA above 1 kV", texts, f"{tables.sources['breaker_series'].source}; making {factor:g} times"
        )


_OFFERS: Mapping[type[Part], Callable[[Any, Tables, float], Iterator[Offer]]] = {
    Cable: _cables,
    OverheadLine: _lines,
    SynchronousGenerator: _machines,
    SynchronousMotor: _machines,
    InductionMotor: _code_letters,
    Transformer: _transformers,
    Breaker: _breakers,
}
