"""The sparse solver against numpy's dense inverse, circuits solved by hand, and the laws of networks."""

from dataclasses import dataclass

import networkx as nx
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.engine.ordering import analyse
from onelinefault.engine.solver import Factor, earthed_nodes, factorise
from onelinefault.errors import SingularNetworkError, StudyError


@dataclass(frozen=True)
class Circuit:
    """Branches with series admittances (c, k), 0 where a scenario lacks them, and shunts (n, k)."""

    n: int
    rows: np.ndarray
    cols: np.ndarray
    series: np.ndarray
    shunt: np.ndarray

    @property
    def diagonal(self) -> np.ndarray:
        total = self.shunt.astype(complex)
        np.add.at(total, self.rows, self.series)
        np.add.at(total, self.cols, self.series)
        return total

    @property
    def earthed(self) -> np.ndarray:
        return earthed_nodes(self.n, self.rows, self.cols, self.series != 0, self.shunt != 0)

    def factor(self) -> Factor:
        return factorise(analyse(self.n, self.rows, self.cols), self.diagonal, -self.series, self.earthed)

    def dense(self, scenario: int) -> np.ndarray:
        return dense(self.rows, self.cols, self.diagonal[:, scenario], -self.series[:, scenario])


def dense(rows: np.ndarray, cols: np.ndarray, diagonal: np.ndarray, off_diagonal: np.ndarray) -> np.ndarray:
    matrix = np.diag(diagonal).astype(complex)
    np.add.at(matrix, (rows, cols), off_diagonal)
    np.add.at(matrix, (cols, rows), off_diagonal)
    return matrix


def assert_is_inverse(factor: Factor, scenario: int, z: np.ndarray, relative: float = 1e-12) -> None:
    """All of diagonal, adjacent, columns and solve against the full inverse z, relative to its largest entry."""
    pattern = factor.pattern
    within = relative * np.abs(z).max()
    nodes = np.random.default_rng(0).integers(0, pattern.n_nodes, 5)
    rhs = np.random.default_rng(1).normal(size=(pattern.n_nodes, 2)) + 0.5j
    assert np.abs(factor.diagonal()[:, scenario] - z.diagonal()).max() < within
    assert np.abs(factor.adjacent()[:, scenario] - z[pattern.from_node, pattern.to_node]).max(initial=0) < within
    assert np.abs(factor.columns(nodes)[:, :, scenario] - z[:, nodes]).max() < within
    assert np.abs(factor.solve(rhs)[:, :, scenario] - z @ rhs).max() < within * pattern.n_nodes


