"""Claims about the whole response: its -3 dB frequency, and the family it belongs to.

The -3 dB frequency is where |H|^2 is half of what it is at the reference: at DC, or at infinity where H vanishes at
DC, as in :mod:`symnet.shape.figures`. A frequency that is claimed in symbols is put into that equation, which must
become an identity; one in numbers is compared with every crossing of a response in numbers. Families are those of
:mod:`symnet.shape.recognise`: exactly by their conditions in symbols, by their distance in numbers.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.errors import Fault, LimitError, MissingValueError, NotationError, UndefinedError, nearest
from symnet.exact.polynomials import make_ring
from symnet.expressions import Name
from symnet.quantities import HERTZ, engineering
from symnet.review.algebra import Value
from symnet.review.checked import is_zero, rounding, value_of
from symnet.review.digits import half_unit
from symnet.review.figures import lowest
from symnet.review.numbers import ratio_of
from symnet.review.rounding import can_vanish
from symnet.review.verdicts import Judgement, Verdict, worst
from symnet.review.working import FIGURES, Equation, Family, Line
from symnet.shape.conditions import conditions_of
from symnet.shape.families import CATALOGUE
from symnet.shape.figures import f3db
from symnet.shape.recognise import recognise
from symnet.shape.verdict import Recognition

if TYPE_CHECKING:
    from symnet.exact.ratio import Ratio
    from symnet.exact.readable.packed import Polynomial
    from symnet.expressions import Expression
    from symnet.review.judge import Judge
    from symnet.review.scope import Scope
    from symnet.shape.families import Family as CatalogueFamily
    from symnet.shape.verdict import Candidate

__all__ = ["gives_transfer", "half_power_claim", "judge_family", "judge_half_power"]

_HALF_POWER: Final = ("f3dB", "w3dB")


def half_power_claim(judge: Judge, statement: Equation) -> bool:
    """Whether a line claims a -3 dB frequency: f3dB = ..., w3dB = ...."""
    first = statement.sides[0]
    return (
        isinstance(first, Name)
        and FIGURES.get(first.name) in _HALF_POWER
        and judge.scope.is_figure(first.name)
    )


def gives_transfer(scope: Scope, statement: Equation) -> bool:
    """Whether a line gives H: H = ..., or what is read over what drives."""
    if not scope.network.reads or statement.node is not None or statement.of is not None:
        return False
    return not (value_of(scope, statement.sides[0]) - scope.transfer()).numerator


def judge_half_power(judge: Judge, line: Line, statement: Equation) -> Judgement:
    """The verdict on f3dB = ... or w3dB = ..., every side of a chain against the response."""
    name = statement.sides[0]
    assert isinstance(name, Name)  # noqa: S101 - asked for by half_power_claim
    figure = FIGURES[name.name]
    return worst([_half_power(judge, line, figure, side, statement.of) for side in statement.sides[1:]])


def _half_power(judge: Judge, line: Line, figure: str, side: Expression, of: Expression | None) -> Judgement:
    scopes = [(judge.scope, Verdict.IDENTITY)]
    if judge.numeric is not None:
        scopes.append((judge.numeric, Verdict.VALUES))
    for scope, verdict in scopes:
        equation = _HalfPower(scope, of)
        if is_zero(scope, equation.at(value_of(scope, side, of), figure)):
            return Judgement(line, verdict)
        values = rounding(scope, judge.text, side, of=of)
        if values is not None and can_vanish(scope.solution.algebra, equation.at(values[0], figure)):
            return Judgement(line, verdict, rounded=True)
    return Judgement(line, Verdict.FALSE, note=_found(judge, figure, of))


class _HalfPower:
    """|H(jw)|^2 = |H_ref|^2/2 as an equation for w."""

    def __init__(self, scope: Scope, of: Expression | None) -> None:
        self.scope = scope
        self.algebra = scope.solution.algebra
        transfer = scope.transfer() if of is None else value_of(scope, of)
        top, bottom = lowest(scope.solution, *scope.solution.substituted(transfer))
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


# -- families ------------------------------------------------------------------------------------------------------------


def judge_family(judge: Judge, line: Line, claim: Family) -> Judgement:
    """The verdict on a family and its settings; NotationError for one that symnet does not know."""
    family = _known(claim, line)
    where = claim.value
    scope = judge.numeric or judge.scope
    try:
        ratio = ratio_of(scope, value_of(scope, where), where)
    except MissingValueError:
        found = [_in_symbols(judge, line, claim, family)]
        for name, value in claim.settings:
            if name in _HALF_POWER:
                found.append(_half_power(judge, line, name, value, where))
            elif name in FIGURES:
                found.append(judge.alone(line, Equation((Name(name), value), of=where)))
            else:
                message = f"{name} is compared in numbers only, and there is a name without value"
                raise LimitError(Fault(message, "give every part a value", line.span)) from None
        return worst(found)
    return _in_values(judge, line, claim, family, ratio)


def _known(claim: Family, line: Line) -> CatalogueFamily:
    wanted = _plain(claim.name)
    for family in CATALOGUE:
        if _plain(family.name).startswith(wanted):
            return family
    names = [family.name.lower().replace(" ", "_") for family in CATALOGUE]
    close = nearest(claim.name, names)
    hint = f"did you mean {close[0]}?" if close else "families: " + ", ".join(names)
    raise NotationError(Fault(f"{claim.name} is no family of responses known here", hint, line.span))


def _plain(name: str) -> str:
    return "".join(c for c in name.lower() if c.isalnum())


def _in_symbols(judge: Judge, line: Line, claim: Family, family: CatalogueFamily) -> Judgement:
    scope, algebra = judge.scope, judge.scope.solution.algebra
    top, bottom = lowest(scope.solution, *scope.solution.substituted(value_of(scope, claim.value)))
    names = scope.solution.naming.generators.names
    ring = make_ring(names[1:])
    elements = []
    for side in (top, bottom):
        terms = {}
        for monomial, coefficient in side.items():
            exponents = algebra.exponents(monomial)
            if any(name not in names for name in exponents):
                raise LimitError(
                    Fault("a family is told of a quotient of polynomials in the parts", span=line.span)
                )
            terms[tuple(exponents.get(name, 0) for name in names)] = ring.domain(coefficient)
        elements.append(ring.from_dict(terms))
    stated = conditions_of(*elements)
    if stated.order != claim.order:
        return Judgement(line, Verdict.FALSE, note=f"the order is {stated.order}")
    if stated.order == 1:
        return Judgement(line, Verdict.IDENTITY)
    condition = next((c for c in stated.conditions if c.name.startswith(family.name)), None)
    if condition is None or condition.status == "open":
        reason = condition.reason if condition else stated.note
        raise LimitError(Fault(f"whether this is {family.name} is left open: {reason}", span=line.span))
    if condition.status == "if":
        return Judgement(line, Verdict.CONDITION, condition.alternatives)
    verdict = Verdict.IDENTITY if condition.status == "always" else Verdict.FALSE
    return Judgement(line, verdict, note=condition.reason)


def _in_values(judge: Judge, line: Line, claim: Family, family: CatalogueFamily, ratio: Ratio) -> Judgement:
    found = recognise(ratio)
    assert isinstance(found, Recognition)  # noqa: S101 - of numbers
    if found.order == claim.order == 1:
        match = None
    else:
        match = next(
            (
                c
                for c in found.candidates
                if c.family.name == family.name and c.prototype.order == claim.order
            ),
            None,
        )
        if match is None:
            return Judgement(line, Verdict.FALSE, note=f"it is {found}")
        if not match.matches:
            return Judgement(line, Verdict.FALSE, note=match.distance)
    for name, value in claim.settings:
        wrong = _wrong_setting(judge, name, value, ratio, match)
        if wrong:
            return Judgement(line, Verdict.FALSE, note=wrong)
    note = "first order" if match is None else "exactly" if match.exact else match.distance
    return Judgement(line, Verdict.VALUES, rounded=match is not None and not match.exact, note=note)


def _wrong_setting(judge: Judge, name: str, value: Expression, ratio: Ratio, match: Candidate | None) -> str:
    """What a figure or parameter of the family is instead, or an empty text when it is right to its digits."""
    scope = judge.numeric or judge.scope
    wanted = ratio_of(scope, value_of(scope, value), value)
    number = float(wanted.num[0] / wanted.den[0]) if wanted.num else 0.0
    written = judge.text[value.span.start : value.span.end] if value.span else ""
    reach = float(half_unit(written, Fraction(number))) + 1e-9 * abs(number)
    if name in FIGURES:
        figure = FIGURES[name]
        own = [2 * math.pi * c.f for c in f3db(ratio)] if figure in _HALF_POWER else [_own_w0(ratio)]
        if figure[0] not in "wf":
            raise NotationError(
                Fault(f"{figure} is no setting of a family", "such as f3dB = 20 kHz", value.span)
            )
        values = [w / (2 * math.pi) if figure[0] == "f" else w for w in own]
        unit = "Hz" if figure[0] == "f" else "rad/s"
    else:
        settings = {setting.name: setting for setting in match.prototype.settings} if match else {}
        if name not in settings:
            known = ", ".join(("f3dB", "f0", *settings))
            raise NotationError(
                Fault(f"this family has no setting called {name}", f"settings: {known}", value.span)
            )
        values, unit = [settings[name].value], settings[name].unit
        reach += 0.005 * abs(number)
    if any(abs(found - number) <= reach for found in values):
        return ""
    if name in FIGURES:
        return f"{name} is {_frequencies(values, unit)}" if values else f"there is no {name}"
    return f"{name} is {values[0]:.5g} {unit}"


def _own_w0(ratio: Ratio) -> float:
    """The geometric mean of the pole magnitudes."""
    low = next(k for k, c in enumerate(ratio.den) if c)
    order = len(ratio.den) - 1 - low
    return float(abs(ratio.den[low] / ratio.den[-1])) ** (1 / order) if order else math.nan
