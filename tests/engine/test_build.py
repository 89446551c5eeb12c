"""The whole way from plant to network: arrays on small plants worked by hand; what users can do wrong never raises."""

from dataclasses import fields, replace

import numpy as np
import pytest

from onelinefault.engine.build import build_network
from onelinefault.engine.case import Case
from onelinefault.engine.network import Network
from onelinefault.model.fields import fields_of
from onelinefault.model.part import Part
from onelinefault.model.parts import PART_CLASSES
from onelinefault.model.plant import Plant
from onelinefault.model.sources import InductionMotor
from tests.oracle.sketch import Sketch

T1 = {
    "rated_power": "10 MVA", "high_voltage": "33 kV", "low_voltage": "11.5 kV", "impedance": "10 %", "x_over_r": "20",
    "zero_sequence_impedance": "90 %",
}  # fmt: skip
CABLE = {
    "length": "1 km", "r_per_length": "0.1", "x_per_length": "0.1", "r0_per_length": "0.4", "x0_per_length": "0.3"
}  # fmt: skip


def plant() -> Sketch:
    """A 33 kV supply, T1 with a tap of 2.5 % to an 11 kV bus, a cable to a motor."""
    sketch = Sketch()
    high, low = sketch.bus(33.0, "B33"), sketch.bus(11.0, "B11")
    sketch.hang("supply", high, name="Grid", nominal_voltage="33 kV", fault_level_max="750 MVA", x0_over_x1="3")
    sketch.hang("transformer", high, low, name="T1", tap="2.5 %", **T1)
    cable = sketch.add("cable", name="W1", **CABLE)
    sketch.wire((cable, "a"), low)
    sketch.hang("induction_motor", (cable, "b"), name="M1", rated_power="1 MW", rated_voltage="11 kV", poles="4")
    return sketch


def codes(network: Network, severity: str = "error") -> list[str]:
    return [f.code for f in network.findings if f.severity == severity]


def test_nodes_and_branches() -> None:
    network = build_network(plant().plant, Case())
    assert [node.label for node in network.nodes] == ["B33", "B11", "between W1 and M1"]
    assert network.nominal_kv.tolist() == [33.0, 11.0, 11.0]
    assert network.branch_parts == ("p4", "p5")
    assert network.branch_terminals == ((("p4", "high"), ("p4", "low")), (("p5", "a"), ("p5", "b")))
    assert [(s.part, s.node, network.shunt_parts[s.shunt]) for s in network.sources] == [
        ("p3", 0, "p3"),
        ("p6", 2, "p6"),
    ]
    assert network.live.all() and network.findings == ()


def test_transformer_branch_by_hand() -> None:
    # 10 % of 11.5²/10 on the low side is 1.3225 ohm; base there 11²/100 = 1.21 ohm; ratio (33·1.025/33)/(11.5/11)
    network = build_network(plant().plant, Case())
    assert abs(1 / network.y_series[0, 0]) == pytest.approx(1.3225 / 1.21)
    assert network.ratio[0] == pytest.approx(1.025 * 11 / 11.5)
    assert network.y_series[0, 2] == 0
    assert abs(1 / network.y_to[0, 2]) == pytest.approx(0.9 * 1.3225 / 1.21)  # Dyn: a shunt at the low side


def test_low_side_leads_with_clock_eleven() -> None:
    # Dyn11: the low side lags by 330°, so it leads by 30°
    assert build_network(plant().plant, Case()).displacement_deg == pytest.approx([0.0, 30.0, 30.0])


def test_star_point_of_the_transformer() -> None:
    (term,) = build_network(plant().plant, Case()).neutral_terms
    assert (term.part, term.side, term.element, term.index, term.factor) == ("p4", "low", "to", 0, 1.0)


