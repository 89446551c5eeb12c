"""How quick a fault is, against the plain way with dense inverses: ``python tests/bench/bench_faults.py [most nodes]``.

Networks like plants: a tree of boards with fan-out 2 to 9, 8 % short ties, a step-down with open zero sequence now
and then, each board drawn with its wires. Timed, in one run:

- click: one fault with the voltages of all nodes, the currents of all branches at both ends and of all wires;
- first click: the same from a network just built (ordering, factors, wiring included);
- table: all nodes and all four kinds, with the currents next to each fault, as arrays;
- rows: the same as the rows of the bus table (Python objects);
- dense: numpy's inverse of the three matrices, and the plain formulas on it (above 2,000 nodes put up by the cube).

The answers are compared before a time is printed.
"""

import os
import statistics
import sys
import time
from collections.abc import Callable
from pathlib import Path

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")  # one thread each, or a busy machine punishes the dense way

import numpy as np

sys.path.insert(0, str(Path(__file__).parents[2]))

from onelinefault.engine.boundary import boundary_of
from onelinefault.engine.case import Case
from onelinefault.engine.currents import admittances
from onelinefault.engine.faults import currents_next_to_faults, solve_everywhere
from onelinefault.engine.network import Joint, Network, Node, Source
from onelinefault.engine.study import Study
from onelinefault.engine.symmetrical import to_phases
from onelinefault.model.conductors import Cable
from onelinefault.model.consumers import Bus
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.plant import Plant
from onelinefault.model.sources import Supply

OPEN_SHARE = 0.1
EARTH_LEAST = 1e-9  # the dense way cannot leave unearthed parts out: it gets this shunt, as plain ways do


