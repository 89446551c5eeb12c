"""What can be said about one part by itself, and about the plant without its network."""

from collections.abc import Callable, Mapping
from typing import Any

from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor
from onelinefault.model.consumers import Bus, Note
from onelinefault.model.fields import fields_of
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part import Part, describe
from onelinefault.model.part_checks_common import Findings, hints, missing, typed, warns
from onelinefault.model.part_checks_conductors import check_busway, check_cable, check_overhead_line, check_reactor
from onelinefault.model.part_checks_sources import (
    check_converter,
    check_induction_motor,
    check_supply,
    check_synchronous,
)
from onelinefault.model.part_checks_transforming import (
    check_autotransformer,
    check_earthing_transformer,
    check_transformer,
    check_transformer3,
)
from onelinefault.model.plant import Plant
from onelinefault.model.sources import ConverterSource, InductionMotor, Supply, SynchronousGenerator, SynchronousMotor
from onelinefault.model.switching import Breaker, Fuse, Switch
from onelinefault.model.transforming import Autotransformer, EarthingTransformer, Transformer, Transformer3

_USUAL_HZ = ((49.0, 51.0), (59.0, 61.0), (16.0, 17.0))
_USUAL_PREFAULT = (0.9, 1.1)


def check_part(part: Part) -> list[Finding]:
    """All findings about one part by itself, as typed: what is missing, impossible or unusual."""
    findings = [
        missing(part, name) for name, field in fields_of(type(part)).items() if field.required and _lacks(part, name)
    ]
    findings.extend(_two_forms(part))
    if type(part) in _CHECKS:
        findings.extend(_CHECKS[type(part)](part))
    return findings


def check_plant(plant: Plant) -> list[Finding]:
    """Findings about the plant as a whole that need no network: names, emptiness, the calculation's basis."""
    findings = []
    if not any(not isinstance(part, Note) for part in plant.parts.values()):
        message = "The sheet is empty."
        findings.append(Finding(Severity.HINT, "empty-plant", message, "Drag a supply from the shelf to begin."))
    findings.extend(_doubled_names(plant))
    hertz, prefault = plant.document.frequency_hz, plant.document.prefault_pu
    if not any(low <= hertz <= high for low, high in _USUAL_HZ):
        message = f"A frequency of {hertz:g} Hz is unusual."
        findings.append(Finding(Severity.WARNING, "frequency", message, "Check the frequency.", (), "frequency"))
    if not _USUAL_PREFAULT[0] <= prefault <= _USUAL_PREFAULT[1]:
        message = f"A voltage of {prefault:g} times nominal before the fault is unusual."
        remedy = "Check the voltage before the fault."
        findings.append(Finding(Severity.WARNING, "prefault-voltage", message, remedy, (), "prefault_voltage"))
    return findings


def _lacks(part: Part, name: str) -> bool:
    return part.value(name) is None


def _doubled_names(plant: Plant) -> list[Finding]:
    by_name: dict[str, list[Part]] = {}
    for part in plant.parts.values():
        if part.name.strip() and not isinstance(part, Note):
            by_name.setdefault(part.name.strip().casefold(), []).append(part)
    return [
        Finding(
            Severity.WARNING,
            "duplicate-name",
            f"{len(parts)} parts are called {parts[0].name.strip()}.",
            "Give each a name of its own; tables and reports go by names.",
            tuple(part.id for part in parts),
            "name",
        )
        for parts in by_name.values()
        if len(parts) > 1
    ]


def _two_forms(part: Part) -> Findings:
    """Two forms of one rating, both typed: a hint, once for each pair."""
    told: set[frozenset[str]] = set()
    for name, field in fields_of(type(part)).items():
        for other in field.alternatives:
            pair = frozenset((name, other))
            both = part.given(name) is not None and part.given(other) is not None
            if both and pair not in told and other in fields_of(type(part)) and not _go_together(pair):
                told.add(pair)
                message = f"{field.label} and {describe(type(part), other).label} are both given and say the same thing"
                yield hints(part, "two-forms", message, "Clear the one that shall not count", name)


def _go_together(pair: frozenset[str]) -> bool:
    """Poles and speed confirm one another; a check of its own compares them."""
    return pair == frozenset(("poles", "rated_speed"))


def _check_bus(part: Bus) -> Findings:
    peak, short_time = typed(part, "peak_withstand_current", "kA"), typed(part, "short_time_current", "kA")
    if peak is not None and short_time is not None and peak < short_time:
        yield _peak_below(part, "peak_withstand_current", "short_time_current")


def _check_breaker(part: Breaker) -> Findings:
    yield from _unrated(part)
    making, breaking = typed(part, "making_current", "kA"), typed(part, "breaking_current", "kA")
    if making is not None and breaking is not None and making < breaking:
        yield _peak_below(part, "making_current", "breaking_current")


def _check_switch(part: Switch) -> Findings:
    yield from _unrated(part)
    making, short_time = typed(part, "making_current", "kA"), typed(part, "short_time_current", "kA")
    if making is not None and short_time is not None and making < short_time:
        yield _peak_below(part, "making_current", "short_time_current")


def _unrated(part: Part) -> Findings:
    ratings = [name for name in fields_of(type(part)) if name not in ("closed", "form")]
    if all(part.given(name) is None for name in ratings):
        message = "it has no ratings, so its duty cannot be checked"
        yield hints(part, "no-ratings", message, f"Enter the ratings of {part.title}", ratings[0])


def _peak_below(part: Part, peak: str, rms: str) -> Finding:
    label = describe(type(part), peak).label
    message = f"{label} {part.text(peak)}, a peak, is below the r.m.s. value {part.text(rms)}"
    return warns(part, "peak-below-rms", message, "Check which is which", peak)


_CHECKS: Mapping[type[Part], Callable[[Any], Findings]] = {
    Bus: _check_bus,
    Supply: check_supply,
    SynchronousGenerator: check_synchronous,
    SynchronousMotor: check_synchronous,
    InductionMotor: check_induction_motor,
    ConverterSource: check_converter,
    Transformer: check_transformer,
    Transformer3: check_transformer3,
    Autotransformer: check_autotransformer,
    EarthingTransformer: check_earthing_transformer,
    Cable: check_cable,
    OverheadLine: check_overhead_line,
    Busway: check_busway,
    Reactor: check_reactor,
    Breaker: _check_breaker,
    Switch: _check_switch,
    Fuse: _unrated,
}
