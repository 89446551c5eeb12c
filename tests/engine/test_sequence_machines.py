"""Rotating machines against their definitions and IEC 60909-0, 6.6 and 6.10 (without correction factors)."""

import math

import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.sequence_machines import (
    induction_mva,
    induction_stamps,
    induction_x_over_r,
    pole_pairs,
    synchronous_mva,
    synchronous_stamps,
)
from onelinefault.engine.sequence_stamps import PartLeftOutError, Setting, Stamps
from onelinefault.model.part import Part
from onelinefault.model.sources import InductionMotor, SynchronousGenerator, SynchronousMotor

KV, BASE = 11.0, 11.0**2 / 100


def made(part_class: type[Part], **ratings: str) -> Part:
    part: Part = part_class(id="p1", name="M1")
    for name, text in ({"rated_voltage": "11 kV"} | ratings).items():
        part = part.with_text(name, text)
    return part


def generator(**ratings: str) -> SynchronousGenerator:
    part = made(SynchronousGenerator, **({"rated_power": "20 MVA", "subtransient_reactance": "15 %"} | ratings))
    assert isinstance(part, SynchronousGenerator)
    return part


def motor(**ratings: str) -> InductionMotor:
    part = made(InductionMotor, **({"rated_power": "2000 kW", "efficiency": "95 %", "power_factor": "0.9"} | ratings))
    assert isinstance(part, InductionMotor)
    return part


def z_ohm(stamps: Stamps) -> tuple[complex, complex, complex | None]:
    y = stamps.shunts[0].y
    return BASE / y[0], BASE / y[1], BASE / y[2] if y[2] else None


def machine(part: SynchronousGenerator, moment: str = "subtransient", hz: float = 50.0) -> Stamps:
    return synchronous_stamps(part, KV, Setting(100.0, hz, Case(moment=moment)))


def test_generator_reactances_on_its_own_rating() -> None:
    # own base 11²/20 = 6.05 ohm; X″d 15 % = 0.9075 ohm, R = X″d/20; X2 = X″d when not given; star isolated
    z1, z2, z0 = z_ohm(machine(generator(x_over_r="20")))
    assert z1 == z2 == pytest.approx(complex(0.045375, 0.9075))
    assert z0 is None


@pytest.mark.parametrize(
    ("moment", "x_ohm"), [("subtransient", 0.15 * 6.05), ("transient", 0.25 * 6.05), ("steady", 1.8 * 6.05)]
)
def test_generator_reactance_of_the_moment(moment: str, x_ohm: float) -> None:
    part = generator(transient_reactance="25 %", synchronous_reactance="1.8 pu", negative_sequence_reactance="18 %")
    z1, z2, _ = z_ohm(machine(part, moment))
    assert z1.imag == pytest.approx(x_ohm)
    assert z2.imag == pytest.approx(0.18 * 6.05)


def test_reactance_in_ohm() -> None:
    assert z_ohm(machine(generator(subtransient_reactance="0.8 ohm")))[0].imag == pytest.approx(0.8)


@pytest.mark.parametrize("hz", [50.0, 60.0])
def test_resistance_from_the_armature_time_constant(hz: float) -> None:
    # definition: Ta = X2/(2πf R)
    part = generator(armature_time_constant="150 ms", negative_sequence_reactance="18 %")
    assert z_ohm(machine(part, hz=hz))[0].real == pytest.approx(0.18 * 6.05 / (2 * math.pi * hz * 0.150))


def test_resistance_as_given_comes_first() -> None:
    part = generator(resistance="0.4 %", armature_time_constant="150 ms", x_over_r="30")
    assert z_ohm(machine(part))[0].real == pytest.approx(0.004 * 6.05)


def test_earthed_star_point() -> None:
    part = generator(zero_sequence_reactance="6 %", neutral="resistor 20 ohm", x_over_r="15")
    stamps = machine(part)
    assert z_ohm(stamps)[2] == pytest.approx(complex(0.9075 / 15 + 60, 0.06 * 6.05))
    assert [(s.side, s.element) for s in stamps.star_points] == [("line", "shunt")]


def test_resistor_in_amperes_at_the_machines_voltage() -> None:
    # 10 A at 11/√3 kV: 635.1 ohm
    z0 = z_ohm(machine(generator(neutral="resistor 10 A")))[2]
    assert z0 is not None and z0.real == pytest.approx(3 * 635.085 + 0.045375, abs=1e-3)


def test_delta_winding_has_no_zero_sequence() -> None:
    stamps = machine(generator(connection="delta", neutral="solid"))
    assert stamps.shunts[0].y[2] == 0 and not stamps.star_points


