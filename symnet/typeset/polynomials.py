"""Ring elements as they stand: every term written, powers of s ascending, terms in the order of the ring.

The readable, grouped forms are found in :mod:`symnet.exact.readable.forms`; this is the plain one, for tables of
terms and for what is too long to group.
"""

from __future__ import annotations

from heapq import nsmallest
from typing import TYPE_CHECKING, Any

from symnet.typeset.tree import ZERO, Atom, Omitted, Tree, minus, number, plus, power, times

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["collected", "plain"]


def plain(polynomial: PolyElement, most: int | None = None) -> Tree:
    """The expanded polynomial as a tree; of more than ``most`` terms the rest is counted, not written.

    The first generator decides the order (it is s in every ring of symnet), ascending; then the order of the ring.

    >>> from symnet.exact.polynomials import make_ring
    >>> from symnet.typeset.writing import to_text
    >>> s, R1, R2, C1 = make_ring(["R1", "R2", "C1"]).gens
    >>> to_text(plain(s*R1*C1 - 2*s*R2*C1 + s**2*R1**2*C1**2 + 1))
    '1 + s*R1*C1 - 2*s*R2*C1 + s^2*R1^2*C1^2'
    >>> to_text(plain(R1 + R2 + C1, most=2))
    'R1 + R2 + ... 1 more term'
    """
    terms = sorted(polynomial.items(), key=lambda term: (term[0][:1], _order(term)))
    return _sum(_names(polynomial), terms[:most], len(terms))


def collected(polynomial: PolyElement, most: int) -> Tree:
    """The polynomial by ascending powers of its first generator, at most so many terms in each coefficient.

    Nothing is grouped, so that also a polynomial of some hundred thousand terms is shown at once.

    >>> from symnet.exact.polynomials import make_ring
    >>> from symnet.typeset.writing import to_text
    >>> s, R1, R2, C1, C2 = make_ring(["R1", "R2", "C1", "C2"]).gens
    >>> to_text(collected(1 + s*R1*C1 + s*R1*C2 + s*R2*C2 + s**2*R1*R2*C1*C2, most=2))
    '1 + s*(R1*C1 + R1*C2 + ... 1 more term) + s^2*R1*R2*C1*C2'
    """
    names = _names(polynomial)
    powers: dict[int, list[tuple[tuple[int, ...], Any]]] = {}
    for term in polynomial.items():
        powers.setdefault(term[0][0], []).append(term)
    written = []
    for exponent, terms in sorted(powers.items()):
        shown = [((0, *monomial[1:]), c) for monomial, c in nsmallest(most, terms, key=_order)]
        written.append(times(power(Atom(names[0]), exponent), _sum(names, shown, len(terms))))
    return plus(*written) if written else ZERO


def _names(polynomial: PolyElement) -> list[str]:
    return [str(symbol) for symbol in polynomial.ring.symbols]


def _order(term: tuple[tuple[int, ...], Any]) -> tuple[int, ...]:
    return tuple(-e for e in term[0][1:])


def _sum(names: list[str], terms: list[tuple[tuple[int, ...], Any]], count: int) -> Tree:
    written: list[Tree] = []
    for monomial, coefficient in terms:
        factors = (power(Atom(name), e) for name, e in zip(names, monomial, strict=True))
        tree = times(number(abs(int(coefficient))), *factors)
        written.append(minus(tree) if coefficient < 0 else tree)
    if count > len(written):
        written.append(Omitted(count - len(written)))
    return plus(*written) if written else ZERO
