"""What is missing is filled by typical values and said; what cannot be known is not."""

import math

import pytest

from onelinefault.model.completion import completed_part, completed_plant
from onelinefault.model.fields import Basis, fields_of
from onelinefault.model.findings import Severity
from onelinefault.model.part import Part
from onelinefault.model.parts import PART_CLASSES, part_class
from onelinefault.model.plant import Document, Plant
from onelinefault.model.quantity import Quantity, read_quantity
from onelinefault.model.typical import Tables
from onelinefault.store.tables import load_tables


@pytest.fixture(scope="module")
def tables() -> Tables:
    return load_tables()


def made(kind: str, **texts: str) -> Part:
    part = part_class(kind)(id="p1", name="X1")
    for name, text in texts.items():
        part = part.with_text(name, text)
    return part


SAMPLES = [
    made("supply", nominal_voltage="33 kV", fault_level_max="900 MVA"),
    made("transformer", rated_power="1 MVA", high_voltage="11 kV", low_voltage="0.4 kV"),
    made("cable", length="200 m", size="240"),
    made("cable", length="200 ft", size="4/0 AWG", construction="in steel conduit"),
    made("busway", length="20 m", r_per_length="0.03", x_per_length="0.02"),
    made("overhead_line", length="3 km", r_per_length="0.3", x_per_length="0.35"),
    made("induction_motor", rated_power="1.2 MW", rated_voltage="11 kV"),
    made("synchronous_generator", rated_power="5 MVA", rated_voltage="11 kV", neutral="solid"),
    made("transformer3", high_voltage="132 kV", medium_voltage="33 kV", low_voltage="11 kV", rated_power_high="60 MVA"),
]


def number(part: Part, name: str, unit: str) -> float:
    value = part.given(name)
    assert isinstance(value, Quantity), name
    return value.to(unit)


@pytest.mark.parametrize("part", [*SAMPLES, *(c(id="p1") for c in PART_CLASSES)], ids=lambda p: p.kind)
@pytest.mark.parametrize("hertz", [50.0, 60.0])
def test_completing_twice_changes_nothing(tables: Tables, part: Part, hertz: float) -> None:
    once, hints = completed_part(part, tables, hertz)
    twice, again = completed_part(once, tables, hertz)
    assert twice == once and (twice is once or once is not part)
    assert {(f.field, f.code) for f in again} == {(f.field, f.code) for f in hints}
    for name in fields_of(type(part)):
        if part.given(name) is not None:
            assert once.given(name) == part.given(name)  # what was typed stands
        elif once.given(name) is not None:
            assert once.basis_of(name) is Basis.TYPICAL
    assert all(f.severity is Severity.HINT and f.parts == ("p1",) and f.remedy and f.message for f in hints)


@pytest.mark.parametrize("kind", PART_CLASSES)
def test_what_only_the_nameplate_knows_is_not_filled(tables: Tables, kind: type[Part]) -> None:
    completed, _ = completed_part(kind(id="p1"), tables, 50)
    assert all(completed.given(name) is None for name, field in fields_of(kind).items() if field.required)


def test_every_filling_has_its_hint(tables: Tables) -> None:
    part = made("cable", length="200 m", size="240")
    completed, hints = completed_part(part, tables, 50)
    filled = {n for n in fields_of(type(part)) if part.given(n) is None and completed.given(n) is not None}
    assert filled == {"r_per_length", "x_per_length", "r0_per_length", "x0_per_length"}
    assert {f.field for f in hints} == filled
    assert hints[0].message == (
        "cable X1: R 0.0754 Ω/km assumed, typical for copper 240 mm², at 20 °C (IEC 60228 class 2)."
    )
    assert "rated voltage is not given" in hints[1].message


def test_a_cable_by_hand(tables: Tables) -> None:
    part, _ = completed_part(made("cable", length="1 km", size="3c 95", rated_voltage="12 kV"), tables, 60)
    assert number(part, "r_per_length", "ohm/km") == 0.193  # IEC 60228 class 2
    assert number(part, "x_per_length", "ohm/km") == pytest.approx(0.12)  # 0.10 at 50 Hz
    assert number(part, "r0_per_length", "ohm/km") == pytest.approx(4 * 0.193)
    assert number(part, "x0_per_length", "ohm/km") == pytest.approx(3.5 * 0.12)
    assert part.given("r_temperature") is None


