"""The policy of IEC 60909: what is in the network, which factors, which view. Clauses of the 2016 edition."""

import math

import numpy as np
import pytest

from onelinefault.engine.case import WHOLE, Case, View
from onelinefault.engine.iec60909 import Iec60909
from onelinefault.engine.iec60909_figures import IecFigures
from onelinefault.engine.study import Study
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.oracle.sketch import Sketch, TerminalKey

SQRT3 = math.sqrt(3)


def study(sketch: Sketch, **case: str | float | bool) -> Study:
    return Study(sketch.plant, Case(method="iec60909", **case))  # type: ignore[arg-type]


def ik(sketch: Sketch, bus: TerminalKey, kind: FaultKind = FaultKind.THREE_PHASE, **case: str | float | bool) -> float:
    return study(sketch, **case).fault(Fault(Place(*bus), kind)).ik_ka


def figures(
    sketch: Sketch, bus: TerminalKey, kind: FaultKind = FaultKind.THREE_PHASE, **case: str | float | bool
) -> IecFigures:
    found = study(sketch, **case).fault(Fault(Place(*bus), kind)).figures
    assert isinstance(found, IecFigures)
    return found


def fed(kv: float = 10.0, level: str = "10 kA") -> tuple[Sketch, TerminalKey]:
    """A bus on a feeder."""
    s = Sketch(frequency="50 Hz")
    bus = s.bus(kv)
    s.hang("supply", bus, nominal_voltage=f"{kv} kV", fault_level_max=level, x_over_r="10", x0_over_x1="1")
    return s, bus


# ----------------------------------------------------------------------------------------------------- voltage factors


@pytest.mark.parametrize(("level", "factor"), [("max", 1.1), ("min", 1.0)])
def test_a_feeder_gives_its_own_current_back_whatever_c(level: str, factor: float) -> None:
    # c in ZQ and c at the fault cancel (6.2)
    s, bus = fed()
    s.parts = {key: p.with_text("fault_level_min", "10 kA") if p.kind == "supply" else p for key, p in s.parts.items()}
    assert ik(s, bus, level=level) == pytest.approx(10.0, rel=1e-12)
    assert figures(s, bus, level=level).c == factor
    z = study(s, level=level).fault(Fault(Place(*bus))).z_ohm[0]
    assert abs(z or 0) == pytest.approx(factor * 10 / (SQRT3 * 10), rel=1e-12)


def test_a_feeder_without_smallest_level_keeps_its_impedance() -> None:
    s, bus = fed()
    assert (ik(s, bus, level="max"), ik(s, bus, level="min")) == (pytest.approx(10), pytest.approx(10 / 1.1))


@pytest.mark.parametrize(
    ("tolerance", "level", "c"), [(6, "max", 1.05), (10, "max", 1.1), (6, "min", 0.95), (10, "min", 0.9)]
)
def test_the_low_voltage_tolerance_decides_c_up_to_1_kv(tolerance: float, level: str, c: float) -> None:
    s, bus = fed(0.69, "0.02 ohm")  # an impedance is no fault level: c is at the fault only
    assert ik(s, bus, level=level, lv_tolerance_percent=tolerance) == pytest.approx(c * 0.69 / SQRT3 / 0.02, rel=1e-12)


def test_the_plant_s_voltage_before_the_fault_and_the_case_s_do_not_count() -> None:
    s, bus = fed()
    s.document = Sketch(frequency="50 Hz", prefault_voltage="1.04 pu").document
    assert ik(s, bus, prefault="no-load") == pytest.approx(10.0, rel=1e-12)


def test_taps_and_charging_do_not_count() -> None:
    def low(tap: str, capacitance: str) -> float:
        s, bus = fed()
        far, low_bus = s.bus(10.0), s.bus(0.4)
        s.hang("cable", bus, far, length="3 km", r_per_length="0.2 ohm/km", x_per_length="0.1 ohm/km",
               capacitance=capacitance)  # fmt: skip
        s.hang("transformer", far, low_bus, rated_power="1 MVA", high_voltage="10 kV", low_voltage="0.4 kV",
               impedance="6 %", x_over_r="8", tap=tap)  # fmt: skip
        return ik(s, low_bus, charging=True)

    assert low("5 %", "0.5 uF/km") == low("0 %", "")


