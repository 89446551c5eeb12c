"""Supplies and converters against Ohm's law and IEC 60909-0, 6.2 (with c = 1)."""

import math

import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.sequence_sources import converter_stamps, supply_stamps
from onelinefault.engine.sequence_stamps import PartLeftOutError, Setting
from onelinefault.model.sources import ConverterSource, Supply

BASE_MVA = 100.0


def supply(**ratings: str) -> Supply:
    part = Supply(id="p1", name="Grid").with_text("nominal_voltage", "33 kV")
    for name, text in ratings.items():
        part = part.with_text(name, text)
    return part


def z_ohm(part: Supply, level: str = "max", node_kv: float = 33.0) -> tuple[complex, complex, complex | None]:
    y = supply_stamps(part, node_kv, Setting(BASE_MVA, 50.0, Case(level=level))).shunts[0].y
    base = node_kv**2 / BASE_MVA
    return base / y[0], base / y[1], base / y[2] if y[2] else None


@pytest.mark.parametrize("level", ["750 MVA", f"{750 / (math.sqrt(3) * 33)!r} kA", f"{33**2 / 750!r} ohm"])
def test_positive_sequence_from_every_form_of_fault_level(level: str) -> None:
    # Z = U²/S = 1.452 ohm; X/R = 10: X = 0.99504 Z (IEC 60909-0, 6.2)
    z1, z2, _ = z_ohm(supply(fault_level_max=level, x0_over_x1="1"))
    assert z1 == z2 == pytest.approx(complex(0.14448, 1.44479), abs=1e-5)


def test_impedance_belongs_to_the_own_voltage_not_the_nodes() -> None:
    z1, _, _ = z_ohm(supply(fault_level_max="750 MVA", x0_over_x1="1"), node_kv=34.5)
    assert abs(z1) == pytest.approx(33**2 / 750)


def test_smallest_level_is_used_when_asked_for() -> None:
    part = supply(fault_level_max="750 MVA", fault_level_min="500 MVA", x0_over_x1="1")
    assert abs(z_ohm(part, "min")[0]) == pytest.approx(33**2 / 500)
    assert abs(z_ohm(supply(fault_level_max="750 MVA", x0_over_x1="1"), "min")[0]) == pytest.approx(33**2 / 750)


def test_zero_sequence_from_ratios() -> None:
    # R0 belongs to X0, not to R1 (IEC 60909-0, 6.2)
    z1, _, z0 = z_ohm(supply(fault_level_max="750 MVA", x0_over_x1="2.5", r0_over_x0="0.2"))
    assert z0 == pytest.approx(complex(0.5, 2.5) * z1.imag)


@pytest.mark.parametrize("rho", ["0", "0.1", "3"])
@pytest.mark.parametrize("ka", [0.2, 5.0, 13.0, 19.0])
def test_earth_fault_level_gives_back_its_current(ka: float, rho: str) -> None:
    # law of the line-to-earth fault: I = 3 U/√3 / |2 Z1 + Z0|
    z1, _, z0 = z_ohm(supply(fault_level_max="750 MVA", earth_fault_level_max=f"{ka} kA", r0_over_x0=rho))
    assert z0 is not None
    assert 3 * 33 / math.sqrt(3) / abs(2 * z1 + z0) == pytest.approx(ka, rel=1e-12)
    assert z0.real == pytest.approx(float(rho) * z0.imag)


def test_earth_fault_level_as_power() -> None:
    one = z_ohm(supply(fault_level_max="750 MVA", earth_fault_level_max="300 MVA"))
    other = z_ohm(supply(fault_level_max="750 MVA", earth_fault_level_max=f"{300 / (math.sqrt(3) * 33)!r} kA"))
    assert one[2] == pytest.approx(other[2])


def test_weak_state_keeps_the_strong_states_ratio_without_its_own_earth_fault_level() -> None:
    part = supply(fault_level_max="750 MVA", fault_level_min="500 MVA", earth_fault_level_max="5 kA")
    strong, weak = z_ohm(part), z_ohm(part, "min")
    assert strong[2] is not None and weak[2] is not None
    assert weak[2] / weak[0] == pytest.approx(strong[2] / strong[0])


def test_weak_states_own_earth_fault_level() -> None:
    part = supply(
        fault_level_max="750 MVA", fault_level_min="500 MVA", earth_fault_level_max="9 kA", earth_fault_level_min="4 kA"
    )
    z1, _, z0 = z_ohm(part, "min")
    assert z0 is not None
    assert 3 * 33 / math.sqrt(3) / abs(2 * z1 + z0) == pytest.approx(4.0)


def test_impossible_earth_fault_level_is_named_and_the_ratio_used() -> None:
    # the limit Z0 → 0 is 1.5 times the three-phase current of 13.12 kA
    part = supply(fault_level_max="750 MVA", earth_fault_level_max="20 kA", x0_over_x1="2")
    stamps = supply_stamps(part, 33.0, Setting(BASE_MVA, 50.0, Case()))
    assert [(f.code, f.severity, f.parts) for f in stamps.findings] == [("earth-fault-level", "error", ("p1",))]
    assert "Grid" in stamps.findings[0].message and "19.68" in stamps.findings[0].message
    z1, _, z0 = z_ohm(part)
    assert z0 is not None and z0.imag == pytest.approx(2 * z1.imag)


def test_isolated_network_has_no_zero_sequence() -> None:
    assert z_ohm(supply(fault_level_max="750 MVA", star_point="isolated", earth_fault_level_max="5 kA"))[2] is None


def test_missing_zero_sequence_is_assumed_and_said() -> None:
    stamps = supply_stamps(supply(fault_level_max="750 MVA"), 33.0, Setting(BASE_MVA, 50.0, Case()))
    assert [(f.code, f.field) for f in stamps.findings] == [("zero-sequence-assumed", "x0_over_x1")]
    assert stamps.shunts[0].y[2].imag == pytest.approx(stamps.shunts[0].y[0].imag, rel=1e-3)


def test_missing_fault_level_leaves_the_supply_out_by_name() -> None:
    with pytest.raises(PartLeftOutError, match=r"supply Grid.*Fault level, largest") as caught:
        supply_stamps(supply(), 33.0, Setting(BASE_MVA, 50.0, Case()))
    assert caught.value.finding.field == "fault_level_max"


def test_converter_limit_in_amperes() -> None:
    # 2 MVA at 0.69 kV: 1.6735 kA rated, 1.2 times is 2.0082 kA; base 100 MVA at 0.66 kV: 87.48 kA
    part = ConverterSource(id="p1").with_text("rated_power", "2 MVA").with_text("rated_voltage", "0.69 kV")
    stamps = converter_stamps(part, 0.66, Setting(BASE_MVA, 50.0, Case()))
    assert stamps.converters[0].limit_pu * 100 / (math.sqrt(3) * 0.66) == pytest.approx(2.0082, abs=1e-4)
    assert stamps.converters[0].angle_deg == 90 and not stamps.shunts
