"""A plant with its missing ratings filled by typical ones, and a hint for every assumption made."""

from collections.abc import Iterator
from dataclasses import replace
from functools import lru_cache
from typing import Any

from onelinefault.model.completion_rules import ASSUMED_DEFAULTS, FILLERS, Fill, Setting
from onelinefault.model.fields import Basis, Field, Value, fields_of, text_of
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant
from onelinefault.model.sources import Supply
from onelinefault.model.typical import Tables

TYPICAL = "typical"
GUESSED = "guessed"
_QUIET = frozenset({"r_temperature"})  # says at which temperature R holds; R itself has the hint
_MEMORY_LIMIT = 50_000

_Completed = tuple[Part, tuple[Finding, ...]]
# parts are values that an edit shares unless it touches them, so most need not be completed again: part by identity
_memory: dict[int, tuple[Part, Tables, float, _Completed]] = {}


def completed_plant(plant: Plant, tables: Tables) -> tuple[Plant, tuple[Finding, ...]]:
    """The plant with what is missing filled in, basis typical, and hints on all that is typical, guessed or assumed.

    Only ratings that the network needs and that can be typical are filled. A plant that lacks nothing comes back
    itself, and completing twice changes nothing.
    """
    setting = Setting(tables, plant.document.frequency_hz)
    parts: dict[str, Part] = {}
    findings: list[Finding] = []
    changed = False
    for key, part in plant.parts.items():
        completed, found = _remembered(part, setting)
        parts[key] = completed
        changed = changed or completed is not part
        findings.extend(found)
    return (replace(plant, parts=parts) if changed else plant), tuple(findings)


def completed_part(part: Part, tables: Tables, frequency_hz: float) -> tuple[Part, tuple[Finding, ...]]:
    """One part with what is missing filled in, and hints on all that is typical, guessed or assumed about it."""
    setting = Setting(tables, frequency_hz)
    fills = list(FILLERS[type(part)](part, setting)) if type(part) in FILLERS else []
    completed = _filled(part, fills) if fills else part
    findings = [*_of_fills(part, fills), *_of_marks(part), *_of_defaults(completed)]
    return completed, tuple(findings)


def _remembered(part: Part, setting: Setting) -> _Completed:
    known = _memory.get(id(part))
    if known is not None and known[0] is part and known[1] is setting.tables and known[2] == setting.frequency_hz:
        return known[3]
    result = completed_part(part, setting.tables, setting.frequency_hz)
    if len(_memory) >= _MEMORY_LIMIT:
        _memory.clear()
    _memory[id(part)] = part, setting.tables, setting.frequency_hz, result
    return result


def _filled(part: Part, fills: list[Fill]) -> Part:
    kind: type = type(part)
    changes: dict[str, Any] = {fill.field: _value(kind, fill.field, fill.text) for fill in fills}
    basis = {**part.basis, **{fill.field: Basis.TYPICAL for fill in fills}}
    return replace(part, **changes, basis=basis)


@lru_cache(maxsize=4096)
def _value(kind: type, name: str, text: str) -> Value | None:
    return fields_of(kind)[name].value_from(text)


def _of_fills(part: Part, fills: list[Fill]) -> Iterator[Finding]:
    fields = fields_of(type(part))
    for fill in fills:
        if not fill.quiet:
            label = fields[fill.field].label
            text = f"{part.title}: {label} {fill.text} assumed, typical for {fill.reason} ({fill.source})"
            yield _hint(part, fill.field, TYPICAL, text, "Enter the maker's value.")


def _of_marks(part: Part) -> Iterator[Finding]:
    for name, basis in part.basis.items():
        if basis in (Basis.TYPICAL, Basis.GUESSED) and name not in _QUIET and part.given(name) is not None:
            label = fields_of(type(part))[name].label
            code = TYPICAL if basis is Basis.TYPICAL else GUESSED
            text = f"{part.title}: {label} {part.text(name)} is {code}"
            yield _hint(part, name, code, text, "Enter the maker's value.")


def _of_defaults(part: Part) -> Iterator[Finding]:
    fields = fields_of(type(part))
    for name, matters in ASSUMED_DEFAULTS.get(type(part), ()):
        if part.given(name) is None and matters(part) and not _said_otherwise(part, fields[name]):
            text = f"{part.title}: {fields[name].label} is not given; {text_of(fields[name].default)} is taken"
            yield _hint(part, name, TYPICAL, text, f"Enter {fields[name].label} of {part.title}.")
    if isinstance(part, Supply) and part.fault_level_max is not None and part.fault_level_min is None:
        text = f"{part.title}: the smallest fault level is not given; the largest is taken"
        remedy = "Ask the network operator for the smallest fault level; protection is judged by it."
        yield _hint(part, "fault_level_min", TYPICAL, text, remedy)


def _said_otherwise(part: Part, field: Field) -> bool:
    return any(part.given(other) is not None for other in field.alternatives)


def _hint(part: Part, name: str, code: str, text: str, remedy: str) -> Finding:
    return Finding(Severity.HINT, code, f"{text}.", remedy, (part.id,), name)
