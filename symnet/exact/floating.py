"""The weights of a determinant in floating point, for all frequencies of a sweep at once.

:mod:`symnet.exact.sweeps` reads a diagram at many points; here is what it is fed with. A weight is a short
polynomial in s and the names, so it is evaluated as it stands: the names first, in exact fractions, then its
powers of s on the whole array of points. Each coefficient is so rounded once, and weights that no frequency
touches are constant rows.
"""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from typing import TYPE_CHECKING, Any

import numpy as np

from symnet.errors import Fault, MissingValueError
from symnet.exact.polynomials import Generators, Terms

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from symnet.exact.determinant import Determinant

__all__ = ["factor_at", "weights_at"]


def weights_at(
    determinant: Determinant, values: Mapping[str, Fraction], s: NDArray[Any]
) -> tuple[NDArray[Any], NDArray[Any]]:
    """The weights (take, leave) of every piece at these points, as arrays (pieces x points).

    ``values`` gives the numbers (SI units) of the names that occur, ``s`` the points in rad/s, a real or complex
    array of one dimension. ``determinant.factor`` is not among the weights. Raises MissingValueError where a
    name that occurs has no number.

    >>> import numpy as np
    >>> import symnet as sn
    >>> H = sn.derive(sn.network("in -- R1 = 2 ohm -- out -- C1 = 3 F -- gnd; drive in; read out"))
    >>> take, leave = weights_at(H.quotient.denominator, H.values, np.array([1j, 2j]))
    >>> take[-1].tolist(), leave[-2].tolist()
    ([3j, 6j], [(2+0j), (2+0j)])
    """
    points = np.atleast_1d(s)
    numbers = _numbers(determinant.generators, values)
    take, leave = (
        np.array([_row(terms, numbers, points) for terms in side]).reshape(-1, len(points))
        for side in (determinant.take, determinant.leave)
    )
    return take, leave


def factor_at(determinant: Determinant, values: Mapping[str, Fraction], s: NDArray[Any]) -> NDArray[Any]:
    """The factor of a determinant at these points; raises as :func:`weights_at`."""
    return _row(determinant.factor, _numbers(determinant.generators, values), np.atleast_1d(s))


def _numbers(generators: Generators, values: Mapping[str, Fraction]) -> list[tuple[str, Fraction | None]]:
    return [(name, values.get(name)) for name in generators.names]


def _row(terms: Terms, numbers: list[tuple[str, Fraction | None]], points: NDArray[Any]) -> NDArray[Any]:
    by_power: dict[int, Fraction] = {}
    for coefficient, powers in terms:
        value, power_of_s = Fraction(coefficient), 0
        for place, exponent in powers:
            if not place:
                power_of_s = exponent
                continue
            name, number = numbers[place]
            if number is None:
                raise MissingValueError(
                    Fault(f"no value for {name}", f'give one: H.with_values({name}="...")', parts=(name,))
                )
            value *= number**exponent
        by_power[power_of_s] = by_power.get(power_of_s, Fraction(0)) + value
    row: NDArray[Any] = np.zeros(points.shape, dtype=np.result_type(points, np.float64))
    for power, value in by_power.items():
        row += float(value) * points**power if power else float(value)
    return row
