"""Small words that all checks of single parts are written with."""

from collections.abc import Iterator

from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part import Part, describe, number_in
from onelinefault.model.values import Neutral, VectorGroup

Findings = Iterator[Finding]

UNUSUAL_CLOCKS = frozenset({2, 3, 4, 7, 8, 9, 10})  # possible, but hardly ever built: 0, 1, 5, 6 and 11 are


def fails(part: Part, code: str, message: str, remedy: str, field: str = "") -> Finding:
    """An error about a part: ``message`` goes on after the part's title."""
    return Finding(Severity.ERROR, code, f"{part.title}: {message}.", f"{remedy}.", (part.id,), field)


def warns(part: Part, code: str, message: str, remedy: str, field: str = "") -> Finding:
    """A warning about a part."""
    return Finding(Severity.WARNING, code, f"{part.title}: {message}.", f"{remedy}.", (part.id,), field)


def hints(part: Part, code: str, message: str, remedy: str, field: str = "") -> Finding:
    """A hint about a part."""
    return Finding(Severity.HINT, code, f"{part.title}: {message}.", f"{remedy}.", (part.id,), field)


def missing(part: Part, field: str, why: str = "") -> Finding:
    """The error for a rating that the calculation cannot do without."""
    label = describe(type(part), field).label
    return fails(part, "missing-rating", f"{label} is not given{why}", f"Enter {label} of {part.title}", field)


def typed(part: Part, name: str, unit: str) -> float | None:
    """A typed rating as a number, or None when it was not typed or is of another dimension."""
    return None if part.given(name) is None else number_in(part, name, unit)


def outside(part: Part, field: str, unit: str, usual: tuple[float, float], code: str, shown: str = "") -> Findings:
    """A warning when a typed rating lies outside what is usual."""
    value = typed(part, field, unit)
    low, high = usual
    if value is not None and not low <= value <= high:
        label = describe(type(part), field).label
        limits = f"{low:g} to {high:g} {shown or unit}".rstrip()
        message = f"{label} {part.text(field)} is unusual; {limits} is usual"
        yield warns(part, code, message, f"Check {label} and its unit", field)


def neutral_against_winding(part: Part, field: str, winding: int) -> Findings:
    """A typed earthing where the vector group in use has no star point, or brings none out."""
    neutral, group = part.given(field), part.value("vector_group")
    if not isinstance(neutral, Neutral) or not neutral.earthed or not isinstance(group, VectorGroup):
        return
    if winding >= len(group.connections):
        return
    label = describe(type(part), field).label
    if group.connections[winding] == "D":
        message = f"{label} is {neutral.text}, but {group.text} has a delta winding there, which has no star point"
        remedy = f"Correct the vector group, or enter isolated for {label}"
        yield warns(part, "neutral-on-delta", message, remedy, field)
    elif not group.brought_out[winding]:
        message = (
            f"{label} is {neutral.text}, but {group.text} does not bring that star point out; it counts as isolated"
        )
        yield warns(part, "neutral-not-brought-out", message, "Write the vector group with n after the star", field)


def neutral_against_connection(part: Part, field: str = "neutral") -> Findings:
    """A typed earthing of the star point of a machine wound in delta."""
    neutral = part.given(field)
    if isinstance(neutral, Neutral) and neutral.earthed and part.value("connection") == "delta":
        message = f"its star point is {neutral.text}, but its winding is in delta and has none"
        yield warns(part, "neutral-on-delta", message, "Correct the winding, or enter isolated", field)


def vector_group_checks(part: Part, windings: int) -> Findings:
    """A vector group for another number of windings; a clock number that is hardly ever built."""
    group = part.value("vector_group")
    if not isinstance(group, VectorGroup):
        return
    if len(group.connections) != windings:
        message = f"its vector group {group.text} names {len(group.connections)} windings, not {windings}"
        default = describe(type(part), "vector_group").default
        example = default.text if isinstance(default, VectorGroup) else ""
        yield fails(part, "vector-group", message, f"Enter a vector group such as {example}", "vector_group")
    for clock in sorted(UNUSUAL_CLOCKS.intersection(group.clocks)):
        message = f"clock number {clock} of {group.text} is hardly ever built"
        yield hints(part, "clock-unusual", message, "Compare it with the nameplate", "vector_group")