def test_conductors_are_cold_for_the_largest_and_hot_for_the_smallest_current() -> None:
    # R at 70 °C given: over 1.2 at 20 °C; 1.28 at 90 °C, with 0.004 per kelvin (7.1)
    s, bus = fed(10.0, "0.0001 ohm")
    far = s.bus(10.0)
    s.hang("cable", bus, far, length="1 km", r_per_length="0.6 ohm/km", x_per_length="0.0001 ohm/km",
           r_temperature="70 °C", hot_temperature="90 °C")  # fmt: skip
    r = [study(s, level=level).fault(Fault(Place(*far))).z_ohm[0] for level in ("max", "min")]
    assert [z.real for z in r if z] == [pytest.approx(0.6 / 1.2, rel=1e-3), pytest.approx(0.6 / 1.2 * 1.28, rel=1e-3)]


# ------------------------------------------------------------------------------------------------------------- drives


def with_motor(drive: str, kind: str = "induction_motor") -> tuple[Sketch, TerminalKey]:
    s, bus = fed()
    more = (
        {"drive": drive, "poles": "4", "efficiency": "95 %", "power_factor": "0.85"}
        if kind == "induction_motor"
        else {}
    )
    s.hang(kind, bus, rated_power="3.23 MW", rated_voltage="10 kV", **more)
    return s, bus


def test_a_regenerating_drive_feeds_three_times_rated_current_into_i_k_and_ip_only() -> None:
    # S = 3.23/(0.95·0.85) = 4 MVA; ZM = 10²/4/3 with R/X = 0.1, as the feeder's (6.11)
    s, bus = with_motor("regenerating converter")
    share = 1.1 * 10 / SQRT3 / (100 / 4 / 3)
    got = figures(s, bus)
    assert got.ik_ka == pytest.approx(10 + share, rel=1e-12)
    assert got.peak_ka == pytest.approx(math.sqrt(2) * (1.02 + 0.98 * math.exp(-0.3)) * (10 + share), rel=1e-9)
    assert got.ib_ka == pytest.approx(10, rel=1e-12) and got.ik_steady_ka == pytest.approx(10, rel=1e-12)
    assert got.machines == ()
    for kind in (FaultKind.LINE_TO_LINE, FaultKind.LINE_TO_EARTH):
        without, _ = fed()
        assert ik(s, bus, kind) == pytest.approx(ik(without, bus, kind), rel=1e-12)


def test_a_drive_that_cannot_feed_back_feeds_nothing() -> None:
    s, bus = with_motor("converter")
    assert ik(s, bus) == pytest.approx(10, rel=1e-12)


@pytest.mark.parametrize("kind", ["induction_motor", "synchronous_motor"])
def test_motors_feed_the_largest_current_only_and_not_the_steady_one(kind: str) -> None:
    s, bus = with_motor("direct", kind)
    largest, smallest = figures(s, bus), figures(s, bus, level="min")
    assert largest.ik_ka > 10.5 and largest.ik_steady_ka == pytest.approx(10, rel=1e-12)
    assert smallest.ik_ka == pytest.approx(10 / 1.1, rel=1e-12)
    assert ik(s, bus, motors=False) == pytest.approx(10, rel=1e-12)


# ---------------------------------------------------------------------------------------------------- converter sources


def with_converter(earthed: bool = True) -> tuple[Sketch, TerminalKey, TerminalKey]:
    """A feeder, a line, and a converter of 2.4 MVA and 1.25 times rated current at its end."""
    s, bus = fed()
    far = s.bus(10.0)
    s.hang("overhead_line", bus, far, length="2 km", r_per_length="0.3 ohm/km", x_per_length="0.35 ohm/km",
           r0_per_length="0.5 ohm/km", x0_per_length="1 ohm/km")  # fmt: skip
    s.hang("converter_source", far, rated_power="2.4 MVA", rated_voltage="10 kV", current_limit="1.25 pu")
    return s, bus, far


LIMIT_KA = 1.25 * 2.4 / (SQRT3 * 10)


