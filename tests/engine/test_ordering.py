"""Symbolic analysis against elimination by hand on sets, SuperLU's fill, and the laws of elimination."""

import itertools

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.sparse import csc_array
from scipy.sparse.linalg import splu

from onelinefault.engine.ordering import Pattern, SummingMatrix, analyse


def tree_with_ties(n: int, seed: int, ties: float = 0.08) -> tuple[np.ndarray, np.ndarray]:
    """Couplings of a tree with fan-out 2 to 9 and short ties, nodes numbered at random."""
    rng = np.random.default_rng(seed)
    parents = np.repeat(np.arange(n), rng.integers(2, 10, n))[: n - 1]
    here = rng.integers(0, n - 9, int(ties * n)) if n > 20 else np.zeros(0, np.int64)
    there = here + rng.integers(1, 9, len(here))
    shuffled = rng.permutation(n)
    return shuffled[np.concatenate((parents, here))], shuffled[np.concatenate((np.arange(1, n), there))]


def eliminated_by_hand(pattern: Pattern) -> set[frozenset[int]]:
    """All couplings that ever exist when the nodes below the top go one by one: textbook elimination on sets."""
    neighbours: dict[int, set[int]] = {node: set() for node in range(pattern.n_nodes)}
    for a, b in zip(pattern.from_node.tolist(), pattern.to_node.tolist(), strict=True):
        if a != b:
            neighbours[a].add(b)
            neighbours[b].add(a)
    seen = {frozenset((a, b)) for a in neighbours for b in neighbours[a]}
    for node in pattern.order[: pattern.top].tolist():
        for a, b in itertools.permutations(neighbours[node], 2):
            neighbours[a].add(b)
            seen.add(frozenset((a, b)))
        for a in neighbours.pop(node):
            neighbours[a].discard(node)
    return seen


def slots_as_couplings(pattern: Pattern) -> list[frozenset[int]]:
    """The two nodes of every slot, read from the levels and the top."""
    found: list[frozenset[int]] = []
    for level in pattern.levels:
        pivots = np.arange(pattern.n_nodes)[level.pivots][level.owner]
        assert len(pivots) == level.slots.stop - level.slots.start
        found += [frozenset(pair) for pair in zip(pivots.tolist(), level.neighbour.tolist(), strict=True)]
    top = zip((pattern.top + pattern.top_row).tolist(), (pattern.top + pattern.top_column).tolist(), strict=True)
    found += [frozenset(pair) for pair in top]
    return [frozenset(int(pattern.order[place]) for place in pair) for pair in found]


def check(pattern: Pattern) -> None:
    """What every pattern has to fulfil."""
    assert sorted(pattern.order.tolist()) == list(range(pattern.n_nodes))
    assert (pattern.order[pattern.place] == np.arange(pattern.n_nodes)).all()
    slots = slots_as_couplings(pattern)
    assert len(slots) == len(set(slots)) == pattern.n_slots
    assert set(slots) == eliminated_by_hand(pattern)
    for coupling, slot in enumerate(pattern.coupling_slot.tolist()):
        ends = frozenset((int(pattern.from_node[coupling]), int(pattern.to_node[coupling])))
        assert ends == (slots[slot - pattern.n_nodes] if slot >= pattern.n_nodes else {int(pattern.order[slot])})
    for level in pattern.levels:
        assert (level.neighbour >= level.pivots.stop).all()  # no two pivots of a level are neighbours
        ends = list(zip(level.owner.tolist(), pattern.order[level.neighbour].tolist(), strict=True))
        pairs = set(zip(level.pair_a.tolist(), level.pair_b.tolist(), strict=True))
        same_pivot = itertools.combinations(range(len(ends)), 2)
        assert pairs == {(a, b) for a, b in same_pivot if ends[a][0] == ends[b][0]}
        one_side = level.partner_slot[: len(level.pair_a)].tolist()
        for a, b, slot in zip(level.pair_a.tolist(), level.pair_b.tolist(), one_side, strict=True):
            assert slots[slot] == {ends[a][1], ends[b][1]}


@pytest.mark.parametrize(("n", "ties"), [(30, 0.0), (80, 0.08), (150, 0.5)])
def test_slots_are_what_elimination_by_hand_makes(n: int, ties: float) -> None:
    check(analyse(n, *tree_with_ties(n, n, ties)))


