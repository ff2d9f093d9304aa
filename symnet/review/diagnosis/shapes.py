"""The shape of a transfer, for what is said of it in numbers: normalisation, tables, sections of a family.

A transfer whose parts have values is taken with them. One in symbols has a shape only when every choice of values
gives the same: that is tried with two different choices, and what is said from it is a remark, never a verdict.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.errors import SymnetError
from symnet.exact.ratio import Ratio
from symnet.expressions import names_in
from symnet.quantities import HERTZ, engineering
from symnet.review.checked import value_of
from symnet.review.diagnosis.explanation import Explanation, Slip
from symnet.review.diagnosis.quotients import Quotient, quotient_of, reduced
from symnet.review.numbers import coefficients_at
from symnet.review.rounding import approximations
from symnet.shape.figures import f3db
from symnet.shape.recognise import recognise
from symnet.shape.verdict import Recognition

if TYPE_CHECKING:
    from symnet.expressions import Expression
    from symnet.review.judge import Judge
    from symnet.review.scope import Scope
    from symnet.shape.families.prototype import Prototype

__all__ = ["family_slip", "in_numbers", "normalisation", "ratio_at", "shape_of"]

_NEAR: Final = 2e-3  # how well rounded coefficients must agree


def shape_of(scope: Scope, of: Expression | None) -> Ratio | None:
    """A transfer in numbers of which only the shape counts; None where it hangs on the values of symbols."""
    try:
        sides = quotient_of(scope, scope.transfer() if of is None else value_of(scope, of))
    except SymnetError:
        return None
    if sides is None:
        return None
    names = scope.solution.naming.generators.names[1:]
    found = []
    for seed in (1, 2):
        values = {name: Fraction(seed * (k % 3 + 1) if seed > 1 else 1) for k, name in enumerate(names)}
        ratio = ratio_at(scope, sides, values)
        if ratio is None:
            return None
        found.append(ratio)
    one, two = (_normalised(ratio) for ratio in found)
    if one is None or two is None or len(one) != len(two):
        return None
    same = all(math.isclose(a, b, rel_tol=1e-9, abs_tol=1e-12) for a, b in zip(one, two, strict=True))
    return found[0] if same else None


def ratio_at(scope: Scope, sides: Quotient, values: dict[str, Fraction]) -> Ratio | None:
    """A quotient of polynomials at these values of the names; None for roots of names and where it is 0/0."""
    algebra = scope.solution.algebra
    known = {**approximations(algebra), **values}
    try:
        return Ratio.of(*(coefficients_at(algebra, side, known) for side in sides))
    except (KeyError, SymnetError):
        return None


def in_numbers(scope: Scope, side: Expression, of: Expression | None = None) -> Ratio | None:
    """A side in lowest terms as a ratio of numbers; None while a name in it has no value."""
    try:
        sides = reduced(scope, value_of(scope, side, of))
    except SymnetError:
        return None
    return None if sides is None else ratio_at(scope, sides, {})


def _normalised(ratio: Ratio) -> list[float] | None:
    """The coefficients of the denominator at w0 = 1: what no scale of frequency can change."""
    low = next((k for k, c in enumerate(ratio.den) if c), None)
    if low is None:
        return None
    own = [float(c) for c in ratio.den[low:]]
    order = len(own) - 1
    if not order:
        return None
    w0 = abs(own[0] / own[-1]) ** (1 / order)
    return [c * w0**k / own[0] for k, c in enumerate(own)]


# -- a claimed H in numbers ----------------------------------------------------------------------------------------------


def normalisation(judge: Judge, sides: tuple[Expression, Expression]) -> Iterator[Explanation]:
    """A claimed H whose shape is right and whose frequency scale is not, or whose coefficients are denormalised."""
    scope = judge.numeric or judge.scope
    truth, claim = (in_numbers(scope, side) for side in sides)
    if truth is None or claim is None:
        return
    right, wrong = (_by_constant(ratio) for ratio in (truth, claim))
    if right is None or wrong is None or len(right) != len(wrong) or len(right) < 2:
        return
    order = len(right) - 1
    scale = abs(wrong[-1] / right[-1]) ** (1 / order)
    if not _alike(wrong, [c * scale**k for k, c in enumerate(right)]) or math.isclose(
        scale, 1, rel_tol=_NEAR
    ):
        return
    denormalised = _denormalised(scope, sides[1], right, wrong) if order == 2 else ""
    if denormalised:
        yield Explanation(Slip.NORMALISATION, denormalised)
    else:
        yield _scaled(truth, claim, scale)


def _by_constant(ratio: Ratio) -> list[float] | None:
    """The denominator over its constant term."""
    return [float(c / ratio.den[0]) for c in ratio.den] if ratio.den[0] else None


def _alike(one: Sequence[float], two: Sequence[float]) -> bool:
    return all(math.isclose(a, b, rel_tol=_NEAR) for a, b in zip(one, two, strict=True))


def _scaled(truth: Ratio, claim: Ratio, scale: float) -> Explanation:
    words = f"the shape is right, but not the frequency: the line lies at {1 / scale:.5g} times the frequencies of the network"
    evidence = []
    for name, ratio in (("the line", claim), ("the network", truth)):
        crossings = _half_power(ratio)
        if crossings:
            evidence.append(
                f"{name} is 3.01 dB down at {engineering(Fraction(crossings[0]), HERTZ, digits=5)}"
            )
    named = _reference(truth, scale)
    if named:
        words += f"; {named}"
    elif math.isclose(scale, 2 * math.pi, rel_tol=_NEAR):
        words += ": a factor 2*pi, Hz for rad/s"
    elif math.isclose(scale * 2 * math.pi, 1, rel_tol=_NEAR):
        words += ": a factor 2*pi, rad/s for Hz"
    elif math.isclose(math.log10(scale), round(math.log10(scale)), abs_tol=1e-3):
        words += ": a power of ten, look at the prefixes"
    return Explanation(Slip.NORMALISATION, words, tuple(evidence))


def _half_power(ratio: Ratio) -> list[float]:
    try:
        return [crossing.f for crossing in f3db(ratio)]
    except SymnetError:
        return []


def _prototype(ratio: Ratio) -> Prototype | None:
    try:
        found = recognise(ratio)
    except SymnetError:
        return None
    if not isinstance(found, Recognition) or not found.candidates or not found.candidates[0].matches:
        return None
    return found.candidates[0].prototype


def _reference(truth: Ratio, scale: float) -> str:
    """Which two references of the family are that far apart: the one of the table, and the one it was taken for."""
    prototype = _prototype(truth)
    if prototype is None:
        return ""
    for table in prototype.references:
        for taken in prototype.references:
            if table.name != taken.name and math.isclose(table.w / taken.w, scale, rel_tol=_NEAR):
                return (
                    f"these are the coefficients of {prototype} for the reference "
                    f"'{table.label}', taken as if it were '{taken.label}'"
                )
    return ""


def _denormalised(scope: Scope, claim: Expression, right: Sequence[float], wrong: Sequence[float]) -> str:
    """Coefficients of s^2 + b*s + c in rad/s where those of 1 + a*S + b*S^2 should stand, S as the line has it."""
    linear, square = right[1] / right[2], 1 / right[2]
    for name in {name.name for name in names_in(claim)} & set(scope.definitions):
        unit = _times_s(scope, name)
        if unit and _alike([wrong[1] / unit, wrong[2] / unit**2], [linear, square]):
            return (
                f"{linear:.6g} and {square:.8g} look denormalised (w0 = {math.sqrt(square):.4g} rad/s): they are "
                f"the coefficients of s^2 + {linear:.6g}*s + {square:.8g} with s in rad/s, while {name} is "
                f"s/({1 / unit:.6g} rad/s); normalised they are {right[1] / unit:.5g} and {right[2] / unit**2:.5g}"
            )
    return ""


def _times_s(scope: Scope, name: str) -> float | None:
    """The number that a definition multiplies s with; None where it is anything else than s times a number."""
    value = scope.of_name(name)
    ratio = ratio_at(scope, (value.numerator, value.denominator), {})
    if ratio is None or len(ratio.num) != 2 or ratio.num[0] or len(ratio.den) != 1:
        return None
    return float(ratio.num[1] / ratio.den[0])


# -- families ------------------------------------------------------------------------------------------------------------


def family_slip(judge: Judge, value: Expression, name: str, order: int) -> Iterator[Explanation]:
    """The Q of the sections beside those that the family asks for."""
    from symnet.shape.families import CATALOGUE

    scope = judge.numeric or judge.scope
    ratio = shape_of(scope, value)
    if ratio is None:
        ratio = in_numbers(scope, value)
    if ratio is None:
        return
    wanted = _sections_of(name, order)
    own = _qualities(ratio)
    if not wanted or not own or len(own) != len(wanted):
        return
    family = next(f.name for f in CATALOGUE if f.name.lower().startswith(name.lower()))
    theirs, ours = (" and ".join(f"{q:.4g}" for q in found) for found in (wanted, own))
    words = f"{family} of order {order} takes sections with Q = {theirs}; here they have Q = {ours}"
    if len({f"{q:.4g}" for q in own}) == 1 and len(own) > 1:
        words = f"a cascade of equal sections is no {family} of order {order}: it takes Q = {theirs}, here Q = {ours}"
    yield Explanation(Slip.CONVENTION, words)


def _sections_of(name: str, order: int) -> list[float]:
    from symnet.shape import prototypes

    maker = getattr(prototypes, name, None) if name in prototypes.__all__ else None
    try:
        prototype = maker(order) if maker is not None else None
    except (SymnetError, TypeError):
        return []
    return _of_poles(prototype.poles) if prototype is not None else []


def _qualities(ratio: Ratio) -> list[float]:
    import numpy as np

    own = _normalised(ratio)
    return _of_poles([complex(p) for p in np.roots(own[::-1])]) if own else []


def _of_poles(poles: Sequence[complex]) -> list[float]:
    return sorted(abs(p) / (-2 * p.real) for p in poles if p.imag > 1e-6 * abs(p) and p.real)
