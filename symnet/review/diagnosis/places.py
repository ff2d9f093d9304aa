"""What every piece of a line would have to be for the line to be true: worked out from the outside to the inside.

With left = right and all pieces known at a point, the left side would have to be the right one; a term of a sum the
wanted sum less the other terms; a factor the wanted product over the other factors; and so on. One pass gives the
wanted value of every piece, modulo a prime, and a slip that was made in one place shows there as a simple relation
between what stands and what is wanted: the negative, twice as much, one over it, the value of another name. Nothing
has to be guessed piece by piece.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Final, TypeAlias

from symnet.exact.modular import PRIME
from symnet.expressions import Expression, Number, Parallel, Power, Product, Root, Sum, children
from symnet.review.diagnosis.point import Point, inverse

__all__ = ["Path", "Place", "at", "places", "put", "spliced"]

#: The way from the sides of an equation to a piece: number of the side, then numbers of children.
Path: TypeAlias = tuple[int, ...]

_MOST_PLACES: Final = 600


@dataclass(frozen=True, slots=True)
class Place:
    """A piece of a line: what it is worth, and what it would have to be worth, modulo the prime."""

    path: Path
    expression: Expression
    parent: Expression | None
    value: int
    wanted: int

    @property
    def is_term(self) -> bool:
        """Whether it is a side, or a term of a sum of several."""
        return self.parent is None or (isinstance(self.parent, Sum) and len(self.parent.terms) > 1)


def places(sides: Sequence[Expression], point: Point, excess: int = 0) -> list[Place]:
    """Every piece of ``left = right`` with its wanted value; left - right is to be ``excess`` (zero as a rule).

    Raises UnreadableError where a side has no value at the point.
    """
    values: dict[Path, int] = {}
    for k, side in enumerate(sides):
        _fill(side, (k,), point, values)
    left, right = values[0,], values[1,]
    found: list[Place] = []
    for k, wanted in ((0, right + excess), (1, left - excess)):
        for place in _inside(sides[k], None, (k,), wanted % PRIME, values):
            found.append(place)
            if len(found) > _MOST_PLACES:
                return found
    return found


def _fill(expression: Expression, path: Path, point: Point, values: dict[Path, int]) -> None:
    """The values of all pieces, inner ones first."""
    inner = children(expression)
    for k, child in enumerate(inner):
        _fill(child, (*path, k), point, values)
    own = [values[(*path, k)] for k in range(len(inner))]
    match expression:
        case Sum(terms=terms):
            values[path] = sum(sign * value for (sign, _), value in zip(terms, own, strict=True)) % PRIME
        case Product(factors=factors):
            total = 1
            for (power, _), value in zip(factors, own, strict=True):
                total = total * (value if power > 0 else inverse(value)) % PRIME
            values[path] = total
        case _:
            values[path] = point(expression)


def _inside(
    expression: Expression, parent: Expression | None, path: Path, wanted: int, values: dict[Path, int]
) -> Iterator[Place]:
    value = values[path]
    yield Place(path, expression, parent, value, wanted)
    inner = children(expression)
    own = [values[(*path, k)] for k in range(len(inner))]
    for k, child in enumerate(inner):
        for of_child in _of_child(expression, k, own, wanted):
            yield from _inside(child, expression, (*path, k), of_child, values)


def _of_child(expression: Expression, k: int, own: Sequence[int], wanted: int) -> list[int]:
    """What a child would have to be for its parent to be what is wanted; ``own`` are the values of all children."""
    match expression:
        case Sum(terms=terms):
            rest = sum(sign * own[j] for j, (sign, _) in enumerate(terms) if j != k)
            return [terms[k][0] * (wanted - rest) % PRIME]
        case Product(factors=factors):
            rest = 1
            for j, (power, _) in enumerate(factors):
                if j != k:
                    rest = rest * (own[j] if power > 0 else inverse(own[j])) % PRIME
            if factors[k][0] > 0:
                return [wanted * inverse(rest) % PRIME] if rest else []
            return [rest * inverse(wanted) % PRIME] if wanted else []
        case Power(exponent=exponent) if wanted and exponent:
            target = wanted if exponent > 0 else inverse(wanted)
            return [target] if abs(exponent) == 1 else _roots(target) if abs(exponent) == 2 else []
        case Parallel() if wanted and all(own):
            rest = inverse(wanted) - sum(inverse(value) for j, value in enumerate(own) if j != k)
            return [inverse(rest % PRIME)] if rest % PRIME else []
        case Root():
            return [wanted * wanted % PRIME]
        case _:
            return []


def _roots(square: int) -> list[int]:
    root = pow(square, (PRIME + 1) // 4, PRIME)  # the prime is 3 modulo 4
    return [root, PRIME - root] if root * root % PRIME == square else []


# -- the line with another piece in a place ---------------------------------------------------------------------------


def at(sides: Sequence[Expression], path: Path) -> Expression:
    """The piece at a place."""
    found = sides[path[0]]
    for k in path[1:]:
        found = children(found)[k]
    return found


def put(sides: Sequence[Expression], path: Path, new: Expression) -> tuple[Expression, ...]:
    """The sides with another piece in a place; sums within sums are made one."""
    return tuple(_put(side, path[1:], new) if k == path[0] else side for k, side in enumerate(sides))


def _put(expression: Expression, path: Path, new: Expression) -> Expression:
    if not path:
        return new
    k, rest = path[0], path[1:]
    match expression:
        case Sum(terms=terms):
            sign, term = terms[k]
            return spliced((*terms[:k], (sign, _put(term, rest, new)), *terms[k + 1 :]))
        case Product(factors=factors):
            power, factor = factors[k]
            return Product((*factors[:k], (power, _put(factor, rest, new)), *factors[k + 1 :]))
        case Power(base=base, exponent=exponent):
            return Power(_put(base, rest, new), exponent)
        case Parallel(branches=branches):
            return Parallel((*branches[:k], _put(branches[k], rest, new), *branches[k + 1 :]))
        case Root(base=base):
            return Root(_put(base, rest, new))
        case _:
            return expression


def spliced(terms: Sequence[tuple[int, Expression]]) -> Expression:
    """A sum with the terms of inner sums and the signs of inner numbers taken out; zeros are left out."""
    flat: list[tuple[int, Expression]] = []
    for sign, term in terms:
        if isinstance(term, Sum):
            flat += [(sign * inner, piece) for inner, piece in term.terms]
        elif isinstance(term, Number) and term.value < 0:
            flat.append((-sign, Number(-term.value, term.dimension)))
        elif not (isinstance(term, Number) and not term.value):
            flat.append((sign, term))
    if not flat:
        return Number(Fraction(0))
    if len(flat) == 1 and flat[0][0] > 0:
        return flat[0][1]
    return Sum(tuple(flat))
