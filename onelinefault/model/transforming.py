"""Parts that change the voltage or make a neutral."""

from dataclasses import dataclass
from typing import ClassVar

from onelinefault.model.fields import choice, flag, neutral, rating, vector_group, words
from onelinefault.model.part import Part, Terminal
from onelinefault.model.quantity import (
    APPARENT_POWER,
    EARTHING_IMPEDANCE,
    LOSS,
    NUMBER,
    PERCENT,
    TIME,
    VOLTAGE,
    Quantity,
)
from onelinefault.model.values import Neutral, VectorGroup

_CORES = ("three-limb", "five-limb", "shell", "three single-phase")


@dataclass(frozen=True, kw_only=True)
class Transformer(Part):
    """A two-winding transformer."""

    kind: ClassVar[str] = "transformer"
    label: ClassVar[str] = "Transformer"
    letter: ClassVar[str] = "T"
    terminals: ClassVar[tuple[Terminal, ...]] = (Terminal("high", 0, -4, "high"), Terminal("low", 0, 4, "low"))

    rated_power: Quantity | None = rating("Rated power", APPARENT_POWER, required=True)
    high_voltage: Quantity | None = rating("Rated voltage, high", VOLTAGE, required=True)
    low_voltage: Quantity | None = rating("Rated voltage, low", VOLTAGE, required=True)
    impedance: Quantity | None = rating(
        "Impedance",
        PERCENT,
        at_most=100,
        help="On rated power, at the principal tap. Typical by size when not given (IEC 60076-5).",
    )
    x_over_r: Quantity | None = rating(
        "X/R",
        NUMBER,
        at_most=500,
        alternatives=("load_loss",),
        help="Typical by size when neither X/R nor load loss is given.",
    )
    load_loss: Quantity | None = rating(
        "Load loss",
        LOSS,
        alternatives=("x_over_r",),
        help="Total for three phases at rated current, in kW, or as a percentage of rated power.",
    )
    vector_group: VectorGroup | None = vector_group("Vector group", default="Dyn11")
    tap: Quantity | None = rating(
        "Tap",
        PERCENT,
        above_zero=False,
        at_least=-30,
        at_most=30,
        default="0 %",
        help="Extra voltage of the tapped winding, +2.5 % means more turns.",
    )
    tap_side: str | None = choice("Tapped side", ("high", "low"), default="high")
    neutral_high: Neutral | None = neutral(
        "Neutral, high side", help="isolated, solid, resistor 400 A 10 s, reactor 5 ohm"
    )
    neutral_low: Neutral | None = neutral(
        "Neutral, low side", default="solid", help="isolated, solid, resistor 400 A 10 s, reactor 5 ohm"
    )
    zero_sequence_impedance: Quantity | None = rating(
        "Z0 in % of Z1",
        PERCENT,
        at_most=2000,
        group="Earthing",
        help="Share of the positive-sequence impedance. Typical by connection and core when not given.",
    )
    x0_over_r0: Quantity | None = rating(
        "X0/R0", NUMBER, at_most=500, group="Earthing", help="Taken as X/R when not given."
    )
    core: str | None = choice(
        "Core",
        _CORES,
        default="three-limb",
        group="Earthing",
        help="A three-limb core gives an earthed star a magnetising path in the zero sequence.",
    )
    magnetising_impedance: Quantity | None = rating(
        "Magnetising Z0",
        PERCENT,
        at_most=100000,
        group="Earthing",
        help="Zero-sequence magnetising impedance on rated power, of a three-limb core. Left out when not given.",
    )
    unit_generator: str | None = words(
        "Unit with generator",
        group="IEC 60909",
        help="Name of the generator that makes a power station unit with this transformer (IEC 60909-0, 6.7).",
    )
    on_load_tap_changer: bool | None = flag(
        "On-load tap changer",
        default=True,
        group="IEC 60909",
        help="Matters for a power station unit only: factor K_S with one, K_SO without.",
    )
    tap_range: Quantity | None = rating(
        "Off-load tap, pT",
        PERCENT,
        above_zero=False,
        at_least=-30,
        at_most=30,
        default="0 %",
        group="IEC 60909",
        help="Of a unit without on-load tap changer, where an off-load tap is used permanently: +5 % or -5 %.",
    )


