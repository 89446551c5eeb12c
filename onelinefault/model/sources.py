"""Parts that feed a fault: supplies, machines, converters."""

from dataclasses import dataclass
from typing import ClassVar

from onelinefault.model.fields import choice, neutral, rating, whole_number
from onelinefault.model.part import Part, Terminal
from onelinefault.model.quantity import (
    ANGLE,
    APPARENT_POWER,
    FAULT_LEVEL,
    MACHINE_POWER,
    NUMBER,
    PER_UNIT,
    PERCENT,
    REACTANCE,
    SHAFT_POWER,
    SPEED,
    TIME,
    VOLTAGE,
    Quantity,
)
from onelinefault.model.values import Neutral

MOTOR_DRIVES = ("direct", "regenerating converter", "converter")


@dataclass(frozen=True, kw_only=True)
class Supply(Part):
    """A network feeder: the utility, or everything upstream, as a fault level at a voltage."""

    kind: ClassVar[str] = "supply"
    label: ClassVar[str] = "Supply"
    letter: ClassVar[str] = "Q"
    terminals: ClassVar[tuple[Terminal, ...]] = (Terminal("out", 0, 3),)
    is_source: ClassVar[bool] = True

    nominal_voltage: Quantity | None = rating(
        "Nominal voltage", VOLTAGE, required=True, help="Line-to-line voltage at which the fault level is given."
    )
    fault_level_max: Quantity | None = rating(
        "Fault level, largest",
        FAULT_LEVEL,
        required=True,
        help="Three-phase fault level as MVA or kA, or the source impedance in ohm.",
    )
    fault_level_min: Quantity | None = rating(
        "Fault level, smallest",
        FAULT_LEVEL,
        help="For the weakest state of the network; taken as the largest when not given.",
    )
    x_over_r: Quantity | None = rating(
        "X/R",
        NUMBER,
        default="10",
        at_most=1000,
        help="Ratio of reactance to resistance, positive sequence. Typical: R = 0.1 X (IEC 60909-0, 6.2).",
    )
    earth_fault_level_max: Quantity | None = rating(
        "Earth-fault level, largest",
        FAULT_LEVEL,
        group="Earth fault",
        alternatives=("x0_over_x1",),
        help="Line-to-earth fault current in kA (or MVA as √3·U·I) at the largest fault level.",
    )
    earth_fault_level_min: Quantity | None = rating(
        "Earth-fault level, smallest", FAULT_LEVEL, group="Earth fault", help="At the smallest fault level."
    )
    x0_over_x1: Quantity | None = rating(
        "X0/X1",
        NUMBER,
        at_most=1000,
        group="Earth fault",
        alternatives=("earth_fault_level_max",),
        help="Used when no earth-fault level is given.",
    )
    r0_over_x0: Quantity | None = rating(
        "R0/X0",
        NUMBER,
        above_zero=False,
        at_least=0,
        at_most=100,
        default="0.1",
        group="Earth fault",
        help="Ratio of zero-sequence resistance to reactance.",
    )
    star_point: str | None = choice(
        "Network neutral",
        ("earthed", "isolated"),
        default="earthed",
        group="Earth fault",
        help="Isolated: the network feeds no earth-fault current.",
    )


@dataclass(frozen=True, kw_only=True)
class SynchronousGenerator(Part):
    """A synchronous generator."""

    kind: ClassVar[str] = "synchronous_generator"
    label: ClassVar[str] = "Generator"
    letter: ClassVar[str] = "G"
    terminals: ClassVar[tuple[Terminal, ...]] = (Terminal("line", 0, -3),)
    is_source: ClassVar[bool] = True

    rated_power: Quantity | None = rating(
        "Rated power", MACHINE_POWER, required=True, help="Apparent power, or active power with the power factor."
    )
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE, required=True)
    power_factor: Quantity | None = rating("Power factor", NUMBER, default="0.8", at_most=1)
    subtransient_reactance: Quantity | None = rating(
        "X″d",
        REACTANCE,
        at_most=500,
        default="15 %",
        help="Direct-axis subtransient reactance, saturated, on the machine's own rating.",
    )
    transient_reactance: Quantity | None = rating(
        "X′d", REACTANCE, at_most=500, help="Direct-axis transient reactance."
    )
    synchronous_reactance: Quantity | None = rating(
        "Xd", REACTANCE, at_most=1000, help="Direct-axis synchronous reactance."
    )
    negative_sequence_reactance: Quantity | None = rating(
        "X2", REACTANCE, at_most=500, help="Taken as X″d when not given."
    )
    zero_sequence_reactance: Quantity | None = rating(
        "X0",
        REACTANCE,
        at_most=500,
        default="5 %",
        group="Earthing",
        help="Matters only where the star point is earthed.",
    )
    resistance: Quantity | None = rating(
        "R",
        REACTANCE,
        above_zero=False,
        at_least=0,
        alternatives=("x_over_r", "armature_time_constant"),
        help="Stator resistance.",
    )
    x_over_r: Quantity | None = rating(
        "X/R",
        NUMBER,
        default="20",
        at_most=1000,
        alternatives=("resistance", "armature_time_constant"),
        help="X″d over R.",
    )
    armature_time_constant: Quantity | None = rating(
        "Ta",
        TIME,
        unit="ms",
        alternatives=("resistance", "x_over_r"),
        help="Armature (d.c.) time constant: R = X2/(2πf·Ta).",
    )
    voltage_range: Quantity | None = rating(
        "Voltage above rated, pG",
        PERCENT,
        above_zero=False,
        at_least=0,
        at_most=30,
        default="0 %",
        group="IEC 60909",
        help="By how much its terminal voltage is permanently above the rated one (IEC 60909-0, 6.6.1 and 6.7.2).",
    )
    connection: str | None = choice("Winding", ("star", "delta"), default="star")
    neutral: Neutral | None = neutral("Star point", help="isolated, solid, resistor 10 A, reactor 5 ohm")


