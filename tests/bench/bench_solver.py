"""How much faster the selected inversion is than the plain ways: ``python tests/bench/bench_solver.py [most nodes]``.

Networks like plants: a tree with fan-out 2 to 9, 8 % short ties, three sequences. Wanted: Z_kk of all nodes and Z_ij of
both ends of all branches. Compared in the same run, so the ratios mean something on any machine:

- splu: SuperLU factors (not counted), all unit vectors in blocks of 64, three times;
- dense: numpy's inverse, three times (up to 2,000 nodes);
- selected: this program's solver, from new values on a known topology, and from nothing.

Every way's answers are compared before a time is printed.
"""

import statistics
import sys
import time
from collections.abc import Callable
from functools import partial
from pathlib import Path

import numpy as np
from scipy.sparse import csc_array
from scipy.sparse.linalg import SuperLU, splu

sys.path.insert(0, str(Path(__file__).parents[2]))

from onelinefault.engine.ordering import Pattern, analyse
from onelinefault.engine.solver import earthed_nodes, factorise

Network = tuple[int, np.ndarray, np.ndarray, np.ndarray, np.ndarray]  # nodes, rows, cols, diagonal, off-diagonal


def network(n: int, ties: float = 0.08, far: bool = False, k: int = 3, seed: int = 1) -> Network:
    """Plant-like topology and values."""
    rng = np.random.default_rng(seed)
    parents = np.repeat(np.arange(n), rng.integers(2, 10, n))[: n - 1]
    here = rng.integers(0, n, int(ties * n))
    there = rng.integers(0, n, len(here)) if far else np.clip(here + rng.integers(1, 10, len(here)), 0, n - 1)
    number = rng.permutation(n)
    rows, cols = number[np.concatenate((parents, here))], number[np.concatenate((np.arange(1, n), there))]
    rows, cols = rows[rows != cols], cols[rows != cols]
    series = 1 / (rng.uniform(0.001, 0.05, (len(rows), k)) + 1j * rng.uniform(0.01, 0.2, (len(rows), k)))
    diagonal = np.zeros((n, k), complex)
    diagonal[rng.integers(0, n, max(1, n // 20))] = 1 / (0.01 + 0.3j)
    diagonal[number[0]] += 1 / (0.001 + 0.02j)
    np.add.at(diagonal, rows, series)
    np.add.at(diagonal, cols, series)
    return n, rows, cols, diagonal, -series


def matrix(net: Network, s: int) -> csc_array:
    """Y of one sequence."""
    n, rows, cols, diagonal, off = net
    values = np.concatenate((diagonal[:, s], off[:, s], off[:, s]))
    node = np.arange(n)
    return csc_array((values, (np.concatenate((node, rows, cols)), np.concatenate((node, cols, rows)))), shape=(n, n))


def by_splu(factors: list[SuperLU], net: Network) -> tuple[np.ndarray, np.ndarray]:
    """The blocked way with factors at hand."""
    n, rows, cols = net[:3]
    own, adjacent = np.empty((n, 3), complex), np.empty((len(rows), 3), complex)
    by_column = np.argsort(cols, kind="stable")
    ends = np.searchsorted(cols[by_column], np.arange(0, n + 64, 64))
    for s, factor in enumerate(factors):
        for block, first in enumerate(range(0, n, 64)):
            nodes = np.arange(first, min(first + 64, n))
            unit = np.zeros((n, len(nodes)), complex)
            unit[nodes, nodes - first] = 1
            z = factor.solve(unit)
            own[nodes, s] = z[nodes, nodes - first]
            here = by_column[ends[block] : ends[block + 1]]
            adjacent[here, s] = z[rows[here], cols[here] - first]
    return own, adjacent


def by_dense(net: Network) -> tuple[np.ndarray, np.ndarray]:
    """numpy's inverse of the full matrices."""
    inverse = [np.linalg.inv(matrix(net, s).toarray()) for s in range(3)]
    return np.stack([z.diagonal() for z in inverse], 1), np.stack([z[net[1], net[2]] for z in inverse], 1)


def by_selection(pattern: Pattern, net: Network) -> tuple[np.ndarray, np.ndarray]:
    """This program's way, from values on a known topology."""
    factor = factorise(pattern, net[3], net[4])
    return factor.diagonal(), factor.adjacent()


def median_ms(run: Callable[[], object], seconds: float = 0.6, least: int = 3) -> float:
    """Median time of a call in ms, of as many runs as fit."""
    times: list[float] = []
    while len(times) < least or (sum(times) < seconds and len(times) < 200):
        start = time.perf_counter()
        run()
        times.append(time.perf_counter() - start)
    return statistics.median(times) * 1e3


def difference(one: tuple[np.ndarray, np.ndarray], other: tuple[np.ndarray, np.ndarray]) -> float:
    """Largest relative difference of two answers."""
    return max(float(np.abs(a - b).max() / np.abs(b).max()) for a, b in zip(one, other, strict=True))


def all_buses(n: int) -> None:
    """All Z_kk and adjacent Z_ij, three ways."""
    net = network(n)
    pattern = analyse(*net[:3])
    factors = [splu(matrix(net, s), permc_spec="MMD_AT_PLUS_A") for s in range(3)]
    mine = by_selection(pattern, net)
    error = difference(mine, by_splu(factors, net))
    known = median_ms(lambda: by_selection(pattern, net))
    nothing = median_ms(lambda: by_selection(analyse(*net[:3]), net))
    plain = median_ms(lambda: by_splu(factors, net), least=3 if n <= 2000 else 1)
    line = f"{n:7,} nodes  selected {known:8.2f} ms  from nothing {nothing:8.2f}  splu {plain:10.1f}"
    line += f"  = {plain / known:7.0f} x  from nothing {plain / nothing:6.0f} x"
    if n <= 2000:
        error = max(error, difference(mine, by_dense(net)))
        dense = median_ms(lambda: by_dense(net), least=3 if n <= 200 else 1)
        line += f"  dense {dense:8.1f} = {dense / known:7.0f} x"
    print(f"{line}  (largest difference {error:.0e})")


def single_click(n: int) -> None:
    """One fault, from new values: who is earthed, factors, one column in three sequences, one solution."""
    net = network(n)
    _, rows, cols, diagonal, off = net
    pattern = analyse(*net[:3])
    rhs = np.ones((n, 1))
    has_shunt = np.ones((n, 3), bool)

    def click() -> None:
        factor = factorise(pattern, diagonal, off, earthed_nodes(n, rows, cols, off != 0, has_shunt))
        factor.columns(np.array([n // 2]))
        factor.solve(rhs)

    def plain() -> None:
        for s in range(3):
            factor = splu(matrix(net, s), permc_spec="MMD_AT_PLUS_A")
            unit = np.zeros((n, 1), complex)
            unit[n // 2] = 1
            factor.solve(unit)
            factor.solve(rhs.astype(complex))

    mine, theirs = median_ms(click), median_ms(plain)
    print(f"{n:7,} nodes  click {mine:8.2f} ms  splu {theirs:8.2f} = {theirs / mine:5.1f} x")


def floating(n: int) -> None:
    """The same as all_buses where half the zero sequence has no path to earth."""
    n, rows, cols, diagonal, off = network(n)
    earthed, off = np.ones((n, 3), bool), off.copy()
    earthed[: n // 2, 2] = False
    off[earthed[rows, 2] != earthed[cols, 2], 2] = 0
    pattern = analyse(n, rows, cols)

    def run() -> None:
        factor = factorise(pattern, diagonal, off, earthed)
        factor.diagonal()
        factor.adjacent()

    print(f"{n:7,} nodes  half unearthed in the zero sequence {median_ms(run):8.2f} ms")


def batch(n: int = 200, configurations: int = 1024) -> None:
    """Many sets of values on one topology, in the last axis."""
    pattern = analyse(*network(n)[:3])
    one = network(n)
    dense = median_ms(lambda: by_dense(one)) * configurations
    for together in (1, 8, 32, 64):
        net = network(n, k=3 * together)
        took = median_ms(partial(by_selection, pattern, net)) * configurations / together
        print(
            f"{n:7,} nodes  {configurations:,} configurations, {together:2} at once {took:8.1f} ms"
            f"  dense one by one {dense:8.0f} = {dense / took:5.0f} x"
        )


def extremes(most: int) -> None:
    """The largest and the most meshed."""
    for n, ties, far in ((50_000, 0.08, False), (10_000, 0.15, True), (10_000, 0.3, True)):
        if n > most * 5:
            continue
        net = network(n, ties, far)
        pattern = analyse(*net[:3])
        known, symbolic = median_ms(partial(by_selection, pattern, net)), median_ms(partial(analyse, *net[:3]))
        kind = f"{ties:.0%} ties {'anywhere' if far else 'nearby'}, dense top {n - pattern.top}"
        print(f"{n:7,} nodes  {kind}: selected {known:8.1f} ms, symbolic {symbolic:6.1f} ms")


def main(most: int = 10_000) -> None:
    """Print all tables, up to this many nodes."""
    print("All Z_kk and adjacent Z_ij, three sequences")
    for n in (50, 200, 1000, 2000, 10_000):
        if n <= most:
            all_buses(n)
    print("One click: earthing, factors, one column and one solution")
    for n in (200, 2000, 10_000):
        if n <= most:
            single_click(n)
    floating(min(2000, most))
    batch()
    extremes(most)


if __name__ == "__main__":
    main(*(int(argument) for argument in sys.argv[1:2]))
