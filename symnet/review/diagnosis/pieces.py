"""Pieces of a line put together anew: products with other factors, terms with their sign, the current of a part."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Final

from symnet.circuit.network import Network
from symnet.circuit.parts import GROUND, Branch, CurrentLaw, Part, class_letter
from symnet.circuit.series import Beside, Group, Leaf, Series, ends_at, groups, leaves
from symnet.circuit.spelling import write_expression
from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Sum, negative
from symnet.review.rows import ends_of

__all__ = [
    "Flow",
    "current_through",
    "flows_at",
    "monomial",
    "scaled",
    "shown",
    "signed",
    "times",
    "turned",
    "voltage",
    "voltage_between",
]

_ONE: Final = Number(Fraction(1))


def shown(expression: Expression) -> str:
    """An expression inside a sentence."""
    return write_expression(expression)


def signed(sign: int, term: Expression) -> str:
    """A term with its sign, as in a sum."""
    text = write_expression(term)
    if isinstance(term, Sum) and len(term.terms) > 1:
        text = f"({text})"
    return text if sign > 0 else f"-{text}"


def turned(expression: Expression) -> Expression:
    """The negative of a current; its difference of voltages is turned round rather than negated."""
    if isinstance(expression, Product):
        for k, (power, factor) in enumerate(expression.factors):
            match factor:
                case Sum(terms=((1, plus), (-1, minus))):
                    turn = power, Sum(((1, minus), (-1, plus)))
                    return Product((*expression.factors[:k], turn, *expression.factors[k + 1 :]))
                case _:
                    pass
    return negative(expression)


def scaled(expression: Expression, factor: Fraction) -> Expression:
    """A piece times a number, which goes into a number that stands there already."""
    if factor == 1:
        return expression
    if factor < 0:
        return negative(scaled(expression, -factor))
    if isinstance(expression, Number):
        return Number(expression.value * factor, expression.dimension)
    if isinstance(expression, Sum) and len(expression.terms) == 1:
        return negative(scaled(expression.terms[0][1], factor))
    factors: list[tuple[int, Expression]] = [(1, expression)]
    if isinstance(expression, Product):
        factors = list(expression.factors)
    for k, (power, inner) in enumerate(factors):
        if isinstance(inner, Number):
            value = inner.value * (factor if power > 0 else 1 / factor)
            if value == 1 and (len(factors) > 1):
                del factors[k]
            else:
                factors[k] = power, Number(value, inner.dimension)
            return _product(factors)
    if factor.numerator != 1:
        factors.insert(0, (1, Number(Fraction(factor.numerator))))
    if factor.denominator != 1:
        factors.append((-1, Number(Fraction(factor.denominator))))
    return _product(factors)


def times(expression: Expression, powers: Mapping[str, int]) -> Expression:
    """A piece times a product of powers of names; names that stand there already are cancelled or raised."""
    if isinstance(expression, Sum) and len(expression.terms) == 1:
        return negative(times(expression.terms[0][1], powers))
    left = Counter(dict(powers))
    factors: list[tuple[int, Expression]] = []
    for power, inner in _flat(expression, 1):
        name, exponent = _as_power(inner)
        total = power * exponent + left.get(name, 0)
        if name in left and (total > 0) == (power > 0) and total:
            factors.append((power, _raised(name, abs(total))))
            del left[name]
        elif name in left:
            left[name] = total
        else:
            factors.append((power, inner))
    for name, e in sorted(left.items(), key=lambda item: _place_of(item[0])):
        new = 1 if e > 0 else -1, _raised(name, abs(e))
        later = (
            k
            for k, (power, inner) in enumerate(factors)
            if power == new[0] and _place(inner) > _place_of(name)
        )
        if e:
            factors.insert(next(later, len(factors)) if e > 0 else len(factors), new)
    return _product(factors)


def _flat(expression: Expression, power: int) -> Iterator[tuple[int, Expression]]:
    """The factors of a product and of the products in it."""
    if isinstance(expression, Product):
        for inner, factor in expression.factors:
            yield from _flat(factor, power * inner)
    else:
        yield power, expression


def _place_of(name: str) -> int:
    """Where a name stands in a product: s, then R, L, C, then voltages and whatever else."""
    return {"s": 0, "R": 1, "L": 2, "C": 3}.get(name if name == "s" else class_letter(name), 4)


def _place(expression: Expression) -> int:
    if isinstance(expression, Number):
        return -1
    name, _ = _as_power(expression)
    return _place_of(name) if name else 5


def _as_power(expression: Expression) -> tuple[str, int]:
    match expression:
        case Name(name=name):
            return name, 1
        case Power(base=Name(name=name), exponent=exponent):
            return name, exponent
        case _:
            return "", 0


def _raised(name: str, exponent: int) -> Expression:
    return Name(name) if exponent == 1 else Power(Name(name), exponent)


def _product(factors: list[tuple[int, Expression]]) -> Expression:
    kept = [
        (power, inner)
        for power, inner in factors
        if not (
            isinstance(inner, Number) and inner.value == 1 and power > 0 and inner.dimension == _ONE.dimension
        )
    ]
    if not kept:
        return _ONE
    if all(power < 0 for power, _ in kept):
        kept.insert(0, (1, _ONE))
    return kept[0][1] if len(kept) == 1 else Product(tuple(kept))


def monomial(powers: Mapping[str, int]) -> Expression:
    """A product of powers of names."""
    return times(_ONE, powers)


def _part(network: Network, name: str) -> Part | None:
    return network[name] if name not in network.drive_names else None


# -- currents ---------------------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Flow:
    """The current that leaves a node through a part, or through parts in series; ``other`` is where it goes.

    ``name`` is that of the part (of the first part of a series), ``called`` what a sentence calls it.
    """

    node: str
    other: str
    name: str
    called: str
    leaving: Expression


def flows_at(network: Network, node: str) -> Iterator[Flow]:
    """Every current that leaves a node, drives and amplifiers included, as a person writes it."""
    coils = {coil for coupling in network.couplings for coil in (coupling.first, coupling.second)}
    branches = [part for part in network.parts if isinstance(part, Branch)]
    for start, group, end in groups(branches, ends_at(network.parts)):
        if node in {start, end} and start != end:
            other = end if node == start else start
            for item in group.items if isinstance(group, Beside) else (group,):
                names = [leaf.name for leaf in leaves(item)]
                if (
                    isinstance(item, Leaf) and item.name in coils
                ):  # its current hangs on those of its partners
                    flow = Name(f"i_{item.name}") if node == start else negative(Name(f"i_{item.name}"))
                else:
                    flow = _through(network, item, voltage_between(node, other))
                yield Flow(node, other, names[0], " + ".join(names), flow)
    for name, start, end in ends_of(network):
        if node in {start, end} and start != end and not isinstance(_part(network, name), Branch):
            part = _part(network, name)
            flow = part.value if isinstance(part, CurrentLaw) else Name(f"i_{name}")
            yield Flow(
                node, end if node == start else start, name, name, flow if node == start else negative(flow)
            )


def current_through(network: Network, name: str) -> Expression | None:
    """The current through one branch, from its start to its end; None for a coupled coil and for sources."""
    part = network[name]
    coupled = any(name in (each.first, each.second) for each in network.couplings)
    if not isinstance(part, Branch) or coupled:
        return None
    return _through(network, Leaf(name), voltage_between(part.start, part.end))


def voltage(node: str) -> Expression:
    """The voltage of a node by its name."""
    return Name(f"v_{node}" if node.isdigit() else node)


def voltage_between(start: str, end: str) -> Expression:
    """The voltage from one node to another."""
    if end == GROUND:
        return voltage(start)
    return negative(voltage(end)) if start == GROUND else Sum(((1, voltage(start)), (-1, voltage(end))))


def _through(network: Network, group: Group, across: Expression) -> Expression:
    """The current of a branch with this voltage across it."""
    if isinstance(across, Sum) and len(across.terms) == 1:
        return negative(_through(network, group, across.terms[0][1]))
    if isinstance(group, Leaf):
        own = Name(group.name)
        match class_letter(group.name):
            case "C":
                return Product(((1, Name("s")), (1, own), (1, across)))
            case "Y":
                return Product(((1, own), (1, across)))
            case "L":
                return Product(((1, across), (-1, _impedance(group))))
            case _:
                return Product(((1, across), (-1, own)))
    return Product(((1, across), (-1, _impedance(group))))


def _impedance(group: Group) -> Expression:
    match group:
        case Series(items):
            return Sum(tuple((1, _impedance(item)) for item in items))
        case Beside(items):
            return Parallel(tuple(_impedance(item) for item in items))
        case Leaf(name):
            s, own = Name("s"), Name(name)
            match class_letter(name):
                case "L":
                    return Product(((1, s), (1, own)))
                case "C":
                    return Product(((1, _ONE), (-1, Product(((1, s), (1, own))))))
                case "Y":
                    return Product(((1, _ONE), (-1, own)))
                case _:
                    return own
