"""Claims that a response is of a family: exactly by the conditions in symbols, by its distance in numbers.

Families, and what counts as a member, are those of :mod:`symnet.shape.recognise`.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from symnet.errors import Fault, LimitError, MissingValueError, NotationError, nearest
from symnet.exact.polynomials import make_ring
from symnet.expressions import Name
from symnet.review.checked import value_of
from symnet.review.figures import lowest
from symnet.review.frequencies import HALF_POWER, judge_one, with_reach, wrong_figure
from symnet.review.numbers import ratio_of
from symnet.review.verdicts import Judgement, Verdict, worst
from symnet.review.working import FIGURES, Equation, Family, Line
from symnet.shape.conditions import conditions_of
from symnet.shape.families import CATALOGUE
from symnet.shape.recognise import recognise
from symnet.shape.verdict import Recognition

if TYPE_CHECKING:
    from symnet.exact.ratio import Ratio
    from symnet.expressions import Expression
    from symnet.review.judge import Judge
    from symnet.shape.candidate import Candidate
    from symnet.shape.families import Family as CatalogueFamily

__all__ = ["judge_family"]


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
            if name in HALF_POWER:
                found.append(judge_one(judge, line, name, value, where))
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
    if name in FIGURES:
        return wrong_figure(judge, FIGURES[name], wanted, value, ratio)
    number, reach = with_reach(judge, wanted, value)
    settings = {setting.name: setting for setting in match.prototype.settings} if match else {}
    if name not in settings:
        known = ", ".join(("f3dB", "f0", *settings))
        raise NotationError(
            Fault(f"this family has no setting called {name}", f"settings: {known}", value.span)
        )
    found = settings[name]
    # A fitted parameter is known no better than that.
    return (
        ""
        if abs(found.value - number) <= reach + 0.005 * abs(number)
        else f"{name} is {found.value:.5g} {found.unit}"
    )
