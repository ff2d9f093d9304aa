"""Coefficients of N and D for thousands of value sets at once: one pass over the diagram, in arrays.

Every node of the diagram is a polynomial in s whose coefficients are arrays, one entry per value set. The weights
of a piece are divided by the larger of take and leave, set by set: that is a common factor of N and D, and keeps
the products of many part values within the range of doubles. Sets are taken in blocks that fit into the
processor's cache, which is where the time goes.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import TYPE_CHECKING, Any, Final

import numpy as np

from symnet.errors import Fault, MissingValueError, UnknownNameError, nearest

if TYPE_CHECKING:
    from numpy.typing import ArrayLike, NDArray

    from symnet.exact.determinant import Determinant
    from symnet.exact.polynomials import Terms
    from symnet.exact.transfer import Transfer
    from symnet.exact.trees import Diagram

__all__ = ["coefficient_arrays"]

_BLOCK: Final = 2048  # sets in one pass: a few dozen arrays of this length stay in the second-level cache

_Weight = list["tuple[NDArray[np.float64], int]"]  # what stands before a power of s, and that power


def coefficient_arrays(
    transfer: Transfer, values: Mapping[str, ArrayLike]
) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """The coefficients of N and D for many value sets: arrays (powers of s, ascending) x (sets).

    ``values`` gives an array (SI units, all of one length, or one number) for names of H; the others take the
    number that H has for them. Column k of both arrays belongs to set k and carries an arbitrary common factor;
    N/D is H. Raises MissingValueError for a name without any value, UnknownNameError for one that H has not.

    >>> import symnet as sn
    >>> H = sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out; C1 = 1 uF"))
    >>> n, d = coefficient_arrays(H, {"R1": [1e3, 2e3]})
    >>> (d / n[0]).tolist()
    [[1.0, 1.0], [0.001, 0.002]]
    """
    names = transfer.naming.generators.names[1:]
    for name in values:
        if name not in names:
            close = nearest(name, names)
            hint = f"did you mean {close[0]}?" if close else f"H holds: {', '.join(names)}"
            raise UnknownNameError(Fault(f"H holds no name {name}", hint))
    given = {name: np.atleast_1d(np.asarray(array, dtype=np.float64)) for name, array in values.items()}
    sets = max((len(array) for array in given.values()), default=1)
    columns = []
    for name in names:
        if name in given:
            columns.append(np.broadcast_to(given[name], (sets,)))
        elif name in transfer.values:
            columns.append(np.full(sets, float(transfer.values[name])))
        elif name in transfer.names:
            raise MissingValueError(
                Fault(f"no value for {name}", "give it an array, or H a number", parts=(name,))
            )
        else:
            columns.append(np.ones(sets))  # it has cancelled
    n, d = transfer.quotient.numerator, transfer.quotient.denominator
    blocks = [
        _block(n, d, [column[start : start + _BLOCK] for column in columns])
        for start in range(0, sets, _BLOCK)
    ]
    return tuple(_joined([block[side] for block in blocks]) for side in (0, 1))  # type: ignore[return-value]


def _joined(blocks: Sequence[NDArray[np.float64]]) -> NDArray[np.float64]:
    powers = max(block.shape[0] for block in blocks)
    joined = np.zeros((powers, sum(block.shape[1] for block in blocks)))
    at = 0
    for block in blocks:
        joined[: block.shape[0], at : at + block.shape[1]] = block
        at += block.shape[1]
    return joined


def _block(
    n: Determinant, d: Determinant, columns: Sequence[NDArray[np.float64]]
) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    takes, leaves = [], []
    for take, leave in zip(n.take, n.leave, strict=True):
        taken, left = _weight(take, columns), _weight(leave, columns)
        largest = np.max([np.abs(array) for array, _ in (*taken, *left)], axis=0)
        largest[largest == 0] = 1
        takes.append([(array / largest, power) for array, power in taken])
        leaves.append([(array / largest, power) for array, power in left])
    sets = len(columns[0]) if columns else 1
    return tuple(  # type: ignore[return-value]
        _times(_diagram(det.diagram, takes, leaves, sets), _weight(det.factor, columns), sets)
        for det in (n, d)
    )


def _weight(terms: Terms, columns: Sequence[NDArray[np.float64]]) -> _Weight:
    sets = len(columns[0]) if columns else 1
    out: _Weight = []
    for coefficient, powers in terms:
        array, degree = np.full(sets, float(coefficient)), 0
        for k, exponent in powers:
            if k:
                array = array * columns[k - 1] ** exponent
            else:
                degree = exponent
        out.append((array, degree))
    return out or [(np.zeros(sets), 0)]


def _times(polynomial: NDArray[np.float64], weight: _Weight, sets: int) -> NDArray[np.float64]:
    out = np.zeros((polynomial.shape[0] + max(power for _, power in weight), sets))
    for array, power in weight:
        out[power : power + polynomial.shape[0]] += array * polynomial
    return out


def _diagram(
    diagram: Diagram, takes: Sequence[_Weight], leaves: Sequence[_Weight], sets: int
) -> NDArray[np.float64]:
    if diagram.is_zero:
        return np.zeros((1, sets))
    values: list[Any] = [None] * len(diagram)
    values.append(np.full((1, sets), float(diagram.overall)))
    for k in range(len(diagram) - 1, -1, -1):
        i, leave, take = diagram.piece[k], diagram.leave[k], diagram.take[k]
        parts = [(values[leave], leaves[i], 1)] if leave >= 0 else []
        parts += [(values[take], takes[i], diagram.sign[k])] if take >= 0 else []
        degree = max(below.shape[0] + max(power for _, power in weight) for below, weight, _ in parts)
        out = np.zeros((degree, sets))
        for below, weight, sign in parts:
            for array, power in weight:
                product = array * below
                here = out[power : power + below.shape[0]]
                if sign > 0:
                    here += product
                else:
                    here -= product
        values[k] = out
    result: NDArray[np.float64] = values[diagram.root]
    return result