def test_an_american_cable_carries_the_temperature_of_its_table(tables: Tables) -> None:
    texts = {"length": "500 ft", "size": "4/0 AWG", "construction": "in steel conduit"}
    part, hints = completed_part(made("cable", **texts), tables, 60)
    assert number(part, "r_per_length", "ohm/kft") == 0.063 and number(part, "x_per_length", "ohm/kft") == 0.051
    assert number(part, "r_temperature", "°C") == 75
    assert "r_temperature" not in {f.field for f in hints}  # R's own hint says it
    typed, _ = completed_part(made("cable", **texts, r_temperature="20 °C"), tables, 60)
    # the table's 75 °C brought to the typed 20 °C: R2 = R1 (b + T2)/(b + T1), b = 234.5 (IEC 60949)
    assert number(typed, "r_per_length", "ohm/kft") == pytest.approx(0.063 * 254.5 / 309.5, rel=1e-3)
    assert typed.text("r_temperature") == "20 °C"


def test_a_cable_with_half_its_data(tables: Tables) -> None:
    only_r, _ = completed_part(made("cable", length="1 km", r_per_length="0.2 ohm/mi"), tables, 50)
    assert number(only_r, "r0_per_length", "ohm/mi") == pytest.approx(0.8)
    assert number(only_r, "x_per_length", "ohm/km") == 0.08
    nothing, hints = completed_part(made("cable", length="1 km"), tables, 50)
    assert nothing.given("r_per_length") is None and nothing.given("r0_per_length") is None and hints == ()


def test_a_line_by_hand(tables: Tables) -> None:
    part, _ = completed_part(made("overhead_line", length="3 km", r_per_length="0.3", x_per_length="0.35"), tables, 60)
    earth_return = 3 * math.pi**2 * 60 * 1e-4  # Carson: π²·f·10⁻⁴ Ω/km, three times
    assert number(part, "r0_per_length", "ohm/km") == pytest.approx(0.3 + earth_return, rel=0.02)
    assert number(part, "x0_per_length", "ohm/km") == pytest.approx(3 * 0.35)
    by_geometry = made("overhead_line", length="3 km", geometry="a 0 9; b 1 9; c 2 9", conductor_resistance="0.3")
    assert completed_part(by_geometry, tables, 50)[0] is by_geometry


def test_a_transformer_by_hand(tables: Tables) -> None:
    part, hints = completed_part(
        made("transformer", rated_power="1000 kVA", high_voltage="11 kV", low_voltage="400 V"), tables, 50
    )
    assert part.text("impedance") == "5 %" and part.text("zero_sequence_impedance") == "95 %"
    assert number(part, "x_over_r", "") == pytest.approx(math.sqrt(25 - 1.05**2) / 1.05, rel=5e-3)
    assert {"vector_group", "neutral_low"} < {f.field for f in hints}
    with_loss, _ = completed_part(made("transformer", rated_power="1 MVA", load_loss="9 kW"), tables, 50)
    assert with_loss.given("x_over_r") is None


@pytest.mark.parametrize(
    ("texts", "filled"),
    [
        ({}, "95 %"),  # Dyn11, solid by default
        ({"vector_group": "Dy11"}, ""),
        ({"vector_group": "Yd1", "neutral_high": "solid"}, ""),
        ({"vector_group": "YNd1"}, ""),  # brought out, but isolated unless something is typed
        ({"vector_group": "YNd1", "neutral_high": "resistor 400 A"}, "85 %"),
        ({"neutral_low": "isolated"}, ""),
        ({"zero_sequence_impedance": "90 %"}, "90 %"),
    ],
)
def test_zero_sequence_data_only_where_there_is_an_earthed_star(
    tables: Tables, texts: dict[str, str], filled: str
) -> None:
    part, _ = completed_part(made("transformer", rated_power="1 MVA", **texts), tables, 50)
    assert part.text("zero_sequence_impedance") == filled