@dataclass(frozen=True, kw_only=True)
class Transformer3(Part):
    """A three-winding transformer, rated by three pair impedances, each on its own base."""

    kind: ClassVar[str] = "transformer3"
    label: ClassVar[str] = "Three-winding transformer"
    letter: ClassVar[str] = "T"
    terminals: ClassVar[tuple[Terminal, ...]] = (
        Terminal("high", 0, -4, "high"),
        Terminal("medium", -2, 4, "medium"),
        Terminal("low", 2, 4, "low"),
    )

    high_voltage: Quantity | None = rating("Rated voltage, high", VOLTAGE, required=True)
    medium_voltage: Quantity | None = rating("Rated voltage, medium", VOLTAGE, required=True)
    low_voltage: Quantity | None = rating("Rated voltage, low", VOLTAGE, required=True)
    rated_power_high: Quantity | None = rating("Rated power, high", APPARENT_POWER, required=True)
    rated_power_medium: Quantity | None = rating(
        "Rated power, medium", APPARENT_POWER, help="Taken as the high side's when not given."
    )
    rated_power_low: Quantity | None = rating(
        "Rated power, low", APPARENT_POWER, help="Taken as the high side's when not given."
    )
    impedance_high_medium: Quantity | None = rating("Impedance high-medium", PERCENT, required=True, at_most=200)
    impedance_high_low: Quantity | None = rating("Impedance high-low", PERCENT, required=True, at_most=200)
    impedance_medium_low: Quantity | None = rating("Impedance medium-low", PERCENT, required=True, at_most=200)
    base_high_medium: Quantity | None = rating(
        "… on base, high-medium", APPARENT_POWER, help="The smaller rated power of the pair when not given."
    )
    base_high_low: Quantity | None = rating("… on base, high-low", APPARENT_POWER)
    base_medium_low: Quantity | None = rating("… on base, medium-low", APPARENT_POWER)
    x_over_r: Quantity | None = rating(
        "X/R", NUMBER, default="20", at_most=500, help="Of each pair whose load loss is not given."
    )
    load_loss_high_medium: Quantity | None = rating(
        "Load loss, high-medium", LOSS, help="At the pair's base power, in kW, or as a percentage of it."
    )
    load_loss_high_low: Quantity | None = rating("Load loss, high-low", LOSS)
    load_loss_medium_low: Quantity | None = rating("Load loss, medium-low", LOSS)
    vector_group: VectorGroup | None = vector_group("Vector group", default="YNyn0d11")
    tap: Quantity | None = rating("Tap, high side", PERCENT, above_zero=False, at_least=-30, at_most=30, default="0 %")
    neutral_high: Neutral | None = neutral("Neutral, high side", default="solid")
    neutral_medium: Neutral | None = neutral("Neutral, medium side", default="solid")
    neutral_low: Neutral | None = neutral("Neutral, low side")
    zero_sequence_impedance: Quantity | None = rating(
        "Z0 in % of Z1", PERCENT, at_most=2000, default="100 %", group="Earthing", help="Of each star leg."
    )


@dataclass(frozen=True, kw_only=True)
class Autotransformer(Part):
    """An autotransformer with a delta tertiary; series and common winding share one neutral."""

    kind: ClassVar[str] = "autotransformer"
    label: ClassVar[str] = "Autotransformer"
    letter: ClassVar[str] = "T"
    terminals: ClassVar[tuple[Terminal, ...]] = (
        Terminal("high", 0, -4, "high"),
        Terminal("low", 0, 4, "low"),
        Terminal("tertiary", -4, 0, "tertiary"),
    )

    high_voltage: Quantity | None = rating("Rated voltage, high", VOLTAGE, required=True)
    low_voltage: Quantity | None = rating("Rated voltage, low", VOLTAGE, required=True)
    tertiary_voltage: Quantity | None = rating("Rated voltage, tertiary", VOLTAGE, required=True)
    rated_power: Quantity | None = rating(
        "Rated power", APPARENT_POWER, required=True, help="Throughput rating high-low."
    )
    rated_power_tertiary: Quantity | None = rating(
        "Rated power, tertiary", APPARENT_POWER, help="A third of the throughput when not given."
    )
    impedance_high_low: Quantity | None = rating("Impedance high-low", PERCENT, required=True, at_most=200)
    impedance_high_tertiary: Quantity | None = rating("Impedance high-tertiary", PERCENT, required=True, at_most=500)
    impedance_low_tertiary: Quantity | None = rating("Impedance low-tertiary", PERCENT, required=True, at_most=500)
    base_high_low: Quantity | None = rating("… on base, high-low", APPARENT_POWER, help="Rated power when not given.")
    base_high_tertiary: Quantity | None = rating(
        "… on base, high-tertiary", APPARENT_POWER, help="Rated power when not given."
    )
    base_low_tertiary: Quantity | None = rating(
        "… on base, low-tertiary", APPARENT_POWER, help="Rated power when not given."
    )
    x_over_r: Quantity | None = rating("X/R", NUMBER, default="30", at_most=500, help="Of each pair.")
    vector_group: VectorGroup | None = vector_group("Vector group", default="YNa0d11")
    tap: Quantity | None = rating("Tap, high side", PERCENT, above_zero=False, at_least=-30, at_most=30, default="0 %")
    neutral: Neutral | None = neutral("Common neutral", default="solid")
    zero_sequence_impedance: Quantity | None = rating(
        "Z0 in % of Z1",
        PERCENT,
        at_most=2000,
        default="100 %",
        group="Earthing",
        help="Of each star leg, with the neutral solidly earthed.",
    )


@dataclass(frozen=True, kw_only=True)
class EarthingTransformer(Part):
    """A zigzag or star/delta transformer that gives an unearthed network a neutral."""

    kind: ClassVar[str] = "earthing_transformer"
    label: ClassVar[str] = "Earthing transformer"
    letter: ClassVar[str] = "TE"
    terminals: ClassVar[tuple[Terminal, ...]] = (Terminal("line", 0, -3),)

    rated_voltage: Quantity | None = rating("Rated voltage", VOLTAGE, required=True)
    connection: str | None = choice("Connection", ("zigzag", "star-delta"), default="zigzag")
    zero_sequence_impedance: Quantity | None = rating(
        "Z0 per phase, or neutral current",
        EARTHING_IMPEDANCE,
        required=True,
        help="Z0 in ohm per phase, or neutral current in A with one line at earth: Z0 = √3·U/I, no resistor.",
    )
    rated_time: Quantity | None = rating("Rated time", TIME)
    x0_over_r0: Quantity | None = rating("X0/R0", NUMBER, default="10", at_most=500)
    neutral: Neutral | None = neutral(
        "Neutral to earth", default="solid", help="solid, resistor 400 A 10 s, reactor 5 ohm, isolated"
    )
