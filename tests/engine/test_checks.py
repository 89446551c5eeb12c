"""Findings that need the network, each on the smallest drawing that has the mistake and on one that has it not."""

import pytest

from onelinefault.engine.build import build_network
from onelinefault.engine.case import Case
from onelinefault.model.findings import Finding
from onelinefault.model.plant import Plant
from tests.oracle.sketch import Sketch, TerminalKey

T = {
    "rated_power": "10 MVA", "high_voltage": "33 kV", "low_voltage": "11 kV", "impedance": "10 %", "x_over_r": "20",
    "zero_sequence_impedance": "90 %",
}  # fmt: skip
MOTOR = {"rated_power": "1 MW", "rated_voltage": "11 kV", "efficiency": "95 %", "power_factor": "0.9"}


def findings(plant: Plant, code: str, case: Case | None = None) -> list[Finding]:
    return [f for f in build_network(plant, case or Case()).findings if f.code == code]


def substation() -> tuple[Sketch, TerminalKey, TerminalKey]:
    """A supply on a 33 kV bus and an 11 kV bus."""
    sketch = Sketch()
    high, low = sketch.bus(33.0, "B33"), sketch.bus(11.0, "B11")
    sketch.hang("supply", high, name="Grid", nominal_voltage="33 kV", fault_level_max="750 MVA", x0_over_x1="3")
    return sketch, high, low


def parallel(*ratings: dict[str, str]) -> Plant:
    """Transformers T1, T2, ... between the two buses."""
    sketch, high, low = substation()
    for k, own in enumerate(ratings):
        sketch.hang("transformer", high, low, name=f"T{k + 1}", **T | own)
    return sketch.plant


def test_paralleled_transformers_of_different_displacement_are_named() -> None:
    (found,) = findings(parallel({}, {"vector_group": "Dyn1"}), "displacement-loop")
    assert found.severity == "error" and found.parts == ("p4", "p5")
    assert "T1 and T2" in found.message and found.remedy


def test_transformers_that_are_innocent_are_not_named() -> None:
    found = findings(parallel({"vector_group": "Dyn5"}, {}, {}), "displacement-loop")
    assert [f.parts for f in found] == [("p4", "p5"), ("p4", "p6")]


@pytest.mark.parametrize("second", ["Dyn11", "YNd11", "Yzn11"])
def test_same_clock_number_may_be_paralleled(second: str) -> None:
    plant = parallel({}, {"vector_group": second})
    assert not findings(plant, "displacement-loop") and not findings(plant, "ratio-loop")


def test_displacement_through_two_levels_closes() -> None:
    # Dyn11 down and YNd1 up again by way of another bus: 330° and −30° back are a whole turn
    sketch, high, low = substation()
    sketch.hang("transformer", high, low, name="T1", **T)
    other = sketch.bus(11.0)
    sketch.hang("transformer", high, other, name="T2", **T | {"vector_group": "YNd11"})
    sketch.hang("cable", low, other, length="1 km", r_per_length="0.1", x_per_length="0.1")
    assert not findings(sketch.plant, "displacement-loop")


def test_different_ratios_are_named() -> None:
    (found,) = findings(parallel({}, {"tap": "2.5 %"}), "ratio-loop")
    assert found.severity == "warning" and "T1 and T2" in found.message
    assert not findings(parallel({}, {"tap": "0.4 %"}), "ratio-loop")


def test_loop_inside_a_three_winding_transformer_is_none() -> None:
    sketch, high, low = substation()
    ratings = {"impedance_high_medium": "10 %", "impedance_high_low": "12 %", "impedance_medium_low": "6 %"}
    ratings |= {
        "high_voltage": "33 kV",
        "medium_voltage": "11 kV",
        "low_voltage": "11 kV",
        "rated_power_high": "30 MVA",
    }
    sketch.hang("transformer3", high, low, low, name="T1", vector_group="YNyn0yn0", **ratings)
    assert not findings(sketch.plant, "displacement-loop")
    sketch.hang("transformer3", high, low, low, name="T2", vector_group="YNyn0d11", **ratings)
    assert {f.parts for f in findings(sketch.plant, "displacement-loop")} <= {("p5",), ("p4", "p5")}
    assert findings(sketch.plant, "displacement-loop")


def test_dead_buses_are_a_hint() -> None:
    sketch, _, _ = substation()
    (found,) = findings(sketch.plant, "dead-island")
    assert found.severity == "hint" and found.parts == ("p2",) and "B11" in found.message