@pytest.mark.parametrize(
    ("texts", "r_over_x"),
    [
        ({"rated_power": "1.9 MW", "rated_voltage": "6 kV"}, 0.15),  # taken as four-pole: 0.95 MW per pole pair
        ({"rated_power": "1.9 MW", "rated_voltage": "6 kV", "poles": "2"}, 0.10),
        ({"rated_power": "4 MW", "rated_voltage": "6 kV", "rated_speed": "740 rpm"}, 0.10),  # 8 poles at 50 Hz: 1 MW
        ({"rated_power": "3.9 MW", "rated_voltage": "6 kV", "rated_speed": "740 rpm"}, 0.15),
        ({"rated_power": "200 hp", "rated_voltage": "460 V"}, 0.42),
    ],
)
def test_motors_by_hand(tables: Tables, texts: dict[str, str], r_over_x: float) -> None:
    part, _ = completed_part(made("induction_motor", **texts), tables, 50)
    assert number(part, "x_over_r", "") == pytest.approx(1 / r_over_x, rel=1e-3)
    assert part.given("zero_sequence_reactance") is None


def test_an_earthed_motor_has_a_zero_sequence_reactance(tables: Tables) -> None:
    texts = {"rated_power": "1 MW", "rated_voltage": "6 kV", "connection": "star", "neutral": "solid"}
    part, _ = completed_part(made("induction_motor", **texts, locked_rotor_ratio="5"), tables, 50)
    assert number(part, "zero_sequence_reactance", "%") == pytest.approx(10)  # half of 1/5


def test_a_supply_without_earth_fault_data(tables: Tables) -> None:
    texts = {"nominal_voltage": "33 kV", "fault_level_max": "900 MVA"}
    part, hints = completed_part(made("supply", **texts), tables, 50)
    assert part.text("x0_over_x1") == "1"
    assert {"x0_over_x1", "x_over_r", "r0_over_x0", "fault_level_min"} == {f.field for f in hints}
    for more in ({"star_point": "isolated"}, {"earth_fault_level_max": "5 kA"}, {"x0_over_x1": "2"}):
        assert completed_part(made("supply", **texts, **more), tables, 50)[0].given("x0_over_x1") == made(
            "supply", **more
        ).given("x0_over_x1")


def test_defaults_in_use_are_said_unless_another_form_is_typed(tables: Tables) -> None:
    def told(**texts: str) -> set[str]:
        part = made("synchronous_generator", **{"rated_power": "5 MVA", "rated_voltage": "11 kV"} | texts)
        return {f.field for f in completed_part(part, tables, 50)[1]}

    assert told() == {"subtransient_reactance", "x_over_r"}
    assert told(subtransient_reactance="14 %", armature_time_constant="100 ms") == set()
    assert told(neutral="resistor 10 A") == {"subtransient_reactance", "x_over_r", "zero_sequence_reactance"}
    assert "power_factor" in told(rated_power="4 MW")


def test_what_is_marked_typical_or_guessed_is_said(tables: Tables) -> None:
    part = made("reactor", reactance="6 %", rated_current="630 A")
    part = part.with_text("x_over_r", "90", Basis.GUESSED).with_text("reactance", "6 %", Basis.TYPICAL)
    found = {f.field: f.code for f in completed_part(part, tables, 50)[1]}
    assert found == {"x_over_r": "guessed", "reactance": "typical"}


def test_a_whole_plant(tables: Tables) -> None:
    parts = {f"p{i}": type(p)(**{**vars(p), "id": f"p{i}"}) for i, p in enumerate(SAMPLES)}
    plant = Plant(parts=parts)
    completed, hints = completed_plant(plant, tables)
    assert list(completed.parts) == list(parts) and completed.wires is plant.wires
    assert completed.parts["p7"] is parts["p7"]  # lacks nothing that could be filled
    again, same = completed_plant(completed, tables)
    assert again is completed
    assert {(f.parts, f.field) for f in same} == {(f.parts, f.field) for f in hints}
    remembered, told = completed_plant(plant, tables)
    assert all(remembered.parts[k] is completed.parts[k] for k in parts) and told == hints  # not done anew


def test_the_plant_s_frequency_counts(tables: Tables) -> None:
    hertz = read_quantity("60", fields_of(Document)["frequency"].unit_kind)  # type: ignore[arg-type]
    parts = {"p1": made("cable", length="1 km", size="240")}
    at_50, at_60 = (
        completed_plant(Plant(d, parts), tables)[0].parts["p1"] for d in (Document(), Document(frequency=hertz))
    )
    assert number(at_60, "x_per_length", "ohm/km") / number(at_50, "x_per_length", "ohm/km") == pytest.approx(1.2)
