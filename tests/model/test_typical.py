"""Lookups of typical data, against the standards' own figures and against physics."""

import math

import pytest

from onelinefault.model.quantity import IMPEDANCE_PER_LENGTH, PERCENT, read_quantity
from onelinefault.model.typical import (
    Tables,
    cable_reactance,
    conductor_resistance,
    is_american,
    line_reactance_ohm_per_km,
    motor_x_over_r,
    size_words,
    transformer_impedance,
    transformer_x_over_r,
    zero_sequence_share,
)
from onelinefault.model.values import read_conductor_size, read_vector_group
from onelinefault.store.tables import load_tables

RHO_20 = {"copper": 17.241, "aluminium": 28.264}  # ohm·mm²/km (IEC 60028, IEC 60889)
ZERO_C = {"copper": 234.5, "aluminium": 228.0}  # IEC 60949


@pytest.fixture(scope="module")
def tables() -> Tables:
    return load_tables()


def ohm_per_km(text: str) -> float:
    return read_quantity(text, IMPEDANCE_PER_LENGTH).to("ohm/km")


@pytest.mark.parametrize(
    ("size", "material", "laid", "text", "temperature"),
    [
        ("240 mm²", "copper", "multi-core", "0.0754 Ω/km", 20),  # IEC 60228 table 2
        ("3x240", "aluminium", "single-core flat", "0.125 Ω/km", 20),
        ("1.5 mm²", "copper", "multi-core", "12.1 Ω/km", 20),
        ("4/0 AWG", "copper", "in steel conduit", "0.063 Ω/kft", 75),  # NEC chapter 9 table 9
        ("4/0 AWG", "copper", "in plastic conduit", "0.062 Ω/kft", 75),
        ("4/0 AWG", "aluminium", "multi-core", "0.1 Ω/kft", 75),
        ("500 kcmil", "copper", "in steel conduit", "0.029 Ω/kft", 75),
        ("10 AWG", "copper", "in steel conduit", "1.2 Ω/kft", 75),  # not 10 mm²
        ("10 mm²", "copper", "in steel conduit", "1.83 Ω/km", 20),
        ("14 AWG", "copper", "in steel conduit", "3.1 Ω/kft", 75),
    ],
)
def test_resistance_from_the_tables(
    tables: Tables, size: str, material: str, laid: str, text: str, temperature: float
) -> None:
    found = conductor_resistance(tables, read_conductor_size(size), material, laid)
    assert (found.text, found.temperature_c) == (text, temperature)


def test_metric_resistances_follow_from_resistivity(tables: Tables) -> None:
    """The largest permitted resistance lies above that of the nominal area, by stranding and tolerance.

    Nominal 50 mm² is a conductor of about 47 mm² (remark in IEC 60228), hence the wider margin there.
    """
    for material, rows in tables.conductors.items():
        for area, ohm in rows.items():
            real_mm2 = 47 if area == 50 else area
            assert 1.0 < ohm * real_mm2 / RHO_20[material] < 1.11, (material, area)


def test_american_resistances_follow_from_resistivity(tables: Tables) -> None:
    """Table 9 is a.c. at 75 °C with two figures: near the d.c. value up to 4/0, above it beyond."""
    for size, row in tables.conduits.items():
        for metal, short in (("copper", "cu"), ("aluminium", "al")):
            for conduit in ("pvc", "steel"):
                ohm_per_kft = row.r[f"{short}_{conduit}"]
                if ohm_per_kft is None:
                    assert (size, metal) == ("14", "aluminium")  # not made
                    continue
                hot = RHO_20[metal] * (ZERO_C[metal] + 75) / (ZERO_C[metal] + 20) / row.area_mm2
                # a steel conduit adds hysteresis and proximity losses: 40 % at 1000 kcmil
                assert 0.93 < ohm_per_kft / 0.3048 / hot < 1.5, (size, metal, conduit)


@pytest.mark.parametrize(("size", "material"), [("100 mm²", "copper"), ("700 kcmil", "aluminium"), ("2500", "copper")])
def test_sizes_that_no_table_lists_go_by_resistivity(tables: Tables, size: str, material: str) -> None:
    found = conductor_resistance(tables, read_conductor_size(size), material, "multi-core")
    per_metre = {"copper": 54, "aluminium": 34}[material]  # IEC 60909-0, 6.4
    expected = 1000 / (per_metre * read_conductor_size(size).area_mm2)
    assert ohm_per_km(found.text) == pytest.approx(expected, rel=1e-3) and found.temperature_c == 20


def test_large_conductors_say_that_skin_effect_is_left_out(tables: Tables) -> None:
    small, large = (
        conductor_resistance(tables, read_conductor_size(s), "copper", "multi-core").reason for s in ("240", "300")
    )
    assert "skin" not in small and "skin" in large


@pytest.mark.parametrize(
    ("laid", "kv", "x"),
    [
        ("multi-core", None, 0.08),
        ("multi-core", 0.6, 0.08),
        ("multi-core", 12, 0.10),
        ("single-core trefoil", 12, 0.11),
        ("single-core flat", 0.4, 0.17),
        ("multi-core", 110, 0.12),
    ],
)
def test_reactance_by_construction_and_frequency(tables: Tables, laid: str, kv: float | None, x: float) -> None:
    size = read_conductor_size("240")
    at_50, at_60 = (cable_reactance(tables, size, laid, kv, f) for f in (50, 60))
    assert ohm_per_km(at_50.text) == pytest.approx(x)
    assert ohm_per_km(at_60.text) == pytest.approx(x * 1.2, rel=1e-3)
    assert at_50.source == "common practice"


