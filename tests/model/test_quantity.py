"""Numbers with units. Authority for every conversion factor: the general units library pint."""

import math
import string

import pint
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.errors import EntryError
from onelinefault.model import quantity as q

# our unit → the same unit in pint's words
PINT = {
    "V": "volt", "kV": "kilovolt", "A": "ampere", "kA": "kiloampere",
    "VA": "volt*ampere", "kVA": "kilovolt*ampere", "MVA": "megavolt*ampere", "GVA": "gigavolt*ampere",
    "W": "watt", "kW": "kilowatt", "MW": "megawatt", "hp": "horsepower", "PS": "metric_horsepower",
    "var": "volt*ampere", "kvar": "kilovolt*ampere", "Mvar": "megavolt*ampere",
    "ohm": "ohm", "mohm": "milliohm", "kohm": "kiloohm", "%": "percent", "pu": "dimensionless",
    "mm": "millimeter", "cm": "centimeter", "m": "meter", "km": "kilometer", "in": "inch", "ft": "foot", "yd": "yard",
    "kft": "1000*foot", "mi": "mile", "mm²": "millimeter**2", "cmil": "circular_mil", "kcmil": "1000*circular_mil",
    "ohm/km": "ohm/kilometer", "mohm/m": "milliohm/meter", "ohm/m": "ohm/meter", "ohm/kft": "ohm/(1000*foot)",
    "ohm/ft": "ohm/foot", "ohm/mi": "ohm/mile", "uF/km": "microfarad/kilometer", "nF/km": "nanofarad/kilometer",
    "uF/kft": "microfarad/(1000*foot)", "°C": "degC", "°F": "degF", "K": "kelvin", "°": "degree", "rad": "radian",
    "s": "second", "ms": "millisecond", "min": "minute", "h": "hour", "Hz": "hertz", "ohm·m": "ohm*meter",
    "rpm": "rpm", "": "dimensionless",
}  # fmt: skip
KINDS = [kind for kind in vars(q).values() if isinstance(kind, q.UnitKind)]
# "1.0e5 kVA" and such: a number as people type it, and its value
NUMBERS = st.builds(lambda n, d: round(n / 10**d, d), st.integers(0, 10**7), st.integers(0, 5))


@pytest.fixture(scope="module")
def units() -> pint.UnitRegistry:
    return pint.UnitRegistry(autoconvert_offset_to_baseunit=True)


def test_every_unit_is_compared_with_the_library() -> None:
    assert set(PINT) == set(q._UNITS)


TEMPERATURES = ("°C", "°F", "K")


@pytest.mark.parametrize("unit", sorted(set(PINT) - set(TEMPERATURES)))
@pytest.mark.parametrize("value", [0.37, 12.5])
def test_conversions_agree_with_the_units_library(units: pint.UnitRegistry, unit: str, value: float) -> None:
    ours = value * units.parse_expression(PINT[unit])
    for other in (u for u, (d, _) in q._UNITS.items() if d == q._UNITS[unit][0]):
        expected = (ours / units.parse_expression(PINT[other])).to("").magnitude
        assert q.Quantity(value, unit, "").to(other) == pytest.approx(float(expected), rel=1e-12), other


@pytest.mark.parametrize("unit", TEMPERATURES)
@pytest.mark.parametrize("other", TEMPERATURES)
def test_temperatures_agree_with_the_units_library(units: pint.UnitRegistry, unit: str, other: str) -> None:
    expected = units.Quantity(76.5, PINT[unit]).to(PINT[other]).magnitude
    assert q.Quantity(76.5, unit, "").to(other) == pytest.approx(float(expected), rel=1e-12)


@given(number=NUMBERS, unit=st.sampled_from(sorted(PINT)))
@settings(max_examples=80)
def test_a_quantity_reads_back_from_its_text(number: float, unit: str) -> None:
    kind = next(k for k in KINDS if q._UNITS[unit][0] in k.dimensions)
    made = q.quantity(number, unit)
    read = q.read_quantity(made.text, kind, unit)
    assert (read.value, read.unit) == (number, unit)
    assert q.read_quantity(read.text, kind) == read  # what the file stores gives the same value, whatever the default


@given(number=NUMBERS, kind=st.sampled_from(KINDS))
@settings(max_examples=60)
def test_a_bare_number_takes_the_default_unit_and_keeps_it_in_its_text(number: float, kind: q.UnitKind) -> None:
    read = q.read_quantity(f"{number:.12g}", kind)
    assert read.unit == kind.default_unit
    for other in kind.units():
        assert q.read_quantity(read.text, kind, other) == read