def plant(n: int, seed: int, ties: float = 0.08, k: int = 3, far: bool = False) -> Circuit:
    """A tree with fan-out 2 to 9 and ties; motors at a tenth of the nodes; a supply at the root, numbered at random."""
    rng = np.random.default_rng(seed)
    parents = np.repeat(np.arange(n), rng.integers(2, 10, n))[: n - 1]
    here = rng.integers(0, n, int(ties * n))
    there = rng.integers(0, n, len(here)) if far else np.clip(here + rng.integers(1, 9, len(here)), 0, n - 1)
    number = rng.permutation(n)
    rows, cols = np.concatenate((parents, here)), np.concatenate((np.arange(1, n), there))
    rows, cols = rows[rows != cols], cols[rows != cols]
    series = 1 / (rng.uniform(0.001, 0.05, (len(rows), k)) + 1j * rng.uniform(0.01, 0.2, (len(rows), k)))
    shunt = np.zeros((n, k), complex)
    shunt[rng.integers(0, n, max(1, n // 10))] = 1 / (0.02 + 0.3j)
    shunt[number[0]] += 1 / (0.001 + 0.02j)
    return Circuit(n, number[rows], number[cols], series, shunt)


@pytest.mark.parametrize(
    ("n", "ties", "far"), [(2, 0.0, False), (17, 0.1, False), (300, 0.08, False), (300, 0.6, True), (500, 0.5, True)]
)
def test_agrees_with_the_dense_inverse(n: int, ties: float, far: bool) -> None:
    circuit = plant(n, seed=n, ties=ties, far=far)
    factor = circuit.factor()
    assert factor.pivot_fallback == (False, False, False)
    for s in range(3):
        assert_is_inverse(factor, s, np.linalg.inv(circuit.dense(s)))


def test_a_meshed_network_uses_the_halved_dense_top() -> None:
    circuit = plant(400, seed=8, ties=1.2, far=True)
    factor = circuit.factor()
    assert len(factor.top_inverse[0]) > 64
    assert_is_inverse(factor, 2, np.linalg.inv(circuit.dense(2)))


def test_kirchhoff_at_every_node_and_reciprocity() -> None:
    circuit = plant(200, seed=4)
    columns = circuit.factor().columns(np.arange(200))
    assert np.abs(columns - columns.transpose(1, 0, 2)).max() < 1e-13 * np.abs(columns).max()
    drop = columns[circuit.rows] - columns[circuit.cols]
    current = circuit.series[:, None, :] * drop  # from rows to cols, (c, 200, 3)
    out = circuit.shunt[:, None, :] * columns
    np.add.at(out, circuit.rows, current)
    np.add.at(out, circuit.cols, -current)
    assert np.abs(out - np.eye(200)[:, :, None]).max() < 1e-10


def test_numbering_and_sequence_of_parts_change_nothing() -> None:
    circuit = plant(150, seed=6)
    rng = np.random.default_rng(9)
    number, turn = rng.permutation(150), rng.permutation(len(circuit.rows))
    shunt = np.empty_like(circuit.shunt)
    shunt[number] = circuit.shunt
    other = Circuit(150, number[circuit.cols[turn]], number[circuit.rows[turn]], circuit.series[turn], shunt)
    one, two = circuit.factor(), other.factor()
    assert one.diagonal() == pytest.approx(two.diagonal()[number], rel=1e-12)
    assert one.adjacent()[turn] == pytest.approx(two.adjacent(), rel=1e-12)


def test_many_scenarios_equal_each_alone() -> None:
    circuit = plant(120, seed=2, k=48)
    circuit.series[::7, ::5] = 0.0  # some branches are open in some scenarios
    together = circuit.factor()
    for s in (0, 5, 47):
        alone = Circuit(120, circuit.rows, circuit.cols, circuit.series[:, [s]], circuit.shunt[:, [s]]).factor()
        for mine, its in ((together.diagonal(), alone.diagonal()), (together.adjacent(), alone.adjacent())):
            assert (np.isinf(mine[:, s]) == np.isinf(its[:, 0])).all()
            assert mine[~np.isinf(its[:, 0]), s] == pytest.approx(its[~np.isinf(its)], rel=1e-11)


def test_solve_takes_one_right_hand_side_for_all_or_one_for_each() -> None:
    circuit = plant(60, seed=1)
    factor = circuit.factor()
    rhs = np.random.default_rng(3).normal(size=(60, 4, 3)) * (1 + 2j)
    each = factor.solve(rhs)
    for s in range(3):
        assert np.abs(circuit.dense(s) @ each[:, :, s] - rhs[:, :, s]).max() < 1e-10
        assert (factor.solve(rhs[:, :, s])[:, :, s] == each[:, :, s]).all()


# Small and odd networks ----------------------------------------------------------------------------------------------


def test_no_nodes() -> None:
    factor = Circuit(0, *np.zeros((2, 0), np.int64), np.zeros((0, 3)), np.zeros((0, 3))).factor()
    assert factor.diagonal().shape == factor.adjacent().shape == (0, 3)
    assert factor.columns(np.zeros(0, np.int64)).shape == (0, 0, 3)


def test_one_node_is_its_shunt() -> None:
    factor = Circuit(1, *np.zeros((2, 0), np.int64), np.zeros((0, 2)), np.array([[2j, 0.0]])).factor()
    assert factor.diagonal().tolist() == [[-0.5j, complex(np.inf, 0)]]
    assert factor.columns(np.array([0])).tolist() == [[[-0.5j, complex(np.inf, 0)]]]


def test_a_branch_with_both_ends_on_one_node_carries_nothing() -> None:
    series = np.array([[-10j], [5 - 3j]])
    factor = Circuit(2, np.array([0, 1]), np.array([1, 1]), series, np.array([[-20j], [0]])).factor()
    assert factor.diagonal()[:, 0] == pytest.approx([0.05j, 0.15j], rel=1e-14)
    assert factor.adjacent()[:, 0] == pytest.approx([0.05j, 0.15j], rel=1e-14)


def test_node_numbers_beyond_32_bit_products() -> None:
    n = 70_000  # the last 40 nodes in a chain behind a source; all others stand alone on 1 pu
    rows, cols = np.arange(n - 40, n - 1), np.arange(n - 39, n)
    factor = Circuit(
        n, rows, cols, np.full((39, 1), -10j), np.r_[np.full((n - 39, 1), -1j), np.zeros((39, 1))]
    ).factor()
    assert factor.diagonal()[-40:, 0] == pytest.approx(1j * (1 + 0.1 * np.arange(40)), rel=1e-12)
    assert factor.adjacent()[:, 0] == pytest.approx(1j * (1 + 0.1 * np.arange(39)), rel=1e-12)


def test_results_are_read_only() -> None:
    factor = plant(20, seed=1).factor()
    with pytest.raises(ValueError, match="read-only"):
        factor.diagonal()[0] = 0


def test_wrong_shapes_are_refused() -> None:
    pattern = analyse(2, np.array([0]), np.array([1]))
    one = np.ones((2, 3), complex)
    for diagonal, off_diagonal, earthed in (
        (one[:1], one[:1], None),
        (one, one, None),
        (one[:, :0], one[:1, :0], None),
        (one, one[:1], np.ones((2, 2), bool)),
    ):
        with pytest.raises(ValueError, match="must be"):
            factorise(pattern, diagonal, off_diagonal, earthed)


# Random small networks with islands ----------------------------------------------------------------------------------


@st.composite
def small_circuits(draw: st.DrawFn) -> Circuit:
    """2 to 40 nodes beside a full mesh of 20 (which fills the dense top); parallel, open and missing branches."""
    n = draw(st.integers(2, 40))
    node = st.integers(0, n - 1)
    ends = draw(st.lists(st.tuples(node, node), min_size=1, max_size=60))
    rng = np.random.default_rng(draw(st.integers(0, 2**32)))
    mesh = [(a, b) for a in range(n, n + 20) for b in range(a) if b >= n]
    pairs = np.array([pair for pair in ends if pair[0] != pair[1]] + mesh)
    share = draw(st.sampled_from([0.0, 0.3, 0.7]))
    size = (len(pairs), 3)
    series = 1 / (rng.uniform(0, 0.1, size) + 1j * rng.uniform(0.01, 0.5, size)) * (rng.random(size) >= share)
    shunt = 1 / (rng.uniform(0, 0.1, (n + 20, 3)) + 1j * rng.uniform(0.05, 1, (n + 20, 3)))
    shunt *= rng.random((n + 20, 3)) < draw(st.sampled_from([0.05, 0.3]))
    return Circuit(n + 20, pairs[:, 0], pairs[:, 1], series, shunt)


@settings(max_examples=40, deadline=None)
@given(small_circuits())
def test_any_small_network_with_islands(circuit: Circuit) -> None:
    factor = circuit.factor()
    diagonal, adjacent, columns = factor.diagonal(), factor.adjacent(), factor.columns(np.arange(circuit.n))
    for s in range(3):
        expected = impedances_by_component(circuit, s)
        finite = np.isfinite(expected)
        near = {"rtol": 1e-9, "atol": 1e-12 * np.abs(expected[finite]).max(initial=1.0)}
        for mine, exact in (
            (columns[:, :, s], expected),
            (diagonal[:, s], expected.diagonal()),
            (adjacent[:, s], expected[circuit.rows, circuit.cols]),
        ):
            assert (np.isinf(mine) == np.isinf(exact)).all()
            np.testing.assert_allclose(mine[np.isfinite(exact)], exact[np.isfinite(exact)], **near)
        connected = expected != 0
        assert (columns[:, :, s][~connected] == 0).all()


def impedances_by_component(circuit: Circuit, scenario: int) -> np.ndarray:
    """Full inverse of each connected component by itself; infinite in those without a shunt, 0 between components."""
    graph = nx.empty_graph(circuit.n)
    present = np.flatnonzero(circuit.series[:, scenario])
    graph.add_edges_from(zip(circuit.rows[present].tolist(), circuit.cols[present].tolist(), strict=True))
    full, result = circuit.dense(scenario), np.zeros((circuit.n, circuit.n), complex)
    for component in nx.connected_components(graph):
        block = np.ix_(sorted(component), sorted(component))
        has_earth = circuit.shunt[sorted(component), scenario].any()
        result[block] = np.linalg.inv(full[block]) if has_earth else np.inf
    return result


# Nodes without a path to earth ---------------------------------------------------------------------------------------


def floating_pair() -> Circuit:
    """Node 0 on a source; 1–2 behind a delta (no coupling in scenario 1); 3 alone."""
    series = np.array([[-10j, 0], [-5j, -5j]])
    return Circuit(4, np.array([0, 1]), np.array([1, 2]), series, np.array([[-1j, -2j], [0, 0], [0, 0], [-1j, 0]]))


def test_unearthed_nodes_are_infinite_within_and_zero_between_components() -> None:
    circuit = floating_pair()
    assert circuit.earthed.tolist() == [[True, True], [True, False], [True, False], [True, False]]
    factor, inf = circuit.factor(), complex(np.inf, 0)
    assert factor.diagonal()[:, 1].tolist() == [0.5j, inf, inf, inf]
    assert factor.adjacent()[:, 1].tolist() == [0, inf]
    assert factor.columns(np.array([0, 1, 3]))[:, :, 1].T.tolist() == [
        [0.5j, 0, 0, 0],
        [0, inf, inf, 0],
        [0, 0, 0, inf],
    ]
    assert factor.diagonal()[:, 0] == pytest.approx([1j, 1.1j, 1.3j, 1j], rel=1e-14)


def test_solve_is_infinite_only_where_current_enters_an_unearthed_component() -> None:
    rhs = np.array([[1, 0], [0, 0], [0, 2], [0, 0]], complex)
    x = floating_pair().factor().solve(rhs)[:, :, 1]
    inf = complex(np.inf, 0)
    assert x.T.tolist() == [[0.5j, 0, 0, 0], [0, inf, inf, 0]]


def test_a_coupling_from_earthed_to_unearthed_is_refused() -> None:
    circuit = floating_pair()
    wrong = circuit.earthed
    wrong[2, 0] = False
    with pytest.raises(ValueError, match="joins a node"):
        factorise(analyse(4, circuit.rows, circuit.cols), circuit.diagonal, -circuit.series, wrong)


def test_floating_islands_cost_no_digits() -> None:
    circuit = plant(300, seed=3)
    cut = circuit.rows == circuit.rows[0]
    circuit.series[cut, 2] = 0
    circuit.shunt[:, 2] = 0
    circuit.shunt[circuit.cols[0], 2] = 1 - 5j  # the only earth
    factor = circuit.factor()
    kept = circuit.earthed[:, 2]
    assert 0 < kept.sum() < 300
    exact = np.linalg.inv(circuit.dense(2)[np.ix_(kept, kept)])
    assert factor.diagonal()[kept, 2] == pytest.approx(exact.diagonal(), rel=1e-12)
    assert np.isinf(factor.diagonal()[~kept, 2]).all()


# Cancelling impedances -----------------------------------------------------------------------------------------------


def with_mesh(circuit: Circuit) -> Circuit:
    """The same beside a full mesh of 20 that fills the dense top, so that the circuit itself goes by levels."""
    ends = np.array([(a, b) for a in range(20) for b in range(a)]) + circuit.n
    k = circuit.series.shape[1]
    return Circuit(
        circuit.n + 20,
        np.concatenate((circuit.rows, ends[:, 0])),
        np.concatenate((circuit.cols, ends[:, 1])),
        np.concatenate((circuit.series, np.full((len(ends), k), -3j))),
        np.concatenate((circuit.shunt, np.full((20, k), -1j))),
    )


@pytest.mark.parametrize(("z2", "z3"), [(0.08j, -0.006j), (-0.01j, 0.12j), (0.08j, -1e-4j), (0.08j, 1e-5j)])
def test_three_winding_star_with_a_negative_or_tiny_leg(z2: complex, z3: complex) -> None:
    """Source 0.05j behind terminal 0, star point 3. By hand: Z_22 = Zs + z1 + z2, Z_23 = Zs + z1, and so on."""
    z1, source = 0.1j, 0.05j
    series = 1 / np.array([[z1], [z2], [z3]])
    star = Circuit(4, np.array([0, 1, 2]), np.array([3, 3, 3]), series, np.array([[1 / source], [0], [0], [0]]))
    factor = with_mesh(star).factor()
    assert factor.pivot_fallback == (False,)
    core = source + z1
    digits = 1e-13 * max(1.0, abs(0.1 / z3))  # a tiny leg beside large ones has lost its own digits in Y already
    assert factor.diagonal()[:4, 0] == pytest.approx([source, core + z2, core + z3, core], rel=digits)
    assert factor.adjacent()[:3, 0] == pytest.approx([source, core, core], rel=digits)


def test_plants_of_three_winding_units_with_negative_legs() -> None:
    circuit = plant(400, seed=12)
    leaves = np.flatnonzero(np.bincount(np.r_[circuit.rows, circuit.cols], minlength=400) == 1)
    leg = np.isin(circuit.rows, leaves) | np.isin(circuit.cols, leaves)
    circuit.series[leg] *= np.where(np.arange(leg.sum()) % 3 == 0, -1.0, 1.0)[:, None]
    circuit.shunt[leaves] = 1 / (0.01 + 0.5j)
    factor = circuit.factor()
    for s in range(3):
        assert_is_inverse(factor, s, np.linalg.inv(circuit.dense(s)), relative=1e-11)


def test_cables_with_charging() -> None:
    circuit = plant(400, seed=13)
    charging = 1j * np.random.default_rng(1).uniform(1e-4, 5e-2, circuit.shunt.shape)
    charged = Circuit(400, circuit.rows, circuit.cols, circuit.series, circuit.shunt + charging)
    factor = charged.factor()
    assert factor.pivot_fallback == (False, False, False)
    for s in range(3):
        assert_is_inverse(factor, s, np.linalg.inv(charged.dense(s)))


def test_an_unearthed_network_is_held_by_its_charging_alone() -> None:
    """A chain of 30: seen from its end node 0, Z is the ladder 1/(jB) with series z, by hand from the far end."""
    z, charge = 0.01 + 0.05j, 1e-3j
    n = 30
    series, shunt = np.full((n - 1, 1), 1 / z), np.full((n, 1), charge)
    ladder = 1 / charge
    for _ in range(n - 1):
        ladder = 1 / (charge + 1 / (z + ladder))
    factor = with_mesh(Circuit(n, np.arange(n - 1), np.arange(1, n), series, shunt)).factor()
    assert factor.diagonal()[0, 0] == pytest.approx(ladder, rel=1e-11)


@pytest.mark.parametrize("left", [0.0, 1e-13, 1e-4])
def test_a_vanishing_pivot_falls_back_to_pivoting_in_its_scenario_only(left: float) -> None:
    """An end node whose charging cancels its only branch: zero on the diagonal, yet the matrix is regular."""
    circuit = plant(200, seed=5)
    end = int(np.flatnonzero(np.bincount(np.r_[circuit.rows, circuit.cols], minlength=200) == 1)[0])
    branch = np.flatnonzero((circuit.rows == end) | (circuit.cols == end))
    circuit.shunt[end, 1] = -circuit.series[branch, 1][0] * (1 - left)
    assert analyse(200, circuit.rows, circuit.cols).place[end] < 150
    factor = circuit.factor()
    assert factor.pivot_fallback == (False, True, False)
    for s in range(3):
        assert_is_inverse(factor, s, np.linalg.inv(circuit.dense(s)), relative=1e-11)


def test_the_fallback_knows_unearthed_nodes_too() -> None:
    circuit = plant(200, seed=5, k=1)
    end = int(np.flatnonzero(np.bincount(np.r_[circuit.rows, circuit.cols], minlength=200) == 1)[0])
    branch = np.flatnonzero((circuit.rows == end) | (circuit.cols == end))
    circuit.shunt[end] = -circuit.series[branch[0]]
    apart = Circuit(
        202,
        np.r_[circuit.rows, 200],
        np.r_[circuit.cols, 201],
        np.r_[circuit.series, [[-10j]]],
        np.r_[circuit.shunt, [[0], [0]]],
    )
    factor, whole = apart.factor(), np.linalg.inv(circuit.dense(0))
    assert factor.pivot_fallback == (True,)
    assert factor.diagonal()[:200, 0] == pytest.approx(whole.diagonal(), rel=1e-11)
    assert np.isinf(factor.diagonal()[200:]).all()
    assert np.isinf(factor.adjacent()).ravel().tolist() == [False] * len(circuit.rows) + [True]
    assert np.isinf(factor.columns(np.array([201]))).ravel().tolist() == [False] * 200 + [True] * 2


@pytest.mark.parametrize("beside", [False, True])
def test_exact_resonance_is_an_error_that_names_the_place(beside: bool) -> None:
    """Shunts of +j5 and −j10 at the ends of −j10: the matrix [[−j5, j10], [j10, −j20]] has determinant 0."""
    circuit = Circuit(2, np.array([0]), np.array([1]), np.array([[1.0, -10j]]), np.array([[1, 5j], [1, -10j]]))
    circuit = with_mesh(circuit) if beside else circuit
    assert abs(np.linalg.det(circuit.dense(1)[:2, :2])) == 0
    with pytest.raises(SingularNetworkError, match=r"matrix 2.*node [01]\b") as caught:
        circuit.factor()
    assert isinstance(caught.value, StudyError)
    assert caught.value.scenario == 1
    assert caught.value.node in (0, 1)


def test_a_floating_network_that_was_not_marked_is_an_error() -> None:
    circuit = plant(100, seed=5)
    circuit.shunt[:, 2] = 0
    with pytest.raises(SingularNetworkError, match="matrix 3"):
        factorise(analyse(100, circuit.rows, circuit.cols), circuit.diagonal, -circuit.series)


@pytest.mark.parametrize("admittance", [np.inf, np.nan])
def test_an_infinite_admittance_is_an_error(admittance: float) -> None:
    circuit = plant(100, seed=5)
    circuit.series[3, 0] = admittance
    with pytest.raises(SingularNetworkError, match=r"matrix 1.*infinite"):
        circuit.factor()
