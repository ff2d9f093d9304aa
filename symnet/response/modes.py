"""A response in time as the exact sum of its modes, repeated poles included.

The response to an input with the transform 1/s^k is the sum, over the poles p of H(s)/s^k, of a polynomial in t times
exp(p t); the polynomial's coefficients are the Laurent coefficients at the pole, found by dividing two Taylor series
there, so that a pole of multiplicity five is no different from a single one. Poles that are merely close give large
coefficients that cancel: the sum of their sizes tells how many digits that costs, poles and coefficients are computed
with so many more, and where doubles would not do the sum itself is taken in as many.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Final, TypeAlias

import mpmath
import numpy as np
from numpy.typing import NDArray

from symnet.exact.ratio import Ratio

if TYPE_CHECKING:
    from collections.abc import Sequence
    from fractions import Fraction

__all__ = ["Modes", "decays"]

Floats: TypeAlias = NDArray[np.float64]

#: Digits that a sum of doubles may lose before it is taken in more of them.
_SPARE: Final = 4
_DIGITS: Final = 40


@dataclass(frozen=True, slots=True, eq=False)
class Mode:
    """``(c_0 + c_1 t + c_2 t^2/2! + ...) exp(p t)``: one pole with one coefficient for each of its multiplicity.

    For a complex pole the conjugate is meant too: twice the real part counts.
    """

    pole: Any
    coefficients: tuple[Any, ...]
    is_real: bool


@dataclass(frozen=True, slots=True, eq=False)
class Modes:
    """A sum of modes for t > 0; t in seconds, the value in the unit of H times that of the input.

    ``lost`` is how many digits cancel in the sum at worst, ``digits`` how many poles and coefficients have.
    """

    modes: tuple[Mode, ...]
    lost: float
    digits: int

    @classmethod
    def of(cls, h: Ratio, power: int) -> Modes:
        """The modes of H(s)/s^power; H must not grow faster than s^power towards infinite frequency."""
        digits = _DIGITS
        while True:
            found, lost = _modes(h, power, digits)
            if lost <= digits - 25 or digits > 2000:
                return cls(found, lost, digits)
            digits = int(lost) + 50

    def __call__(self, t: Sequence[float] | Floats) -> Floats:
        """The value at the times t in seconds, each not below zero."""
        times = np.asarray(t, dtype=float)
        if self.lost <= _SPARE:
            return self._in_doubles(times)
        with mpmath.workdps(self.digits):
            flat = [float(self._at(mpmath.mpf(float(x)))) for x in times.ravel()]
        return np.asarray(flat).reshape(times.shape)

    def derivative(self) -> Modes:
        """The modes of the slope for t > 0; what jumps at t = 0 is not in it."""
        with mpmath.workdps(self.digits):
            slopes = tuple(
                Mode(
                    mode.pole,
                    tuple(
                        mode.pole * c + (mode.coefficients[k + 1] if k + 1 < len(mode.coefficients) else 0)
                        for k, c in enumerate(mode.coefficients)
                    ),
                    mode.is_real,
                )
                for mode in self.modes
            )
        return Modes(slopes, self.lost, self.digits)

    def _in_doubles(self, times: Floats) -> Floats:
        total = np.zeros(times.shape)
        for mode in self.modes:
            decay = np.exp(complex(mode.pole) * times)
            weight = np.zeros(times.shape, dtype=complex)
            for k, c in reversed(list(enumerate(mode.coefficients))):
                weight = weight * times / (k + 1) + complex(c)
            total += (1 if mode.is_real else 2) * (weight * decay).real
        return total

    def _at(self, t: Any) -> Any:
        total = mpmath.mpf(0)
        for mode in self.modes:
            weight = mpmath.mpc(0)
            for k, c in reversed(list(enumerate(mode.coefficients))):
                weight = weight * t / (k + 1) + c
            total += (1 if mode.is_real else 2) * mpmath.re(weight * mpmath.exp(mode.pole * t))
        return total


def _modes(h: Ratio, power: int, digits: int) -> tuple[tuple[Mode, ...], float]:
    """The modes to so many digits, and how many digits their sum may lose."""
    with mpmath.workdps(digits + 10):
        num = [_mp(c) for c in h.num]
        den = [mpmath.mpf(0)] * power + [_mp(c) for c in h.den]
        multiplicities = {0: power}
        poles: list[tuple[Any, int, bool]] = []
        for root in h.poles(digits + 10):
            if root.real == root.imag == 0:
                multiplicities[0] += root.multiplicity
            elif root.imag >= 0:
                poles.append((mpmath.mpc(_mp(root.real), _mp(root.imag)), root.multiplicity, root.is_real))
        if multiplicities[0]:
            poles.append((mpmath.mpc(0), multiplicities[0], True))
        found = tuple(Mode(p, _laurent(num, den, p, m), is_real) for p, m, is_real in poles)
        lost = _lost(found)
    return found, lost


def _lost(modes: tuple[Mode, ...]) -> float:
    """The digits that cancel in the sum: the sizes of its terms over its own size at the times of the modes."""
    size = mpmath.mpf(0)
    for mode in modes:
        tau = 1 / abs(mode.pole) if mode.pole else mpmath.mpf(1)
        size += sum(abs(c) * tau**k for k, c in enumerate(mode.coefficients))
    taus = [1 / abs(mode.pole) for mode in modes if mode.pole]
    if not taus or not size:
        return 0.0
    whole = Modes(modes, 0.0, mpmath.mp.dps)
    times = (min(taus), mpmath.sqrt(min(taus) * max(taus)), max(taus))
    own = max(abs(whole._at(t)) for t in times)  # noqa: SLF001 - of this module
    return max(0.0, float(mpmath.log10(size / own))) if own else 0.0


def _laurent(num: Sequence[Any], den: Sequence[Any], p: Any, multiplicity: int) -> tuple[Any, ...]:
    """The coefficients c_k of t^k/k! exp(p t) in the inverse transform of num/den, for a pole of that multiplicity.

    With num(p + h) = sum n_i h^i and den(p + h) = h^m sum d_i h^i, the quotient q of the two series gives
    c_k = q_(m - 1 - k).
    """
    top = _taylor(num, p, multiplicity)
    bottom = _taylor(den, p, 2 * multiplicity)[multiplicity:]
    quotient: list[Any] = []
    for k in range(multiplicity):
        rest = top[k] - sum((bottom[k - j] * quotient[j] for j in range(k)), mpmath.mpc(0))
        quotient.append(rest / bottom[0])
    return tuple(reversed(quotient))


def _taylor(polynomial: Sequence[Any], p: Any, count: int) -> list[Any]:
    """The first coefficients of the polynomial in powers of (s - p), by repeated division (Horner)."""
    work = list(polynomial)
    found: list[Any] = []
    for _ in range(count):
        if not work:
            found.append(mpmath.mpc(0))
            continue
        rest = mpmath.mpc(0)
        quotient: list[Any] = []
        for c in reversed(work):
            quotient.append(rest)
            rest = rest * p + c
        found.append(rest)
        work = list(reversed(quotient[1:]))
    return found


def _mp(value: Fraction) -> Any:
    return mpmath.mpf(value.numerator) / value.denominator


def decays(h: Ratio) -> list[tuple[float, float]]:
    """For every pole that is not at the origin: its decay per second (positive where it dies out) and its w in rad/s."""
    return [(-r.value.real, abs(r.value.imag)) for r in h.poles() if r.value and math.isfinite(abs(r.value))]
