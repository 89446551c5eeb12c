"""A number with its unit, kept as it was typed.

``read_quantity("750 hp", SHAFT_POWER)`` keeps the text, so that files and prints show what the nameplate says, and
converts only when asked: ``.to("kW")``. Conversion factors are exact by definition (NIST SP 811) unless noted; the
tests compare them with a general units library.
"""

import math
import re
from dataclasses import dataclass
from functools import lru_cache

from onelinefault.errors import EntryError

_FOOT_M = 0.3048
_HP_W = 550 * _FOOT_M * 0.45359237 * 9.80665  # mechanical horsepower: 550 foot-pounds a second
_KCMIL_MM2 = math.pi / 4 * 0.0254**2 * 1000  # a circular mil is the area of a circle of 1/1000 inch diameter

# unit → (dimension, factor to the dimension's own unit)
_UNITS: dict[str, tuple[str, float]] = {
    "V": ("voltage", 1e-3),
    "kV": ("voltage", 1.0),
    "A": ("current", 1e-3),
    "kA": ("current", 1.0),
    "VA": ("apparent power", 1e-6),
    "kVA": ("apparent power", 1e-3),
    "MVA": ("apparent power", 1.0),
    "GVA": ("apparent power", 1e3),
    "W": ("active power", 1e-6),
    "kW": ("active power", 1e-3),
    "MW": ("active power", 1.0),
    "hp": ("active power", _HP_W * 1e-6),
    "PS": ("active power", 735.49875e-6),
    "var": ("reactive power", 1e-6),
    "kvar": ("reactive power", 1e-3),
    "Mvar": ("reactive power", 1.0),
    "ohm": ("impedance", 1.0),
    "mohm": ("impedance", 1e-3),
    "kohm": ("impedance", 1e3),
    "%": ("ratio", 0.01),
    "pu": ("ratio", 1.0),
    "mm": ("length", 1e-6),
    "cm": ("length", 1e-5),
    "m": ("length", 1e-3),
    "km": ("length", 1.0),
    "in": ("length", 0.0254e-3),
    "ft": ("length", _FOOT_M * 1e-3),
    "yd": ("length", 3 * _FOOT_M * 1e-3),
    "kft": ("length", _FOOT_M),
    "mi": ("length", 5.28 * _FOOT_M),
    "mm²": ("area", 1.0),
    "cmil": ("area", _KCMIL_MM2 / 1000),
    "kcmil": ("area", _KCMIL_MM2),
    "ohm/km": ("impedance per length", 1.0),
    "mohm/m": ("impedance per length", 1.0),
    "ohm/m": ("impedance per length", 1e3),
    "ohm/kft": ("impedance per length", 1 / _FOOT_M),
    "ohm/ft": ("impedance per length", 1000 / _FOOT_M),
    "ohm/mi": ("impedance per length", 1 / (5.28 * _FOOT_M)),
    "uF/km": ("capacitance per length", 1.0),
    "nF/km": ("capacitance per length", 1e-3),
    "uF/kft": ("capacitance per length", 1 / _FOOT_M),
    "°C": ("temperature", 1.0),
    "°F": ("temperature", 5 / 9),
    "K": ("temperature", 1.0),
    "°": ("angle", 1.0),
    "rad": ("angle", 180 / math.pi),
    "s": ("time", 1.0),
    "ms": ("time", 1e-3),
    "min": ("time", 60.0),
    "h": ("time", 3600.0),
    "Hz": ("frequency", 1.0),
    "ohm·m": ("resistivity", 1.0),
    "rpm": ("speed", 1.0),
    "": ("number", 1.0),
}
_TEMPERATURE_OFFSET_C = {"°C": 0.0, "°F": -160 / 9, "K": -273.15}

