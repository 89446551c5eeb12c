"""Cables, lines, busways and reactors against R·l, ωC·l and the temperature law of IEC 60949."""

import math
from typing import TypeVar

import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.line_constants import sequence_impedances_ohm_per_km
from onelinefault.engine.sequence_conductors import line_stamps, parallel_count, reactor_stamps, temperature_factor
from onelinefault.engine.sequence_stamps import BranchStamp, PartLeftOutError, Setting
from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor

P = TypeVar("P", Cable, OverheadLine, Busway, Reactor)
KV, BASE = 11.0, 11.0**2 / 100
PER_LENGTH = {
    "length": "500 m", "r_per_length": "0.125 ohm/km", "x_per_length": "0.09 ohm/km", "r0_per_length": "0.6 ohm/km",
    "x0_per_length": "0.3 ohm/km",
}  # fmt: skip


def made(part_class: type[P], **ratings: str) -> P:
    part = part_class(id="p1", name="W1")
    for name, text in ratings.items():
        part = part.with_text(name, text)
    return part


def branch(part: Cable | OverheadLine | Busway, hz: float = 50.0, **case: object) -> BranchStamp:
    return line_stamps(part, KV, KV, Setting(100.0, hz, Case(**case))).branches[0]  # type: ignore[arg-type]


def test_length_times_impedance() -> None:
    y = branch(made(Cable, **PER_LENGTH)).y
    assert BASE / y[0] == BASE / y[1] == pytest.approx(complex(0.0625, 0.045))
    assert BASE / y[2] == pytest.approx(complex(0.3, 0.15))


@pytest.mark.parametrize(
    ("ratings", "sets"),
    [({}, 1), ({"parallel": "3"}, 3), ({"size": "2x240 mm²"}, 2), ({"size": "2x240 mm²", "parallel": "2"}, 2)],
)
def test_equal_cables_side_by_side(ratings: dict[str, str], sets: int) -> None:
    # the count says what the size does not; "2x" in the size is the number itself
    part = made(Cable, **PER_LENGTH, **ratings)
    assert parallel_count(part) == sets
    assert BASE / branch(part).y[2] == pytest.approx(complex(0.3, 0.15) / sets)


@pytest.mark.parametrize(
    ("material", "given", "level", "factor"),
    [
        ("copper", "20 °C", "max", 1.0),
        ("copper", "20 °C", "min", 324.5 / 254.5),
        ("copper", "75 °C", "max", 254.5 / 309.5),
        ("aluminium", "20 °C", "min", 318 / 248),
    ],
)
def test_resistance_at_temperature(material: str, given: str, level: str, factor: float) -> None:
    # R2 = R1 (b + T2)/(b + T1), b = 234.5 copper, 228 aluminium (IEC 60949); hot is 90 °C
    part = made(Cable, **PER_LENGTH, material=material, r_temperature=given, hot_temperature="90 °C")
    assert temperature_factor(part, level) == pytest.approx(factor)
    y = branch(part, level=level).y
    assert BASE / y[0] == pytest.approx(complex(0.0625 * factor, 0.045))
    assert BASE / y[2] == pytest.approx(complex(0.3 * factor, 0.15))


def test_charging_is_half_at_each_end() -> None:
    # 0.3 µF/km · 0.5 km · 2 cables at 60 Hz: ωC = 113.1 µS in all
    part = made(Cable, **PER_LENGTH, capacitance="0.3 uF/km", zero_sequence_capacitance="0.2 uF/km", parallel="2")
    found = branch(part, 60.0, charging=True)
    half = 0.5j * 2 * math.pi * 60 * 0.3e-6
    assert found.y_a == found.y_b == pytest.approx((half * BASE, half * BASE, half * BASE * 2 / 3))
    assert branch(part).y_a == (0, 0, 0)


def test_zero_sequence_capacitance_is_the_phases_when_not_given() -> None:
    found = branch(made(Cable, **PER_LENGTH, capacitance="0.3 uF/km"), charging=True)
    assert found.y_a[2] == found.y_a[0] != 0


def test_charging_without_a_capacitance_is_remarked() -> None:
    stamps = line_stamps(made(Cable, **PER_LENGTH), KV, KV, Setting(100.0, 50.0, Case(charging=True)))
    assert [f.code for f in stamps.findings] == ["no-capacitance"]
    assert stamps.branches[0].y_a == (0, 0, 0)


