"""Every published network, drawing by drawing: of those that differ in values only, the first."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

import symnet as sn
from symnet.circuit.network import Network
from symnet.expressions import Expression, Number, children, names_in
from symnet.quantities import NUMBER
from tests.reference import (
    active_sections,
    attenuators,
    doubly_terminated,
    finite_zeros,
    mains_network,
    passive_sections,
    riaa,
    singly_terminated,
)

__all__ = ["drawings"]

_CASES = (
    *active_sections.CASES,
    *passive_sections.CASES,
    *attenuators.CASES,
    *riaa.CASES,
    *riaa.DEEMPHASIS,
    *singly_terminated.CASES,
    *doubly_terminated.CASES,
    *finite_zeros.CASES,
    *mains_network.CASES,
)


@cache
def drawings(most_nodes: int = 5) -> dict[str, Network]:
    """The networks of at most so many nodes, all parts symbols, by the id of their case."""
    found: dict[object, tuple[str, Network]] = {}
    for case in _CASES:
        network = sn.network(case.text)
        drawn = (tuple((part.name, *part.nodes) for part in network.parts), network.drives, network.reads)
        network = _without_numbers(network)
        if len(network.nodes) <= most_nodes and not _has_units(network):
            found.setdefault(drawn, (case.id, network))
    return dict(found.values())


def _has_units(network: Network) -> bool:
    """Whether a tie names a quantity (C2 = 318 us/R2), which plain arithmetic cannot read."""
    return any(number.dimension != NUMBER for _, v in network.values for number in _numbers(v.expression))


def _numbers(expression: Expression) -> Iterator[Number]:
    if isinstance(expression, Number):
        yield expression
    for inner in children(expression):
        yield from _numbers(inner)


def _without_numbers(network: Network) -> Network:
    numbers = [name for name, value in network.values if not any(True for _ in names_in(value.expression))]
    return network.with_values(dict.fromkeys(numbers))
