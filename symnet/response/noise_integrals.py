r"""Integrals of |N(jw)|^2/|D(jw)|^2 over all frequencies, in closed form and exact, and over a band.

*All frequencies.* For D with all roots to the left the integrals

.. math:: J_m = \frac{1}{2 \pi} \int_{-\infty}^{\infty} \frac{w^{2m}}{|D(jw)|^2} dw, \quad m = 0 \dots n - 1

are rational functions of the coefficients of D (tables up to order 7 in H. M. James, N. B. Nichols, R. S. Phillips,
*Theory of Servomechanisms*, McGraw-Hill 1947, appendix; from memory). They are found on the way back through the
scheme of Routh, after K. J. Astrom, *Introduction to Stochastic Control Theory*, Academic Press 1970, ch. 5 (from
memory): D_k of degree k gives D_(k-1) = D_k - alpha s T, with T the part of D_k that has the parity of k - 1 and alpha
the quotient of the two leading coefficients. Integrals of what has degree 2(k-2) or less are the same over D_k as over
D_(k-1), and that of |T|^2 is 1/(2 alpha). So J_0 ... J_(n-1) come one by one, each from those before it, by sums of
products and divisions only: the coefficients may be fractions or rational functions of names. The integral of any
numerator is then a sum of its coefficients times these, whatever the number of sources.

The rows of the scheme are kept as integers without a common factor. Measured once on RC ladders: 6 ms at order 20, 0.3 s
at order 40, 4 s at order 60, where exact elimination of the n equations for J takes 15 ms, 0.8 s and 10 s.

*A band.* The antiderivative of a rational function of a real variable is, by partial fractions, a sum of logarithms
and powers at the roots of its denominator. These are certified (:mod:`symnet.exact.roots`), with repeated roots known
as such. The sum is taken with more digits until two numbers of digits agree to 1e-20 of the result, so that close roots,
whose terms are large and cancel, cost time but no accuracy.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from math import lcm
from typing import TYPE_CHECKING, Any, Final

from symnet.errors import Fault, LimitError, UndefinedError
from symnet.exact.dense import primitive
from symnet.exact.ratio import Ratio
from symnet.exact.roots import roots
from symnet.response.axis import squared

if TYPE_CHECKING:
    from mpmath import MPContext

__all__ = ["antiderivative_between", "moments"]

_AGREE: Final = 20  # digits to which two computations of a band must agree
_MOST_DIGITS: Final = 640


def moments(d: Sequence[Any]) -> list[Any]:
    """J_0 ... J_(n-1) of the module head for D with these coefficients, ascending, in any field.

    D must have all its roots in the open left half plane; ZeroDivisionError where it has some on the jw axis.

    >>> moments([Fraction(1), Fraction(2)])                  # 1/(1 + 2s): 1/(2 tau)
    [Fraction(1, 4)]
    >>> moments([Fraction(1), Fraction(1), Fraction(1)])     # s^2 + s + 1
    [Fraction(1, 2), Fraction(1, 2)]
    """
    exact = all(isinstance(c, Fraction) for c in d)
    scheme: list[tuple[Any, list[Any]]] = []
    row, scale = _tidied(list(d), Fraction(1)) if exact else (list(d), 1)
    while len(row) > 1:
        k = len(row) - 1
        part = [c if (k - 1 - i) % 2 == 0 else 0 for i, c in enumerate(row[:-1])]
        lead, below = row[-1], row[-2]
        if not below:
            raise ZeroDivisionError
        scheme.append((scale**2 * below / (2 * lead), part))
        row = [row[0] * below, *(c * below - lead * t for c, t in zip(row[1:-1], part[:-1], strict=True))]
        scale = scale * below
        if exact:
            row, scale = _tidied(row, scale)
    found: list[Any] = []
    for own, part in reversed(scheme):
        *square, last = squared(part)
        found.append((own - (_sum_of_products(square, found) if exact else _plain_sum(square, found))) / last)
    return found


def _tidied(row: list[Any], scale: Fraction) -> tuple[list[Any], Fraction]:
    """The row over its content, and what D is now multiplied by."""
    content, tidy = primitive([Fraction(c) for c in row])
    return list(tidy), scale / content


def _sum_of_products(integers: Sequence[int], fractions: Sequence[Fraction]) -> Fraction:
    """Over one common denominator: a greatest common divisor for each product would take most of the time."""
    common = lcm(*(f.denominator for f in fractions))
    pairs = zip(integers, fractions, strict=True)
    return Fraction(sum(c * f.numerator * (common // f.denominator) for c, f in pairs if c), common)


def _plain_sum(coefficients: Sequence[Any], moments: Sequence[Any]) -> Any:
    return sum((c * m for c, m in zip(coefficients, moments, strict=True) if c), 0)


def antiderivative_between(ratio: Ratio, low: Fraction, high: Fraction | None) -> Fraction:
    """The integral of a rational function of a real variable from ``low`` to ``high`` (None: without end), to 20 digits.

    Raises UndefinedError where the integral diverges: a real pole within the limits, or too little decay without end.

    >>> one = Ratio.of([1], [1, 0, 1])                       # 1/(1 + t^2): the arc tangent
    >>> 4*float(antiderivative_between(one, Fraction(0), Fraction(1)))
    3.141592653589793
    >>> 2*float(antiderivative_between(one, Fraction(0), None))
    3.141592653589793
    """
    if ratio.is_zero:
        return Fraction(0)
    if high is None and len(ratio.num) > len(ratio.den) - 2:
        raise UndefinedError(Fault("the integral without an upper end diverges"))
    if high is not None and high <= low:
        return Fraction(0)
    digits = 40
    before = None
    while digits <= _MOST_DIGITS:
        value = _integral(ratio, low, high, digits)
        if before is not None and abs(value - before) <= abs(value) / 10**_AGREE:
            return value
        before, digits = value, 2 * digits
    raise LimitError(Fault(f"this integral over a band needs more than {_MOST_DIGITS} digits of every root"))


def _integral(ratio: Ratio, low: Fraction, high: Fraction | None, digits: int) -> Fraction:
    from mpmath import MPContext

    context = MPContext()
    context.dps = digits
    total = context.mpf(0)
    whole, rest = _divided(ratio.num, ratio.den)
    for k, c in enumerate(whole):  # empty without an upper end
        total += _real(context, c * ((high or 0) ** (k + 1) - low ** (k + 1)) / (k + 1))
    top, bottom = ([_real(context, c) for c in side] for side in (rest, ratio.den))
    a, b = _real(context, low), None if high is None else _real(context, high)
    for root in roots(ratio.den, digits):
        if root.imag < 0:
            continue
        if root.is_real and root.real >= low and (high is None or root.real <= high):
            raise UndefinedError(Fault("the integral diverges: there is a pole within the band"))
        at = context.mpc(_real(context, root.real), _real(context, root.imag))
        for power, factor in enumerate(_principal_part(context, top, bottom, at, root.multiplicity), 1):
            step = factor * (_primitive(context, b, at, power) - _primitive(context, a, at, power))
            total += step.real if root.is_real else 2 * step.real
    return _fraction(total)


def _primitive(context: MPContext, t: Any, root: Any, power: int) -> Any:
    """The antiderivative of (t - root)^-power.

    Without end, t = None, it is 0: the residues at all roots add up to zero there. The logarithm does not jump between
    two points of the real axis on one side of a real root, and to the right of it is taken of what is positive.
    """
    if t is None:
        return context.mpf(0)
    apart = t - root
    if power > 1:
        return -(apart ** (1 - power)) / (power - 1)
    if apart.imag:
        return context.log(apart)
    return context.log(abs(apart.real))


def _principal_part(
    context: MPContext, top: Sequence[Any], bottom: Sequence[Any], root: Any, multiplicity: int
) -> list[Any]:
    """The factors of (t - root)^-1 ... (t - root)^-multiplicity in top/bottom."""
    above = _around(context, top, root, multiplicity)
    below = _around(context, bottom, root, 2 * multiplicity)[multiplicity:]
    series: list[Any] = []
    for k in range(multiplicity):
        value = above[k] - sum(
            (below[i] * series[k - i] for i in range(1, k + 1)),
            context.mpc(0),
        )
        series.append(value / below[0])
    return series[::-1]


def _around(context: MPContext, coefficients: Sequence[Any], at: Any, count: int) -> list[Any]:
    """The first coefficients of the Taylor series around a point."""
    rest = [context.mpc(c) for c in coefficients]
    found = []
    for _ in range(count):
        value = context.mpc(0)
        quotient = []
        for c in reversed(rest):
            quotient.append(value)
            value = value * at + c
        found.append(value)
        rest = quotient[:0:-1]
    return found


def _divided(top: Sequence[Fraction], bottom: Sequence[Fraction]) -> tuple[list[Fraction], list[Fraction]]:
    """Quotient and rest of two polynomials."""
    rest = list(top)
    quotient = [Fraction(0)] * max(0, len(top) - len(bottom) + 1)
    for k in reversed(range(len(quotient))):
        factor = quotient[k] = rest[k + len(bottom) - 1] / bottom[-1]
        for i, c in enumerate(bottom):
            rest[k + i] -= factor * c
    return quotient, rest[: len(bottom) - 1]


def _real(context: MPContext, value: Fraction) -> Any:
    return context.mpf(value.numerator) / value.denominator


def _fraction(value: Any) -> Fraction:
    """The binary number as it stands."""
    sign, mantissa, exponent, _ = value._mpf_
    size = Fraction(int(mantissa)) * Fraction(2) ** int(exponent)
    return -size if sign else size
