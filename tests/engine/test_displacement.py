"""Displacements and ratios carried over graphs, against paths added up by hand and loops that are known to be wrong."""

import numpy as np
import pytest

from onelinefault.engine.displacement import Carried, carry, wrapped


def over(n: int, edges: list[tuple[int, int, float]], period: float = 360.0) -> Carried:
    one, other = (np.array([e[k] for e in edges], np.int64) for k in (0, 1))
    return carry(n, one, other, np.array([e[2] for e in edges], np.float64), period, 1e-6)


def test_values_add_up_along_the_path_in_either_direction() -> None:
    found = over(5, [(0, 1, -30.0), (2, 1, 150.0), (3, 4, 30.0)])
    assert found.values.tolist() == [0.0, -30.0, -180.0, 0.0, 30.0]
    assert not found.broken


def test_equal_transformers_in_parallel_close() -> None:
    assert not over(2, [(0, 1, -330.0), (0, 1, 30.0), (1, 0, -30.0)]).broken


def test_a_loop_through_all_clock_numbers_closes() -> None:
    assert not over(3, [(0, 1, -150.0), (1, 2, -330.0), (2, 0, 120.0)]).broken


def test_the_loop_that_does_not_close_is_the_wrong_ones() -> None:
    # three in parallel, the first by 60° wrong: both loops with it, none between the good ones
    found = over(2, [(0, 1, -90.0), (0, 1, -30.0), (0, 1, -30.0)])
    assert [set(found.loop(k)) for k in found.broken] == [{0, 1}, {0, 2}]


def test_loop_leaves_out_the_way_to_it() -> None:
    # 0–1–2 leads to the ring 2–3–4–5–2
    edges = [(0, 1, 0.0), (1, 2, 0.0), (2, 3, 30.0), (3, 4, 0.0), (4, 5, 0.0), (5, 2, 0.0)]
    found = over(6, edges)
    (broken,) = found.broken
    assert set(found.loop(broken)) == {2, 3, 4, 5}


def test_a_branch_from_a_node_to_itself() -> None:
    found = over(1, [(0, 0, 30.0)])
    assert found.broken == (0,) and found.loop(0) == (0,)


def test_without_a_period_every_difference_counts() -> None:
    assert over(2, [(0, 1, 0.0), (0, 1, 360.0)], period=0.0).broken == (1,)


@pytest.mark.parametrize(("angle", "between"), [(-180, 180), (180, 180), (-330, 30), (540, 180), (-30, -30), (0, 0)])
def test_wrapped(angle: float, between: float) -> None:
    assert wrapped(np.array([float(angle)])).tolist() == [between]