# other spellings of a unit, lower-cased where the case says nothing
_SPELLINGS = {
    "Ω": "ohm", "Ohm": "ohm", "ohms": "ohm", "Ohms": "ohm", "mΩ": "mohm", "kΩ": "kohm",
    "percent": "%", "p.u.": "pu", "per unit": "pu", "pu.": "pu",
    "mm2": "mm²", "mm^2": "mm²", "sqmm": "mm²", "qmm": "mm²", "MCM": "kcmil", "mcm": "kcmil",
    "Ω/km": "ohm/km", "mΩ/m": "mohm/m", "Ω/m": "ohm/m", "Ω/kft": "ohm/kft", "Ω/ft": "ohm/ft", "Ω/mi": "ohm/mi",
    "ohm/1000ft": "ohm/kft", "ohm/1000 ft": "ohm/kft", "Ω/1000ft": "ohm/kft", "Ω/1000 ft": "ohm/kft",
    "ohm/mile": "ohm/mi", "Ω/mile": "ohm/mi", "mile": "mi", "miles": "mi", "feet": "ft", "'": "ft", "′": "ft",
    "µF/km": "uF/km", "μF/km": "uF/km", "µF/kft": "uF/kft", "μF/kft": "uF/kft",
    "C": "°C", "degC": "°C", "deg C": "°C", "F": "°F", "degF": "°F", "deg": "°",
    "sec": "s", "seconds": "s", "r/min": "rpm", "1/min": "rpm", "min-1": "rpm",
    "ohm-m": "ohm·m", "ohm m": "ohm·m", "ohm.m": "ohm·m", "Ωm": "ohm·m", "Ω·m": "ohm·m", "Ω m": "ohm·m",
    "HP": "hp", "Hp": "hp", "bhp": "hp", "MVAr": "Mvar", "kVAr": "kvar", "MVAR": "Mvar", "kVAR": "kvar",
    "x": "pu", "×": "pu",
}  # fmt: skip
_SHOWN = {"ohm": "Ω", "mohm": "mΩ", "kohm": "kΩ", "ohm/km": "Ω/km", "mohm/m": "mΩ/m", "ohm/m": "Ω/m",
          "ohm/kft": "Ω/kft", "ohm/ft": "Ω/ft", "ohm/mi": "Ω/mi", "uF/km": "µF/km", "uF/kft": "µF/kft",
          "ohm·m": "Ω·m"}  # fmt: skip
# upper and lower case never decide between milli and mega: any spelling of these with the wrong one is refused
_MILLI_OR_MEGA = ("MVA", "MW", "Mvar", "mohm", "mohm/m")
_AMBIGUOUS = {"mω/km": "ohm/km", "mohm/km": "ohm/km"}  # no unit here, but easily taken for one


@dataclass(frozen=True)
class UnitKind:
    """What a field accepts: a name for messages, the dimensions allowed, and the unit a bare number takes."""

    name: str
    dimensions: tuple[str, ...]
    default_unit: str

    def units(self) -> tuple[str, ...]:
        """All units that this kind accepts, the default unit first."""
        rest = [u for u, (dim, _) in _UNITS.items() if dim in self.dimensions and u not in (self.default_unit, "")]
        return (self.default_unit, *rest)


VOLTAGE = UnitKind("voltage", ("voltage",), "kV")
CURRENT = UnitKind("current", ("current",), "A")
FAULT_CURRENT = UnitKind("fault current", ("current",), "kA")
APPARENT_POWER = UnitKind("apparent power", ("apparent power",), "MVA")
MACHINE_POWER = UnitKind("rated power", ("apparent power", "active power"), "MVA")
SHAFT_POWER = UnitKind("shaft power", ("active power",), "kW")
REACTIVE_POWER = UnitKind("reactive power", ("reactive power",), "Mvar")
LOSS = UnitKind("loss", ("active power", "ratio"), "kW")
FAULT_LEVEL = UnitKind("fault level", ("apparent power", "current", "impedance"), "MVA")
PERCENT = UnitKind("per cent or per unit", ("ratio",), "%")
PER_UNIT = UnitKind("per unit or per cent", ("ratio",), "pu")
IMPEDANCE = UnitKind("impedance", ("impedance",), "ohm")
REACTANCE = UnitKind("reactance", ("ratio", "impedance"), "%")
EARTHING_IMPEDANCE = UnitKind("impedance or current", ("impedance", "current"), "ohm")
LENGTH = UnitKind("length", ("length",), "m")
SMALL_LENGTH = UnitKind("length", ("length",), "mm")
AREA = UnitKind("cross-section", ("area",), "mm²")
IMPEDANCE_PER_LENGTH = UnitKind("impedance per length", ("impedance per length",), "ohm/km")
CAPACITANCE_PER_LENGTH = UnitKind("capacitance per length", ("capacitance per length",), "uF/km")
TEMPERATURE = UnitKind("temperature", ("temperature",), "°C")
ANGLE = UnitKind("angle", ("angle",), "°")
TIME = UnitKind("time", ("time",), "s")
FREQUENCY = UnitKind("frequency", ("frequency",), "Hz")
RESISTIVITY = UnitKind("resistivity", ("resistivity",), "ohm·m")
SPEED = UnitKind("speed", ("speed",), "rpm")
NUMBER = UnitKind("number", ("number",), "")


