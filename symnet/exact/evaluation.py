"""A polynomial with exact coefficients at complex doubles: full precision, no overflow, no underflow.

Every sample is scaled by the power of two next to its own size, and the coefficients for that octave with it, so
that s^40 at 1 GHz and products of forty farads are both harmless; the result is a mantissa and an exponent.
Horner's scheme carries a bound on its rounding error. Where the terms cancel so far that the bound passes 1e-13
(pass-band edges of high order, the flanks of a notch) the value is computed again as the product of
(s - root)^multiplicity, with each root as the sum of two doubles: that product has a relative error of a few units
per factor everywhere. The roots are certified (:mod:`symnet.exact.roots`) and computed only when they are needed.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction
from typing import Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.exact.doubles import binary, double
from symnet.exact.roots import Root, roots

__all__ = ["Complexes", "Floats", "evaluate", "scale_back"]

Complexes: TypeAlias = NDArray[np.complex128]
Floats: TypeAlias = NDArray[np.float64]
Exponents: TypeAlias = NDArray[np.int64]

_HORNER_LIMIT: Final = 1e-13  # of relative error; beyond it the product over the roots is used
_DOUBLE: Final = 2.0**-53
_ROOT_DIGITS: Final = 34  # two doubles hold them


def evaluate(coefficients: Sequence[Fraction], s: Complexes) -> tuple[Complexes, Exponents]:
    """The polynomial at finite points s (one dimension), as mantissas and binary exponents.

    >>> m, e = evaluate([Fraction(1), Fraction(1, 10**6)], np.array([1e6j]))
    >>> complex(m[0] * 2.0 ** e[0])
    (1+1j)
    """
    if not coefficients:
        return np.zeros_like(s), np.zeros(s.shape, dtype=np.int64)
    mantissas, exponents = (np.array(column) for column in zip(*map(binary, coefficients), strict=True))
    powers = np.arange(len(coefficients))
    octave = np.frexp(np.abs(s))[1].astype(np.int64)
    octaves, group = np.unique(octave, return_inverse=True)
    raised = exponents[:, None] + powers[:, None] * octaves
    raised[mantissas == 0] = np.iinfo(np.int64).min // 2
    top = raised.max(axis=0)
    table = np.ldexp(mantissas[:, None], np.maximum(raised - top, -1074).astype(np.int32))
    t = _ldexp(s, -octave)
    size_of_t = np.abs(t)
    value = np.zeros_like(s)
    size = np.zeros(s.shape)
    for row in table[::-1]:
        terms = row[group]
        value = value * t + terms
        size = size * size_of_t + np.abs(terms)
    exponent = top[group]
    doubtful = size * ((4 * len(coefficients)) * _DOUBLE) > np.abs(value) * _HORNER_LIMIT
    if doubtful.any() and len(coefficients) > 1:
        value[doubtful], exponent[doubtful] = _product(coefficients, s[doubtful])
    return value, exponent


def _product(coefficients: Sequence[Fraction], s: Complexes) -> tuple[Complexes, Exponents]:
    mantissa, power = binary(coefficients[-1])
    value = np.full(s.shape, mantissa, dtype=np.complex128)
    exponent = np.full(s.shape, power, dtype=np.int64)
    for root in roots(coefficients, digits=_ROOT_DIGITS):
        gap = _gap(s, root)
        shift = np.frexp(np.maximum(np.abs(gap.real), np.abs(gap.imag)))[1].astype(np.int64)
        gap = _ldexp(gap, -shift)
        for _ in range(root.multiplicity):
            value = value * gap
            exponent = exponent + shift
        shift = np.frexp(np.abs(value))[1].astype(np.int64)
        value = _ldexp(value, -shift)
        exponent = exponent + shift
    return value, exponent


def _gap(s: Complexes, root: Root) -> Complexes:
    """S - root, good to a few units of the double even where almost everything cancels."""
    out = np.empty_like(s)
    for part, exact in ((np.real, root.real), (np.imag, root.imag)):
        high = double(exact)
        low = double(exact - Fraction(high)) if math.isfinite(high) else 0.0
        difference = (part(s) - high) - low
        if part is np.real:
            out.real = difference
        else:
            out.imag = difference
    return out


def _ldexp(values: Complexes, exponents: Exponents) -> Complexes:
    """Values times 2^exponents; 0 or inf outside the range of doubles."""
    clipped = np.clip(exponents, -5000, 5000).astype(np.int32)
    out = np.empty_like(values)
    with np.errstate(over="ignore", under="ignore"):
        out.real = np.ldexp(values.real, clipped)
        out.imag = np.ldexp(values.imag, clipped)
    return out


def scale_back(mantissas: Complexes, exponents: Exponents) -> Complexes:
    """Mantissas and exponents as plain complex doubles."""
    return _ldexp(mantissas, exponents)
