"""A last equation of the second degree solved for a part, with the inequality under which its roots are real.

A x^2 + B x + C = 0 with A > 0. Its roots are (-B +- sqrt(B^2 - 4AC))/(2A). By the rule of signs one of them is
positive where C < 0, whatever the rest; where C > 0 both are if B < 0 and B^2 >= 4AC, and none is if B > 0. Where
the parts leave a sign open the cases are kept apart, each with its inequalities.
"""

from __future__ import annotations

from collections.abc import Collection, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, TypeAlias

from symnet.exact.readable.forms import readable, readable_ratio
from symnet.shape.given import Given
from symnet.shape.positive import content, divide_content
from symnet.shape.radicals import root
from symnet.typeset.tree import ONE, Root, Tree, minus, over, plus, times

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["Quadratic", "quadratic_roots"]

#: A polynomial with what is asked of it: "> 0" or ">= 0".
Need: TypeAlias = "tuple[PolyElement, str]"


@dataclass(frozen=True, slots=True)
class Quadratic:
    """The roots that can be positive, each with what must hold for it to be real and positive.

    ``coefficients`` are A, B and C, A being positive.
    """

    equation: PolyElement
    name: str
    roots: tuple[tuple[Tree, tuple[Need, ...]], ...]
    coefficients: tuple[PolyElement, PolyElement, PolyElement]


def quadratic_roots(
    equations: Sequence[PolyElement], given: Given, wanted: Collection[int]
) -> Quadratic | None:
    """One of the equations solved for a wanted symbol that it holds to the second power; None if none can be.

    The symbol with the shortest discriminant is taken.
    """
    best: tuple[int, Quadratic] | None = None
    for equation in equations:
        ring = equation.ring
        for index in sorted(wanted):
            if index in given or max(m[index] for m in equation) != 2:
                continue
            c, b, a = (
                ring.from_dict(
                    {(*m[:index], 0, *m[index + 1 :]): x for m, x in equation.items() if m[index] == k}
                )
                for k in range(3)
            )
            sign = given.sign(a)
            if sign not in {1, -1}:
                continue
            if sign == -1:
                a, b, c = -a, -b, -c
            size = len(b * b - 4 * a * c)
            if best is None or size < best[0]:
                name = str(ring.symbols[index])
                best = size, Quadratic(equation, name, tuple(_roots(a, b, c, given)), (a, b, c))
    return None if best is None else best[1]


def _roots(
    a: PolyElement, b: PolyElement, c: PolyElement, given: Given
) -> list[tuple[Tree, tuple[Need, ...]]]:
    last = given.sign(c)
    found: list[tuple[Tree, tuple[Need, ...]]] = []
    if last != 1:
        found.append((_root(a, b, c, given, 1), () if last == -1 else ((-c, ">"),)))
    if last not in {-1, 0} and given.sign(b) not in {0, 1}:
        needs: tuple[Need, ...] = ((b * b - 4 * a * c, ">="), (-b, ">"))
        needs += () if last == 1 else ((c, ">"),)
        found += [(_root(a, b, c, given, sign), needs) for sign in (1, -1)]
    return found


def _root(a: PolyElement, b: PolyElement, c: PolyElement, given: Given, sign: int) -> Tree:
    """-B/(2A) (1 +- sqrt(1 - 4AC/B^2)) where the sign of B is sure, which reads best; else by the general formula."""
    if given.sign(b) in {1, -1}:
        inner = readable_ratio(*(4 * a * c).cancel(b * b))
        radical = Root(plus(ONE, minus(inner)))
        if given.sign(b) == 1:  # then C < 0, and the root is the one that is subtracted
            bracket = plus(radical, minus(ONE))
            return times(readable_ratio(*b.cancel(2 * a)), bracket)
        bracket = plus(ONE, radical if sign > 0 else minus(radical))
        front = _front(*(-b).cancel(2 * a))
        return times(front, bracket)
    by_formula = root(b * b - 4 * a * c, b.ring.one, 2) if b else root(-4 * a * c, a.ring.one, 2)
    return over(plus(minus(readable(b)), by_formula if sign > 0 else minus(by_formula)), readable(2 * a))


def _front(top: PolyElement, bottom: PolyElement) -> Tree:
    """A ratio that is positive where its terms have both signs: the positive ones first, as in (C1 - C2)*R2/C2."""
    rest = divide_content(top, *content(top))
    left = rest.ring.from_dict({m: c for m, c in rest.items() if c > 0})
    right = rest.ring.from_dict({m: -c for m, c in rest.items() if c < 0})
    if not left or not right:
        return readable_ratio(top, bottom)
    return times(plus(readable(left), minus(readable(right))), readable_ratio(top.exquo(rest), bottom))