@pytest.mark.parametrize("at_far", [False, True])
def test_a_full_converter_adds_its_constant_current(at_far: bool) -> None:
    # I″k = (c·Un/√3 + Σ Zij·Isk)/Zi in magnitudes (6.9): with one feeder Zij = Zi at both places
    s, bus, far = with_converter()
    place = far if at_far else bus
    alone = abs(1.1 * 10 / SQRT3 / ((0.1 + 1j) * 1.1 / (SQRT3 * math.hypot(1, 0.1)) + (0.6 + 0.7j) * at_far))
    got = figures(s, place)
    assert got.ik_ka == pytest.approx(alone + LIMIT_KA, rel=1e-12)
    assert got.of_converters_ka == pytest.approx(LIMIT_KA, rel=1e-9)
    for peak in got.peaks.values():
        assert peak.ip_ka == pytest.approx(math.sqrt(2) * (peak.kappa * alone + LIMIT_KA), rel=1e-9)
    assert got.ib_ka == pytest.approx(alone + LIMIT_KA, rel=1e-9) == got.ik_steady_ka
    assert got.idc_ka == pytest.approx(math.sqrt(2) * alone * math.exp(-10 * math.pi * got.r_over_x_dc), rel=1e-9)
    assert got.ith_ka == pytest.approx(math.sqrt(got.m * alone**2 + (alone + LIMIT_KA) ** 2), rel=1e-9)


def test_the_converter_s_own_current_is_its_limit_and_currents_add_up() -> None:
    s, bus, _ = with_converter()
    result = study(s).fault(Fault(Place(*bus)))
    converter = next(p.id for p in s.parts.values() if p.kind == "converter_source")
    line = next(p.id for p in s.parts.values() if p.kind == "overhead_line")
    np.testing.assert_allclose(abs(result.terminal_ka[converter, "line"]), LIMIT_KA, rtol=1e-9)
    np.testing.assert_allclose(result.terminal_ka[line, "b"], -result.terminal_ka[converter, "line"], rtol=1e-9)


def test_smallest_currents_have_no_converters() -> None:
    s, bus, _ = with_converter()
    assert ik(s, bus, level="min") == pytest.approx(10 / 1.1, rel=1e-12)


def test_an_island_of_converters_alone_has_their_current() -> None:
    s = Sketch()
    bus = s.bus(10.0)
    for _ in range(2):
        s.hang("converter_source", bus, rated_power="2.4 MVA", rated_voltage="10 kV", current_limit="1.25 pu")
    got = figures(s, bus)
    assert got.ik_ka == pytest.approx(2 * LIMIT_KA, rel=1e-4) and got.idc_ka == pytest.approx(0, abs=1e-4)


def test_the_table_of_all_buses_has_converters_too() -> None:
    s, _, _ = with_converter()
    for row in study(s).all_buses():
        place = Place(row.part)
        assert row.ik_ka == pytest.approx(study(s).fault(Fault(place, FaultKind(row.kind))).ik_ka, rel=1e-9)
        assert isinstance(row.figures, IecFigures) and row.figures.ik_ka == pytest.approx(row.ik_ka, rel=1e-9)


# ---------------------------------------------------------------------------------------------------- typical data


@pytest.mark.parametrize(
    ("kind", "ratings", "missing"),
    [
        (
            "synchronous_generator",
            {"rated_power": "5 MVA", "x_over_r": "30", "subtransient_reactance": "15 %"},
            "power_factor",
        ),
        (
            "induction_motor",
            {
                "rated_power": "1 MW",
                "efficiency": "95 %",
                "power_factor": "0.9",
                "locked_rotor_ratio": "6",
                "x_over_r": "9",
            },
            "poles",
        ),
    ],
)
def test_what_only_this_method_assumes_is_said(kind: str, ratings: dict[str, str], missing: str) -> None:
    given = {"power_factor": "0.85", "poles": "6"}[missing]
    for more, wanted in (({}, ("M",)), ({missing: given}, ())):
        s = Sketch()
        bus = s.bus(10.0)
        s.hang(kind, bus, name="M", rated_voltage="10 kV", **ratings, **more)
        iec = study(s).fault(Fault(Place(*bus)))
        assert study(s).assumed.get(0, ()) == wanted
        assert any(f.code == "assumed" and "M" in f.message for f in iec.findings) is bool(wanted)
        assert Study(s.plant, Case()).assumed == {}


# ----------------------------------------------------------------------------------------------------------- views


def test_views_are_as_few_as_can_be() -> None:
    s, _ = fed()
    method = study(s).network.method
    assert isinstance(method, Iec60909)
    assert method.without_motors() == method.without_drives() == WHOLE
    assert {method.view_of(0, kind) for kind in FaultKind} == {WHOLE}
    s, _ = with_motor("regenerating converter")
    method = study(s).network.method
    assert isinstance(method, Iec60909)
    assert method.without_motors() == View(motors=False) and method.without_drives() == View(drives=False)
    assert method.view_of(0, FaultKind.LINE_TO_LINE) == View(drives=False)
    assert method.view_of(0, FaultKind.THREE_PHASE) == WHOLE