@settings(max_examples=40, deadline=None)
@given(st.data())
def test_any_small_network(data: st.DataObject) -> None:
    """Beside a full mesh of 20, which alone stays in the dense top: so the small network goes by levels."""
    n = data.draw(st.integers(1, 40))
    node = st.integers(0, n - 1)
    ends = data.draw(st.lists(st.tuples(node, node), min_size=n // 2, max_size=60))
    ends += list(itertools.combinations(range(n, n + 20), 2))
    check(analyse(n + 20, np.array([a for a, _ in ends]), np.array([b for _, b in ends])))


@pytest.mark.parametrize("n", [0, 1, 5])
def test_nodes_without_couplings(n: int) -> None:
    pattern = analyse(n, np.zeros(0, np.int64), np.zeros(0, np.int64))
    check(pattern)
    assert pattern.top == n


def test_fill_is_no_worse_than_superlu_minimum_degree() -> None:
    n = 2000
    rows, cols = tree_with_ties(n, 3)
    matrix = csc_array((-np.ones(2 * len(rows)), (np.r_[rows, cols], np.r_[cols, rows])), shape=(n, n))
    matrix = csc_array(matrix + csc_array((np.full(n, 100.0), (np.arange(n), np.arange(n))), shape=(n, n)))
    options = {"SymmetricMode": True}
    fill_of_superlu = splu(matrix, permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.0, options=options).L.nnz - n
    assert analyse(n, rows, cols).n_slots <= 1.05 * fill_of_superlu


def test_a_star_makes_no_fill_and_goes_in_one_level() -> None:
    pattern = analyse(1001, np.zeros(1000, np.int64), np.arange(1, 1001))
    assert pattern.n_slots == 1000
    assert pattern.levels[0].pivots == slice(0, 1000)


def test_a_chain_needs_few_levels() -> None:
    n = 4096  # from its two ends it would take 2048
    assert len(analyse(n, np.arange(n - 1), np.arange(1, n)).levels) <= 3 * np.log2(n)


def test_a_full_mesh_is_all_dense() -> None:
    ends = np.array(list(itertools.combinations(range(40), 2)))
    pattern = analyse(40, ends[:, 0], ends[:, 1])
    assert pattern.levels == ()
    assert pattern.top == 0
    check(pattern)


def test_parallel_and_reversed_couplings_share_a_slot() -> None:
    pattern = analyse(3, np.array([0, 1, 1, 2]), np.array([1, 0, 2, 2]))
    assert pattern.n_couplings == 4
    assert pattern.n_slots == 2
    assert pattern.coupling_slot[0] == pattern.coupling_slot[1]
    assert pattern.coupling_slot[3] == pattern.place[2]


def test_keys_beyond_32_bits() -> None:
    n = 70_000  # n² > 2³², where 32-bit keys of different couplings would meet
    rows, cols = np.arange(n - 40, n - 1, dtype=np.int32), np.arange(n - 39, n, dtype=np.int32)
    pattern = analyse(n, rows, cols)
    assert len(set(pattern.coupling_slot.tolist())) == 39
    assert pattern.coupling_slot.min() >= n


def test_the_same_couplings_give_the_same_pattern_in_any_sequence() -> None:
    rows, cols = tree_with_ties(300, 5)
    shuffled = np.random.default_rng(0).permutation(len(rows))
    one, other = analyse(300, rows, cols), analyse(300, cols[shuffled], rows[shuffled])
    assert (one.order == other.order).all()
    assert (one.coupling_slot[shuffled] == other.coupling_slot).all()


def test_summing_matrix_adds_rows_to_their_targets() -> None:
    target = np.array([2, 0, 2, 2])
    operand = np.arange(24).reshape(4, 3, 2) * (1 - 2j)
    expected = np.zeros((5, 3, 2), np.complex128)
    np.add.at(expected, target, operand)
    assert (SummingMatrix.of(5, target) @ operand == expected).all()
    assert (SummingMatrix.of(5, np.zeros(0, np.int64)) @ np.zeros((0, 3), np.complex128) == np.zeros((5, 3))).all()


@pytest.mark.parametrize(("n", "rows", "cols"), [(3, [0], [3]), (3, [-1], [0]), (3, [0, 1], [1]), (0, [0], [0])])
def test_ends_that_cannot_be_are_refused(n: int, rows: list[int], cols: list[int]) -> None:
    with pytest.raises(ValueError, match="coupling"):
        analyse(n, np.array(rows), np.array(cols))