@dataclass(frozen=True, kw_only=True)
class SynchronousMotor(Part):
    """A synchronous motor or condenser; feeds a fault like a generator."""

    kind: ClassVar[str] = "synchronous_motor"
    label: ClassVar[str] = "Synchronous motor"
    letter: ClassVar[str] = "M"
    terminals: ClassVar[tuple[Terminal, ...]] = (Terminal("line", 0, -3),)
    is_source: ClassVar[bool] = True

    rated_power: Quantity | None = rating(
        "Rated power",
        MACHINE_POWER,
        unit="MW",
        required=True,
        help="Shaft power in kW or hp, or apparent power in MVA.",
    )
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE, required=True)
    efficiency: Quantity | None = rating("Efficiency", PERCENT, default="96 %", at_most=100)
    power_factor: Quantity | None = rating("Power factor", NUMBER, default="0.9", at_most=1)
    subtransient_reactance: Quantity | None = rating(
        "X″d", REACTANCE, at_most=500, default="20 %", help="On the machine's own apparent power."
    )
    transient_reactance: Quantity | None = rating("X′d", REACTANCE, at_most=500)
    synchronous_reactance: Quantity | None = rating("Xd", REACTANCE, at_most=1000)
    negative_sequence_reactance: Quantity | None = rating(
        "X2", REACTANCE, at_most=500, help="Taken as X″d when not given."
    )
    zero_sequence_reactance: Quantity | None = rating("X0", REACTANCE, at_most=500, default="5 %", group="Earthing")
    resistance: Quantity | None = rating(
        "R", REACTANCE, above_zero=False, at_least=0, alternatives=("x_over_r", "armature_time_constant")
    )
    x_over_r: Quantity | None = rating(
        "X/R", NUMBER, default="20", at_most=1000, alternatives=("resistance", "armature_time_constant")
    )
    armature_time_constant: Quantity | None = rating("Ta", TIME, unit="ms", alternatives=("resistance", "x_over_r"))
    connection: str | None = choice("Winding", ("star", "delta"), default="star")
    neutral: Neutral | None = neutral("Star point")


@dataclass(frozen=True, kw_only=True)
class InductionMotor(Part):
    """An induction motor, or a group of equal ones drawn as one."""

    kind: ClassVar[str] = "induction_motor"
    label: ClassVar[str] = "Motor"
    letter: ClassVar[str] = "M"
    terminals: ClassVar[tuple[Terminal, ...]] = (Terminal("line", 0, -3),)
    is_source: ClassVar[bool] = True

    count: int | None = whole_number("Motors in the group", default=1, help="Equal motors drawn as one.")
    rated_power: Quantity | None = rating(
        "Rated power, each", SHAFT_POWER, required=True, help="Shaft power of one motor."
    )
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE, required=True)
    efficiency: Quantity | None = rating("Efficiency", PERCENT, default="94 %", at_most=100)
    power_factor: Quantity | None = rating("Power factor", NUMBER, default="0.86", at_most=1)
    locked_rotor_ratio: Quantity | None = rating(
        "Locked-rotor current", NUMBER, default="6", at_most=20, help="As a multiple of rated current."
    )
    poles: int | None = whole_number("Poles", at_least=2, at_most=100, help="Even; gives the power per pole pair.")
    rated_speed: Quantity | None = rating("Rated speed", SPEED, alternatives=("poles",))
    x_over_r: Quantity | None = rating(
        "X/R",
        NUMBER,
        at_most=200,
        help="Typical by voltage and power per pole pair (IEC 60909-0, 6.10) when not given.",
    )
    running_share: Quantity | None = rating(
        "Share running",
        PERCENT,
        default="100 %",
        above_zero=False,
        at_least=0,
        at_most=100,
        help="Share of the group that runs when the fault happens.",
    )
    drive: str | None = choice(
        "Fed",
        MOTOR_DRIVES,
        default="direct",
        help="A motor behind a converter feeds a fault only where the converter can feed back; it then counts as one "
        "with 3 times rated current and X/R 10, in three-phase faults only (IEC 60909-0, 6.11).",
    )
    connection: str | None = choice("Winding", ("star", "delta"), default="delta")
    neutral: Neutral | None = neutral("Star point", help="Nearly always isolated.")
    zero_sequence_reactance: Quantity | None = rating(
        "X0",
        REACTANCE,
        at_most=500,
        group="Earthing",
        help="Only where the star point is earthed; on the motor's apparent power.",
    )


@dataclass(frozen=True, kw_only=True)
class ConverterSource(Part):
    """A converter that feeds a fault with a limited current: PV, battery, regenerating drive, full-converter wind."""

    kind: ClassVar[str] = "converter_source"
    label: ClassVar[str] = "Converter source"
    letter: ClassVar[str] = "U"
    terminals: ClassVar[tuple[Terminal, ...]] = (Terminal("line", 0, -3),)
    is_source: ClassVar[bool] = True

    rated_power: Quantity | None = rating("Rated power", APPARENT_POWER, required=True)
    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE, required=True)
    current_limit: Quantity | None = rating(
        "Current limit",
        PER_UNIT,
        default="1.2 pu",
        at_most=10,
        help="Largest current during a fault as a multiple of rated current.",
    )
    fault_angle: Quantity | None = rating(
        "Angle during the fault",
        ANGLE,
        default="90 °",
        above_zero=False,
        at_least=-90,
        at_most=90,
        help="How far the current lags the voltage at the converter's terminals: 90° feeds reactive current only.",
    )
