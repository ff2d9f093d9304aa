"""Claims about a frequency of the whole response: f3dB, w3dB, and w0, f0, tau above order 2.

The -3 dB frequency is where |H|^2 is half of what it is at the reference: at DC, or at infinity where H vanishes at
DC, as in :mod:`symnet.shape.figures`. A frequency that is claimed in symbols is put into that equation, which must
become an identity; so is w0 into w0^n = |a0/an|, since its n-th root is no fraction. Relative to a peak a frequency is
compared with every crossing of the response in numbers.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.errors import Fault, LimitError, MissingValueError, NotationError, UndefinedError
from symnet.expressions import Name
from symnet.quantities import HERTZ, SECOND, engineering
from symnet.review.algebra import Value
from symnet.review.checked import is_zero, rounding, value_of
from symnet.review.digits import half_unit
from symnet.review.figures import denominator_of, lowest
from symnet.review.numbers import ratio_of
from symnet.review.rounding import can_vanish
from symnet.review.verdicts import Judgement, Verdict, worst
from symnet.review.working import FIGURES, Equation, Line
from symnet.shape.figures import f3db

if TYPE_CHECKING:
    from symnet.exact.ratio import Ratio
    from symnet.exact.readable.packed import Polynomial
    from symnet.expressions import Expression
    from symnet.review.judge import Judge
    from symnet.review.scope import Scope

__all__ = [
    "HALF_POWER",
    "gives_transfer",
    "is_frequency_claim",
    "judge_frequency",
    "judge_one",
    "with_reach",
    "wrong_figure",
]

HALF_POWER: Final = ("f3dB", "w3dB")
_MEAN: Final = ("w0", "f0", "tau")


def is_frequency_claim(judge: Judge, statement: Equation) -> bool:
    """Whether a line claims a frequency that has an equation of its own: a -3 dB frequency, or w0 above order 2."""
    first = statement.sides[0]
    if not isinstance(first, Name) or not judge.scope.is_figure(first.name):
        return False
    figure = FIGURES[first.name]
    if figure in HALF_POWER:
        return True
    return (
        figure in _MEAN
        and len(denominator_of(judge.scope.solution, _transfer(judge.scope, statement.of))) > 3
    )


def _transfer(scope: Scope, of: Expression | None) -> Value:
    return scope.transfer() if of is None else value_of(scope, of)


def gives_transfer(scope: Scope, statement: Equation) -> bool:
    """Whether a line gives H: H = ..., or what is read over what drives."""
    if not scope.network.reads or statement.node is not None or statement.of is not None:
        return False
    return not (value_of(scope, statement.sides[0]) - scope.transfer()).numerator


def judge_frequency(judge: Judge, line: Line, statement: Equation) -> Judgement:
    """The verdict on f3dB = ..., w0 = ... and so on, every side of a chain against the response."""
    name = statement.sides[0]
    assert isinstance(name, Name)  # noqa: S101 - asked for by is_frequency_claim
    figure = FIGURES[name.name]
    return worst([judge_one(judge, line, figure, side, statement.of) for side in statement.sides[1:]])


def judge_one(judge: Judge, line: Line, figure: str, side: Expression, of: Expression | None) -> Judgement:
    """The verdict on one side as that figure of H, or of ``of``: in symbols first, then for the given values."""
    scopes = [(judge.scope, Verdict.IDENTITY)]
    if judge.numeric is not None:
        scopes.append((judge.numeric, Verdict.VALUES))
    for scope, verdict in scopes:
        value = value_of(scope, side, of)
        if _is_negative(value):
            return Judgement(line, Verdict.FALSE, note=f"{figure} is positive")
        try:
            equation = (_HalfPower if figure in HALF_POWER else _Mean)(scope, of)
        except LimitError:
            if judge.numeric is None:
                raise
            return _at_a_crossing(judge, line, figure, side, of)
        if is_zero(scope, equation.at(value, figure)):
            return Judgement(line, verdict)
        values = rounding(scope, judge.text, side, of=of)
        if values is not None and can_vanish(scope.solution.algebra, equation.at(values[0], figure)):
            return Judgement(line, verdict, rounded=True)
    return Judgement(line, Verdict.FALSE, note=_found(judge, figure, of))


def _is_negative(value: Value) -> bool:
    """Whether a value is negative for all positive names, as the signs of its terms tell."""
    sides = [{c > 0 for c in side.values()} for side in (value.numerator, value.denominator)]
    return all(len(side) == 1 for side in sides) and sides[0] != sides[1]


def _at_a_crossing(
    judge: Judge, line: Line, figure: str, side: Expression, of: Expression | None
) -> Judgement:
    """A -3 dB frequency relative to a peak, in numbers: every crossing is as good as the other."""
    ratio = _in_numbers(judge, of)
    scope = judge.numeric or judge.scope
    if ratio is None:
        raise LimitError(
            Fault("a -3 dB frequency relative to a peak is not decided in symbols", span=side.span)
        )
    wrong = wrong_figure(judge, figure, ratio_of(scope, value_of(scope, side, of), side), side, ratio)
    return Judgement(line, Verdict.FALSE if wrong else Verdict.VALUES, rounded=not wrong, note=wrong)


class _Mean:
    """w0^n = |a0/an| as an equation for w0, the geometric mean of the poles of an H of order n."""

    def __init__(self, scope: Scope, of: Expression | None) -> None:
        self.algebra = scope.solution.algebra
        self.coefficients = denominator_of(scope.solution, _transfer(scope, of))

    def at(self, value: Value, figure: str) -> Polynomial:
        """What must be zero for the value to be that frequency, or that time constant."""
        order = len(self.coefficients) - 1
        first, last = (Value(self.algebra, self.coefficients[k]) for k in (0, -1))
        if figure == "tau":
            return (first * value**order - last).numerator
        w = value if figure == "w0" else self.algebra.number(2) * self.algebra.generator("pi") * value
        return (last * w**order - first).numerator


class _HalfPower:
    """|H(jw)|^2 = |H_ref|^2/2 as an equation for w."""

    def __init__(self, scope: Scope, of: Expression | None) -> None:
        self.scope = scope
        self.algebra = scope.solution.algebra
        top, bottom = lowest(scope.solution, *scope.solution.substituted(_transfer(scope, of)))
        self.top, self.bottom = (self.algebra.split(side, ("s",)) for side in (top, bottom))
        self.reference = self._reference()

    def _reference(self) -> tuple[Polynomial, Polynomial]:
        """Numerator and denominator of H at DC, or at infinity where it vanishes at DC."""
        if (0,) in self.top and (0,) in self.bottom:
            return self.top[0,], self.bottom[0,]
        high = max(self.top), max(self.bottom)
        if high[0] == high[1]:
            return self.top[high[0]], self.bottom[high[1]]
        raise LimitError(
            Fault(
                "a -3 dB frequency relative to a peak is not decided in symbols",
                "give the parts values and use sn.f3db",
            )
        )

    def at(self, frequency: Value, figure: str) -> Polynomial:
        """What must be zero for the frequency to be one where the power is half of that at the reference."""
        two = self.algebra.number(2)
        w = frequency if figure == "w3dB" else two * self.algebra.generator("pi") * frequency
        square = w * w
        above, below = (self._squared(side, square) for side in (self.top, self.bottom))
        n, d = (Value(self.algebra, side) for side in self.reference)
        return (two * above * d * d - below * n * n).numerator

    def _squared(self, side: dict[tuple[int, ...], Polynomial], square: Value) -> Value:
        """|P(jw)|^2 = E^2 + w^2*O^2."""
        halves = [self.algebra.number(0), self.algebra.number(0)]
        for (power,), coefficient in side.items():
            term = Value(self.algebra, coefficient) * square ** (power // 2)
            halves[power % 2] = halves[power % 2] + (-term if power // 2 % 2 else term)
        return halves[0] * halves[0] + square * halves[1] * halves[1]


def _found(judge: Judge, figure: str, of: Expression | None) -> str:
    """The -3 dB frequencies of a response in numbers, for a note; empty where it has none."""
    ratio = _in_numbers(judge, of)
    if ratio is None:
        return ""
    if figure in _MEAN:
        w0 = _own_w0(ratio)
        if figure == "tau":
            return f"tau is {engineering(Fraction(1 / w0), SECOND, digits=5)}"
        return f"{figure} is {_frequencies([w0], 'rad/s') if figure == 'w0' else _frequencies([w0 / (2 * math.pi)], 'Hz')}"
    try:
        crossings = f3db(ratio)
    except UndefinedError:
        return ""
    unit = "Hz" if figure == "f3dB" else "rad/s"
    found = [c.f if figure == "f3dB" else 2 * math.pi * c.f for c in crossings]
    return f"{figure} is {_frequencies(found, unit)}" if found else f"there is no {figure}"


def _frequencies(found: Sequence[float], unit: str) -> str:
    return ", ".join(engineering(Fraction(f), HERTZ, digits=5, unit=unit) for f in found)


def _in_numbers(judge: Judge, of: Expression | None) -> Ratio | None:
    scope = judge.numeric or judge.scope
    where = of or (scope.network.reads[0] if scope.network.reads else Name("H"))
    try:
        return ratio_of(scope, scope.transfer() if of is None else value_of(scope, of), where)
    except MissingValueError:
        return None


def with_reach(judge: Judge, wanted: Ratio, value: Expression) -> tuple[float, float]:
    """A number, and how far from it another may be and still have its digits."""
    number = float(wanted.num[0] / wanted.den[0]) if wanted.num else 0.0
    written = judge.text[value.span.start : value.span.end] if value.span else ""
    return number, float(half_unit(written, Fraction(number))) + 1e-9 * abs(number)


def wrong_figure(judge: Judge, figure: str, wanted: Ratio, value: Expression, ratio: Ratio) -> str:
    """What a frequency of a response in numbers is instead, or an empty text when it is right to its digits."""
    if figure[0] not in "wf":
        raise NotationError(Fault(f"{figure} is no setting of a family", "such as f3dB = 20 kHz", value.span))
    number, reach = with_reach(judge, wanted, value)
    own = [2 * math.pi * c.f for c in f3db(ratio)] if figure in HALF_POWER else [_own_w0(ratio)]
    values = [w / (2 * math.pi) if figure[0] == "f" else w for w in own]
    if any(abs(found - number) <= reach for found in values):
        return ""
    unit = "Hz" if figure[0] == "f" else "rad/s"
    return f"{figure} is {_frequencies(values, unit)}" if values else f"there is no {figure}"


def _own_w0(ratio: Ratio) -> float:
    """The geometric mean of the pole magnitudes."""
    low = next(k for k, c in enumerate(ratio.den) if c)
    order = len(ratio.den) - 1 - low
    return float(abs(ratio.den[low] / ratio.den[-1])) ** (1 / order) if order else math.nan