def test_apparent_power() -> None:
    shaft = made(SynchronousMotor, rated_power="3 MW", efficiency="96 %", power_factor="0.8")
    assert isinstance(shaft, SynchronousMotor)
    assert synchronous_mva(shaft) == pytest.approx(3 / 0.96 / 0.8)
    assert synchronous_mva(generator(rated_power="16 MW", power_factor="0.8")) == pytest.approx(20.0)
    assert synchronous_mva(generator()) == pytest.approx(20.0)


def test_missing_reactance_of_the_moment_is_taken_as_subtransient_and_said() -> None:
    stamps = machine(generator(), "transient")
    assert z_ohm(stamps)[0].imag == pytest.approx(0.15 * 6.05)
    assert [(f.code, f.field) for f in stamps.findings] == [("reactance-assumed", "transient_reactance")]
    assert "M1" in stamps.findings[0].message and "X′d" in stamps.findings[0].message


def test_missing_power_leaves_the_machine_out_by_name() -> None:
    with pytest.raises(PartLeftOutError, match=r"generator M1.*Rated power"):
        machine(generator(rated_power=""))


def induction(part: InductionMotor, moment: str = "subtransient") -> Stamps:
    return induction_stamps(part, KV, Setting(100.0, 50.0, Case(moment=moment)))


def test_induction_motor_by_locked_rotor_current() -> None:
    # S = 2/(0.95·0.9) = 2.33918 MVA; Z = 11²/2.33918/6 = 8.6213 ohm (IEC 60909-0, 6.10)
    assert induction_mva(motor()) == pytest.approx(2.33918, abs=1e-5)
    z1, z2, z0 = z_ohm(induction(motor(locked_rotor_ratio="6", x_over_r="8")))
    assert z1 == z2 and abs(z1) == pytest.approx(8.6213, abs=1e-4) and z1.imag / z1.real == pytest.approx(8)
    assert z0 is None


def test_a_group_is_so_many_motors_running() -> None:
    one = z_ohm(induction(motor()))[0]
    assert z_ohm(induction(motor(count="5", running_share="60 %")))[0] == pytest.approx(one / 3)
    assert induction(motor(count="5", running_share="0 %")) == Stamps()


def test_induction_motor_feeds_nothing_in_the_steady_state() -> None:
    assert induction(motor(), "steady") == Stamps()
    assert induction(motor(), "transient").shunts


@pytest.mark.parametrize(
    ("ratings", "r_over_x"),
    [
        ({"rated_power": "2000 kW", "poles": "4"}, 0.10),
        ({"rated_power": "2000 kW", "poles": "6"}, 0.15),
        ({"rated_power": "2000 kW", "rated_speed": "990 rpm"}, 0.15),
        ({"rated_power": "2000 kW", "rated_speed": "1485 rpm"}, 0.10),
        ({"rated_power": "200 kW", "rated_voltage": "400 V"}, 0.42),
        ({"rated_power": "200 kW", "rated_voltage": "690 V", "x_over_r": "5"}, 0.2),
    ],
)
def test_typical_x_over_r(ratings: dict[str, str], r_over_x: float) -> None:
    # IEC 60909-0, 6.10
    assert induction_x_over_r(motor(**ratings), 50.0) == pytest.approx(1 / r_over_x)


@pytest.mark.parametrize(
    ("rpm", "hz", "pairs"), [(2975, 50, 1), (1500, 50, 2), (1480, 50, 2), (890, 60, 4), (595, 60, 6), (9000, 50, 1)]
)
def test_pole_pairs_from_speed(rpm: int, hz: float, pairs: int) -> None:
    assert pole_pairs(motor(rated_speed=f"{rpm} rpm"), hz) == pairs


def test_star_earthed_motor() -> None:
    stamps = induction(motor(connection="star", neutral="resistor 4 ohm", zero_sequence_reactance="10 %", count="2"))
    z1, _, z0 = z_ohm(stamps)
    # each motor with its own star point and resistor
    assert z0 == pytest.approx(complex(z1.real + 12 / 2, 0.10 * 121 / 2.339181 / 2), rel=1e-6)
    assert not stamps.findings and len(stamps.star_points) == 1


def test_star_earthed_motor_without_zero_sequence_data_says_what_is_taken() -> None:
    stamps = induction(motor(connection="star", neutral="solid"))
    assert stamps.shunts[0].y[2] == pytest.approx(stamps.shunts[0].y[0])
    assert [f.code for f in stamps.findings] == ["zero-sequence-assumed"]
