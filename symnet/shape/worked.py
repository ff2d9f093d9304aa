"""Numbers beside the formulas of a condition, wherever everything in them has a number."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import replace
from fractions import Fraction
from typing import Final

from symnet.shape.stated import Alternative, Condition, Formula
from symnet.typeset.numbers import plain_number, quantity
from symnet.typeset.tree import Tree, evaluate, names_of
from symnet.typeset.writing import to_text

__all__ = ["with_numbers"]

_EXACT: Final = 1e-12
_UNITS: Final = {"f": "Hz", "B": "Hz", "T": "s", "Q": ""}


def with_numbers(
    condition: Condition, numbers: Mapping[str, Fraction], units: Mapping[str, str]
) -> Condition:
    """The condition with "= 20 nF" behind "C1 = 2*C2" where C2 has a number, and so on for its figures."""
    known = {name: float(x) for name, x in numbers.items()} | {"pi": math.pi}
    ways = []
    for way in condition.alternatives:
        solved = _solved(way, known)
        texts = [(name, _text(value, units.get(name, ""))) for name, value in solved.items()]
        texts += _multiples(way, known, units)
        ways.append(replace(way, worked=tuple(texts) or way.worked))
    if len(ways) == 1:
        known |= _solved(condition.alternatives[0], known)
    formulas: list[Formula] = []
    for formula in condition.formulas:
        value = _value(formula.tree, known)
        if value is not None:
            value *= formula.factor
            known[formula.name.split(" ")[0]] = value
            text = _text(value, _UNITS.get(formula.name[0], ""))
            formula = replace(formula, worked="" if text == to_text(formula.tree) else text)
        formulas.append(formula)
    return replace(condition, alternatives=tuple(ways), formulas=tuple(formulas))


def _solved(way: Alternative, known: Mapping[str, float]) -> dict[str, float]:
    """The values that hang on numbers only, directly or through each other."""
    found: dict[str, float] = {}
    for _ in way.values:
        for name, tree in way.values:
            value = _value(tree, {**known, **found})
            if value is not None:
                found[name] = value
    return found


def _multiples(
    way: Alternative, known: Mapping[str, float], units: Mapping[str, str]
) -> list[tuple[str, str]]:
    """What is a number times one other part of the same kind, such as R1 = 1.863*R2."""
    found = []
    for name, tree in way.values:
        names = names_of(tree)
        free = names - known.keys()
        if len(free) != 1 or len(names) == 1:
            continue
        (other,) = free
        one, two = (_value(tree, {**known, other: x}) for x in (1.0, 2.0))
        if one and two and abs(two / one - 2) < _EXACT and units.get(name) == units.get(other):
            found.append((name, f"{plain_number(one)}*{other}"))
    return found


def _value(tree: Tree, known: Mapping[str, float]) -> float | None:
    if not names_of(tree) <= known.keys():
        return None
    try:
        value = evaluate(tree, known.__getitem__, float)
    except (ArithmeticError, ValueError):
        return None
    return float(value) if isinstance(value, float) and math.isfinite(value) else None


def _text(value: float, unit: str) -> str:
    return str(quantity(value, unit) if unit else plain_number(value))
