"""Laws of the whole result: Kirchhoff everywhere, patterns across transformers, neutrals, shares."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.model.fault import PHASE_CHOICES, Fault, FaultKind, Place
from tests.engine.networks import INF, Sketch, random_sketch

CHOICES = [(kind, phases) for kind in FaultKind for phases in PHASE_CHOICES[kind]]
seeds = st.integers(0, 2**32 - 1)


def assert_kirchhoff(result) -> None:
    """At each terminal: what wires bring in = what the part takes + what leaves into the fault (all phases)."""
    network = result.network
    size = max(result.ik_ka, *(abs(v).max() for v in result.terminal_ka.values()), 1e-3)
    brought = {key: np.zeros(3, complex) for key in result.terminal_ka}
    for joint in network.joints:
        if joint.is_wire:
            brought[joint.a] -= result.wire_ka[joint.id]
            brought[joint.b] += result.wire_ka[joint.id]
    for key, current in result.terminal_ka.items():
        here = (result.fault.place.part, result.fault.place.terminal) == key and result.fault.place.fraction is None
        taken = current + (result.phases_ka if here else 0)
        assert np.allclose(brought[key], taken, rtol=0, atol=1e-9 * size), key
    for joint in network.joints:
        if not joint.is_wire:
            through = result.terminal_ka[joint.id, "a"] + result.terminal_ka[joint.id, "b"]
            assert np.allclose(through, 0, rtol=0, atol=1e-12 * size)


@settings(max_examples=50, deadline=None)
@given(seeds, st.sampled_from(CHOICES), st.booleans(), st.booleans(), st.sampled_from(["nominal", "no-load"]))
def test_kirchhoff_holds_at_every_terminal(
    seed: int, choice: tuple[FaultKind, str], charging: bool, converters: bool, prefault: str
) -> None:
    rng = np.random.default_rng(seed)
    sketch = random_sketch(rng, charging)
    n = len(sketch.kv)
    if converters:
        sketch.converter(int(rng.integers(n)), 0.2)
    node = int(rng.integers(n))
    sketch.breaker(node, (f"B{node}", "bar"), sketch.terminals[node][-1])  # beside the wire: a ring
    study = sketch.study(prefault=prefault)
    if seed % 2:
        assert_kirchhoff(study.fault(Fault(Place(f"B{rng.integers(n)}"), *choice, zf_ohm=0.1)))
    else:
        part = f"W{rng.integers(len(sketch.branches))}"
        assert_kirchhoff(study.fault(Fault(Place(part, "a", fraction=float(rng.uniform(0.05, 0.95))), *choice)))


@settings(max_examples=30, deadline=None)
@given(seeds, st.sampled_from(CHOICES))
def test_shares_of_the_sources_add_up_to_the_fault(seed: int, choice: tuple[FaultKind, str]) -> None:
    rng = np.random.default_rng(seed)
    sketch = random_sketch(rng)
    sketch.converter(int(rng.integers(len(sketch.kv))), 0.2)
    result = sketch.study().fault(Fault(Place(f"B{rng.integers(len(sketch.kv))}"), *choice))
    if result.ik_ka > 1e-9:
        assert sum(s.at_fault_ka for s in result.sources) == pytest.approx(result.sequence_ka[0], rel=1e-9)
        assert sum(s.share for s in result.sources) == pytest.approx(1, rel=1e-9)
    for source in result.sources:
        terminal = "line" if source.part.startswith("C") else "out"
        assert np.array_equal(source.phases_ka, -result.terminal_ka[source.part, terminal])


def delta_star(high_turn=0.0, low_turn=30.0):
    """110 kV supply, transformer with its star earthed on the 10 kV side: delta towards the supply."""
    s = Sketch()
    high, low = s.node(110, high_turn), s.node(10, low_turn)
    s.source(high, (0.01 + 0.1j, 0.01 + 0.1j, 0.3j))
    s.branch(high, low, (0.12j, 0.12j, INF))
    s.earthing(low, 0.11j)
    s.neutrals.append(("T", "low", "shunt", 1))
    return s.study()


def test_line_to_earth_behind_a_delta_draws_one_one_zero() -> None:
    """Dyn11, a to earth on the star side: A and B of the delta carry 1/√3 of the (referred) current, opposite, C
    none."""
    result = delta_star().fault(Fault(Place("B1"), FaultKind.LINE_TO_EARTH))
    A, B, C = result.terminal_ka["W0", "a"]
    referred = result.phases_ka[0] * 10 / 110
    assert pytest.approx(referred / np.sqrt(3), rel=1e-12) == A
    assert pytest.approx(-referred / np.sqrt(3), rel=1e-12) == B
    assert abs(C) < 1e-12


def test_line_to_line_behind_a_delta_draws_one_two_one() -> None:
    """b to c on the star side of a Dyn11 (windings AB, BC, CA carry a, b, c): A = a − c, B = b − a, C = c − b."""
    result = delta_star().fault(Fault(Place("B1"), FaultKind.LINE_TO_LINE))
    b = result.phases_ka[1] * 10 / 110 / np.sqrt(3)
    assert np.allclose(result.terminal_ka["W0", "a"], [b, b, -2 * b], rtol=1e-12)


def test_the_low_side_of_a_dyn11_leads_by_30_degrees_before_and_during_the_fault() -> None:
    result = delta_star().fault(Fault(Place("B1"), FaultKind.THREE_PHASE))
    assert np.angle(result.prefault_voltages_kv[:, 0], deg=True) == pytest.approx([-30, 0], abs=1e-12)
    assert np.angle(result.terminal_ka["W0", "a"] / -result.terminal_ka["W0", "b"], deg=True) == pytest.approx(
        [-30] * 3, abs=1e-9
    )


def test_the_reference_is_the_faulted_node_whatever_its_own_displacement() -> None:
    one = delta_star().fault(Fault(Place("B1"), FaultKind.TWO_LINES_TO_EARTH))
    other = delta_star(120, 150).fault(Fault(Place("B1"), FaultKind.TWO_LINES_TO_EARTH))
    assert np.allclose(one.voltages_kv, other.voltages_kv, atol=1e-12)
    assert np.allclose(one.terminal_ka["W0", "a"], other.terminal_ka["W0", "a"], atol=1e-12)


def test_an_earthed_star_returns_all_of_the_earth_fault_current() -> None:
    result = delta_star().fault(Fault(Place("B1"), FaultKind.LINE_TO_EARTH))
    assert result.neutral_ka == {("T", "low"): pytest.approx(-result.residual_ka, rel=1e-12)}
    assert result.residual_ka == pytest.approx(result.phases_ka.sum(), rel=1e-12)


def test_an_isolated_network_only_lifts_its_healthy_lines() -> None:
    """Everywhere in the isolated part to √3, behind the delta not at all."""
    s = Sketch()
    a, b, c = s.node(110), s.node(10, 30), s.node(10, 30)
    s.source(a, (0.1j, 0.1j, 0.1j))
    s.branch(a, b, (0.1j, 0.1j, INF))
    s.branch(b, c, (0.2j, 0.2j, 0.5j))
    result = s.study().fault(Fault(Place(f"B{c}"), FaultKind.LINE_TO_EARTH))
    assert result.ik_ka == 0 and result.peak_ka == 0 and result.fault_level_mva == 0 and np.isnan(result.x_over_r)
    assert result.z_ohm[2] is None and result.z_ohm[0] is not None
    ratio = abs(result.voltages_kv) / (result.network.nominal_kv[:, None] / np.sqrt(3))
    assert np.allclose(ratio, [[1, 1, 1], [0, np.sqrt(3), np.sqrt(3)], [0, np.sqrt(3), np.sqrt(3)]], atol=1e-12)
    assert result.voltage_left == pytest.approx([1, 0, 0], abs=1e-12)
    assert [finding.code for finding in result.findings] == ["unearthed", "assumed"]


def test_a_star_star_transformer_of_clock_6_turns_the_earth_fault_current_round() -> None:
    """YNyn6: every phase of the low side is the negative of the high side's, the zero sequence too (ratio −1)."""
    s = Sketch()
    high, low = s.node(110, 0), s.node(10, 180)
    s.source(high, (0.1j, 0.1j, 0.1j))
    s.branch(high, low, (0.1j, 0.1j, 0.1j), t=(1, 1, -1))
    result = s.study().fault(Fault(Place(f"B{low}"), FaultKind.LINE_TO_EARTH))
    into, out = result.terminal_ka["W0", "a"] * 110, -result.terminal_ka["W0", "b"] * 10
    assert np.allclose(into, -out, rtol=0, atol=1e-11)
    assert abs(into[0]) > 100 and np.allclose(into[1:], 0, atol=1e-11)