def test_star_points_count_over_all_parts() -> None:
    sketch = plant()
    sketch.hang("earthing_transformer", ("p1", "bar"), rated_voltage="33 kV", zero_sequence_impedance="40 ohm")
    sketch.hang("transformer", ("p1", "bar"), ("p2", "bar"), name="T2", **T1)
    network = build_network(sketch.plant, Case())
    found = {(t.part, t.element): t.index for t in network.neutral_terms}
    assert network.shunt_parts[found["p7", "shunt"]] == "p7"
    assert network.branch_parts[found["p8", "to"]] == "p8"


def test_admittances_go_with_the_base() -> None:
    # per unit is ohm over V²/S: the same ohm on another S
    drawn = plant().plant
    one, other = (
        build_network(replace(drawn, document=Sketch(base_power=text).document), Case())
        for text in ("100 MVA", "7.3 MVA")
    )
    for name in ("y_series", "y_from", "y_to", "y_shunt"):
        np.testing.assert_allclose(getattr(other, name) * 7.3, getattr(one, name) * 100, rtol=1e-14, atol=0)
    assert np.array_equal(one.ratio, other.ratio)


def test_motors_only_when_asked_for() -> None:
    network = build_network(plant().plant, Case(motors=False))
    assert [s.part for s in network.sources] == ["p3"]


def test_parts_out_of_service_are_left_out() -> None:
    drawn = plant().plant
    for part_id in ("p3", "p4", "p5", "p6"):
        stopped = replace(drawn.parts[part_id], in_service=False)
        network = build_network(replace(drawn, parts={**drawn.parts, part_id: stopped}), Case())
        assert part_id not in (*network.branch_parts, *network.shunt_parts)


def test_inner_star_point() -> None:
    sketch = Sketch()
    buses = [sketch.bus(kv) for kv in (132.0, 33.0, 11.0)]
    ratings = {"impedance_high_medium": "10 %", "impedance_high_low": "12 %", "impedance_medium_low": "6 %"}
    ratings |= {
        "high_voltage": "132 kV",
        "medium_voltage": "34 kV",
        "low_voltage": "11 kV",
        "rated_power_high": "60 MVA",
    }
    sketch.hang("transformer3", *buses, name="T1", **ratings)
    sketch.hang("supply", buses[0], nominal_voltage="132 kV", fault_level_max="5 GVA", x0_over_x1="1")
    network = build_network(sketch.plant, Case())
    inner = network.nodes[3]
    assert (inner.inner, inner.nominal_kv, inner.terminals) == (True, 132.0, ())
    assert network.to_node.tolist() == [3, 3, 3] and network.branch_terminals[1] == (("p4", "medium"), None)
    # YNyn0d11: the delta leads by 30°, the star point turns with the high side
    assert network.displacement_deg == pytest.approx([0, 0, 30, 0])
    assert network.live.all()


def test_order_of_parts_and_wires_changes_nothing() -> None:
    drawn = plant().plant
    turned = replace(drawn, parts=dict(reversed(drawn.parts.items())), wires=dict(reversed(drawn.wires.items())))
    one, other = build_network(drawn, Case()), build_network(turned, Case())
    for field in fields(Network):
        a, b = getattr(one, field.name), getattr(other, field.name)
        assert np.array_equal(a, b) if isinstance(a, np.ndarray) else a == b, field.name


def test_islands_and_dead_nodes() -> None:
    sketch = plant()
    dead = sketch.bus(11.0, "Spare")
    sketch.hang("breaker", ("p2", "bar"), dead, closed="no")
    network = build_network(sketch.plant, Case())
    node = network.node_of[dead]
    assert not network.live[node] and network.island[node] != network.island[0]
    assert codes(network) == [] and "dead-island" in codes(network, "hint")


