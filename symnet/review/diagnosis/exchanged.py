"""Slips that run through a whole line: two parts exchanged everywhere, or one name for another everywhere."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import combinations
from typing import Final

from symnet.circuit.parts import class_letter
from symnet.exact.modular import PRIME
from symnet.expressions import Expression, Name, names_in, substitute
from symnet.review.diagnosis.explanation import Slip
from symnet.review.diagnosis.point import Point, UnreadableError
from symnet.review.diagnosis.slips import Finder, Hypothesis

__all__ = ["exchanges"]

_MOST_PAIRS: Final = 200


def exchanges(finder: Finder, excess: int = 0) -> Iterator[Hypothesis]:
    """Every exchange of two parts of one kind, and every part for another, with which the line would hold."""
    parts = [name for name in finder.replaceable if class_letter(name) in "RLCZY"]
    pairs = [
        (a, b)
        for a, b in combinations(parts, 2)
        if class_letter(a) == class_letter(b) and (a in finder.spoken or b in finder.spoken)
    ]
    for a, b in pairs[:_MOST_PAIRS]:
        both = a in finder.spoken and b in finder.spoken
        often = sum(name.name in {a, b} for side in finder.sides for name in names_in(side))
        if often == 1:
            continue  # one name in one place is found there
        if not both and not finder.may_replace(*((a, b) if a in finder.spoken else (b, a))):
            continue
        swapped = _renamed(finder.sides, {a: b, b: a})
        if _holds(finder.point, swapped, excess):
            here, right = (a, b) if a in finder.spoken else (b, a)
            if both:
                words = f"{a} and {b} are exchanged: each stands where the other should"
                yield Hypothesis(Slip.SWAPPED, 1.1 if often == 2 else 1.3, swapped, words, name=a)
            else:
                yield Hypothesis(Slip.PART, 1.15, swapped, f"{here} stands where {right} should", name=right)
        elif both:
            for here, right in ((a, b), (b, a)):
                renamed = _renamed(finder.sides, {here: right})
                if _holds(finder.point, renamed, excess):
                    words = f"{here} stands where {right} should, throughout"
                    yield Hypothesis(Slip.PART, 1.6, renamed, words, name=right)


def _renamed(sides: tuple[Expression, ...], names: dict[str, str]) -> tuple[Expression, ...]:
    def rename(name: Name) -> Name:
        return Name(names.get(name.name, name.name))

    return tuple(substitute(side, rename) for side in sides)


def _holds(point: Point, sides: tuple[Expression, ...], excess: int) -> bool:
    try:
        return (point(sides[0]) - point(sides[1]) - excess) % PRIME == 0
    except UnreadableError:
        return False