@dataclass(frozen=True, slots=True)
class Quantity:
    """A number with its unit, and the text it was read from.

    Two quantities are equal when their texts are: "500 ft" and "152.4 m" are the same length typed differently.
    """

    value: float
    unit: str
    text: str

    @property
    def dimension(self) -> str:
        """The dimension of the unit: "voltage", "current", "ratio", ..."""
        return _UNITS[self.unit][0]

    def to(self, unit: str) -> float:
        """The number in another unit of the same dimension.

        Raises EntryError when the dimensions differ, e.g. kA asked of a quantity in MVA.
        """
        dimension, factor = _UNITS[self.unit]
        wanted, other = _UNITS[unit]
        if dimension != wanted:
            raise EntryError(f"{self.text} is a {dimension}, not a {wanted}")
        if dimension == "temperature":
            return (self.value * factor + _TEMPERATURE_OFFSET_C[self.unit] - _TEMPERATURE_OFFSET_C[unit]) / other
        return self.value * (factor / other)


def quantity(value: float, unit: str) -> Quantity:
    """A quantity from a number and a unit, with the text made for it: ``quantity(33, "kV").text == "33 kV"``."""
    return Quantity(value, unit, f"{value:.12g} {show_unit(unit)}".strip())


def show_unit(unit: str) -> str:
    """The unit as printed: "Ω/km" for "ohm/km"."""
    return _SHOWN.get(unit, unit)


def read_unit(text: str) -> str | None:
    """The program's own symbol of a typed unit, or None when it is not known. Raises EntryError for "mva" and such."""
    text = text.strip()
    if text in _UNITS:
        return text
    if text in _SPELLINGS:
        return _SPELLINGS[text]
    folded = text.casefold()
    found = _FOLDED.get(folded)
    if found in _MILLI_OR_MEGA and text[0] != found[0]:
        raise EntryError(f"{text}: m is milli, M is mega; write {show_unit(found)} if that is meant")
    if folded in _AMBIGUOUS:
        raise EntryError(f"{text}: write {show_unit(_AMBIGUOUS[folded])}")
    return found


_FOLDED = {s.casefold(): _SPELLINGS.get(s, s) for s in (*_SPELLINGS, *_UNITS)}
_NUMBER = re.compile(r"[+-]?(?:\d(?:\d|[\s']+(?=\d))*(?:[.,][\d.,]*)?|[.,]\d+)(?:[eE][+-]?\d+)?")
_GROUPED = re.compile(r"[+-]?\d{1,3}(?:[\s']\d{3})+(?:[.,]\d*)?(?:[eE][+-]?\d+)?")


def read_number(text: str) -> float:
    """The number in a text; decimal point or comma, spaces between thousands.

    Raises EntryError when it is no number, or when a comma could mean thousands as well as decimals ("1,200").
    """
    plain = text.strip().replace("−", "-")
    if re.search(r"\d[\s']+\d", plain) and not _GROUPED.fullmatch(plain):
        raise EntryError(f"{text.strip()} cannot be read as one number")
    digits = re.sub(r"[\s']", "", plain)
    if "," in digits and "." in digits:
        thousands = "," if digits.rindex(",") < digits.rindex(".") else "."
        if not re.fullmatch(rf"[+-]?\d{{1,3}}(\{thousands}\d{{3}})+[.,]\d*(e[+-]?\d+)?", digits, re.I):
            raise EntryError(f"{text.strip()} cannot be read as a number")
        digits = digits.replace(thousands, "")
    elif re.fullmatch(r"[+-]?[1-9]\d{0,2}(,\d{3})+", digits):
        plain = digits.replace(",", "")
        raise EntryError(
            f"{text.strip()} can mean {plain} or {digits.replace(',', '.', 1)}: write it without the comma"
        )
    try:
        value = float(digits.replace(",", "."))
    except ValueError:
        raise EntryError(f"{text.strip() or 'nothing'} cannot be read as a number") from None
    if not math.isfinite(value):
        raise EntryError(f"{text.strip()} is too large")
    return value


@lru_cache(maxsize=8192)
def read_quantity(text: str, kind: UnitKind, default_unit: str | None = None) -> Quantity:
    """Read "500 ft", "0,12 pu", "25kA" or a bare number, which takes the default unit.

    Raises EntryError with a sentence that says what was expected, when the number or the unit cannot be read or the
    unit is of another dimension.
    """
    text = " ".join(text.split())
    match = _NUMBER.match(text.replace("−", "-"))
    if match is None:
        raise EntryError(f"{text or 'nothing'}: expected a number with a unit, for example {_example(kind)}")
    value = read_number(match.group())
    unit_text = text[match.end() :].strip()
    unit = read_unit(unit_text) if unit_text else (default_unit or kind.default_unit)
    if unit is None or _UNITS[unit][0] not in kind.dimensions:
        accepted = ", ".join(show_unit(u) for u in kind.units() if u) or "none"
        raise EntryError(f"{text}: {unit_text} is not a unit of {kind.name}; use {accepted}")
    shown = text if unit_text else f"{text} {show_unit(unit)}".strip()
    return Quantity(value, unit, shown)


def _example(kind: UnitKind) -> str:
    return f"10 {show_unit(kind.default_unit)}".strip()
