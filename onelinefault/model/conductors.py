"""Parts with a length, and reactors."""

from dataclasses import dataclass
from typing import ClassVar

from onelinefault.model.fields import choice, conductor_size, line_geometry, rating, whole_number
from onelinefault.model.part import Part, Terminal
from onelinefault.model.quantity import (
    CAPACITANCE_PER_LENGTH,
    CURRENT,
    IMPEDANCE_PER_LENGTH,
    LENGTH,
    NUMBER,
    REACTANCE,
    RESISTIVITY,
    SMALL_LENGTH,
    TEMPERATURE,
    VOLTAGE,
    Quantity,
)
from onelinefault.model.values import ConductorSize, LineGeometry

_ENDS = (Terminal("a", 0, -3), Terminal("b", 0, 3))
_PER_LENGTH = "Impedance per length"
_HOT = "Conductor temperature for the smallest fault current."


@dataclass(frozen=True, kw_only=True)
class Cable(Part):
    """A cable, or several equal ones in parallel."""

    kind: ClassVar[str] = "cable"
    label: ClassVar[str] = "Cable"
    letter: ClassVar[str] = "W"
    terminals: ClassVar[tuple[Terminal, ...]] = _ENDS

    length: Quantity | None = rating("Length", LENGTH, required=True)
    size: ConductorSize | None = conductor_size(
        "Conductor size",
        help="240 mm², 2x240 mm² (two cables in parallel), 3c 95 mm² (one three-core cable), 4/0 AWG, 500 kcmil.",
    )
    parallel: int | None = whole_number(
        "In parallel", default=1, at_most=100, help="Equal cables side by side, where the size does not say it."
    )
    material: str | None = choice("Conductor", ("copper", "aluminium"), default="copper")
    construction: str | None = choice(
        "Laid as",
        ("multi-core", "single-core trefoil", "single-core flat", "in steel conduit", "in plastic conduit"),
        default="multi-core",
    )
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE)
    r_per_length: Quantity | None = rating(
        "R",
        IMPEDANCE_PER_LENGTH,
        above_zero=False,
        at_least=0,
        group=_PER_LENGTH,
        help="Of one cable. From the table for size and material when not given.",
    )
    x_per_length: Quantity | None = rating(
        "X",
        IMPEDANCE_PER_LENGTH,
        above_zero=False,
        at_least=0,
        group=_PER_LENGTH,
        help="Of one cable, at the plant's frequency.",
    )
    r0_per_length: Quantity | None = rating(
        "R0",
        IMPEDANCE_PER_LENGTH,
        above_zero=False,
        at_least=0,
        group=_PER_LENGTH,
        help="Zero sequence; typical when not given.",
    )
    x0_per_length: Quantity | None = rating("X0", IMPEDANCE_PER_LENGTH, above_zero=False, at_least=0, group=_PER_LENGTH)
    capacitance: Quantity | None = rating(
        "Capacitance",
        CAPACITANCE_PER_LENGTH,
        group=_PER_LENGTH,
        help="Of one phase, one cable; used only when charging is asked for.",
    )
    zero_sequence_capacitance: Quantity | None = rating(
        "Zero-sequence capacitance",
        CAPACITANCE_PER_LENGTH,
        group=_PER_LENGTH,
        help="Taken as the phase capacitance when not given (screened cable).",
    )
    r_temperature: Quantity | None = rating(
        "R given at", TEMPERATURE, above_zero=False, at_least=-50, at_most=300, default="20 °C", group=_PER_LENGTH
    )
    hot_temperature: Quantity | None = rating(
        "Hot conductor",
        TEMPERATURE,
        above_zero=False,
        at_least=-50,
        at_most=400,
        default="90 °C",
        group=_PER_LENGTH,
        help=_HOT,
    )


