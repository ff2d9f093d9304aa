"""H(s) with numbers in it: a rational function of s with exact rational coefficients, in lowest terms.

What is exact stays exact until the moment a double is asked for. The pair of polynomials is canonical when made
by :meth:`Ratio.of`: no common factor (certified, see :mod:`symnet.exact.dense`), trailing zeros trimmed, and the
lowest coefficient of the denominator that is not zero is 1. So two ratios are equal exactly when they are the same
function, and the hash agrees.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING, Any, overload

import numpy as np

from symnet.errors import Fault, UndefinedError
from symnet.exact import dense
from symnet.exact.evaluation import Complexes, Floats, evaluate, scale_back

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from symnet.exact.roots import Root

__all__ = ["Ratio"]


@dataclass(frozen=True, slots=True)
class Ratio:
    """num(s)/den(s) with exact coefficients in ascending powers of s (s in rad/s, values in SI units).

    ``num`` is empty for H = 0. Build one with :meth:`of`; the bare constructor takes what it is given and leaves it
    to the caller that the pair is canonical.

    >>> H = Ratio.of([1], [1, Fraction(1, 1000)])      # 1/(1 + s*tau), tau = 1 ms
    >>> H
    <Ratio of degree 0/1>
    >>> H(1000j)
    (0.5-0.5j)
    >>> H.poles()
    (Root(-1000),)
    """

    num: tuple[Fraction, ...]
    den: tuple[Fraction, ...]

    @classmethod
    def of(cls, num: Sequence[Fraction | int], den: Sequence[Fraction | int]) -> Ratio:
        """The ratio in lowest terms of two polynomials in ascending powers.

        Raises :class:`~symnet.errors.UndefinedError` when the denominator is zero.

        >>> Ratio.of([2, 2], [4, 6, 2]).den                 # 2(s+1) over 2(s+1)(s+2)
        (Fraction(1, 1), Fraction(1, 2))
        """
        return cls.reduced(num, den)[0]

    @classmethod
    def reduced(
        cls, num: Sequence[Fraction | int], den: Sequence[Fraction | int]
    ) -> tuple[Ratio, tuple[Fraction, ...]]:
        """The ratio in lowest terms, and the common factor that was cancelled (integers; (1,) for none).

        A cancelled factor is a mode of the network that this H does not show, so it is never dropped in silence.

        >>> Ratio.reduced([1, 1], [2, 3, 1])[1]
        (Fraction(1, 1), Fraction(1, 1))
        """
        top_content, top = dense.primitive([Fraction(c) for c in num])
        bottom_content, bottom = dense.primitive([Fraction(c) for c in den])
        if not bottom:
            raise UndefinedError(Fault("H has the denominator 0.", "The equations have no single solution."))
        common: dense.Integers = (1,)
        if top:
            common, top, bottom = dense.gcd(top, bottom)
        else:
            bottom = (1,)
        first = Fraction(next(c for c in bottom if c))
        factor = top_content / bottom_content / first
        ratio = cls(tuple(factor * c for c in top), tuple(c / first for c in bottom))
        return ratio, tuple(Fraction(c) for c in common)

    @property
    def order(self) -> int:
        """The degree of the denominator: the number of poles that this H has."""
        return len(self.den) - 1

    @property
    def is_zero(self) -> bool:
        """True for H = 0."""
        return not self.num

    @overload
    def __call__(self, s: complex) -> complex: ...
    @overload
    def __call__(self, s: Sequence[complex] | NDArray[Any]) -> Complexes: ...
    def __call__(self, s: Any) -> Any:
        """H at complex frequencies s in rad/s: a complex for a number, an array of the same shape for an array.

        Each value is good to about one part in 1e13 or better wherever H is neither 0 nor infinite, at any order and
        with any SI values. At a pole the value is complex infinity, ``inf + 0j``; at an infinite s it is the limit.

        >>> import numpy as np
        >>> Ratio.of([0, 1], [1, 1])(np.array([0j, 1j]))
        array([0. +0.j , 0.5+0.5j])
        """
        samples = np.asarray(s, dtype=np.complex128)
        flat = samples.reshape(-1)
        finite = np.isfinite(flat)
        known = flat if finite.all() else np.where(finite, flat, 1)
        value, exponent = self._mantissas(known)
        out = scale_back(value, exponent)
        if not finite.all():
            out = np.where(finite, out, np.where(np.isnan(flat), np.nan, self._at_infinity()))
        return complex(out[0]) if samples.ndim == 0 else out.reshape(samples.shape)

    def _mantissas(self, s: Complexes) -> tuple[Complexes, Any]:
        top, top_exponent = evaluate(self.num, s)
        bottom, bottom_exponent = evaluate(self.den, s)
        pole = bottom == 0
        with np.errstate(divide="ignore", invalid="ignore"):
            value = top / np.where(pole, 1, bottom)
        value[pole] = complex(math.inf, 0)
        return value, np.where(pole, 0, top_exponent - bottom_exponent)

    def _at_infinity(self) -> complex:
        if len(self.num) > len(self.den):
            return complex(math.inf, 0)
        return complex(float(self.num[-1] / self.den[-1])) if len(self.num) == len(self.den) else 0j

    @overload
    def decibels(self, s: complex) -> float: ...
    @overload
    def decibels(self, s: Sequence[complex] | NDArray[Any]) -> Floats: ...
    def decibels(self, s: Any) -> Any:
        """20*log10|H| at complex frequencies s in rad/s, also where |H| is too small or too large for a double.

        -inf where H is zero, inf at a pole.

        >>> round(Ratio.of([1], [1, 1]).decibels(1j), 4)
        -3.0103
        >>> Ratio.of([1], [0] * 40 + [1]).decibels(1e9j)
        -7200.0
        """
        samples = np.asarray(s, dtype=np.complex128)
        value, exponent = self._mantissas(samples.reshape(-1))
        with np.errstate(divide="ignore"):
            out = 20 * (np.log10(np.abs(value)) + exponent * math.log10(2))
        return float(out[0]) if samples.ndim == 0 else out.reshape(samples.shape)

    def at(self, s: Fraction) -> Fraction:
        """H at a rational s, exactly; :class:`~symnet.errors.UndefinedError` at a pole.

        >>> Ratio.of([1], [1, 1]).at(Fraction(1, 2))
        Fraction(2, 3)
        """
        values = [Fraction(0), Fraction(0)]
        for k, coefficients in enumerate((self.num, self.den)):
            for c in reversed(coefficients):
                values[k] = values[k] * s + c
        if not values[1]:
            raise UndefinedError(Fault(f"H has a pole at s = {s} rad/s."))
        return values[0] / values[1]

    def poles(self, digits: int = 17) -> tuple[Root, ...]:
        """The poles in rad/s, certified; see :func:`symnet.exact.roots.roots` for order and precision."""
        from symnet.exact.roots import roots

        return roots(self.den, digits)

    def zeros(self, digits: int = 17) -> tuple[Root, ...]:
        """The zeros in rad/s, certified; none for a constant, :class:`~symnet.errors.UndefinedError` for H = 0."""
        from symnet.exact.roots import roots

        return roots(self.num, digits)

    def stretched(self, factor: Fraction) -> Ratio:
        """H(s/factor): the same shape with every pole and zero multiplied by ``factor`` (positive).

        >>> Ratio.of([1], [1, 1]).stretched(Fraction(10)).poles()
        (Root(-10),)
        """
        return Ratio.of(
            [c / factor**k for k, c in enumerate(self.num)], [c / factor**k for k, c in enumerate(self.den)]
        )

    def __repr__(self) -> str:
        return f"<Ratio of degree {max(len(self.num) - 1, 0)}/{len(self.den) - 1}>"