def test_reported_figures_of_a_hand_case() -> None:
    """500 MVA, X/R 10 at 10 kV through 0.5 ohm: Z1 = 0.2 ohm ∠ 84.29°, so Z = 0.0199 + 0.699j and I = 10/√3/|Z|."""
    s = Sketch(base_mva=50)
    a, b = s.node(10), s.node(10)
    z1 = 0.2 * np.exp(1j * np.arctan(10))
    s.source(a, (z1 / 2, z1 / 2, INF))  # base impedance 2 ohm
    s.branch(a, b, (0.25j, 0.25j, 0.25j))
    result = s.study().fault(Fault(Place("B1")))
    z = z1 + 0.5j
    current = 10 / np.sqrt(3) / abs(z)
    assert result.z_ohm[0] == pytest.approx(z, rel=1e-13)
    assert result.ik_ka == pytest.approx(current, rel=1e-13)
    assert result.fault_level_mva == pytest.approx(np.sqrt(3) * 10 * current, rel=1e-13)
    assert result.x_over_r == pytest.approx(z.imag / z.real, rel=1e-12)
    assert result.peak_ka == pytest.approx(np.sqrt(2) * current * (1 + np.exp(-np.pi * z.real / z.imag)), rel=1e-13)
    assert result.voltages_kv[0, 0] == pytest.approx(10 / np.sqrt(3) * 0.5j / z, rel=1e-12)
    assert np.allclose(result.fault_kv, 0, atol=1e-14)


def test_no_load_voltages_include_what_flows_before_the_fault() -> None:
    """Far from the fault's island nothing changes: the balancing current between two supplies stays as it was."""
    s = Sketch()
    a, b, c = s.node(), s.node(), s.node()
    s.source(a, (0.1j,) * 3)
    s.source(b, (0.1j,) * 3)
    s.branch(a, b, (0.2j,) * 3, t=(1.1, 1.1, 1.1))
    s.source(c, (0.1j,) * 3)
    result = s.study(prefault="no-load").fault(Fault(Place(f"B{c}")))
    around = (1 / 1.1 - 1) / (0.1j / 1.21 + 0.3j) * 100 / np.sqrt(3) / 10
    assert result.terminal_ka["W0", "b"][0] == pytest.approx(-around, rel=1e-12)
    assert result.terminal_ka["S1", "out"][0] == pytest.approx(around, rel=1e-12)
    nominal = s.study().fault(Fault(Place(f"B{c}")))
    assert np.all(nominal.terminal_ka["W0", "b"] == 0)
