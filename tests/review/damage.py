"""Mistakes as people make them, made on purpose: one line of a right derivation damaged in one of five ways.

The derivations are those that symnet tells of published networks. Damage that the oracle finds harmless (a sign on
both sides, a factor that cancels) is left out; what a definition (``let``) says cannot be wrong, so that
definitions are spared, and so are the values given with the network.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cache
from random import Random
from typing import TypeAlias

import symnet as sn
from symnet.circuit.network import Network
from symnet.circuit.parts import Branch
from symnet.exact.byhand.narration import Step
from symnet.expressions import Expression, Name, Number, Product, Sum, children, names_in, substitute
from symnet.present.explain import Explanation
from symnet.review.verdicts import Review
from tests.reference.drawings import drawings
from tests.workings import untrue

__all__ = ["KINDS", "NETWORKS", "Damage", "damages", "reviewed", "told"]

Terms: TypeAlias = tuple[tuple[int, Expression], ...]
Change: TypeAlias = Callable[[Terms, int], Terms]

KINDS = ("branch dropped", "sign flipped", "wrong node", "names swapped", "factor of two")

#: Published networks in the order of the lists, all parts symbols; more than forty.
NETWORKS: dict[str, Network] = dict(
    [
        (name, network)
        for name, network in drawings(most_nodes=9).items()
        # the oracle knows neither coupled coils nor devices with parts inside
        if not network.couplings and not any("." in part for part in network.part_names)
    ][:48]
)


@dataclass(frozen=True, slots=True)
class Damage:
    """A derivation with one damaged line: ``line`` counts from 1, ``right`` and ``wrong`` are what it said and says."""

    network: str
    kind: str
    line: int
    right: str
    wrong: str
    working: str

    def __str__(self) -> str:
        return f"{self.network}, {self.kind}, line {self.line}: {self.right}  ->  {self.wrong}"


@cache
def told(name: str) -> tuple[Network, Explanation]:
    """A network and the derivation that symnet tells of it."""
    return NETWORKS[name], sn.explain(NETWORKS[name])


@cache
def damages(name: str) -> tuple[Damage, ...]:
    """One damage of each kind to the derivation of a network, where that kind can do harm."""
    network, right = told(name)
    found = (_damaged(name, kind, network, right) for kind in KINDS)
    return tuple(damage for damage in found if damage is not None)


@cache
def reviewed(damage: Damage) -> Review:
    """What the checker says of a damaged derivation."""
    return sn.verify(told(damage.network)[0], damage.working)


def _damaged(name: str, kind: str, network: Network, right: Explanation) -> Damage | None:
    random = Random(f"{name} {kind}")
    ways = [(k, way) for k, step in enumerate(right.steps) for way in _ways(kind, step, network)]
    random.shuffle(ways)
    for k, way in ways:
        steps = list(right.steps)
        steps[k] = way
        working = replace(right, steps=tuple(steps)).to_working()
        if untrue(network, working) == [k]:
            return Damage(name, kind, k + 1, str(right.steps[k]), str(way), working)
    return None


def _ways(kind: str, step: Step, network: Network) -> Iterator[Step]:
    """Every way to damage one line."""
    if step.kind in {"given", "let"}:
        return
    match kind:
        case "branch dropped":
            if step.kind == "node":
                yield from _at_a_sum(step, lambda terms, k: (*terms[:k], *terms[k + 1 :]), outermost=True)
        case "sign flipped":
            yield from _at_a_sum(
                step, lambda terms, k: (*terms[:k], (-terms[k][0], terms[k][1]), *terms[k + 1 :])
            )
        case "factor of two":
            yield from _at_a_sum(
                step, lambda terms, k: (*terms[:k], (terms[k][0], _doubled(terms[k][1])), *terms[k + 1 :])
            )
        case "wrong node":
            if step.kind == "node":
                yield from _renamed(step, [node for node in network.nodes if "+" not in node])
        case _:
            parts = [part.name for part in network.parts if isinstance(part, Branch)]
            yield from _swapped(step, parts)


def _doubled(term: Expression) -> Expression:
    two = Number(Fraction(2))
    return Product(((1, two), *term.factors)) if isinstance(term, Product) else Product(((1, two), (1, term)))


def _with(step: Step, side: str, expression: Expression) -> Step:
    return replace(step, left=expression) if side == "left" else replace(step, right=expression)


def _at_a_sum(step: Step, change: Change, *, outermost: bool = False) -> Iterator[Step]:
    """The line with one sum in it changed at one of its terms."""
    for side in ("left", "right"):
        expression = step.left if side == "left" else step.right
        for target in [expression] if outermost else _sums(expression):
            if isinstance(target, Sum) and len(target.terms) > 1:
                for k in range(len(target.terms)):
                    terms = change(target.terms, k)
                    yield _with(step, side, _replaced(expression, target, Sum(terms)))


def _sums(expression: Expression) -> Iterator[Sum]:
    stack = [expression]
    while stack:
        node = stack.pop()
        if isinstance(node, Sum):
            yield node
        stack.extend(children(node))


def _replaced(expression: Expression, old: Expression, new: Expression) -> Expression:
    """The expression with this very piece of it replaced."""
    if expression is old:
        return new
    match expression:
        case Sum(terms):
            return Sum(tuple((sign, _replaced(term, old, new)) for sign, term in terms))
        case Product(factors):
            return Product(tuple((power, _replaced(factor, old, new)) for power, factor in factors))
        case _:
            return expression


def _renamed(step: Step, nodes: list[str]) -> Iterator[Step]:
    """A branch taken to another node: one difference of voltages with another name in it."""
    for side in ("left", "right"):
        expression = step.left if side == "left" else step.right
        for target in _sums(expression):
            match target:
                case Sum(terms=((1, Name() as plus), (-1, Name() as minus))):
                    for node in nodes:
                        if node not in {plus.name, minus.name}:
                            for other in (((1, plus), (-1, Name(node))), ((1, Name(node)), (-1, minus))):
                                yield _with(step, side, _replaced(expression, target, Sum(other)))
                case _:
                    pass


def _swapped(step: Step, parts: list[str]) -> Iterator[Step]:
    """Two parts of one class, each where the other should stand."""
    here = {name.name for side in (step.left, step.right) for name in names_in(side)}
    for k, one in enumerate(parts):
        for other in parts[k + 1 :]:
            if one[0] == other[0] and here & {one, other}:
                names = {one: other, other: one}

                def swap(name: Name, names: dict[str, str] = names) -> Expression:
                    return Name(names.get(name.name, name.name))

                yield replace(step, left=substitute(step.left, swap), right=substitute(step.right, swap))