def test_missing_zero_sequence_is_assumed_and_said() -> None:
    part = made(Busway, length="100 ft", r_per_length="0.03 mohm/m", x_per_length="0.02 mohm/m")
    stamps = line_stamps(part, KV, KV, Setting(100.0, 50.0, Case()))
    assert [(f.code, f.field) for f in stamps.findings] == [("zero-sequence-assumed", "r0_per_length")]
    assert BASE / stamps.branches[0].y[0] == pytest.approx(complex(0.03, 0.02) * 0.03048)
    assert stamps.branches[0].y[0] / stamps.branches[0].y[2] == pytest.approx(3.5)


def test_line_from_geometry() -> None:
    # the line constants have tests of their own; here: heated conductor, length, two circuits
    line = made(
        OverheadLine, length="4 mi", geometry="a 0 29; b 2.5 29; c 7 29; n 4 25; ft", parallel="2",
        conductor_resistance="0.306 ohm/mi", conductor_gmr="0.0244 ft", neutral_resistance="0.592 ohm/mi",
        neutral_gmr="0.00814 ft", r_temperature="50 °C",
    )  # fmt: skip
    assert line.geometry is not None
    heat, mile = 248 / 278, 1.609344
    wanted = sequence_impedances_ohm_per_km(
        line.geometry, 0.306 / mile * heat, 0.0244 * 0.3048, 0.592 / mile * heat, 0.00814 * 0.3048, 60.0, 100.0
    )
    y = branch(line, 60.0).y
    assert (BASE / y[0], BASE / y[2]) == pytest.approx([z * 4 * mile / 2 for z in wanted])


def test_earth_wire_without_data_is_named() -> None:
    line = made(
        OverheadLine, length="4 km", geometry="a 0 9; b 1 9; c 2 9; n 1 12", conductor_resistance="0.2 ohm/km",
        conductor_gmr="7 mm",
    )  # fmt: skip
    with pytest.raises(PartLeftOutError, match=r"overhead line W1.*earth wire"):
        branch(line)


def test_zero_impedance_is_refused_by_name() -> None:
    part = made(Cable, **(PER_LENGTH | {"r_per_length": "0", "x_per_length": "0"}))
    with pytest.raises(PartLeftOutError, match=r"cable W1.*impedance is zero"):
        branch(part)


def test_different_nominal_voltages_keep_the_volts() -> None:
    # a conductor joins volts, not per unit: 1 pu of 11 kV is 11/10 pu of 10 kV
    found = line_stamps(made(Cable, **PER_LENGTH), 11.0, 10.0, Setting(100.0, 50.0, Case())).branches[0]
    assert 1.0 / found.ratio[0] == pytest.approx(11 / 10)
    assert 10**2 / 100 / found.y[0] == pytest.approx(complex(0.0625, 0.045))


def reactor(**ratings: str) -> tuple[complex, complex]:
    y = reactor_stamps(made(Reactor, **ratings), KV, KV, Setting(100.0, 50.0, Case())).branches[0].y
    return BASE / y[0], BASE / y[2]


def test_reactor_in_ohm_and_in_per_cent() -> None:
    # 6 % of 11/(√3·0.4) = 0.9526 ohm (IEC 60909-0, 6.5)
    assert reactor(reactance="0.5 ohm", x_over_r="50")[0] == pytest.approx(complex(0.01, 0.5))
    assert reactor(reactance="6 %", rated_current="400 A", x_over_r="100")[0].imag == pytest.approx(0.95263, abs=1e-5)
    at_ten = reactor(reactance="6 %", rated_current="400 A", rated_voltage="10 kV")[0]
    assert at_ten.imag == pytest.approx(0.95263 * 10 / 11, abs=1e-5)


def test_reactors_zero_sequence() -> None:
    z1, z0 = reactor(reactance="0.5 ohm", x_over_r="50")
    assert z0 == z1
    assert reactor(reactance="0.5 ohm", x_over_r="50", zero_sequence_reactance="0.8 ohm")[1] == pytest.approx(
        complex(0.01, 0.8)
    )


def test_reactor_in_per_cent_needs_its_current() -> None:
    with pytest.raises(PartLeftOutError, match=r"reactor W1.*Rated current"):
        reactor(reactance="6 %")
