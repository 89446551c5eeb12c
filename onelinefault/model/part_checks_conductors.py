"""Checks of single cables, lines, busways and reactors."""

from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor
from onelinefault.model.part import Part, number_in
from onelinefault.model.part_checks_common import Findings, fails, hints, missing, outside, typed, warns
from onelinefault.model.quantity import Quantity

_RESISTIVITY = {"copper": 1000 / 54, "aluminium": 1000 / 34}  # ohm·mm²/km at 20 °C (IEC 60909-0, 6.4)
_FIT = (0.6, 1.8)  # R against what its cross-section gives: cold to hot, with some skin effect


def check_cable(part: Cable) -> Findings:
    """Impedance, length, number in parallel, and R against the size."""
    if part.size is None and part.r_per_length is None:
        yield missing(part, "r_per_length", ", nor a conductor size to look it up by")
    yield from outside(part, "length", "m", (0.5, 50_000), "length-unusual")
    yield from _impedances(part, (0.005, 12))
    yield from _parallel(part)
    yield from _resistance_against_size(part)
    if (hot := typed(part, "hot_temperature", "°C")) is not None and hot < 20:
        message = f"a hot conductor of {part.text('hot_temperature')} is colder than a cold one"
        yield warns(part, "temperature", message, "Enter the conductor's temperature in service", "hot_temperature")


def _impedances(part: Part, usual_x_over_r: tuple[float, float]) -> Findings:
    r, x = number_in(part, "r_per_length", "ohm/km"), number_in(part, "x_per_length", "ohm/km")
    if r is not None and x is not None:
        if r == 0 and x == 0:
            remedy = "Enter R and X, or join its ends with a wire if it has none"
            yield fails(part, "impedance-zero", "its impedance is zero", remedy, "x_per_length")
        elif r == 0:
            yield warns(
                part, "resistance-zero", "its R is zero", "Enter R; the peak current rests on it", "r_per_length"
            )
        elif not usual_x_over_r[0] <= x / r <= usual_x_over_r[1]:
            message = f"X/R of {x / r:.2g} is unusual"
            yield warns(part, "x-over-r", message, "Check R and X and their units", "x_per_length")
    for zero, positive in (("r0_per_length", "r_per_length"), ("x0_per_length", "x_per_length")):
        z0, z1 = number_in(part, zero, "ohm/km"), number_in(part, positive, "ohm/km")
        if z0 is not None and z1 is not None and z0 < z1 * (1 - 1e-9):
            name = zero[:2].upper()
            message = f"{name} {part.text(zero)} is below {name[0]} {part.text(positive)}, which is unusual"
            yield warns(part, "zero-sequence-unusual", message, f"Check {name} and its unit", zero)


def _parallel(part: Cable) -> Findings:
    size, parallel = part.size, part.parallel
    if size is None:
        return
    if parallel is not None and size.runs > 1 and size.runs != parallel:
        message = f"its size {size.text} says {size.runs} in parallel, the count says {parallel}; the size counts"
        yield warns(part, "parallel-differs", message, "Correct one of the two", "parallel")
    elif size.runs == 3 and parallel is None:
        message = f"{size.text} is read as three cables in parallel"
        single = size.text.split("x", 1)[-1].split("×", 1)[-1].strip()
        yield hints(part, "three-in-parallel", message, f"For one three-core cable write 3c {single}", "size")


def _resistance_against_size(part: Cable) -> Findings:
    r = typed(part, "r_per_length", "ohm/km")
    if r is None or r == 0 or part.size is None:
        return
    expected = _RESISTIVITY[str(part.value("material"))] / part.size.area_mm2
    if not _FIT[0] <= r / expected <= _FIT[1]:
        message = f"R {part.text('r_per_length')} does not go with {part.size.text} {part.value('material')}"
        remedy = f"Check R, size and conductor; about {expected:.2g} Ω/km would go with it"
        yield warns(part, "resistance-size", message, remedy, "r_per_length")


def check_overhead_line(part: OverheadLine) -> Findings:
    """Impedance or geometry, and length."""
    yield from outside(part, "length", "km", (0.005, 500), "length-unusual")
    if part.geometry is None:
        for field in ("r_per_length", "x_per_length"):
            if part.given(field) is None:
                yield missing(part, field, ", nor the conductor positions")
    elif part.r_per_length is not None and part.x_per_length is not None:
        message = "R and X are given, so the conductor positions do not count"
        yield hints(part, "two-forms", message, "Clear the one that shall not count", "geometry")
    else:
        yield from _geometry(part)
    yield from _impedances(part, (0.1, 30))


def _geometry(part: OverheadLine) -> Findings:
    needed = ["conductor_resistance", "conductor_gmr"]
    if part.geometry is not None and any(name == "n" for name, _, _ in part.geometry.points):
        needed += ["neutral_resistance", "neutral_gmr"]
    for field in needed:
        if part.given(field) is None:
            yield missing(part, field)


def check_busway(part: Busway) -> Findings:
    """Impedance and length."""
    yield from outside(part, "length", "m", (0.3, 500), "length-unusual")
    yield from _impedances(part, (0.1, 10))


def check_reactor(part: Reactor) -> Findings:
    """A reactance in per cent needs the rated current."""
    for field in ("reactance", "zero_sequence_reactance"):
        value = part.given(field)
        if isinstance(value, Quantity) and value.dimension == "ratio" and part.rated_current is None:
            yield missing(part, "rated_current", f", but {value.text} of reactance is based on it")
            break
    yield from outside(part, "x_over_r", "", (10, 200), "x-over-r")
    yield from outside(part, "reactance", "%", (0.5, 50), "reactance-unusual")
