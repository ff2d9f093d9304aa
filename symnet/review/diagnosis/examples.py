"""Numbers that show a line to be false: the smallest counterexample, and where the difference hardly matters.

The counterexample has every name 1, or one of them 2, and s real, so that both sides are plain fractions. How far the
sides are apart at real frequencies is asked with the given values, or with values usual on a bench, which are stated.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from fractions import Fraction
from typing import TYPE_CHECKING, Final

import numpy as np

from symnet.circuit.parts import class_letter
from symnet.errors import SymnetError
from symnet.quantities import FARAD, HENRY, HERTZ, NUMBER, OHM, Dimension, engineering
from symnet.review.checked import value_of
from symnet.review.diagnosis.explanation import Counterexample
from symnet.review.diagnosis.quotients import reduced
from symnet.review.diagnosis.shapes import in_numbers, ratio_at
from symnet.review.solution import generator_of

if TYPE_CHECKING:
    from symnet.exact.ratio import Ratio
    from symnet.exact.readable.packed import Polynomial
    from symnet.expressions import Expression
    from symnet.review.algebra import Value
    from symnet.review.judge import Judge
    from symnet.review.scope import Scope

__all__ = ["counterexample", "figures_of", "reach"]

_MOST_TERMS: Final = 2000
_CLOSE: Final = 0.01
_LOW: Final = -2  # power of ten of the lowest f in Hz,
_HIGH: Final = 10  # of the highest,
_STEPS: Final = 20  # points a decade
_TYPICAL: Final = {
    "R": (Fraction(10_000), OHM),
    "C": (Fraction(1, 10**8), FARAD),
    "L": (Fraction(1, 100), HENRY),
}


def counterexample(scope: Scope, sides: Sequence[Expression], of: Expression | None) -> Counterexample | None:
    """Round values at which the sides differ; None where roots occur, or the solution is too long."""
    solution = scope.solution
    try:
        values = [value_of(scope, side, of) for side in sides]
    except SymnetError:
        return None
    if (
        len(solution.network.drives) > 1
        or solution.terms > _MOST_TERMS
        or any(len(v.numerator) > _MOST_TERMS for v in values)
    ):
        return None
    names = [name for name in solution.naming.generators.names if _occurs(name, scope, values)]
    for numbers in _round(names):
        found = _both(scope, values, numbers)
        if found is not None and found[0] != found[1]:
            return Counterexample(tuple(numbers.items()), *found)
    return None


def _occurs(name: str, scope: Scope, values: Sequence[Value]) -> bool:
    """Whether a name is in a side or in the solution for what a side holds."""
    solution, algebra = scope.solution, scope.solution.algebra
    sides = [side for value in values for side in (value.numerator, value.denominator)]
    held = {n for side in sides for m in side for n in algebra.exponents(m)}
    for unknown in solution.unknowns:
        if generator_of(unknown) in held:
            sides += [solution.numerator(unknown), solution.denominator]
    unit = algebra.unit(name)
    return any(algebra.space.lower(m, unit) for side in sides for m in side)


def _round(names: Sequence[str]) -> Iterator[dict[str, Fraction]]:
    """Every name 1; one of them 2; then 1, 2, 3, ..."""
    ones = dict.fromkeys(names, Fraction(1))
    yield ones
    for name in names:
        yield {**ones, name: Fraction(2)}
    yield {name: Fraction(k + 1) for k, name in enumerate(names)}


def _both(
    scope: Scope, values: Sequence[Value], numbers: Mapping[str, Fraction]
) -> tuple[Fraction, Fraction] | None:
    """Both sides at these values for a drive of 1; None where a side has no value."""
    solution, algebra = scope.solution, scope.solution.algebra
    known = dict(numbers)
    for value in values:
        for side in (value.numerator, value.denominator):
            for monomial in side:
                for name in algebra.exponents(monomial):
                    if name not in known:
                        unknown = next((u for u in solution.unknowns if generator_of(u) == name), None)
                        if unknown is None:
                            return None
                        below = _at(scope, solution.denominator, numbers)
                        above = _at(scope, solution.numerator(unknown), numbers)
                        if not below or above is None:
                            return None
                        known[name] = above / below
    found = []
    for value in values:
        above, below = (_at(scope, side, known) for side in (value.numerator, value.denominator))
        if above is None or not below:
            return None
        found.append(above / below)
    return found[0], found[1]


def _at(scope: Scope, polynomial: Polynomial, known: Mapping[str, Fraction]) -> Fraction | None:
    total = Fraction(0)
    for monomial, coefficient in polynomial.items():
        term = Fraction(coefficient)
        for name, exponent in scope.solution.algebra.exponents(monomial).items():
            if name not in known:
                return None
            term *= known[name] ** exponent
        total += term
    return total


# -- how far apart -------------------------------------------------------------------------------------------------------


def reach(judge: Judge, sides: Sequence[Expression], of: Expression | None) -> str:
    """At which frequencies the sides differ by less than 1 %, in a sentence; empty where that cannot be asked."""
    scope = judge.scope
    try:
        left, right = (value_of(scope, side, of) for side in sides)
        if not left.numerator or not right.numerator:
            return ""
        quotient = reduced(scope, left / right)
    except SymnetError:
        return ""
    if quotient is None:
        return ""
    given = scope.solution.naming.numbers
    values, chosen = {}, []
    for name in scope.solution.naming.generators.names[1:]:
        if name in given:
            values[name] = given[name]
        else:
            value, dimension = _TYPICAL.get(class_letter(name), (Fraction(1), None))
            values[name] = value
            if any(_has(scope, side, name) for side in quotient):
                chosen.append(f"{name} = {engineering(value, dimension) if dimension is not None else value}")
    ratio = ratio_at(scope, quotient, values)
    if ratio is None or len(ratio.num) + len(ratio.den) <= 2:
        return ""
    bands = _bands(ratio)
    with_values = f"with {_gathered(chosen)} (usual values)" if chosen else "with the given values"
    if bands is None:
        return f"{with_values} the two sides differ by more than 1 % at every frequency"
    return f"{with_values} the two sides differ by less than 1 % {bands}" if bands else ""


def figures_of(
    judge: Judge, sides: Sequence[Expression], of: Expression | None, dimension: Dimension | None
) -> str:
    """What both sides are with the given values, in a sentence; empty where they hold s or a name without value."""
    ratios = [in_numbers(judge.numeric or judge.scope, side, of) for side in sides]
    found = []
    for ratio in ratios:
        if ratio is None or len(ratio.num) != 1 or len(ratio.den) != 1:
            return ""
        found.append(ratio.num[0] / ratio.den[0])
    left, right = (engineering(value, dimension or NUMBER, digits=4) for value in found)
    times = f": {float(found[1] / found[0]):.4g} times as much" if found[0] else ""
    return f"with the given values the left side is {left}, the right side {right}{times}"


def _gathered(chosen: Sequence[str]) -> str:
    """Equal values told once: R1, R2 = 10 kohm."""
    by_value: dict[str, list[str]] = {}
    for text in chosen:
        name, _, value = text.partition(" = ")
        by_value.setdefault(value, []).append(name)
    return ", ".join(f"{' = '.join(names)} = {value}" for value, names in by_value.items())


def _has(scope: Scope, polynomial: Polynomial, name: str) -> bool:
    unit = scope.solution.algebra.unit(name)
    return any(scope.solution.algebra.space.lower(m, unit) for m in polynomial)


def _apart(ratio: Ratio, f: float) -> float:
    s = 2j * math.pi * f
    above, below = (sum(float(c) * s**k for k, c in enumerate(side)) for side in (ratio.num, ratio.den))
    return abs(above / below - 1) if below else math.inf


def _bands(ratio: Ratio) -> str | None:
    """The bands in which the quotient is 1 within 1 %, in words; None for no band, empty for everywhere."""
    grid = [float(f) for f in np.logspace(_LOW, _HIGH, (_HIGH - _LOW) * _STEPS + 1)]
    near = [_apart(ratio, f) < _CLOSE for f in grid]
    if all(near):
        return ""
    if not any(near):
        return None
    words = []
    start = 0
    for k in range(1, len(grid) + 1):
        if k == len(grid) or near[k] != near[start]:
            if near[start]:
                low = _edge(ratio, grid[start - 1], grid[start]) if start else None
                high = _edge(ratio, grid[k], grid[k - 1]) if k < len(grid) else None
                words.append(_band(low, high))
            start = k
    return " and ".join(words)


def _edge(ratio: Ratio, far: float, near: float) -> float:
    """The frequency between a point outside and one inside at which the difference is 1 %."""
    for _ in range(30):
        middle = math.sqrt(far * near)
        far, near = (far, middle) if _apart(ratio, middle) < _CLOSE else (middle, near)
    return near


def _band(low: float | None, high: float | None) -> str:
    edges = ["" if f is None else engineering(Fraction(f), HERTZ, digits=3) for f in (low, high)]
    if low is None:
        return f"below {edges[1]}"
    return f"above {edges[0]}" if high is None else f"from {edges[0]} to {edges[1]}"
