"""Approximations: whether two sides differ by no more than stated, at every frequency of a range.

With all numbers put in, |left/right - 1| <= b on the jw axis says that b^2 |Q|^2 - |P|^2 is not negative, where
left/right - 1 = P/Q: a polynomial in w^2 with rational coefficients. It is not negative on an interval when it is not
so at one point and has no root of odd multiplicity inside, which Sturm's theorem counts exactly. The ends of a range
in Hz are taken at 2*pi to 60 digits.
"""

from __future__ import annotations

from fractions import Fraction
from typing import TYPE_CHECKING

import numpy as np

from symnet.errors import Fault, MissingValueError, NotationError
from symnet.exact.ratio import Ratio
from symnet.quantities import HERTZ, engineering
from symnet.response.frequency import squared_magnitude
from symnet.review.checked import value_of
from symnet.review.numbers import ratio_of
from symnet.review.rounding import pi_to_60_digits
from symnet.review.verdicts import Judgement, Verdict
from symnet.review.working import Approximation, Line

if TYPE_CHECKING:
    from symnet.expressions import Expression
    from symnet.review.judge import Judge

__all__ = ["judge_approximation"]

_SAMPLES = 400  # frequencies at which the deviation is looked at, for the note only


def judge_approximation(judge: Judge, line: Line, statement: Approximation) -> Judgement:
    """The verdict on an approximation; MissingValueError while a name in it has no value."""
    scope = judge.numeric or judge.scope
    left, right = statement.left, statement.right
    ratio = ratio_of(scope, value_of(scope, left) / value_of(scope, right), right)
    interval = _interval(judge, statement)
    if interval is None and (len(ratio.num) > 1 or len(ratio.den) > 1):
        raise NotationError(
            Fault(
                "an approximation that holds s says over which range",
                "write: ... for f = 10 Hz .. 1 kHz within 1 %",
                line.span,
            )
        )
    low, high = interval or (Fraction(0), Fraction(0))
    holds = all(_never_negative(p, low**2, high**2) for p in _margins(ratio, statement))
    return Judgement(
        line,
        Verdict.VALUES if holds else Verdict.FALSE,
        note=_deviation(ratio, statement, float(low), float(high)),
    )


def _interval(judge: Judge, statement: Approximation) -> tuple[Fraction, Fraction] | None:
    """The range in rad/s."""
    if statement.low is None or statement.high is None:
        return None
    low, high = (_number(judge, end) for end in (statement.low, statement.high))
    if not 0 <= low < high:
        raise NotationError(
            Fault("a range goes from a lower to a higher frequency", span=statement.high.span)
        )
    factor = 2 * pi_to_60_digits() if statement.name == "f" else Fraction(1)
    return low * factor, high * factor


def _number(judge: Judge, end: Expression) -> Fraction:
    ratio = ratio_of(judge.scope, value_of(judge.scope, end), end)
    if len(ratio.num) > 1 or len(ratio.den) > 1:
        raise MissingValueError(Fault("the end of a range is a number", span=end.span))
    return ratio.num[0] / ratio.den[0] if ratio.num else Fraction(0)


def _margins(ratio: Ratio, statement: Approximation) -> list[list[Fraction]]:
    """Polynomials in w^2 that are not negative where the bound is kept."""
    if statement.decibels:
        square = squared_magnitude(ratio)
        bound = Fraction(10 ** (float(statement.within) / 10)).limit_denominator(10**15)
        return [_difference(square.den, square.num, bound), _difference(square.num, square.den, bound)]
    deviation = Ratio.of(_minus(ratio.num, ratio.den), ratio.den)
    square = squared_magnitude(deviation)
    return [_difference(square.den, square.num, statement.within**2)]


def _difference(p: tuple[Fraction, ...], q: tuple[Fraction, ...], factor: Fraction) -> list[Fraction]:
    return _minus([factor * c for c in p], q)


def _minus(
    p: list[Fraction] | tuple[Fraction, ...], q: list[Fraction] | tuple[Fraction, ...]
) -> list[Fraction]:
    length = max(len(p), len(q))
    a, b = ([*side, *[Fraction(0)] * (length - len(side))] for side in (p, q))
    return [x - y for x, y in zip(a, b, strict=True)]


def _never_negative(p: list[Fraction], low: Fraction, high: Fraction) -> bool:
    """Whether a polynomial has no negative value from low to high, ends included."""
    from sympy import QQ, Poly, Symbol

    def at(x: Fraction) -> Fraction:
        return sum((c * x**k for k, c in enumerate(p)), Fraction(0))

    if not any(p) or at(low) < 0 or at(high) < 0:
        return not any(p)
    if low == high:
        return True
    x = Symbol("x")
    whole = Poly([QQ(c.numerator, c.denominator) for c in reversed(p)], x, domain=QQ)
    ends = [QQ(end.numerator, end.denominator) for end in (low, high)]
    for factor, times in whole.sqf_list()[1]:
        if (
            times % 2
            and factor.degree()
            and factor.count_roots(*ends) > sum(factor(end) == 0 for end in ends)
        ):
            return False
    middle = (low + high) / 2
    return at(middle) >= 0


def _deviation(ratio: Ratio, statement: Approximation, low: float, high: float) -> str:
    """How far the sides differ at most, and where, from a few hundred frequencies."""
    w = np.array([low]) if low == high else np.geomspace(max(low, high * 1e-6), high, _SAMPLES)
    values = ratio(1j * w)
    sizes = np.abs(20 * np.log10(np.abs(values))) if statement.decibels else 100 * np.abs(values - 1)
    place = int(np.argmax(sizes))
    unit = "dB" if statement.decibels else "%"
    note = f"the largest deviation is about {sizes[place]:.2g} {unit}"
    if low == high:
        return note
    at = Fraction(w[place] / (2 * np.pi) if statement.name == "f" else w[place])
    where = engineering(at, HERTZ, digits=3, unit="Hz" if statement.name == "f" else "rad/s")
    return f"{note}, at {statement.name} = {where}"