@dataclass(frozen=True, kw_only=True)
class OverheadLine(Part):
    """An overhead line, given by impedances per length or by its geometry."""

    kind: ClassVar[str] = "overhead_line"
    label: ClassVar[str] = "Overhead line"
    letter: ClassVar[str] = "L"
    terminals: ClassVar[tuple[Terminal, ...]] = _ENDS

    length: Quantity | None = rating("Length", LENGTH, unit="km", required=True)
    parallel: int | None = whole_number("In parallel", default=1, at_most=20)
    material: str | None = choice("Conductor", ("copper", "aluminium"), default="aluminium")
    r_per_length: Quantity | None = rating("R", IMPEDANCE_PER_LENGTH, above_zero=False, at_least=0, group=_PER_LENGTH)
    x_per_length: Quantity | None = rating("X", IMPEDANCE_PER_LENGTH, above_zero=False, at_least=0, group=_PER_LENGTH)
    r0_per_length: Quantity | None = rating("R0", IMPEDANCE_PER_LENGTH, above_zero=False, at_least=0, group=_PER_LENGTH)
    x0_per_length: Quantity | None = rating("X0", IMPEDANCE_PER_LENGTH, above_zero=False, at_least=0, group=_PER_LENGTH)
    capacitance: Quantity | None = rating("Capacitance", CAPACITANCE_PER_LENGTH, unit="nF/km", group=_PER_LENGTH)
    zero_sequence_capacitance: Quantity | None = rating(
        "Zero-sequence capacitance", CAPACITANCE_PER_LENGTH, unit="nF/km", group=_PER_LENGTH
    )
    r_temperature: Quantity | None = rating(
        "R given at", TEMPERATURE, above_zero=False, at_least=-50, at_most=300, default="20 °C", group=_PER_LENGTH
    )
    hot_temperature: Quantity | None = rating(
        "Hot conductor",
        TEMPERATURE,
        above_zero=False,
        at_least=-50,
        at_most=400,
        default="80 °C",
        group=_PER_LENGTH,
        help=_HOT,
    )
    geometry: LineGeometry | None = line_geometry(
        "Conductor positions", help="a 0 29; b 2.5 29; c 7 29; n 4 25; ft. Used where R and X are not given (Carson)."
    )
    conductor_resistance: Quantity | None = rating(
        "Conductor R", IMPEDANCE_PER_LENGTH, group="Geometry", help="A.C. resistance of one phase conductor."
    )
    conductor_gmr: Quantity | None = rating(
        "Conductor GMR", SMALL_LENGTH, group="Geometry", help="Geometric mean radius of a phase conductor."
    )
    neutral_resistance: Quantity | None = rating("Earth wire R", IMPEDANCE_PER_LENGTH, group="Geometry")
    neutral_gmr: Quantity | None = rating("Earth wire GMR", SMALL_LENGTH, group="Geometry")
    earth_resistivity: Quantity | None = rating("Earth resistivity", RESISTIVITY, default="100 ohm·m", group="Geometry")


@dataclass(frozen=True, kw_only=True)
class Busway(Part):
    """A busway (enclosed busbar trunking) with a length."""

    kind: ClassVar[str] = "busway"
    label: ClassVar[str] = "Busway"
    letter: ClassVar[str] = "BW"
    terminals: ClassVar[tuple[Terminal, ...]] = _ENDS

    length: Quantity | None = rating("Length", LENGTH, required=True)
    parallel: int | None = whole_number("In parallel", default=1, at_most=20)
    rated_current: Quantity | None = rating("Rated current", CURRENT)
    material: str | None = choice("Conductor", ("copper", "aluminium"), default="copper")
    r_per_length: Quantity | None = rating(
        "R", IMPEDANCE_PER_LENGTH, unit="mohm/m", above_zero=False, at_least=0, group=_PER_LENGTH, required=True
    )
    x_per_length: Quantity | None = rating(
        "X", IMPEDANCE_PER_LENGTH, unit="mohm/m", above_zero=False, at_least=0, group=_PER_LENGTH, required=True
    )
    r0_per_length: Quantity | None = rating(
        "R0", IMPEDANCE_PER_LENGTH, unit="mohm/m", above_zero=False, at_least=0, group=_PER_LENGTH
    )
    x0_per_length: Quantity | None = rating(
        "X0", IMPEDANCE_PER_LENGTH, unit="mohm/m", above_zero=False, at_least=0, group=_PER_LENGTH
    )
    r_temperature: Quantity | None = rating(
        "R given at", TEMPERATURE, above_zero=False, at_least=-50, at_most=300, default="20 °C", group=_PER_LENGTH
    )
    hot_temperature: Quantity | None = rating(
        "Hot conductor",
        TEMPERATURE,
        above_zero=False,
        at_least=-50,
        at_most=400,
        default="90 °C",
        group=_PER_LENGTH,
        help=_HOT,
    )


@dataclass(frozen=True, kw_only=True)
class Reactor(Part):
    """A series current-limiting reactor."""

    kind: ClassVar[str] = "reactor"
    label: ClassVar[str] = "Reactor"
    letter: ClassVar[str] = "LR"
    terminals: ClassVar[tuple[Terminal, ...]] = _ENDS

    reactance: Quantity | None = rating(
        "Reactance",
        REACTANCE,
        required=True,
        help="In ohm per phase, or in % of U/(√3·I) at rated current and voltage.",
    )
    rated_current: Quantity | None = rating("Rated current", CURRENT, help="Needed when the reactance is in %.")
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE, help="The node's nominal voltage when not given.")
    x_over_r: Quantity | None = rating("X/R", NUMBER, default="80", at_most=1000000)
    zero_sequence_reactance: Quantity | None = rating(
        "X0", REACTANCE, group="Earthing", help="Taken as the reactance when not given."
    )
