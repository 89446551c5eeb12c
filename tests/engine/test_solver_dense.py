"""Dense symmetric inverses against numpy's general inverse."""

import numpy as np
import pytest

from onelinefault.engine.solver_dense import SMALL, invert_symmetric


def symmetric(k: int, size: int, seed: int = 0) -> np.ndarray:
    """Admittance-like: complex symmetric and diagonally dominant."""
    rng = np.random.default_rng(seed)
    half = rng.uniform(-1, 0, (k, size, size)) + 1j * rng.uniform(0, 1, (k, size, size))
    whole = half + half.swapaxes(1, 2)
    nodes = np.arange(size)
    whole[:, nodes, nodes] = (1 - 2j) - whole.sum(axis=2) + whole[:, nodes, nodes]
    return whole


@pytest.mark.parametrize("size", [0, 1, 12, SMALL, SMALL + 1, 131, 260])
def test_agrees_with_the_general_inverse(size: int) -> None:
    matrices = symmetric(2, size)
    inverse, growth = invert_symmetric(matrices)
    exact = np.linalg.inv(matrices)
    assert np.abs(inverse - exact).max(initial=0) <= 1e-13 * np.abs(exact).max(initial=0)
    assert (growth < 2).all()


def test_growth_tells_of_a_half_that_is_nearly_singular() -> None:
    size = 2 * SMALL
    matrices = symmetric(2, size)
    half = matrices[1, :SMALL, :SMALL]
    half[0], half[:, 0] = half[1], half[:, 1]  # two equal rows and columns, the same corner
    half[0, 0] = half[1, 1] * (1 + 1e-9)
    half[0, 1] = half[1, 0] = half[1, 1]
    growth = invert_symmetric(matrices)[1]
    assert growth[0] < 2
    assert growth[1] > 1e6


def test_a_singular_matrix_spoils_only_itself() -> None:
    matrices = symmetric(3, 10)
    matrices[1] = 0
    inverse, _ = invert_symmetric(matrices)
    assert np.isnan(inverse[1]).all()
    assert inverse[2] == pytest.approx(np.linalg.inv(matrices[2]), rel=1e-12)


def test_a_singular_half_is_not_trusted() -> None:
    matrices = symmetric(2, 2 * SMALL)
    matrices[0, :SMALL, :SMALL] = 0
    growth = invert_symmetric(matrices)[1]
    assert not growth[0] < 100
    assert growth[1] < 2
