"""The pivoting way against numpy's dense inverse, and its errors."""

import numpy as np
import pytest

from onelinefault.engine.solver_pivoting import PivotedMatrix
from onelinefault.errors import SingularNetworkError


def random_network(n: int, seed: int) -> tuple[np.ndarray, np.ndarray, np.ndarray, np.ndarray]:
    rng = np.random.default_rng(seed)
    rows = rng.integers(0, n, 3 * n)
    cols = (rows + rng.integers(1, n, 3 * n)) % n
    return rows, cols, rng.normal(size=n) * 5 + 3j, rng.normal(size=3 * n) * (1 + 1j)


def whole(rows: np.ndarray, cols: np.ndarray, diagonal: np.ndarray, off_diagonal: np.ndarray) -> np.ndarray:
    matrix = np.diag(diagonal)
    np.add.at(matrix, (rows, cols), off_diagonal)
    np.add.at(matrix, (cols, rows), off_diagonal)
    return matrix


@pytest.mark.parametrize("n", [2, 63, 64, 65, 150])
def test_agrees_with_the_dense_inverse(n: int) -> None:
    rows, cols, diagonal, off_diagonal = random_network(n, n)
    z = np.linalg.inv(whole(rows, cols, diagonal, off_diagonal))
    matrix = PivotedMatrix.of(rows, cols, diagonal, off_diagonal)
    own, adjacent = matrix.selected_inverse(rows, cols)
    within = 1e-10 * np.abs(z).max()
    assert np.abs(own - z.diagonal()).max() < within
    assert np.abs(adjacent - z[rows, cols]).max() < within
    assert np.abs(matrix.solve(np.eye(n)[:, :3].astype(complex)) - z[:, :3]).max() < within


def test_units_do_not_matter() -> None:
    """Two nodes in very different units are as regular as in one: 1e-9 and 1e9 siemens are no near-singularity."""
    diagonal = np.array([2e-9j, 2e9j])
    matrix = PivotedMatrix.of(np.array([0]), np.array([1]), diagonal, np.array([1.0 + 0j]))
    own, _ = matrix.selected_inverse(np.array([0]), np.array([1]))
    determinant = diagonal[0] * diagonal[1] - 1
    assert own == pytest.approx(diagonal[::-1] / determinant, rel=1e-12)


@pytest.mark.parametrize(
    ("diagonal", "off_diagonal", "reason"),
    [
        ([1, 1], [1], "cancel"),  # exactly singular
        ([1, 1 + 1e-15], [1], "all but exactly"),
        ([1, np.inf], [1], "infinite"),
        ([1, np.nan], [1], "infinite"),
        ([1, 0], [0], "none at all"),
    ],
)
def test_no_single_solution(diagonal: list[float], off_diagonal: list[float], reason: str) -> None:
    with pytest.raises(SingularNetworkError, match=reason):
        PivotedMatrix.of(np.array([0]), np.array([1]), np.array(diagonal, complex), np.array(off_diagonal, complex))
