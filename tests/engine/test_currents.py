import numpy as np
import pytest

from onelinefault.engine.currents import ByKey, Terminals, admittances, branch_currents, has_shunt, neutral_currents
from tests.engine.networks import INF, Sketch


def taps() -> Sketch:
    """Three nodes, ratios, charging, an open zero sequence, two parallel branches."""
    s = Sketch()
    a, b, c = s.node(110), s.node(10), s.node(10)
    s.source(a, (0.01 + 0.1j, 0.01 + 0.12j, 0.02 + 0.2j))
    s.branch(a, b, (0.1j, 0.1j, INF), t=(1.05, 1.05, 1), y_from=(0, 0, 0.3 - 2j))
    s.branch(a, b, (0.2j, 0.2j, 0.2j), t=(1.05, 1.05, -1.05))
    s.branch(b, c, (0.1 + 0.1j, 0.1 + 0.1j, 0.3 + 0.3j), y_from=(0.01j,) * 3, y_to=(0.02j,) * 3)
    s.earthing(c, 0.5j)
    return s


def test_matrix_and_currents_are_the_same_stamps() -> None:
    """Y V is the sum of all currents out of each node, for any voltages (Kirchhoff)."""
    network = taps().network()
    diagonal, transfer = admittances(network)
    V = np.random.default_rng(0).normal(size=(3, 6)).view(complex)
    total = diagonal * V
    np.add.at(total, network.from_node, transfer * V[network.to_node])
    np.add.at(total, network.to_node, transfer * V[network.from_node])
    at_from, at_to = branch_currents(network, V[network.from_node], V[network.to_node])
    summed = np.zeros((3, 3), complex)
    np.add.at(summed, network.from_node, at_from)
    np.add.at(summed, network.to_node, at_to)
    np.add.at(summed, network.shunt_node, network.y_shunt * V[network.shunt_node])
    assert np.allclose(total, summed, rtol=1e-14)


def test_an_ideal_ratio_passes_power_unchanged() -> None:
    network = taps().network()
    V = np.random.default_rng(1).normal(size=(2, 6)).view(complex)
    at_from, at_to = branch_currents(network, V[[0, 0, 0]], V[[1, 1, 1]])
    for s in range(2):  # branch 1: no shunts; what the series impedance takes is I²z on its own side
        power = V[0, s] * at_from[1, s].conj() + V[1, s] * at_to[1, s].conj()
        assert power == pytest.approx(abs(at_to[1, s]) ** 2 * 0.2j, rel=1e-13)


def test_no_current_flows_where_the_ratio_explains_the_voltages() -> None:
    network = taps().network()
    at_from, at_to = branch_currents(network, np.full((3, 3), 1.05 + 0j), np.ones((3, 3), complex))
    assert np.allclose(at_from[:2, :2], 0, atol=1e-15) and np.allclose(at_to[:2, :2], 0, atol=1e-15)


def test_several_faults_at_once() -> None:
    network = taps().network()
    V = np.random.default_rng(2).normal(size=(3, 5, 6)).view(complex)
    together = branch_currents(network, V[network.from_node], V[network.to_node])
    for fault in range(5):
        alone = branch_currents(network, V[network.from_node, fault], V[network.to_node, fault])
        assert np.array_equal(together[0][:, fault], alone[0]) and np.array_equal(together[1][:, fault], alone[1])


def test_which_nodes_have_a_shunt() -> None:
    assert has_shunt(taps().network()).tolist() == [[True, True, True], [True, True, True], [True, True, True]]
    s = Sketch()
    s.source(s.node(), (1j, 1j, INF))
    s.node()
    assert has_shunt(s.network()).tolist() == [[True, True, False], [False, False, False]]


def test_each_terminal_gets_the_sum_of_its_elements() -> None:
    network = taps().network()
    terminals = Terminals.of(network, [("spare", "a"), ("B0", "bar")])
    m, s = len(network.from_node), len(network.shunt_node)
    found = ByKey(
        terminals.row,
        terminals.currents_pu(
            np.arange(3 * m).reshape(m, 3) + 1j,
            np.arange(3 * m).reshape(m, 3) + 100j,
            np.full((s, 3), 7 + 0j),
            np.zeros((0, 3), complex),
        ),
    )
    assert found["W1", "a"].tolist() == [3 + 1j, 4 + 1j, 5 + 1j]
    assert found["W1", "b"].tolist() == [3 + 100j, 4 + 100j, 5 + 100j]
    assert found["S0", "out"].tolist() == [7, 7, 7]
    assert found["B0", "bar"].tolist() == found["spare", "a"].tolist() == [0, 0, 0]
    assert len(found) == len(terminals.row) == 3 + 2 * m + s + 1


def test_current_to_earth_in_a_star_point_is_three_times_the_zero_sequence() -> None:
    s = taps()
    s.neutrals += [("T", "high", "branch from", 1), ("T", "low", "to", 1), ("S0", "neutral", "shunt", 0, 0.5)]
    network = s.network()
    at_from, at_to, shunts = np.zeros((3, 3), complex), np.zeros((3, 3), complex), np.zeros((2, 3), complex)
    at_from[1, 2], at_to[1, 2], shunts[0, 2] = 2j, 3, 4
    found = neutral_currents(network, at_from, at_to, shunts, np.array([10.0, 100, 1000]))
    assert found == {("T", "high"): 60j, ("T", "low"): 900, ("S0", "neutral"): 60}
