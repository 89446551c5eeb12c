import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.model.fault import PHASE_CHOICES, Fault, FaultKind, Place
from tests.engine.networks import INF, Sketch, random_sketch

CHOICES = [(kind, phases) for kind in FaultKind for phases in PHASE_CHOICES[kind]]


def with_a_node_between(sketch: Sketch, branch: int, x: float) -> int:
    """Replace a branch by two pi sections of its pieces with a node between: the network built anew."""
    i, j, z, t, y_from, y_to, part = sketch.branches[branch]
    middle = sketch.node(sketch.kv[i], sketch.turn[i])
    scaled = lambda values, share: tuple(value * share for value in values)  # noqa: E731
    sketch.branches[branch] = (i, middle, scaled(z, x), t, scaled(y_from, x), scaled(y_to, x), part)
    far = tuple((1 - x) * y * r**2 for y, r in zip(y_from, t, strict=True))
    sketch.branch(middle, j, scaled(z, 1 - x), (1, 1, 1), far, scaled(y_to, 1 - x))
    return middle


@settings(max_examples=60, deadline=None)
@given(
    st.integers(0, 2**32 - 1),
    st.sampled_from(CHOICES),
    st.floats(0.01, 0.99),
    st.booleans(),
    st.booleans(),
    st.sampled_from(["nominal", "no-load"]),
)
def test_a_fault_along_a_branch_is_a_fault_at_a_node_put_there(
    seed: int, choice: tuple[FaultKind, str], x: float, charging: bool, converters: bool, prefault: str
) -> None:
    """Against the whole network made and factored again with a node at the place of the fault."""
    rng, other = np.random.default_rng(seed), np.random.default_rng(seed)
    sketch, anew = random_sketch(rng, charging), random_sketch(other, charging)
    if converters:
        for each in (sketch, anew):
            each.converter(0, 0.2, 70.0)
    branch = int(rng.integers(len(sketch.branches)))
    i, j = sketch.branches[branch][:2]
    for each in (sketch, anew):  # a line joins equal voltages
        each.kv[j], each.turn[j] = each.kv[i], each.turn[i]
    middle = with_a_node_between(anew, branch, x)
    one = sketch.study(prefault=prefault).fault(
        Fault(Place(f"W{branch}", "a", fraction=x), *choice, zf_ohm=0.2, zg_ohm=0.1)
    )
    two = anew.study(prefault=prefault).fault(Fault(Place(f"B{middle}"), *choice, zf_ohm=0.2, zg_ohm=0.1))

    size = max(two.ik_ka, 0.1 * one.network.base_ka.max())
    assert np.allclose(one.phases_ka, two.phases_ka, rtol=0, atol=1e-9 * size)
    assert np.allclose(one.voltages_kv, two.voltages_kv[:-1], rtol=0, atol=1e-9 * max(sketch.kv))
    assert np.allclose(one.fault_kv, two.voltages_kv[-1], rtol=0, atol=1e-9 * max(sketch.kv))
    assert one.prefault_kv == pytest.approx(two.prefault_kv, rel=1e-10)
    for key, current in one.terminal_ka.items():
        twin = (f"W{len(sketch.branches)}", "b") if key == (f"W{branch}", "b") else key
        assert np.allclose(current, two.terminal_ka[twin], rtol=0, atol=1e-8 * size), key
    for ours, theirs in zip(one.z_ohm, two.z_ohm, strict=True):
        assert (ours is None) == (theirs is None)
        assert ours is None or ours == pytest.approx(theirs, rel=1e-9)
    for ours, theirs in zip(one.sources, two.sources, strict=True):
        assert ours.at_fault_ka == pytest.approx(theirs.at_fault_ka, abs=1e-9 * size)


def feeder() -> Sketch:
    """Supplies at both ends of a line of 1 + j2 per unit."""
    s = Sketch()
    a, b = s.node(), s.node()
    s.source(a, (0.1j, 0.1j, 0.3j))
    s.source(b, (0.4j, 0.4j, INF))
    s.branch(a, b, (0.01 + 0.2j, 0.01 + 0.2j, 0.1 + 0.6j))
    return s


def test_a_hand_case_from_both_ends() -> None:
    """At 25 %: Z1 is (j0.1 + ¼ z) beside (j0.4 + ¾ z); each side feeds V over its own."""
    z, base = 0.01 + 0.2j, 100 / np.sqrt(3) / 10
    result = feeder().study().fault(Fault(Place("W0", "a", fraction=0.25)))
    left, right = 1 / (0.1j + z / 4), 1 / (0.4j + 0.75 * z)
    assert result.sequence_ka[0] == pytest.approx((left + right) * base, rel=1e-13)
    assert result.terminal_ka["W0", "a"][0] == pytest.approx(left * base, rel=1e-12)
    assert result.terminal_ka["W0", "b"][0] == pytest.approx(right * base, rel=1e-12)
    assert result.z_pu[0] == pytest.approx(1 / (left + right), rel=1e-13)


@pytest.mark.parametrize("fraction,bus,far", [(0.0, "B0", "b"), (1.0, "B1", "a")])
def test_the_ends_are_the_end_nodes(fraction: float, bus: str, far: str) -> None:
    study = feeder().study()
    for kind in FaultKind:
        along = study.fault(Fault(Place("W0", "a", fraction=fraction), kind))
        at_end = study.fault(Fault(Place(bus), kind))
        assert np.array_equal(along.phases_ka, at_end.phases_ka)
        assert np.array_equal(along.voltages_kv, at_end.voltages_kv)
        assert np.array_equal(along.terminal_ka["W0", far], at_end.terminal_ka["W0", far])


def test_close_to_an_end_the_result_goes_over_to_the_end() -> None:
    study = feeder().study()
    for kind in FaultKind:
        near = study.fault(Fault(Place("W0", "a", fraction=1e-9), kind))
        assert np.allclose(near.phases_ka, study.fault(Fault(Place("B0"), kind)).phases_ka, rtol=1e-6)


def test_a_line_whose_ends_lie_on_one_node() -> None:
    """Both pieces lead to the same node: the fault sees them in parallel, z·x(1 − x)."""
    s = Sketch()
    a = s.node()
    s.source(a, (0.1j, 0.1j, 0.1j))
    s.branch(a, a, (1.0j, 1.0j, 1.0j))
    result = s.study().fault(Fault(Place("W0", "a", fraction=0.2)))
    assert result.z_pu[0] == pytest.approx(0.1j + 0.16j, rel=1e-12)
    total = result.phases_ka[0]
    assert result.terminal_ka["W0", "a"][0] == pytest.approx(0.8 * total, rel=1e-12)
    assert result.terminal_ka["W0", "b"][0] == pytest.approx(0.2 * total, rel=1e-12)


def test_no_new_factorisation() -> None:
    study = feeder().study()
    study.fault(Fault(Place("B0")))
    factor = study.equations.factor
    study.fault(Fault(Place("W0", "a", fraction=0.3)))
    assert study.equations.factor is factor
