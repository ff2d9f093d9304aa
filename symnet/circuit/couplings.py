"""Coupled coils: whether a coupling names two coils, and whether any real set of windings could have it.

Coils store energy, i^T L i / 2, which is never negative: the matrix of self and mutual inductances is positive
semidefinite (for two coils M^2 <= L1 L2, that is |k| <= 1). Where all couplings of a group of coils are given by
M that matrix is judged as it stands, where all are given by k the one of coefficients, with 1 on its diagonal; both
exactly. A group with some of each is judged by whichever pairs can be, two coils at a time.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from fractions import Fraction
from typing import TYPE_CHECKING

from symnet.circuit.parts import Branch, Coupling
from symnet.errors import Fault, nearest
from symnet.expressions import Number
from symnet.quantities import HENRY, engineering

if TYPE_CHECKING:
    from symnet.circuit.drawing import Drawing

__all__ = ["coupling_faults"]


def coupling_faults(net: Drawing) -> Iterator[Fault]:
    """What is wrong with the couplings of a network."""
    coils = {part.name for part in net.parts if isinstance(part, Branch) and part.kind == "L"}
    numbers = {n: v.expression.value for n, v in net.values if isinstance(v.expression, Number)}
    seen: dict[frozenset[str], str] = {}
    names: set[str] = set()
    sound: list[Coupling] = []
    for coupling in net.couplings:
        pair = frozenset((coupling.first, coupling.second))
        unknown = [coil for coil in (coupling.first, coupling.second) if coil not in coils]
        if unknown:
            close = nearest(unknown[0], coils)
            hint = f"did you mean {close[0]}?" if close else f"place it: a -- {unknown[0]} -- b"
            yield Fault(f"the network has no coil {unknown[0]}", hint, coupling.span, parts=tuple(unknown))
        elif pair in seen:
            said = f"{coupling.first} and {coupling.second} are coupled already, by {seen[pair]}"
            yield Fault(said, "one coupling is enough", coupling.span, parts=tuple(pair))
        elif coupling.name in names:
            hint = "each coupling has a name of its own; a common value is given by a tie: k2 = k1"
            yield Fault(f"{coupling.name} is the name of two couplings", hint, coupling.span)
        else:
            sound.append(coupling)
        seen.setdefault(pair, coupling.name)
        names.add(coupling.name)
    tight = [fault for coupling in sound if (fault := _pair_fault(coupling, numbers)) is not None]
    yield from tight
    if not tight:
        yield from _group_faults(sound, numbers)


def _pair_fault(coupling: Coupling, numbers: Mapping[str, Fraction]) -> Fault | None:
    value = numbers.get(coupling.name)
    if value is None:
        return None
    if coupling.is_coefficient:
        if abs(value) <= 1:
            return None
        said = f"{coupling.name} = {engineering(value)}: a coupling coefficient lies between -1 and 1"
        return Fault(said, "k = M/sqrt(L1 L2)", coupling.span, parts=(coupling.first, coupling.second))
    one, two = numbers.get(coupling.first), numbers.get(coupling.second)
    if one is None or two is None or value**2 <= one * two:
        return None
    said = f"{coupling.name} = {engineering(value, HENRY)} is more than {coupling.first} and {coupling.second} allow"
    hint = "M^2 is at most L1 L2: a coil pair stores no negative energy"
    return Fault(said, hint, coupling.span, parts=(coupling.first, coupling.second))


def _group_faults(couplings: list[Coupling], numbers: Mapping[str, Fraction]) -> Iterator[Fault]:
    """Groups of three and more coils whose couplings together are impossible though each by itself is not."""
    groups: list[tuple[set[str], list[Coupling]]] = []
    for coupling in couplings:
        touched = [group for group in groups if {coupling.first, coupling.second} & group[0]]
        coils = {coupling.first, coupling.second}.union(*(group[0] for group in touched))
        members = [coupling, *(each for group in touched for each in group[1])]
        groups = [group for group in groups if group not in touched] + [(coils, members)]
    for coils, members in groups:
        kinds = {each.is_coefficient for each in members}
        order = sorted(coils)
        diagonal = [Fraction(1) if True in kinds else numbers.get(coil) for coil in order]
        values = [numbers.get(each.name) for each in members]
        if len(order) < 3 or len(kinds) > 1 or None in diagonal or None in values:
            continue
        matrix = [[Fraction(0)] * len(order) for _ in order]
        for k, own in enumerate(diagonal):
            matrix[k][k] = own or Fraction(0)
        for each, value in zip(members, values, strict=True):
            a, b = order.index(each.first), order.index(each.second)
            matrix[a][b] = matrix[b][a] = value or Fraction(0)
        if not _is_semidefinite(matrix):
            names = ", ".join(each.name for each in sorted(members, key=lambda each: each.name))
            said = f"no coils can have the couplings {names} together"
            hint = f"coils that are each close to a third are close to each other: check {', '.join(order)}"
            yield Fault(said, hint, members[0].span, parts=tuple(order))


def _is_semidefinite(matrix: list[list[Fraction]]) -> bool:
    """By elimination: a pivot below zero, or a zero one with anything beside it, shows a negative energy."""
    rows = [list(row) for row in matrix]
    for k in range(len(rows)):
        pivot = rows[k][k]
        if pivot < 0 or (pivot == 0 and any(rows[k][k + 1 :])):
            return False
        for j in range(k + 1, len(rows)):
            if pivot and rows[j][k]:
                factor = rows[j][k] / pivot
                rows[j] = [x - factor * y for x, y in zip(rows[j], rows[k], strict=True)]
    return True