def plant_like(n: int, seed: int = 1) -> tuple[Plant, Network]:
    """A drawn plant of n boards and its network."""
    rng = np.random.default_rng(seed)
    parents = np.repeat(np.arange(n), rng.integers(2, 10, n))[: n - 1]
    here = rng.integers(0, n, int(0.08 * n))
    there = np.clip(here + rng.integers(1, 10, len(here)), 0, n - 1)
    i, j = np.concatenate((parents, here)), np.concatenate((np.arange(1, n), there))
    i, j = i[i != j], j[i != j]
    m = len(i)
    z = rng.uniform(0.001, 0.05, (m, 3)) + 1j * rng.uniform(0.01, 0.2, (m, 3))
    z[:, 1] = z[:, 0]
    y = 1 / z
    y[rng.random(m) < OPEN_SHARE, 2] = 0
    fed = np.unique(np.concatenate(([0], rng.integers(0, n, n // 20))))
    y_source = np.full((len(fed), 3), 1 / (0.01 + 0.3j))
    earthed = rng.integers(0, n, n // 10)  # star points that are no source
    y_earth = np.zeros((len(earthed), 3), complex)
    y_earth[:, 2] = 1 / 0.1j
    shunt_node = np.concatenate((fed, earthed))
    branch = [f"W{k}" for k in range(m)]
    shunt = [f"S{k}" for k in range(len(shunt_node))]
    parts = {f"B{k}": Bus(id=f"B{k}", name=f"Board {k}") for k in range(n)}
    parts |= {p: Cable(id=p) for p in branch} | {p: Supply(id=p) for p in shunt}
    terminals: list[list[tuple[str, str]]] = [[(f"B{k}", "bar")] for k in range(n)]
    joints = []
    for node, key in [
        *((a, (p, "a")) for a, p in zip(i.tolist(), branch, strict=True)),
        *((b, (p, "b")) for b, p in zip(j.tolist(), branch, strict=True)),
        *((a, (p, "out")) for a, p in zip(shunt_node.tolist(), shunt, strict=True)),
    ]:
        joints.append(Joint(f"w{len(joints)}", True, (f"B{node}", "bar"), key))
        terminals[node].append(key)
    network = Network(
        base_mva=100.0,
        frequency_hz=50.0,
        nodes=tuple(Node(f"Board {k}", 10.0, tuple(keys), (f"B{k}",)) for k, keys in enumerate(terminals)),
        node_of={key: k for k, keys in enumerate(terminals) for key in keys},
        from_node=i,
        to_node=j,
        ratio=np.ones((m, 3)),
        y_series=y,
        y_from=np.zeros((m, 3), complex),
        y_to=np.zeros((m, 3), complex),
        branch_parts=tuple(branch),
        branch_terminals=tuple(((p, "a"), (p, "b")) for p in branch),
        shunt_node=shunt_node,
        y_shunt=np.concatenate((y_source, y_earth)),
        shunt_parts=tuple(shunt),
        shunt_terminals=tuple((p, "out") for p in shunt),
        sources=tuple(Source(shunt[k], int(node), k) for k, node in enumerate(fed)),
        converters=(),
        displacement_deg=rng.integers(0, 12, n) * 30.0,
        island=np.zeros(n, np.int64),
        live=np.ones(n, np.bool_),
        joints=tuple(joints),
    )
    return Plant(parts=parts), network


def dense_impedances(network: Network) -> list[np.ndarray]:
    """Three full inverses."""
    diagonal, transfer = admittances(network)
    inverses = []
    for s in range(3):
        Y = np.diag(diagonal[:, s] + EARTH_LEAST * (s == 2))
        np.add.at(Y, (network.from_node, network.to_node), transfer[:, s])
        np.add.at(Y, (network.to_node, network.from_node), transfer[:, s])
        inverses.append(np.linalg.inv(Y))
    return inverses


def table(study: Study) -> list[tuple[np.ndarray, np.ndarray, np.ndarray]]:
    """All nodes, four kinds: phase currents of the fault and next to it, kA."""
    nodes = np.arange(len(study.network.nodes))
    base = study.network.base_ka[:, None]
    found = []
    for kind in FaultKind:
        everywhere = solve_everywhere(study.equations, study.prefault, nodes, boundary_of(Fault(Place(""), kind)))
        at_from, at_to = currents_next_to_faults(study.equations, everywhere)
        found.append(
            (
                to_phases(everywhere.current * base),
                to_phases(at_from * base[study.network.from_node]),
                to_phases(at_to * base[study.network.to_node]),
            )
        )
    return found


def seconds(work: Callable[[], object], repeats: int) -> float:
    """Median of some runs."""
    times = []
    for _ in range(repeats):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return statistics.median(times)


def check(study: Study, node: int) -> None:
    """The click and the table against dense inverses, line to earth, at one node."""
    z = np.array([inverse[:, node] for inverse in dense_impedances(study.network)]).T
    current = 1 / z[node].sum()
    result = study.fault(Fault(Place(f"B{node}"), FaultKind.LINE_TO_EARTH))
    tolerance = 1e-6 if abs(z[node, 2]) < 1e6 else 1e-2  # the dense way's shunt shows in the zero sequence
    base = study.network.base_ka[node]
    assert abs(result.sequence_ka[0] / base - current) < tolerance * max(abs(current), 1e-3)
    assert np.allclose(table(study)[3][0][node], result.phases_ka, atol=1e-9 * base)


def fresh(study: Study) -> Study:
    """The same network with nothing worked out yet."""
    return Study(study.plant, Case(), study.network)


def main() -> None:
    """Print the table of times and ratios."""
    most = int(sys.argv[1]) if len(sys.argv) > 1 else 10_000
    heads = " ".join(f"{head:>9}" for head in ("click", "first", "table", "rows"))
    print(f"{'nodes':>7} {heads} {'dense':>11}   dense/click dense/first dense/table")
    dense_at = (0, 0.0)
    for n in (200, 2_000, 10_000):
        if n > most:
            break
        plant, network = plant_like(n)
        study = Study(plant, Case(), network)
        if n <= 2_000:
            check(study, n // 3)
        fault = Fault(Place(f"B{n // 2}"), FaultKind.LINE_TO_EARTH)
        study.fault(fault)
        click = seconds(lambda: study.fault(fault), 15)  # noqa: B023
        first = seconds(lambda: fresh(study).fault(fault), 3)  # noqa: B023
        study.all_buses()

        def new_values() -> None:
            again = fresh(study)  # noqa: B023
            again.equations.__dict__["pattern"] = study.equations.pattern  # noqa: B023
            table(again)

        whole = seconds(new_values, 5)
        rows = seconds(study.all_buses, 3)
        if n <= 2_000:
            dense_at = (n, seconds(lambda: dense_impedances(study.network), 2))  # noqa: B023
        dense = dense_at[1] * (n / dense_at[0]) ** 3
        ms = " ".join(f"{t * 1e3:7.2f}ms" for t in (click, first, whole, rows))
        ratios = "".join(f"{dense / t:11,.0f}×" for t in (click, first, whole))
        print(f"{n:>7} {ms} {dense * 1e3:9,.0f}ms {ratios}{'' if n <= 2_000 else '  (dense put up by the cube)'}")


if __name__ == "__main__":
    main()