@given(st.text(alphabet=string.digits + string.ascii_letters + " .,%-+'/Ω²°·µ″", max_size=12), st.sampled_from(KINDS))
@settings(max_examples=300)
def test_whatever_is_typed_gives_a_quantity_or_a_sentence(text: str, kind: q.UnitKind) -> None:
    try:
        read = q.read_quantity(text, kind)
    except EntryError as error:
        assert str(error)
    else:
        assert math.isfinite(read.value) and read.dimension in kind.dimensions


@pytest.mark.parametrize(
    ("text", "kind", "value", "unit"),
    [
        ("0,12 pu", q.PERCENT, 0.12, "pu"),
        ("25kA", q.FAULT_LEVEL, 25, "kA"),
        ("1 234.5 kVA", q.APPARENT_POWER, 1234.5, "kVA"),
        ("1'250 kVA", q.APPARENT_POWER, 1250, "kVA"),
        ("1.234,5 kVA", q.APPARENT_POWER, 1234.5, "kVA"),
        ("1,234.5 kVA", q.APPARENT_POWER, 1234.5, "kVA"),
        ("750 HP", q.SHAFT_POWER, 750, "hp"),
        ("500 '", q.LENGTH, 500, "ft"),
        ("500'", q.LENGTH, 500, "ft"),
        ("0.05 ohm/1000 ft", q.IMPEDANCE_PER_LENGTH, 0.05, "ohm/kft"),
        ("−2.5", q.PERCENT, -2.5, "%"),
        ("1e3 kV", q.VOLTAGE, 1000, "kV"),
        ("350 MCM", q.AREA, 350, "kcmil"),
        ("11 KV", q.VOLTAGE, 11, "kV"),
        ("75 degF", q.TEMPERATURE, 75, "°F"),
        (".5 s", q.TIME, 0.5, "s"),
        ("12,5", q.TIME, 12.5, "s"),
    ],
)
def test_what_people_type(text: str, kind: q.UnitKind, value: float, unit: str) -> None:
    read = q.read_quantity(text, kind)
    assert (read.value, read.unit) == (value, unit)


@pytest.mark.parametrize(
    ("text", "kind", "says"),
    [
        ("1,200 kVA", q.APPARENT_POWER, "without the comma"),  # 1200 or 1.2?
        ("10 12 kV", q.VOLTAGE, "one number"),
        ("5 mva", q.APPARENT_POWER, "M is mega"),
        ("5 mVA", q.APPARENT_POWER, "M is mega"),
        ("5 mW", q.MACHINE_POWER, "M is mega"),
        ("5 MOHM", q.IMPEDANCE, "M is mega"),
        ("5 MΩ", q.IMPEDANCE, "M is mega"),
        ("5 MΩ/m", q.IMPEDANCE_PER_LENGTH, "M is mega"),
        ("80 mΩ/km", q.IMPEDANCE_PER_LENGTH, "write Ω/km"),
        ("5 kV", q.CURRENT, "A, kA"),
        ("twelve", q.VOLTAGE, "for example 10 kV"),
        ("", q.VOLTAGE, "for example 10 kV"),
        ("1.2.3 kV", q.VOLTAGE, "number"),
        ("1e400 kV", q.VOLTAGE, "too large"),
    ],
)
def test_what_is_refused_says_why(text: str, kind: q.UnitKind, says: str) -> None:
    with pytest.raises(EntryError, match=says):
        q.read_quantity(text, kind)


def test_another_dimension_is_refused() -> None:
    with pytest.raises(EntryError, match="apparent power, not a current"):
        q.read_quantity("900 MVA", q.FAULT_LEVEL).to("kA")


def test_equality_is_of_texts() -> None:
    assert q.read_quantity("500 ft", q.LENGTH) != q.read_quantity("152.4 m", q.LENGTH)
    assert q.read_quantity("500  ft", q.LENGTH) == q.read_quantity("500 ft", q.LENGTH)


@pytest.mark.parametrize("unit", [u for u in q._UNITS if u])
def test_a_unit_is_read_back_as_printed(unit: str) -> None:
    assert q.read_unit(q.show_unit(unit)) == unit
    assert q.read_unit(unit) == unit


def test_spellings_lead_to_known_units() -> None:
    assert set(q._SPELLINGS.values()) <= set(q._UNITS)
