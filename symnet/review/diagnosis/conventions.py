"""Figures claimed in another convention: 2 zeta for zeta, Q for zeta, rad/s for Hz, w0 for the -3 dB frequency.

A claim ``figure = value`` is put beside every other figure and every usual factor: when the value is that of another
figure, the claim has taken one for the other. Each of these is judged exactly, as if it were a line of its own. The
ideal gain for the noise gain, 1 + R2/R1 for R2/R1, is looked for in every quotient of the claim.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.errors import SymnetError
from symnet.expressions import Expression, Name, Number, Product, children
from symnet.review.checked import value_of
from symnet.review.diagnosis.explanation import Explanation, Slip
from symnet.review.diagnosis.pieces import scaled, shown
from symnet.review.diagnosis.places import Path, put, spliced
from symnet.review.diagnosis.shapes import in_numbers, shape_of
from symnet.review.frequencies import is_frequency_claim, judge_frequency
from symnet.review.verdicts import Verdict
from symnet.review.working import FIGURES, Equation
from symnet.shape.figures import f3db

if TYPE_CHECKING:
    from symnet.review.judge import Judge
    from symnet.review.working import Line

__all__ = ["Figures"]

_PI: Final = Name("pi")
_MEANING: Final = {
    "w0": "w0 in rad/s, the geometric mean of the poles",
    "f0": "f0 = w0/(2*pi) in Hz",
    "tau": "tau = 1/w0",
    "f3dB": "the -3 dB frequency in Hz",
    "w3dB": "the -3 dB frequency in rad/s",
    "Q": "Q = 1/(2*zeta)",
    "zeta": "zeta = 1/(2*Q)",
}
#: Which figures are taken for each.
_TAKEN: Final = {
    "f3dB": ("f0", "w3dB", "w0", "tau"),
    "w3dB": ("w0", "f3dB", "f0", "tau"),
    "f0": ("w0", "f3dB", "tau", "w3dB"),
    "w0": ("f0", "w3dB", "tau", "f3dB"),
    "tau": ("w0", "f0"),
    "Q": ("zeta",),
    "zeta": ("Q",),
}
_MOST_QUOTIENTS: Final = 12
_MOST_TERMS: Final = 20  # of a claim above or below its fraction bar


@dataclass(eq=False)
class Figures:
    """One line ``figure = value`` that does not hold."""

    judge: Judge
    line: Line
    statement: Equation

    @property
    def figure(self) -> str:
        """The figure that is claimed, or nothing."""
        first = self.statement.sides[0]
        known = isinstance(first, Name) and self.judge.scope.is_figure(first.name)
        return FIGURES[first.name] if known and isinstance(first, Name) else ""

    def _typed(self, claim: Expression) -> str:
        """The claim in a sentence; a number as it was typed, unit and all."""
        if isinstance(claim, Number) and claim.span:
            return self.judge.text[claim.span.start : claim.span.end]
        return shown(claim)

    def _is_long(self, claim: Expression) -> bool:
        """Whether every test of the claim would take its time: it is squared, and multiplied with its like."""
        try:
            value = value_of(self.judge.scope, claim, self.statement.of)
            return max(len(value.numerator), len(value.denominator)) > _MOST_TERMS
        except SymnetError:
            return True

    def _true(self, left: Expression, right: Expression) -> bool:
        """Whether a line of its own would hold."""
        statement = Equation((left, right), of=self.statement.of)
        try:
            if isinstance(left, Name) and is_frequency_claim(self.judge, statement):
                return judge_frequency(self.judge, self.line, statement).holds
            found = self.judge.alone(self.line, statement)
        except SymnetError:
            return False
        return found.holds and found.verdict is not Verdict.NOTHING

    def explanations(self) -> Iterator[Explanation]:
        """The conventions in which the claim is true."""
        figure, claim = self.figure, self.statement.sides[-1]
        if not figure or self._is_long(claim):
            return
        for other in _TAKEN[figure]:
            if self._true(Name(other), claim):
                words = f"{self._typed(claim)} is {other}, not {figure}: {other} is {_MEANING[other].removeprefix(other + ' = ')}"
                if figure in {"f3dB", "w3dB"} and other in {"w0", "f0"}:
                    words = f"{self._typed(claim)} is {_MEANING[other]}; the -3 dB frequency is another one{self._ratio(figure)}"
                elif {figure, other} in ({"w0", "f0"}, {"w3dB", "f3dB"}):
                    words = f"{self._typed(claim)} is {_MEANING[other]}: a factor 2*pi between rad/s and Hz"
                yield Explanation(Slip.CONVENTION, words)
                return
        if figure in {"zeta", "Q"}:
            yield from self._twice(figure, claim)
        yield from self._factors(figure, claim)
        yield from self._noise_gain(figure, claim)
        yield from self._times(figure, claim)

    def plain(self) -> Equation | None:
        """The line as an equation of values; f3dB as f0 where the two are one, and None where they are not."""
        if not self.figure or not is_frequency_claim(self.judge, self.statement):
            return self.statement
        if self._is_long(self.statement.sides[-1]):
            return None
        other = {"f3dB": "f0", "w3dB": "w0"}.get(self.figure)
        if other is None or not self._true(Name(self.figure), Name(other)):
            return None
        return replace(self.statement, sides=(Name(other), *self.statement.sides[1:]))

    def _twice(self, figure: str, claim: Expression) -> Iterator[Explanation]:
        two = Product(((1, Number(Fraction(2))), (1, Name(figure))))
        right = scaled(claim, Fraction(1, 2))
        if self._true(two, claim):
            words = f"{self._typed(claim)} is 2*{figure}, not {figure}: {figure} = {shown(right)}"
            if figure == "zeta":
                words += ", since D = 1 + 2*zeta*s/w0 + s^2/w0^2"
            yield self._put(Slip.CONVENTION, words, right)
        half = scaled(Name(figure), Fraction(1, 2))
        if self._true(half, claim):
            right = scaled(claim, Fraction(2))
            yield self._put(
                Slip.CONVENTION, f"{self._typed(claim)} is {figure}/2: {figure} = {shown(right)}", right
            )

    def _factors(self, figure: str, claim: Expression) -> Iterator[Explanation]:
        two_pi = ((1, Number(Fraction(2))), (1, _PI))
        for right, words in (
            (Product(((1, claim), (-1, Product(two_pi)))), "a factor 2*pi too many: rad/s for Hz"),
            (Product((*two_pi, (1, claim))), "a factor 2*pi is missing: Hz for rad/s"),
        ):
            if figure not in {"Q", "zeta"} and self._true(Name(figure), right):
                yield self._put(Slip.CONVENTION, f"{figure} = {shown(right)}: {words}", right)

    def _noise_gain(self, figure: str, claim: Expression) -> Iterator[Explanation]:
        """1 + a for a: a quotient of like parts, or 1 over one."""
        one = Number(Fraction(1))
        for path, piece in list(_quotients(claim, (0,)))[:_MOST_QUOTIENTS]:
            (right,) = put((claim,), path, spliced(((1, one), (1, piece))))
            if self._true(Name(figure), right):
                words = (
                    f"{shown(piece)} should be 1 + {shown(piece)}: the signal gain stands where the noise gain should, "
                    "with which the feedback closes"
                )
                yield self._put(Slip.CONVENTION, words, right)
                return

    def _times(self, figure: str, claim: Expression) -> Iterator[Explanation]:
        """A usual number between a claimed frequency and the -3 dB frequency of a response in numbers."""
        scope = self.judge.numeric or self.judge.scope
        where = self.statement.of or Name("H")
        ratio, value = in_numbers(scope, where), in_numbers(scope, claim)
        if figure not in {"f3dB", "w3dB"} or ratio is None or value is None or not value.num:
            return
        try:
            crossings = f3db(ratio)
        except SymnetError:
            return
        claimed = float(value.num[0] / value.den[0])
        for crossing in crossings:
            right = crossing.f * (1 if figure == "f3dB" else 2 * math.pi)
            for number in (2.0, 0.5, 1e3, 1e-3, 10.0, 0.1):
                if math.isclose(claimed, number * right, rel_tol=5e-3):
                    words = f"{self._typed(claim)} is {number:g} times the {_MEANING[figure].removeprefix('the ')}"
                    yield Explanation(Slip.FACTOR, words)
                    return

    def _put(self, slip: Slip, words: str, right: Expression) -> Explanation:
        sides = (*self.statement.sides[:-1], right)
        return Explanation(slip, words, (), replace(self.statement, sides=sides))

    def _ratio(self, figure: str) -> str:
        """What the -3 dB frequency is as a multiple of w0, where that is one number for all values."""
        ratio = shape_of(self.judge.scope, self.statement.of)
        if ratio is None:
            return ""
        low = next((k for k, c in enumerate(ratio.den) if c), 0)
        order = len(ratio.den) - 1 - low
        try:
            crossings = f3db(ratio)
        except SymnetError:
            return ""
        if len(crossings) != 1 or not order:
            return ""
        w0 = float(abs(ratio.den[low] / ratio.den[-1])) ** (1 / order)
        short = figure[0]
        return f": {figure} = {2 * math.pi * crossings[0].f / w0:.4g}*{short}0"


def _quotients(expression: Expression, path: Path) -> Iterator[tuple[Path, Expression]]:
    """Products with a division in them, the inner ones first."""
    for k, child in enumerate(children(expression)):
        yield from _quotients(child, (*path, k))
    if isinstance(expression, Product) and any(power < 0 for power, _ in expression.factors):
        yield path, expression
