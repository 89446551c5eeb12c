"""Faults against an independent solution in phases, published examples, and the laws that hold for all networks."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.engine.boundary import boundary_of
from onelinefault.engine.faults import Equations, currents_next_to_faults, solve_everywhere
from onelinefault.errors import SingularNetworkError
from onelinefault.model.fault import PHASE_CHOICES, Fault, FaultKind, Place
from tests.engine.networks import (
    INF,
    Sketch,
    branch_blocks,
    phase_block,
    phase_domain_fault,
    random_sketch,
    turned_voltages,
)

CHOICES = [(kind, phases) for kind in FaultKind for phases in PHASE_CHOICES[kind]]
seeds = st.integers(0, 2**32 - 1)


@settings(max_examples=80, deadline=None)
@given(
    seeds,
    st.sampled_from(CHOICES),
    st.sampled_from([0j, 0.3 + 0.1j]),
    st.sampled_from([0j, 0.2 + 0.05j]),
    st.booleans(),
    st.booleans(),
)
def test_all_voltages_and_currents_agree_with_a_dense_solution_in_phases(
    seed: int, choice: tuple[FaultKind, str], zf: complex, zg: complex, charging: bool, open_loops: bool
) -> None:
    rng = np.random.default_rng(seed)
    study = random_sketch(rng, charging, "1.04 pu", open_loops).study()
    network, (kind, phases) = study.network, choice
    node = int(rng.integers(len(network.nodes)))
    result = study.fault(
        Fault(Place(f"B{node}"), kind, phases, zf * network.base_ohm[node], zg * network.base_ohm[node])
    )
    before = turned_voltages(study, node)
    V, I = phase_domain_fault(network, before, node, kind, phases, zf, zg)  # noqa: E741

    kv, ka = network.nominal_kv[:, None] / np.sqrt(3), network.base_ka
    assert np.allclose(result.phases_ka / ka[node], I, rtol=0, atol=1e-9 * max(1, abs(I).max()))
    assert np.allclose(result.voltages_kv / kv, V, rtol=0, atol=1e-9)
    change = V - before[:, None] * np.exp(np.array([0, -2j, 2j]) * np.pi / 3)
    scale = 1e-8 * max(1, abs(I).max())
    for b, part in enumerate(network.branch_parts):
        ends = network.from_node[b], network.to_node[b]
        for end, terminal, blocks in zip(ends, "ab", branch_blocks(network, b), strict=True):
            into = sum(block @ change[other] for block, other in zip(blocks, ends, strict=True))
            assert np.allclose(result.terminal_ka[part, terminal] / ka[end], into, rtol=0, atol=scale)
    for shunt, part in enumerate(network.shunt_parts):
        home = network.shunt_node[shunt]
        into = phase_block(network.y_shunt[shunt], 0) @ change[home]
        assert np.allclose(result.terminal_ka[part, "out"] / ka[home], into, rtol=0, atol=scale)


@settings(max_examples=40, deadline=None)
@given(seeds, st.sampled_from(list(FaultKind)), st.booleans())
def test_faults_everywhere_are_the_single_faults_and_so_are_the_currents_next_to_them(
    seed: int, kind: FaultKind, converters: bool
) -> None:
    rng = np.random.default_rng(seed)
    sketch = random_sketch(rng)
    if converters:
        sketch.converter(int(rng.integers(len(sketch.kv))), 0.3)
        sketch.converter(0, 0.1, 60.0)
    study = sketch.study()
    network, nodes = study.network, np.arange(len(study.network.nodes))
    everywhere = solve_everywhere(study.equations, study.prefault, nodes, boundary_of(Fault(Place(""), kind)))
    into_from, into_to = currents_next_to_faults(study.equations, everywhere)
    turn = np.array(
        [
            [1, 1, 1],
            [-0.5 - 0.75**0.5 * 1j, -0.5 + 0.75**0.5 * 1j, 1],
            [-0.5 + 0.75**0.5 * 1j, -0.5 - 0.75**0.5 * 1j, 1],
        ]
    )
    for node in nodes:
        single = study.fault(Fault(Place(f"B{node}"), kind))
        base = network.base_ka[node]
        size = max(single.ik_ka, base)
        assert np.allclose(everywhere.current[node] * base, single.sequence_ka, rtol=0, atol=1e-9 * size)
        for b, part in enumerate(network.branch_parts):
            for ends, terminal, found in ((network.from_node, "a", into_from), (network.to_node, "b", into_to)):
                if ends[b] == node:
                    assert np.allclose(
                        turn @ found[b] * base, single.terminal_ka[part, terminal], rtol=0, atol=1e-8 * size
                    )


@settings(max_examples=30, deadline=None)
@given(seeds, st.sampled_from(CHOICES), st.floats(0.01, 1e5))
def test_nothing_depends_on_the_base(seed: int, choice: tuple[FaultKind, str], factor: float) -> None:
    first, second = random_sketch(np.random.default_rng(seed)), random_sketch(np.random.default_rng(seed))
    second.base_mva *= factor
    second.branches = [(i, j, tuple(z * factor for z in zs), *rest) for i, j, zs, *rest in second.branches]
    second.shunts = [(i, tuple(z * factor for z in zs), *rest) for i, zs, *rest in second.shunts]
    fault = Fault(Place("B1"), *choice, zf_ohm=0.1 + 0.02j, zg_ohm=0.05)
    one, other = first.study().fault(fault), second.study().fault(fault)
    largest = abs(one.phases_ka).max()
    assert np.allclose(other.phases_ka, one.phases_ka, rtol=0, atol=1e-12 * largest)
    assert np.allclose(other.voltages_kv, one.voltages_kv, rtol=0, atol=1e-12 * abs(one.voltages_kv).max())
    for key, current in one.terminal_ka.items():
        assert np.allclose(other.terminal_ka[key], current, rtol=0, atol=1e-11 * max(abs(current).max(), largest))
    for ours, theirs in zip(one.z_ohm, other.z_ohm, strict=True):
        assert (ours is None) == (theirs is None)
        assert ours is None or theirs == pytest.approx(ours, rel=1e-12)


def glover() -> Sketch:
    """Glover and Sarma, Power System Analysis and Design, chapter 9: generator, 138 kV line, motor, 100 MVA base."""
    s = Sketch(prefault="1.05 pu")
    generator, high1, high2, motor = s.node(13.8, -30), s.node(138), s.node(138), s.node(13.8, -30)
    line = 138**2 / 100
    s.source(generator, (0.15j, 0.17j, 0.05j))
    s.branch(high1, generator, (0.1j, 0.1j, INF))
    s.earthing(high1, 0.1j)
    s.branch(high1, high2, (20j / line, 20j / line, 60j / line))
    s.branch(high2, motor, (0.1j, 0.1j, INF))
    s.earthing(high2, 0.1j)
    s.source(motor, (0.2j, 0.21j, 0.1j + 3 * 0.05j))
    return s


@pytest.mark.parametrize(
    "kind,sequence,published",
    [
        (FaultKind.THREE_PHASE, 0, 7.558),
        (FaultKind.LINE_TO_EARTH, 2, 1.96427),
        (FaultKind.LINE_TO_LINE, 0, 3.690),
        (FaultKind.TWO_LINES_TO_EARTH, 0, 4.5464),
        (FaultKind.TWO_LINES_TO_EARTH, 1, 2.873),
    ],
)
def test_generator_line_and_motor_of_a_textbook(kind: FaultKind, sequence: int, published: float) -> None:
    """Glover and Sarma, examples 9.1 to 9.5, printed to four or five digits."""
    result = glover().study().fault(Fault(Place("B3"), kind))
    assert abs(result.sequence_ka[sequence]) / (100 / np.sqrt(3) / 13.8) == pytest.approx(published, rel=2e-4)


def test_textbook_currents_in_kiloamperes_and_impedances() -> None:
    """Glover and Sarma, example 9.3 (24.65 kA) and 9.1 (Z1 0.13893, Z2 0.14562, Z0 0.25 per unit)."""
    result = glover().study().fault(Fault(Place("B3"), FaultKind.LINE_TO_EARTH))
    assert result.ik_ka == pytest.approx(24.65, rel=3e-4)
    assert [z.imag for z in result.z_pu if z] == pytest.approx([0.13893, 0.14562, 0.25], rel=5e-5)


@pytest.mark.parametrize(
    "kind,phase,zf,zg,published",
    [
        (FaultKind.THREE_PHASE, 0, 0.1j, 0, 3.125),
        (FaultKind.LINE_TO_EARTH, 0, 0.1j, 0, 2.7523),
        (FaultKind.LINE_TO_EARTH, 0, 0, 0.1j, 2.7523),
        (FaultKind.LINE_TO_LINE, 1, 0.1j, 0, 3.2075),
        (FaultKind.TWO_LINES_TO_EARTH, 1, 0, 0.1j, 4.0583),
    ],
)
def test_faults_through_an_impedance_of_a_textbook(
    kind: FaultKind, phase: int, zf: complex, zg: complex, published: float
) -> None:
    """Saadat, Power System Analysis, chapter 10: three-bus network, faults at bus 3 through j0.1 per unit."""
    s = Sketch()
    g1, g2, one, two, three = s.node(20), s.node(20), s.node(220), s.node(220), s.node(220)
    s.source(g1, (0.15j, 0.15j, 0.05j + 3 * 0.083333333j))
    s.source(g2, (0.15j, 0.15j, INF))
    s.branch(one, g1, (0.1j, 0.1j, 0.1j))
    s.branch(two, g2, (0.1j, 0.1j, INF))
    s.earthing(two, 0.1j)
    s.branch(one, two, (0.125j, 0.125j, 0.3j))
    s.branch(one, three, (0.15j, 0.15j, 0.35j))
    s.branch(two, three, (0.25j, 0.25j, 0.7125j))
    ohm = 220**2 / 100
    result = s.study().fault(Fault(Place("B4"), kind, "", zf * ohm, zg * ohm))
    assert abs(result.phases_ka[phase]) / (100 / np.sqrt(3) / 220) == pytest.approx(published, rel=5e-5)


def test_a_resonant_network_is_refused_by_name() -> None:
    s = Sketch()
    a, b = s.node(), s.node()
    s.source(a, (0.1j, 0.1j, 0.1j))
    s.branch(a, b, (0.2j, 0.2j, 0.2j), y_to=(0, 1 / 0.3 * 1j, 0))  # ωC cancels ωL exactly in the negative sequence
    with pytest.raises(SingularNetworkError, match=r"negative-sequence impedances cancel around Bus"):
        s.study().fault(Fault(Place("B1")))


def test_the_factors_are_made_once() -> None:
    equations = Equations(glover().network())
    assert equations.factor is equations.factor and equations.pattern is equations.pattern