def test_reactance_in_conduit_is_that_of_the_code(tables: Tables) -> None:
    gauge = read_conductor_size("4/0 AWG")
    assert cable_reactance(tables, gauge, "in steel conduit", None, 60).text == "0.051 Ω/kft"
    assert cable_reactance(tables, gauge, "in plastic conduit", None, 60).text == "0.041 Ω/kft"
    metric = cable_reactance(
        tables, read_conductor_size("107"), "in steel conduit", None, 50
    )  # nearest: 4/0, 107.2 mm²
    assert ohm_per_km(metric.text) == pytest.approx(0.051 / 0.3048 * 50 / 60, rel=1e-3)


@pytest.mark.parametrize(
    ("mva", "high", "low", "hertz", "z"),
    [
        (0.4, 11, 0.4, 50, 4),  # IEC 60076-5 table 1
        (0.63, 11, 0.4, 50, 4),
        (0.631, 11, 0.4, 50, 5),
        (1.6, 11, 0.4, 50, 6),
        (20, 33, 11, 50, 8),
        (200, 132, 33, 50, 12.5),
        (1.5, 13.8, 0.48, 60, 5.75),  # IEEE C57.12
        (0.5, 13.8, 0.48, 60, 4.5),
        (0.15, 13.8, 0.208, 60, 2),
        (2.5, 13.8, 4.16, 60, 5.5),
        (20, 69, 13.8, 60, 8),
        (2.5, 69, 4.16, 60, 6),
    ],
)
def test_transformer_impedance(tables: Tables, mva: float, high: float, low: float, hertz: float, z: float) -> None:
    found = transformer_impedance(tables, mva, high, low, hertz)
    assert read_quantity(found.text, PERCENT).to("%") == z


def test_x_over_r_of_distribution_units_comes_from_losses(tables: Tables) -> None:
    # 1000 kVA: 10.5 kW (EU 548/2014 tier 1) is 1.05 %, with 6 % impedance X/R = √(6² − 1.05²)/1.05
    found = transformer_x_over_r(tables, 1.0, 0.06, 11, 0.4)
    assert float(found.text) == pytest.approx(math.sqrt(36 - 1.05**2) / 1.05, rel=2e-3)
    # between two sizes in proportion: 900 kVA lies half-way between 8.4 kW and 10.5 kW
    between = transformer_x_over_r(tables, 0.9, 0.05, 11, 0.4)
    r = 9.45 / 900
    assert float(between.text) == pytest.approx(math.sqrt(0.05**2 - r**2) / r, rel=5e-3)


@pytest.mark.parametrize(
    ("mva", "high", "low", "ratio"),
    [(10, 33, 11, 16), (20, 33, 11, 16 * 2**0.3), (0.001, 33, 11, 3), (900, 400, 20, 50)],
)
def test_x_over_r_of_power_units_grows_with_size(
    tables: Tables, mva: float, high: float, low: float, ratio: float
) -> None:
    assert float(transformer_x_over_r(tables, mva, 0.1, high, low).text) == pytest.approx(ratio, rel=5e-3)


def test_an_impedance_below_the_usual_loss_falls_back(tables: Tables) -> None:
    assert float(transformer_x_over_r(tables, 0.1, 0.015, 11, 0.4).text) >= 3


@pytest.mark.parametrize(
    ("group", "core", "share"),
    [
        ("Dyn11", "three-limb", "95 %"),
        ("YNd1", "three-limb", "85 %"),
        ("YNd1", "five-limb", "100 %"),
        ("YNyn0", "three-limb", "100 %"),
        ("Yzn5", "three-limb", "10 %"),
        ("Dzn0", "shell", "10 %"),
    ],
)
def test_zero_sequence_shares(tables: Tables, group: str, core: str, share: str) -> None:
    assert zero_sequence_share(tables, read_vector_group(group), core).text == share


@pytest.mark.parametrize(
    ("kv", "mw", "r_over_x"), [(0.4, 0.1, 0.42), (1.0, 2, 0.42), (6, 0.5, 0.15), (6, 1.0, 0.10), (11, 3, 0.10)]
)
def test_motors_go_by_power_per_pole_pair(tables: Tables, kv: float, mw: float, r_over_x: float) -> None:
    # IEC 60909-0, 6.10
    assert float(motor_x_over_r(tables, kv, mw).text) == pytest.approx(1 / r_over_x, rel=1e-3)


def test_reactance_of_a_line_by_its_formula(tables: Tables) -> None:
    # IEC 60909-0, 6.4 with d = 1.25 m, r = √(95/π) mm = 5.499 mm at 50 Hz: 0.0628·(0.25 + ln 227.3) = 0.3566 Ω/km
    assert line_reactance_ohm_per_km(tables, 95, 50) == pytest.approx(0.3566, rel=1e-3)


@pytest.mark.parametrize(
    ("text", "american", "words"),
    [
        ("10 AWG", True, "10 AWG"),
        ("10 mm²", False, "10 mm²"),
        ("2x4/0", True, "4/0 AWG"),
        ("500 MCM", True, "500 kcmil"),
        ("3c 95", False, "95 mm²"),
    ],
)
def test_two_worlds_of_sizes(text: str, american: bool, words: str) -> None:
    assert is_american(read_conductor_size(text)) is american and size_words(read_conductor_size(text)) == words
