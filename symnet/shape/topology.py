"""What a network can never be, whatever its parts: known from what it is built of, or from a coefficient it forces.

A network of resistors and capacitors alone has real poles only, and so has one of resistors and inductors; one of
inductors and capacitors alone has all of them on the jw axis (W. Cauer, *Theorie der linearen Wechselstromschaltungen*,
1941). That settles at any size what equations of many terms leave open. And a ratio a_k^2/(a_(k-1) a_(k+1)), free of
frequency and gain, in which all parts cancel cannot be changed by any of them.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Final

from symnet.circuit.parts import Branch
from symnet.shape.families.family import Family
from symnet.shape.given import Given
from symnet.typeset.numbers import plain_number

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.circuit.network import Network

__all__ = ["forced", "has_real_poles_only", "poles_forbidden", "where_poles_are"]

_MOST_TERMS: Final = 40  # of a coefficient whose ratio to its neighbours is computed
_NOT_REAL: Final = 1e-9

_ALONE: Final = {
    frozenset("RC"): "real",
    frozenset("RL"): "real",
    frozenset("LC"): "imaginary",
}
_SAID: Final = {
    frozenset("RC"): "resistors and capacitors alone have real poles only",
    frozenset("RL"): "resistors and inductors alone have real poles only",
    frozenset("LC"): "inductors and capacitors alone have poles on the jw axis only",
}


def where_poles_are(network: Network) -> tuple[str, str]:
    """Whether all poles are "real" or "imaginary", with the sentence that says why; or two empty texts."""
    kinds = frozenset(part.kind for part in network.branches())
    passive = all(isinstance(part, Branch) for part in network.parts) and not network.couplings
    if not passive or network.instances or kinds not in _ALONE:
        return "", ""
    return _ALONE[kinds], _SAID[kinds]


def has_real_poles_only(family: Family, order: int) -> bool:
    """Whether the members of that order have real poles, as coincident ones are."""
    values = tuple(p.at(0.5) for p in family.parameters(order))
    poles, _ = family.near(order, values)
    return all(abs(p.imag) <= _NOT_REAL * abs(p) for p in poles)


def poles_forbidden(family: Family, order: int, places: tuple[str, str]) -> str:
    """Why the network cannot have the poles of this family, or an empty text."""
    place, why = places
    if not place or order < 2:
        return ""
    if place == "real" and has_real_poles_only(family, order):
        return ""
    has = "coincident real poles" if has_real_poles_only(family, order) else "complex poles"
    return f"{why}, and {family.name} of order {order} has {has}"


def forced(family: Family, a: Sequence[PolyElement], given: Given, indices: Sequence[int]) -> str:
    """A ratio of coefficients that no part can change and that is not the family's, or an empty text.

    ``indices`` are the powers of s that the coefficients have in H, which for a high-pass run downwards.
    """
    order = len(a) - 1
    if family.parameters(order):
        return ""
    want = family.prototype(order).denominator()
    for k in range(1, order):
        if max(map(len, a[k - 1 : k + 2])) > _MOST_TERMS or not all(a[k - 1 : k + 2]):
            continue
        top, bottom = (a[k] ** 2).cancel(a[k - 1] * a[k + 1])
        value = (given.value(top), given.value(bottom))
        if value[0] is None or not value[1]:
            continue
        own, ratio = value[0] / value[1], want[k] ** 2 / (want[k - 1] * want[k + 1])
        if abs(float(own) / ratio - 1) < 1e-9:
            continue
        before, here, after = (indices[j] for j in (k - 1, k, k + 1))
        before, after = sorted((before, after))
        fixed = len(top) == len(bottom) == 1 and not any(map(any, (*top, *bottom)))
        when = "whatever the parts are" if fixed else "with these values"
        return (
            f"a_{here}^2/(a_{before}*a_{after}) = {plain_number(own)} {when}, "
            f"and {family.name} of order {order} has {plain_number(ratio)}"
        )
    return ""
