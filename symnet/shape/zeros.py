"""H with finite zeros in symbols: what it can be by them, and that no family without zeros can be meant.

Zeros cannot be wished away: a family without finite zeros is out of reach unless the coefficients that make them can
vanish, or a zero meets a pole, which the resultant of N and D tells. What is left to ask is whether the zeros lie where
a notch, a band-stop or an all-pass has them; the low-pass behind those is judged by its families.
"""

from __future__ import annotations

from collections.abc import Collection, Iterator, Sequence
from typing import TYPE_CHECKING, Final

from symnet.exact.readable.forms import readable_ratio
from symnet.shape.given import Given
from symnet.shape.judging import judged
from symnet.shape.positive import sign_of
from symnet.shape.radicals import centre_frequency, root
from symnet.shape.solving import vanishing
from symnet.shape.stated import Condition, Formula
from symnet.shape.transformed import all_pass_equations, notch_equations, null_equation
from symnet.typeset.tree import Tree

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = [
    "all_pass_rows",
    "can_be_all_pass",
    "one_pole_one_zero",
    "pole_meets_zero",
    "quality",
    "quality_row",
    "stop_rows",
    "without_zeros",
]

_HIGHEST_ELIMINATED: Final = 4
_MOST_WORK: Final = 3000  # terms that the resultant can have


def without_zeros(
    top: Sequence[PolyElement], a: Sequence[PolyElement], given: Given, wanted: Collection[int]
) -> Condition:
    """Whether H can lose its finite zeros, so that a family without them is to be had at all."""
    start = next(k for k, c in enumerate(top) if c)
    order, count = len(a) - 1, len(top) - 1 - start
    name = "any family without finite zeros"
    zeros = f"{count} finite zero{'s' * (count > 1)}"
    # a low-pass keeps the lowest term of N alone, a high-pass the highest
    ends = [top[start + 1 :]] if start == 0 and len(top) - 1 < order else []
    ends = [top[start:-1]] if start and len(top) - 1 == order else ends
    ends = ends or [top[start + 1 :], top[start:-1]]
    for rest in ends:
        equations = [c for c in rest if c]
        if all(vanishing(e, given) for e in equations if given.at(e)):
            found = judged(name, equations, given=given, wanted=wanted)
            if found.status == "if":
                return found
    return Condition(name, "never", reason=f"H has {zeros} and such a family has none")


def pole_meets_zero(
    top: Sequence[PolyElement], a: Sequence[PolyElement], given: Given, wanted: Collection[int]
) -> Condition | None:
    """When a zero cancels a pole, so that the order is lower; None where that cannot be."""
    name = "of lower order (a zero cancels a pole)"
    start = next(k for k, c in enumerate(top) if c)
    top = top[start:]
    n_degree, d_degree = len(top) - 1, len(a) - 1
    # a resultant has the degree of one polynomial in the coefficients of the other
    work = max(map(len, top)) ** d_degree * max(map(len, a)) ** n_degree
    if max(n_degree, d_degree) > _HIGHEST_ELIMINATED or work > _MOST_WORK:
        return Condition(name, "open", reason="not decided within the limits of the elimination")
    ring = a[0].ring
    s = ring.gens[0]
    n, d = (sum((c * s**k for k, c in enumerate(side)), ring.zero) for side in (top, a))
    resultant = n.resultant(d).set_ring(ring)
    if not resultant or not vanishing(resultant, given):
        return None
    found = judged(name, [resultant], given=given, wanted=wanted)
    return None if found.status == "never" else found


def quality(a: Sequence[PolyElement]) -> Tree:
    """Q = sqrt(a_0 a_2)/a_1, cancelled where the sign of a_1 is sure."""
    from symnet.exact.readable.forms import readable
    from symnet.typeset.tree import over

    if sign_of(a[1]) != 1:
        return over(root(a[0] * a[2], a[1].ring.one, 2), readable(a[1]))
    top, bottom = (a[0] * a[2]).cancel(a[1] ** 2)
    return root(top, bottom, 2)


def quality_row(name: str, a: Sequence[PolyElement], *more: Formula) -> Condition:
    """A second order that is what its name says whatever the parts are: f0 and Q."""
    formulas = (Formula("f0", centre_frequency(a[0], a[2], 2)), Formula("Q", quality(a)), *more)
    return Condition(name, "always", formulas=formulas)


def stop_rows(
    top: Sequence[PolyElement], a: Sequence[PolyElement], given: Given, wanted: Collection[int]
) -> Iterator[Condition]:
    """A null on the jw axis, and the notch of order 2 whose null is at the f0 of its poles."""
    start = next(k for k, c in enumerate(top) if c)
    shifted = top[start:]
    signs = {sign_of(c) for c in shifted if c}
    equation = null_equation(shifted)
    if signs in ({1}, {-1}) and not any(shifted[1::2]) and len(shifted) == 3:
        formula = Formula("f_null", centre_frequency(shifted[0], shifted[2], 2))
        yield Condition("a null on the jw axis", "always", formulas=(formula,))
    elif signs in ({1}, {-1}) and equation is not None:
        formula = Formula("f_null", centre_frequency(*equation[1], 2))
        yield judged("a null on the jw axis", [equation[0]], given=given, wanted=wanted, formulas=(formula,))
    order = len(a) - 1
    if len(top) - 1 == order == 2 and not start:
        formulas = (
            Formula("f0", centre_frequency(a[0], a[2], 2)),
            Formula("Q", quality(a)),
            Formula("H(0)", readable_ratio(*top[0].cancel(a[0]))),
        )
        equations = notch_equations(top, a)
        yield judged("notch, order 2", equations, given=given, wanted=wanted, formulas=formulas)


def one_pole_one_zero(top: Sequence[PolyElement], a: Sequence[PolyElement]) -> Condition:
    """A first order with a zero: both corners and both levels."""
    formulas = (
        Formula("f_pole", centre_frequency(a[0], a[1], 1)),
        Formula("f_zero", centre_frequency(top[0], top[1], 1)),
        Formula("H(0)", readable_ratio(*top[0].cancel(a[0]))),
        Formula("H(infinity)", readable_ratio(*top[1].cancel(a[1]))),
    )
    return Condition("first order with one zero", "always", formulas=formulas)


def can_be_all_pass(top: Sequence[PolyElement], a: Sequence[PolyElement]) -> bool:
    """Whether the signs let the zeros mirror the poles: N(s) has then coefficients of both signs."""
    return {sign_of(c) for c in top} != {1} or {sign_of(c) for c in a} != {1}


def all_pass_rows(
    top: Sequence[PolyElement], a: Sequence[PolyElement], given: Given, wanted: Collection[int]
) -> Condition:
    """When N(s) = K D(-s)."""
    order = len(a) - 1
    formulas = [Formula("f0", centre_frequency(a[0], a[-1], order))]
    if order == 2:
        formulas.append(Formula("Q", quality(a)))
    formulas.append(Formula("T", readable_ratio(*(2 * a[1]).cancel(a[0]))))
    name = "first order, all-pass" if order == 1 else f"all-pass, order {order}"
    stable = [c for c in a if sign_of(c) != 1]  # the sign of a_0 is that of all
    return judged(
        name, all_pass_equations(top, a), stable, given=given, wanted=wanted, formulas=tuple(formulas)
    )
