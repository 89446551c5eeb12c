"""Nominal voltages of nodes by the order of precedence in the module's docstring, on small drawings."""

import pytest

from onelinefault.engine.topology import topology_of
from onelinefault.engine.voltages import UNKNOWN_KV, NominalVoltages, nominal_voltages
from tests.oracle.sketch import Sketch, TerminalKey


def solved(sketch: Sketch) -> tuple[NominalVoltages, dict[TerminalKey, float]]:
    topology = topology_of(sketch.plant)
    found = nominal_voltages(topology)
    return found, {key: found.kv[node] for key, node in topology.node_of.items()}


def test_supply_gives_its_voltage_and_cables_carry_it() -> None:
    sketch = Sketch()
    supply = sketch.add("supply", nominal_voltage="33 kV")
    first, second = (sketch.add("bus") for _ in range(2))
    sketch.wire((supply, "out"), (first, "bar"))
    sketch.hang("overhead_line", (first, "bar"), (second, "bar"))
    reactor = sketch.add("reactor")
    sketch.wire((second, "bar"), (reactor, "a"))
    found, kv = solved(sketch)
    assert kv[first, "bar"] == kv[second, "bar"] == kv[reactor, "b"] == 33.0
    assert not found.findings and all(found.known)


def behind_transformer(high: str = "33 kV", low: str = "11.5 kV", **bus: str) -> tuple[Sketch, str, str]:
    sketch = Sketch()
    transformer = sketch.add("transformer", name="T1", high_voltage=high, low_voltage=low)
    bar = sketch.add("bus", name="B1", **bus)
    sketch.wire((transformer, "low"), (bar, "bar"))
    return sketch, transformer, bar


def test_winding_gives_its_rated_voltage_where_no_bus_states_one() -> None:
    sketch, transformer, bar = behind_transformer()
    _, kv = solved(sketch)
    assert (kv[transformer, "high"], kv[bar, "bar"]) == (33.0, 11.5)


def test_bus_comes_before_the_winding() -> None:
    sketch, _, bar = behind_transformer(nominal_voltage="11 kV")
    assert solved(sketch)[1][bar, "bar"] == 11.0


def test_carried_voltage_comes_before_the_winding() -> None:
    sketch, _, bar = behind_transformer()
    far = sketch.bus(11.0)
    sketch.hang("cable", (bar, "bar"), far)
    assert solved(sketch)[1][bar, "bar"] == 11.0


def test_lowest_winding_voltage_along_a_cable() -> None:
    # 11.5 kV feeding, 11 kV fed: the network is an 11 kV one
    sketch, _, bar = behind_transformer()
    fed = sketch.add("transformer", high_voltage="11 kV", low_voltage="433 V")
    sketch.hang("cable", (bar, "bar"), (fed, "high"))
    kv = solved(sketch)[1]
    assert kv[bar, "bar"] == kv[fed, "high"] == 11.0 and kv[fed, "low"] == pytest.approx(0.433)


def test_machine_gives_its_voltage_last() -> None:
    sketch = Sketch()
    motor, generator = sketch.add("induction_motor", rated_voltage="6.6 kV"), sketch.add("bus")
    sketch.wire((motor, "line"), (generator, "bar"))
    assert solved(sketch)[1][generator, "bar"] == 6.6
    sketch, _, bar = behind_transformer()
    sketch.hang("induction_motor", (bar, "bar"), rated_voltage="11 kV")
    assert solved(sketch)[1][bar, "bar"] == 11.5


def test_open_switch_and_cable_out_of_service_tell_the_voltage_behind() -> None:
    sketch = Sketch()
    live, dead, far = sketch.bus(11.0), (sketch.add("bus"), "bar"), (sketch.add("bus"), "bar")
    sketch.hang("breaker", live, dead, closed="no")
    sketch.hang("cable", dead, far, in_service=False)
    found, kv = solved(sketch)
    assert kv[dead] == kv[far] == 11.0 and not found.findings


def test_unknown_voltage_is_remarked() -> None:
    sketch = Sketch()
    sketch.add("bus", name="Lonely")
    found, kv = solved(sketch)
    assert kv == {("p1", "bar"): UNKNOWN_KV} and found.known == (False,)
    assert [(f.code, f.parts) for f in found.findings] == [("unknown-voltage", ("p1",))]
    assert "Lonely" in found.findings[0].message


def test_two_voltages_on_a_node_name_both() -> None:
    sketch = Sketch()
    one, other = sketch.bus(11.0, "North"), sketch.bus(6.6, "South")
    sketch.wire(one, other)
    found, kv = solved(sketch)
    assert kv[one] == 11.0
    (finding,) = found.findings
    assert (finding.code, finding.severity) == ("two-voltages", "error")
    assert set(finding.parts) == {"p1", "p2"}
    assert all(text in finding.message for text in ("North", "South", "11 kV", "6.6 kV"))


def test_half_a_per_cent_is_the_same_voltage() -> None:
    sketch = Sketch()
    sketch.wire(sketch.bus(0.4), sketch.bus(0.4019))
    assert not solved(sketch)[0].findings


def test_cable_between_different_voltages_names_both_ends() -> None:
    sketch = Sketch()
    one, other = sketch.bus(11.0, "North"), sketch.bus(6.6, "South")
    cable = sketch.hang("cable", one, other, name="W1")
    found, kv = solved(sketch)
    assert (kv[one], kv[other]) == (11.0, 6.6)
    (finding,) = found.findings
    assert finding.code == "two-voltages" and finding.parts == ("p1", "p2", cable)
    assert all(text in finding.message for text in ("North", "South", "W1"))


def test_bus_out_of_service_states_nothing() -> None:
    sketch = Sketch()
    live = sketch.bus(11.0)
    dead = sketch.add("bus", nominal_voltage="6.6 kV", in_service=False)
    sketch.wire(live, (dead, "bar"))
    assert not [f for f in solved(sketch)[0].findings if f.code == "two-voltages"]
