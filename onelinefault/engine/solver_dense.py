"""Inverses of small dense complex symmetric matrices: the top of the elimination.

Up to ``SMALL`` rows by LAPACK with pivoting. Larger ones are halved, which saves the other half of the work that
symmetry makes superfluous::

    ┌ A  Bᵀ ┐⁻¹      ┌ A⁻¹ + Wᵀ Z W   −(Z W)ᵀ ┐
    └ B  C  ┘    =   └ −Z W               Z    ┘     W = B A⁻¹,   Z = (C − W Bᵀ)⁻¹

W holds the multipliers of the step, as S does in the sparse elimination, and their size tells in the same way whether
it can be trusted. Source: block inversion by the Schur complement.
"""

import numpy as np

from onelinefault.engine.ordering import ComplexArray, FloatArray

SMALL = 64
"""Rows that LAPACK inverts in one piece; 32 to 200 were alike."""


def invert_symmetric(matrices: ComplexArray) -> tuple[ComplexArray, FloatArray]:
    """Inverses of symmetric matrices (k, t, t), and the largest part of any multiplier for each, shape (k,).

    Where a matrix is exactly singular its inverse is not-a-number.
    """
    k, size = matrices.shape[:2]
    if size <= SMALL:
        return _invert_small(matrices), np.zeros(k)
    half = size // 2
    A, B, C = matrices[:, :half, :half], matrices[:, half:, :half], matrices[:, half:, half:]
    inverse_A, growth_A = invert_symmetric(A)
    W = B @ inverse_A
    Z, growth_C = invert_symmetric(C - W @ B.swapaxes(1, 2))
    ZW = Z @ W
    inverse = np.empty_like(matrices)
    inverse[:, :half, :half] = inverse_A + W.swapaxes(1, 2) @ ZW
    inverse[:, half:, :half] = -ZW
    inverse[:, :half, half:] = -ZW.swapaxes(1, 2)
    inverse[:, half:, half:] = Z
    growth = np.abs(W.view(np.float64)).max(axis=(1, 2))
    return inverse, np.max((growth, growth_A, growth_C), axis=0)


def _invert_small(matrices: ComplexArray) -> ComplexArray:
    try:
        return np.asarray(np.linalg.inv(matrices), np.complex128)
    except np.linalg.LinAlgError:
        pass  # at least one is singular: one by one
    inverses = np.full_like(matrices, np.nan)
    for inverse, matrix in zip(inverses, matrices, strict=True):
        try:
            inverse[:] = np.linalg.inv(matrix)
        except np.linalg.LinAlgError:
            continue
    return inverses
