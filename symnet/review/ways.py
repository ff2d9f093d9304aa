"""What would have to be true of the parts for an equation to hold: its condition, solved where it can be."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.exact.polynomials import make_ring
from symnet.shape.judging import alternatives
from symnet.shape.solving import solve
from symnet.typeset.tree import names_of

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.solution import Solution
    from symnet.shape.stated import Alternative

__all__ = ["has_values", "ways"]

_MOST_SOLVED: Final = 60  # terms of an equation that is still solved
_MOST_EQUATIONS: Final = 12  # that must hold together; of more the shortest are looked at


def ways(solution: Solution, parts: Sequence[Polynomial]) -> tuple[Alternative, ...]:
    """The ways in which all of these polynomials in the names can be zero for positive names, at every s.

    Empty where there is none, and where none is found: equations with roots of names in them, or of more than some
    sixty terms, are left alone.
    """
    algebra = solution.algebra
    apart = [name for name in algebra.names if name == "s" or name.startswith("drive:")]
    equations: list[Polynomial] = []
    for part in parts:
        for piece in algebra.split(part, apart).values():
            by_roots = list(algebra.split(piece, (), roots=True).values())
            if len(by_roots) > 1 or any(len(p) > _MOST_SOLVED for p in by_roots):
                return ()
            equations += by_roots
    equations = sorted(equations, key=len)[:_MOST_EQUATIONS]
    names = [name for name in algebra.names[1:] if ":" not in name]
    ring = make_ring(names)
    places = {name: k for k, name in enumerate(("s", *names))}
    elements = []
    for equation in equations:
        terms = {}
        for monomial, coefficient in equation.items():
            exponents = [0] * len(places)
            for name, exponent in algebra.exponents(monomial).items():
                exponents[places[name]] = exponent
            terms[tuple(exponents)] = ring.domain(coefficient)
        elements.append(ring.from_dict(terms))
    found: list[Alternative] = []
    for branch in solve(elements):
        if all(solved.index != places["pi"] for solved in branch.solved):
            found += alternatives(branch)
    return tuple(found)


def has_values(way: Alternative, numbers: Mapping[str, Fraction]) -> bool:
    """Whether every name that a condition speaks of has a value, so that nothing about it is open."""
    names = {name for name, _ in way.values}
    for tree in (*(tree for _, tree in way.values), *(side for a, _, b in way.relations for side in (a, b))):
        names |= names_of(tree)
    return all(name in numbers for name in names if name != "pi")
