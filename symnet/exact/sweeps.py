"""A diagram read in floating point, at many points at once: values, and the share of every piece.

The values of one level of the diagram are one array (nodes x points). After every level they are scaled by a
power of two per point, kept apart as an integer, so that the product of hundreds of part values neither
overflows nor underflows; scaling by powers of two costs no accuracy.

Every path takes or leaves each piece exactly once, so D = T_i + L_i for every piece i, with T_i the sum of the
paths that take it. The reverse pass finds all shares T_i/D at the cost of a few evaluations. With a piece
weighing take/leave, the relative sensitivity of D to a parameter x (Bode: dlnD/dlnx) is

    S = sum over pieces of  (T_i/D) dln(take_i)/dlnx + (1 - T_i/D) dln(leave_i)/dlnx,

so a capacitor's share is its sensitivity, and a resistor's is one minus its share.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from symnet.exact.trees import Diagram

__all__ = ["Scaled", "shares", "sweep"]


@dataclass(frozen=True, slots=True, eq=False)
class Scaled:
    """Numbers as ``mantissa * 2**exponent``, one per point; zero has mantissa 0."""

    mantissa: NDArray[Any]
    exponent: NDArray[np.int64]

    def over(self, other: Scaled) -> Scaled:
        """The quotient, point by point; division by zero gives inf or nan as in numpy."""
        with np.errstate(divide="ignore", invalid="ignore"):
            return Scaled(self.mantissa / other.mantissa, self.exponent - other.exponent)

    def plain(self) -> NDArray[Any]:
        """Ordinary floats: 0 or inf where they are out of range."""
        exponent = np.clip(self.exponent, -4000, 4000).astype(np.int32)
        with np.errstate(over="ignore", under="ignore", invalid="ignore"):
            if np.iscomplexobj(self.mantissa):
                return _complex(
                    np.ldexp(self.mantissa.real, exponent), np.ldexp(self.mantissa.imag, exponent)
                )
            real: NDArray[Any] = np.ldexp(self.mantissa, exponent)
            return real

    def log2(self) -> NDArray[np.float64]:
        """The base-2 logarithm of the magnitude, also where the magnitude itself is out of range."""
        with np.errstate(divide="ignore"):
            logarithm: NDArray[np.float64] = np.log2(np.abs(self.mantissa)) + self.exponent
        return logarithm


def _complex(real: NDArray[Any], imaginary: NDArray[Any]) -> NDArray[Any]:
    out = np.empty(real.shape, dtype=np.complex128)
    out.real, out.imag = real, imaginary
    return out


def sweep(diagram: Diagram, take: NDArray[Any], leave: NDArray[Any]) -> Scaled:
    """The determinant at many points; ``take`` and ``leave`` are arrays (pieces x points), real or complex."""
    return _forward(diagram, take, leave, keep=False)[0]


def shares(diagram: Diagram, take: NDArray[Any], leave: NDArray[Any]) -> tuple[Scaled, NDArray[Any]]:
    """The determinant, and the share T_i/D of the paths that take each piece (pieces x points)."""
    value, levels = _forward(diagram, take, leave, keep=True)
    points = value.mantissa.shape[0]
    out = np.zeros((take.shape[0], points), dtype=np.result_type(take, leave, np.float64))
    if diagram.root < 0:
        return value, out
    weights = np.ones((1, points), dtype=out.dtype)
    for level, below in zip(diagram.levels, levels, strict=True):
        leaves = leave[level.piece] * weights[level.leave_from]
        takes = take[level.piece] * weights[level.take_from] * level.sign[:, None]
        taken = (takes * below[level.take_to]).sum(axis=0)
        left = (leaves * below[level.leave_to]).sum(axis=0)
        with np.errstate(divide="ignore", invalid="ignore"):
            out[level.piece] = taken / (taken + left)
        following = np.zeros((below.shape[0], points), dtype=out.dtype)
        np.add.at(following, level.leave_to, leaves)
        np.add.at(following, level.take_to, takes)
        weights, _ = _normalised(following)
    return value, out


def _forward(
    diagram: Diagram, take: NDArray[Any], leave: NDArray[Any], *, keep: bool
) -> tuple[Scaled, list[NDArray[Any]]]:
    """The determinant bottom-up and, if kept, the values of each level's children, first level first."""
    points = take.shape[1] if take.ndim > 1 else 1
    dtype = np.result_type(take, leave, np.float64)
    exponent = np.zeros(points, dtype=np.int64)
    if diagram.root < 0:
        return Scaled(np.zeros(points, dtype=dtype), exponent), []
    kept: list[NDArray[Any]] = []
    values = np.ones((1, points), dtype=dtype)
    for level in reversed(diagram.levels):
        kept.append(values) if keep else None
        following = np.zeros((level.size, points), dtype=dtype)
        following[level.leave_from] = leave[level.piece] * values[level.leave_to]
        following[level.take_from] += (take[level.piece] * level.sign[:, None]) * values[level.take_to]
        values, shift = _normalised(following)
        exponent += shift
    return Scaled(values[0] * diagram.overall, exponent), kept[::-1]


def _normalised(values: NDArray[Any]) -> tuple[NDArray[Any], NDArray[np.int64]]:
    """The values scaled by a power of two per point, so that the largest is near one."""
    if np.iscomplexobj(values):
        largest = np.maximum(np.abs(values.real), np.abs(values.imag)).max(axis=0)
        _, shift = np.frexp(largest)
        return _complex(np.ldexp(values.real, -shift), np.ldexp(values.imag, -shift)), shift.astype(np.int64)
    _, shift = np.frexp(np.abs(values).max(axis=0))
    return np.ldexp(values, -shift), shift.astype(np.int64)
