"""The step response from poles and zeros, also where poles coincide.

A sum over residues breaks down at coincident poles and loses digits near them. The same sum is a divided difference,
and that is an entry of a matrix function (Opitz 1964): with J the matrix that has 0, p_1 ... p_n on its diagonal and
ones above it, the inverse transform of N(s)/(s (s - p_1) ... (s - p_n)) is the upper right entry of N(J) exp(J t). No
pole is subtracted from another. Times are equally spaced, so that one exponential serves them all.

Source: G. Opitz, "Steigungsmatrizen", Zeitschrift fuer angewandte Mathematik und Mechanik 44 (1964), T52-T54 (from
memory).
"""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from symnet.shape.families.curves import geometric_mean

__all__ = ["step"]

_TERMS = 24  # of the series of exp(x), |x| <= 1: the next one is below 1e-25


def step(
    poles: Sequence[complex], zeros: Sequence[complex], factor: float, end: float, points: int
) -> NDArray[np.float64]:
    """The response of factor * prod(s - z)/prod(s - p) to a unit step at the times 0 ... end in seconds, equally spaced.

    Poles and zeros in rad/s with their conjugates, no more zeros than poles. Returns one value for each time.

    >>> step([-1.0], [], 1.0, 2.0, 3).round(6).tolist()  # 1 - exp(-t)
    [0.0, 0.632121, 0.864665]
    """
    w0 = geometric_mean(poles)
    n = len(poles)
    j = np.diag(np.asarray([0, *(p / w0 for p in poles)], dtype=np.complex128)) + np.eye(n + 1, k=1)
    h = end / (points - 1)
    advance = _exponential(np.asarray(j * (h * w0), dtype=np.complex128))
    row = np.zeros(n + 1, dtype=complex)
    row[0] = factor * w0 ** (len(zeros) - n)
    for z in zeros:
        row = row @ j - row * (z / w0)
    found = np.empty(points)
    state = np.zeros(n + 1, dtype=complex)
    state[-1] = 1
    for k in range(points):
        found[k] = (row @ state).real
        state = advance @ state
    return found


def _exponential(a: NDArray[np.complex128]) -> NDArray[np.complex128]:
    """exp(A) by its series on A/2^k and k squarings."""
    size = float(np.abs(a).sum(axis=1).max())
    squarings = max(0, math.ceil(math.log2(size))) if size > 0 else 0
    part = a / 2**squarings
    total = term = np.eye(len(a), dtype=complex)
    for k in range(1, _TERMS):
        term = term @ part / k
        total = total + term
    for _ in range(squarings):
        total = total @ total
    return total
