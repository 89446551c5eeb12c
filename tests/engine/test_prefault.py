import numpy as np
import pytest

from onelinefault.engine.faults import Equations
from onelinefault.engine.prefault import Potentials, Prefault
from tests.engine.networks import INF, Sketch

LINE = (0.01 + 0.1j,) * 3


def chain(ratios):
    """Nodes 0, 1, 2, ... in a row; branch k from node k to k+1 with the ratio V_k = t V_k+1."""
    s = Sketch()
    for _ in range(len(ratios) + 1):
        s.node()
    for k, t in enumerate(ratios):
        s.branch(k, k + 1, LINE, t=(t, t, -t))
    s.source(0, LINE)
    return s


def test_potentials_are_products_of_ratios_along_the_way() -> None:
    ratios = [1.1, 0.9, 1.0, 1.25, 1.0, 0.8, 1.05]
    network = chain(ratios).network()
    found = Potentials.of(network, 0, [0])
    expected = np.concatenate(([1], 1 / np.cumprod(ratios)))
    assert np.allclose(found.ratio, expected, rtol=1e-14)
    assert np.allclose(found.seen_from(3), expected / expected[3], rtol=1e-14)
    zero = Potentials.of(network, 2, [0])
    assert np.allclose(zero.ratio, expected * (-1.0) ** np.arange(8), rtol=1e-14)


def test_potentials_hold_on_every_branch_of_a_consistent_mesh() -> None:
    rng = np.random.default_rng(3)
    s = Sketch()
    level = rng.uniform(0.5, 2, 40)
    for _ in level:
        s.node()
    for k in range(1, 40):
        for i, j in ((k, rng.integers(k)), (rng.integers(k), k)):
            s.branch(i, j, LINE, t=(level[i] / level[j],) * 3)
    network = s.network()
    V = Potentials.of(network, 0, [7]).ratio
    assert V[7] == 1
    assert np.allclose(V[network.from_node], network.ratio[:, 0] * V[network.to_node], rtol=1e-12)


def test_components_apart_have_roots_of_their_own() -> None:
    s = chain([1.1])
    c, d = s.node(), s.node()
    s.branch(c, d, (0.1j, 0.1j, INF), t=(0.5, 0.5, 1))
    found = Potentials.of(s.network(), 0, [d])
    assert found.ratio[[d, c]].tolist() == [1, 0.5]
    assert np.all(found.seen_from(c)[[0, 1]] == 0)
    assert np.unique(Potentials.of(s.network(), 2).component).size == 3  # open in the zero sequence


def test_nominal_sets_the_voltage_at_the_fault_whichever_it_is() -> None:
    s = chain([1.05, 0.97])
    c, d = s.node(), s.node()  # another island
    s.branch(c, d, LINE, t=(1.1, 1.1, 1.1))
    s.source(d, LINE)
    dead = s.node()
    prefault = Prefault.nominal(s.network(), 1.1)
    for node in (0, 1, 2):
        V = prefault.everywhere(node)
        assert V[node] == pytest.approx(1.1, rel=1e-15)
        assert np.allclose([V[0] / V[1], V[1] / V[2]], [1.05, 0.97], rtol=1e-14)
        assert np.allclose(V[[d, c]], [1.1, 1.21], rtol=1e-14) and V[dead] == 0
    assert prefault.at(np.array([0, dead])).tolist() == [1.1, 0]
    assert np.allclose(prefault.at_others(np.array([2, c]), np.array([0, d])), [
        [1.1 * 1.05 * 0.97, 1.1],
        [prefault.everywhere(c)[0], 1.0],
    ])  # fmt: skip


def test_no_load_is_the_solution_with_every_source_behind_its_impedance() -> None:
    """Two supplies at the ends of a chain with taps: checked by a divider worked out by hand.

    Node 0 ──(1.05:1) z── node 1, source 0 behind z0 at node 0, source 1 behind z1 at node 1, both emfs 1.02."""
    z, z0, z1 = 0.01 + 0.08j, 0.02 + 0.1j, 0.005 + 0.06j
    s = Sketch()
    s.node(), s.node()
    s.branch(0, 1, (z, z, z), t=(1.05, 1.05, 1))
    s.source(0, (z0, z0, z0))
    s.source(1, (z1, z1, z1))
    network = s.network()
    prefault = Prefault.from_sources(network, 1.02, Equations(network).pattern, ())
    around = (1.02 / 1.05 - 1.02) / (z0 / 1.05**2 + z + z1)  # balancing current on node 1's side
    assert prefault.at(np.array([1]))[0] == pytest.approx(1.02 + around * z1, rel=1e-13)
    assert prefault.at(np.array([0]))[0] == pytest.approx(1.02 - around / 1.05 * z0, rel=1e-13)
    assert prefault.emf is not None and prefault.emf.tolist() == [1.02, 1.02]


def test_a_single_supply_gives_its_voltage_through_the_ratios_and_motors_follow() -> None:
    s = chain([0.95, 1.1])
    motor = s.source(2, (0.2j, 0.2j, INF))
    network = s.network()
    prefault = Prefault.from_sources(network, 1.0, Equations(network).pattern, {motor})
    assert np.allclose(prefault.everywhere(1), [1, 1 / 0.95, 1 / 0.95 / 1.1], rtol=1e-13)
    assert prefault.emf is not None and np.allclose(prefault.emf, [1, 1 / 0.95 / 1.1], rtol=1e-13)


def test_motors_hold_an_island_that_has_nothing_else() -> None:
    s = Sketch()
    motor = s.source(s.node(), (0.2j, 0.2j, INF))
    network = s.network()
    prefault = Prefault.from_sources(network, 1.05, Equations(network).pattern, {motor})
    assert prefault.everywhere(0)[0] == pytest.approx(1.05, rel=1e-14)


def test_an_island_of_converters_alone_stands_at_the_factor() -> None:
    s = chain([1.0])
    s.converter(s.node(), 0.1)
    network = s.network()
    prefault = Prefault.from_sources(network, 1.05, Equations(network).pattern, ())
    assert prefault.everywhere(0)[2] == 1.05


def test_charging_lifts_the_no_load_voltage() -> None:
    """A capacitance y behind a series impedance z: V = E / (1 + z y), above E where z is inductive (Ferranti)."""
    s = Sketch()
    a, b = s.node(), s.node()
    s.source(a, (0.1j,) * 3)
    s.branch(a, b, (0.2j,) * 3, y_to=(0.05j,) * 3)
    network = s.network()
    prefault = Prefault.from_sources(network, 1.0, Equations(network).pattern, ())
    assert prefault.everywhere(a)[b] == pytest.approx(1 / (1 + 0.3j * 0.05j), rel=1e-14)
