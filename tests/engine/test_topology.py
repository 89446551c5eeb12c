"""Nodes from the drawing, against small drawings counted by eye and a brute-force closure."""

import random
from dataclasses import replace

import numpy as np
import pytest

from onelinefault.engine.topology import Topology, components, id_order, node_label, topology_of
from onelinefault.model.consumers import Bus
from onelinefault.model.plant import End, Plant, Wire
from tests.oracle.sketch import Sketch, TerminalKey


def same(topology: Topology, a: TerminalKey, b: TerminalKey) -> bool:
    return topology.node_of[a] == topology.node_of[b]


def feeder(kind: str = "breaker", in_service: bool = True, **ratings: str) -> tuple[Topology, TerminalKey, TerminalKey]:
    """A supply and a motor with a device between, wired end to end."""
    sketch = Sketch()
    supply = sketch.add("supply", name="Grid")
    device = sketch.add(kind, name="Q1", in_service=in_service, **ratings)
    motor = sketch.add("induction_motor", name="M1")
    sketch.wire((supply, "out"), (device, "a"))
    sketch.wire((motor, "line"), (device, "b"))
    return topology_of(sketch.plant), (supply, "out"), (motor, "line")


@pytest.mark.parametrize("kind", ["breaker", "switch", "fuse"])
def test_closed_devices_join_and_open_ones_part(kind: str) -> None:
    topology, supply, motor = feeder(kind)
    assert same(topology, supply, motor) and len(topology.members) == 1
    topology, supply, motor = feeder(kind, closed="no")
    assert not same(topology, supply, motor) and len(topology.members) == 2


def test_device_out_of_service_is_open() -> None:
    topology, supply, motor = feeder(in_service=False)
    assert not same(topology, supply, motor)


def test_joints_are_wires_and_closed_devices() -> None:
    topology, _, _ = feeder()
    assert [(j.id, j.is_wire) for j in topology.joints] == [("w1", True), ("w2", True), ("p2", False)]
    topology, _, _ = feeder(closed="no")
    assert [j.id for j in topology.joints] == ["w1", "w2"]


def two_on_a_bus(**bus: str | bool) -> tuple[Topology, str]:
    sketch = Sketch()
    bar = sketch.add("bus", **bus)
    for name in ("M1", "M2"):
        motor = sketch.add("induction_motor", name=name)
        sketch.wire((motor, "line"), (bar, "bar"))
    return topology_of(sketch.plant), bar


def test_bus_joins_its_wires() -> None:
    topology, bar = two_on_a_bus(name="B1")
    assert same(topology, ("p2", "line"), ("p3", "line")) and topology.buses == ((bar,),)


def test_wires_to_a_bus_out_of_service_end_nowhere() -> None:
    topology, _ = two_on_a_bus(name="B1", in_service=False)
    assert len(topology.members) == 3 and not topology.joints


def test_wires_to_itself_doubled_or_to_nowhere_do_no_harm() -> None:
    sketch = Sketch()
    line = sketch.add("cable")
    bar = sketch.add("bus")
    sketch.wire((line, "a"), (line, "a"))
    sketch.wire((line, "a"), (bar, "bar"))
    sketch.wire((bar, "bar"), (line, "a"))
    plant = sketch.plant
    lost = Wire("w9", End("p77", "a"), End(bar, "bar"))
    topology = topology_of(replace(plant, wires={**plant.wires, "w9": lost}))
    assert len(topology.members) == 2
    assert [j.id for j in topology.joints] == ["w2", "w3"]
    sketch.wire((line, "a"), (line, "b"))
    assert len(topology_of(sketch.plant).members) == 1


def test_labels() -> None:
    topology, _ = two_on_a_bus(name="B1")
    assert node_label(topology, 0) == "B1"
    topology, _ = two_on_a_bus()
    assert node_label(topology, 0) == "bus p1"
    topology, _, _ = feeder(closed="no")
    assert node_label(topology, 0) == "between Grid and Q1"
    sketch = Sketch()
    sketch.add("transformer", name="T1")
    assert [node_label(topology_of(sketch.plant), k) for k in (0, 1)] == ["at T1", "at T1"]


def test_the_first_bus_names_the_node() -> None:
    sketch = Sketch()
    for name in ("First", "Second"):
        sketch.add("bus", name=name)
    sketch.wire(("p1", "bar"), ("p2", "bar"))
    topology = topology_of(sketch.plant)
    assert (node_label(topology, 0), topology.buses[0]) == ("First", ("p1", "p2"))


def test_a_joint_without_a_name_is_no_bus() -> None:
    joint = Bus(id="p1", length=0)
    assert topology_of(Plant(parts={"p1": joint})).buses == ((),)
    assert topology_of(Plant(parts={"p1": replace(joint, name="J")})).buses == (("p1",),)


def test_order_of_parts_and_wires_changes_nothing() -> None:
    rng = random.Random(4)
    sketch = Sketch()
    for k in range(30):
        sketch.add(rng.choice(("bus", "cable", "breaker", "transformer")), name=f"X{k}")
    ends = [(p.id, t.name) for p in sketch.plant.parts.values() for t in p.terminals]
    for _ in range(35):
        sketch.wire(rng.choice(ends), rng.choice(ends))
    plant = sketch.plant
    parts, wires = list(plant.parts.items()), list(plant.wires.items())
    rng.shuffle(parts)
    rng.shuffle(wires)
    shuffled = topology_of(replace(plant, parts=dict(parts), wires=dict(wires)))
    assert shuffled == topology_of(plant)


@pytest.mark.parametrize("seed", range(5))
def test_components_are_the_closure_of_their_edges(seed: int) -> None:
    # brute force: spread the smallest number along edges until nothing changes
    rng = np.random.default_rng(seed)
    one, other = rng.integers(0, 40, (2, 30))
    label = list(range(40))
    for _ in range(40):
        for i, j in zip(one, other, strict=True):
            label[i] = label[j] = min(label[i], label[j])
    firsts = sorted(set(label))
    assert components(40, one, other).tolist() == [firsts.index(k) for k in label]


def test_ids_in_the_order_of_their_numbers() -> None:
    assert sorted(["p10", "p2", "w1", "x", "p1"], key=id_order) == ["p1", "p2", "p10", "w1", "x"]


def test_empty_plant() -> None:
    assert topology_of(Plant()).members == ()