def everything() -> Plant:
    """A part of every kind, fully rated, on one bus with the rest of its terminals on buses of their own."""
    sketch = Sketch()
    common = sketch.bus(33.0, "Main")
    later = {"transient_reactance": "25 %", "synchronous_reactance": "180 %"}
    own = {
        "supply": {"nominal_voltage": "33 kV", "fault_level_max": "750 MVA", "x0_over_x1": "3"},
        "synchronous_generator": {"rated_power": "20 MVA", "rated_voltage": "33 kV", "neutral": "solid"} | later,
        "synchronous_motor": {"rated_power": "2 MW", "rated_voltage": "33 kV"} | later,
        "induction_motor": {"rated_power": "2 MW", "rated_voltage": "33 kV"},
        "converter_source": {"rated_power": "2 MVA", "rated_voltage": "33 kV"},
        "transformer": T1 | {"magnetising_impedance": "60 %"},
        "transformer3": {
            "high_voltage": "33 kV", "medium_voltage": "11 kV", "low_voltage": "6.6 kV", "rated_power_high": "60 MVA",
            "impedance_high_medium": "10 %", "impedance_high_low": "12 %", "impedance_medium_low": "6 %",
        },
        "autotransformer": {
            "high_voltage": "33 kV", "low_voltage": "22 kV", "tertiary_voltage": "11 kV", "rated_power": "60 MVA",
            "impedance_high_low": "10 %", "impedance_high_tertiary": "12 %", "impedance_low_tertiary": "6 %",
        },
        "earthing_transformer": {"rated_voltage": "33 kV", "zero_sequence_impedance": "40 ohm"},
        "cable": CABLE, "overhead_line": CABLE, "busway": CABLE,
        "reactor": {"reactance": "6 %", "rated_current": "400 A"},
    }  # fmt: skip
    for part_class in PART_CLASSES:
        ends = [common, *((sketch.add("bus"), "bar") for _ in part_class.terminals[1:])]
        sketch.hang(part_class.kind, *ends[: len(part_class.terminals)], **own.get(part_class.kind, {}))
    return sketch.plant


def test_a_part_of_every_kind() -> None:
    network = build_network(everything(), Case(charging=True))
    assert codes(network) == []
    wanted = {c.kind for c in PART_CLASSES} - {"bus", "breaker", "switch", "fuse", "load", "capacitor", "note"}
    drawn = everything().parts
    present = {*network.branch_parts, *network.shunt_parts, *(c.part for c in network.converters)}
    assert {drawn[part_id].kind for part_id in present} == wanted
    for array in (network.y_series, network.y_from, network.y_to, network.y_shunt, network.ratio):
        assert np.isfinite(array).all()


@pytest.mark.parametrize("moment", ["subtransient", "transient", "steady"])
@pytest.mark.parametrize("part_class", PART_CLASSES, ids=lambda c: c.kind)
def test_any_rating_may_be_missing(part_class: type[Part], moment: str) -> None:
    drawn = everything()
    part = next(p for p in drawn.parts.values() if type(p) is part_class)
    for name, described in fields_of(part_class).items():
        bare = replace(part, **{name: None})
        network = build_network(replace(drawn, parts={**drawn.parts, part.id: bare}), Case(moment=moment, level="min"))
        assert all(f.message and f.remedy for f in network.findings)
        left_out = [f for f in network.findings if f.code == "missing-rating" and f.field == name]
        present = part.id in (*network.branch_parts, *network.shunt_parts, *(c.part for c in network.converters))
        assert not (left_out and present)
        assert all(part.title in f.message and f.severity == "error" and f.parts == (part.id,) for f in left_out)
        if described.required and (moment != "steady" or part_class is not InductionMotor):
            assert left_out or present


def test_bare_parts_are_named_one_by_one() -> None:
    sketch = Sketch()
    common = sketch.bus(11.0)
    for part_class in PART_CLASSES:
        sketch.hang(part_class.kind, *[common] * len(part_class.terminals), name=f"{part_class.letter}x")
    network = build_network(sketch.plant, Case())
    named = {part_id for f in network.findings if f.code == "missing-rating" for part_id in f.parts}
    kinds = {sketch.parts[part_id].kind for part_id in named}
    assert kinds >= {"supply", "transformer", "transformer3", "autotransformer", "cable", "reactor", "induction_motor"}
    assert network.sources == () and "no-source" in codes(network)


def test_empty_plant() -> None:
    network = build_network(Plant(), Case())
    assert network.nodes == () and network.findings == () and network.y_series.shape == (0, 3)