def test_bus_out_of_service_is_not_called_dead() -> None:
    sketch, _, _ = substation()
    sketch.add("bus", name="Removed", nominal_voltage="11 kV", in_service=False)
    assert [f.parts for f in findings(sketch.plant, "dead-island")] == [("p2",)]


def test_plant_without_a_source() -> None:
    sketch = Sketch()
    sketch.bus(11.0)
    (found,) = findings(sketch.plant, "no-source")
    assert found.severity == "error" and "supply" in found.remedy
    assert not findings(substation()[0].plant, "no-source")


def test_motors_alone_are_remarked() -> None:
    sketch, _, low = substation()
    sketch.hang("induction_motor", low, name="M1", **MOTOR)
    (found,) = findings(sketch.plant, "motors-only")
    assert found.severity == "warning" and found.parts == ("p4", "p2") and "M1" in found.message
    assert not findings(sketch.plant, "motors-only", Case(motors=False))


def test_converters_alone_are_not_called_strong() -> None:
    sketch, _, low = substation()
    sketch.hang("converter_source", low, name="PV", rated_power="2 MVA", rated_voltage="11 kV")
    assert not findings(sketch.plant, "dead-island")
    assert [f.parts for f in findings(sketch.plant, "motors-only")] == [("p4", "p2")]


@pytest.mark.parametrize(
    ("rated", "remarked"), [("11 kV", False), ("12 kV", False), ("13.2 kV", True), ("9.9 kV", True)]
)
def test_rated_voltage_of_a_machine_off_its_nodes(rated: str, remarked: bool) -> None:
    sketch, _, low = substation()
    sketch.hang("induction_motor", low, name="M1", **MOTOR | {"rated_voltage": rated})
    found = findings(sketch.plant, "voltage-mismatch")
    assert bool(found) == remarked
    if found:
        assert found[0].parts == ("p4",) and found[0].field == "rated_voltage" and "M1" in found[0].message


def test_winding_on_the_wrong_bus() -> None:
    (found,) = findings(parallel({"low_voltage": "6.9 kV"}), "voltage-mismatch")
    assert found.field == "low_voltage" and all(text in found.message for text in ("T1", "6.9 kV", "B11", "11 kV"))


@pytest.mark.parametrize(("rated", "remarked"), [("24 kV", False), ("7.2 kV", True)])
def test_devices_may_be_rated_above(rated: str, remarked: bool) -> None:
    sketch, _, low = substation()
    sketch.hang("breaker", low, sketch.bus(11.0), name="Q1", rated_voltage=rated)
    assert bool(findings(sketch.plant, "voltage-mismatch")) == remarked


def test_loose_ends() -> None:
    sketch, _, low = substation()
    motor = sketch.add("induction_motor", name="M1", **MOTOR)
    transformer = sketch.add("transformer", name="T1", **T)
    sketch.wire(low, (transformer, "low"))
    found = {f.parts[0]: f for f in findings(sketch.plant, "loose-end")}
    assert set(found) == {motor, transformer}
    assert found[motor].severity == "warning" and found[transformer].severity == "hint"
    assert found[transformer].message.endswith("T1 at high.")


def test_closed_device_is_a_connection() -> None:
    sketch, _, low = substation()
    spare = sketch.add("breaker", name="Q1")
    sketch.wire(low, (spare, "a"))
    assert findings(sketch.plant, "loose-end") == []


@pytest.mark.parametrize(("count", "remarked"), [(8, False), (12, False), (13, True)])
def test_motors_far_above_their_transformer(count: int, remarked: bool) -> None:
    # each 1/(0.95·0.9) = 1.1696 MVA; 1.5 times 10 MVA is reached by 12.8 of them
    sketch, high, low = substation()
    sketch.hang("transformer", high, low, name="T1", **T)
    cable = sketch.add("cable", name="W1", length="1 km", r_per_length="0.1", x_per_length="0.1")
    sketch.wire(low, (cable, "a"))
    sketch.hang("induction_motor", (cable, "b"), name="M1", count=str(count - 1), **MOTOR)
    sketch.hang("induction_motor", low, name="M2", **MOTOR)
    found = findings(sketch.plant, "motors-above-transformer")
    assert bool(found) == remarked
    if found:
        assert found[0].parts == ("p4",) and "T1" in found[0].message and "15.2 MVA" in found[0].message
    sketch.hang("transformer", high, low, name="T2", **T)
    assert not findings(sketch.plant, "motors-above-transformer")
