import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.engine.joints import InnerCurrents
from onelinefault.engine.network import Joint


def incidence(joints, row):
    B = np.zeros((len(row), len(joints)))
    for e, joint in enumerate(joints):
        B[row[joint.a], e] += 1
        B[row[joint.b], e] -= 1
    return B


@settings(max_examples=60, deadline=None)
@given(st.integers(0, 2**32 - 1), st.integers(1, 12), st.integers(0, 6))
def test_currents_are_the_smallest_that_meet_kirchhoff(seed: int, n: int, extra: int) -> None:
    """Against numpy's least squares on the incidence matrix of random forests with rings, loops and parallel joints."""
    rng = np.random.default_rng(seed)
    row = {(f"p{k}", "t"): k for k in range(n)}
    pairs = [(k, int(rng.integers(k))) for k in range(1, n) if rng.random() < 0.85]
    pairs += [tuple(rng.integers(0, n, 2).tolist()) for _ in range(extra)]
    pairs = [pair if rng.random() < 0.5 else pair[::-1] for pair in pairs]
    joints = [Joint(f"w{e}", True, (f"p{a}", "t"), (f"p{b}", "t")) for e, (a, b) in enumerate(pairs)]
    B = incidence(joints, row)
    taken = -B @ rng.normal(size=(len(joints), 6)).view(complex)  # any flow's own demand, so that it can be met
    flow = InnerCurrents.of(joints, row).flows(taken)
    assert np.allclose(flow, np.linalg.lstsq(B, -taken, rcond=None)[0] if joints else flow, atol=1e-9)
    assert np.allclose(B @ flow, -taken, atol=1e-12)


def board(*pairs, devices=()):
    """Joints between terminals of one letter each; devices by their ends' letters, with an a and a b terminal."""
    row = {}
    joints = []
    for one, other in pairs:
        ends = [(end[0], end[1:] or "t") for end in (one, other)]
        for end in ends:
            row.setdefault(end, len(row))
        joints.append(Joint(one + other, True, *ends))
    for device in devices:
        joints.append(Joint(device, False, (device, "a"), (device, "b")))
    return InnerCurrents.of(joints, row), row


def test_a_breaker_between_the_bars_carries_one_bar_only() -> None:
    """Incomer 1 (10 kA) on bar X, incomer 2 (4 kA) on bar Y, coupler Q between; fault on X: 4 kA through the
    coupler."""
    inner, row = board(("I", "X"), ("J", "Y"), ("X", "Qa"), ("Y", "Qb"), devices="Q")
    taken = np.zeros((len(row), 3), complex)
    taken[row["I", "t"]], taken[row["J", "t"]], taken[row["X", "t"]] = -10, -4, 14
    flow = inner.flows(taken)
    assert flow[:4, 0] == pytest.approx([10, 4, -4, 4])
    inner.into_devices(flow, taken)
    assert taken[row["Q", "a"], 0] == pytest.approx(-4) and taken[row["Q", "b"], 0] == pytest.approx(4)
    assert list(inner.wires) == ["IX", "JY", "XQa", "YQb"]


def test_two_closed_ways_share_equally() -> None:
    inner, row = board(("X", "Qa"), ("Y", "Qb"), ("X", "Ra"), ("Y", "Rb"), devices="QR")
    taken = np.zeros((len(row), 3), complex)
    taken[row["X", "t"]], taken[row["Y", "t"]] = -6, 6
    flow = inner.flows(taken)
    assert flow[4:, 2] == pytest.approx([3, 3])


def test_trees_are_exact() -> None:
    inner, row = board(*(("X", f"F{k}") for k in range(50)))
    taken = np.zeros((len(row), 3), complex)
    values = np.random.default_rng(0).normal(size=(50, 6)).view(complex)
    for k in range(50):
        taken[row["F", f"{k}"]] = values[k]
    assert np.array_equal(inner.flows(taken), values)


def test_a_plant_without_joints() -> None:
    inner = InnerCurrents.of([], {("a", "t"): 0})
    assert inner.flows(np.zeros((1, 3), complex)).shape == (0, 3)
