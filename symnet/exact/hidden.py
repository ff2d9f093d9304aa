"""Hidden modes: natural frequencies of a network that an H does not show, the parts they live in, and why.

Where the wiring keeps a part of the network from the read, or the drive from it, its determinant is a factor of
numerator and denominator (:mod:`symnet.exact.structure`): the mode is unobservable or uncontrollable whatever the
values. A factor that only algebra finds cancels through equal or tied values or gains, as in a compensated divider;
a mismatch of these brings it back.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from enum import Enum
from fractions import Fraction
from typing import TYPE_CHECKING

from symnet.errors import LimitError
from symnet.exact.determinant import Determinant
from symnet.exact.lowest import factors_with_s
from symnet.exact.polynomials import Terms
from symnet.exact.products import Product

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["Aside", "HiddenMode", "Reason", "modes_aside", "modes_cancelled"]


class Reason(Enum):
    """Why a mode is hidden."""

    UNSEEN = "the read does not see it"
    UNDRIVEN = "the drive does not reach it"
    APART = "the drive does not reach it and the read does not see it"
    STAYS = "a current around a loop of inductors, or a charge between capacitors, that nothing takes away"
    CANCELS = "it cancels through values or gains that fit exactly; any mismatch brings it back"


@dataclass(frozen=True, slots=True)
class HiddenMode:
    """One cancelled factor that holds s.

    ``factor`` is irreducible where it is short, and None where it has too many terms to be written out; ``parts``
    are the parts it lives in, ``reason`` says why H does not show it.
    """

    factor: PolyElement | None
    parts: tuple[str, ...]
    reason: Reason
    _determinant: Determinant | None = None

    def coefficients(self, values: Mapping[str, Fraction]) -> list[Fraction]:
        """The coefficients, ascending in s, for these values (SI); KeyError for a name that has none."""
        if self.factor is not None:
            symbols = [str(symbol) for symbol in self.factor.ring.symbols]
            out = [Fraction(0)] * (self.factor.degree(0) + 1)
            for (degree, *exponents), coefficient in self.factor.items():
                term = Fraction(int(coefficient))
                for name, exponent in zip(symbols[1:], exponents, strict=True):
                    if exponent:
                        term *= values[name] ** exponent
                out[degree] += term
            return out
        assert self._determinant is not None  # noqa: S101 - one of the two is there
        names = self._determinant.generators.names
        held = {
            k
            for side in (self._determinant.take, self._determinant.leave)
            for terms in side
            for k in _generators(terms)
        }
        return self._determinant.coefficients(
            [values[name] if k in held else Fraction(1) for k, name in enumerate(names) if k]
        )


@dataclass(frozen=True, eq=False)
class Aside:
    """A block of the network's determinant that stands in N and D alike; ``owners`` own its pieces."""

    determinant: Determinant
    owners: tuple[str, ...]
    reason: Reason


def modes_aside(aside: Aside) -> Iterator[HiddenMode]:
    """The modes of a block, factor by factor."""
    determinant = aside.determinant
    ring = determinant.generators.ring
    lives = _living(determinant, aside.owners)
    try:
        product = Product.of_determinant(determinant)
    except LimitError:
        if any(0 in _generators(terms) for side in (determinant.take, determinant.leave) for terms in side):
            yield HiddenMode(None, lives(range(1, ring.ngens)), aside.reason, determinant)
        return
    for _ in range(product.exponents[0]):
        yield HiddenMode(ring.gens[0], at_origin(determinant, aside.owners), aside.reason)
    for part in product.factors:
        for factor in factors_with_s(part, ring):
            names = [k for k, degree in enumerate(factor.degrees()) if k and degree]
            yield HiddenMode(factor, lives(names or range(1, ring.ngens)), aside.reason)


def modes_cancelled(
    hidden: Iterable[PolyElement], denominator: Determinant, owners: Sequence[str]
) -> Iterator[HiddenMode]:
    """The modes that are factors of N and D although the wiring alone would show them."""
    lives = _living(denominator, owners)
    for factor in hidden:
        names = [k for k, degree in enumerate(factor.degrees()) if k and degree]
        if len(factor) == 1:
            yield HiddenMode(factor, at_origin(denominator, owners), Reason.STAYS)
        else:
            yield HiddenMode(factor, lives(names), Reason.CANCELS)


def _living(determinant: Determinant, owners: Sequence[str]) -> Callable[[Iterable[int]], tuple[str, ...]]:
    """Which owners have one of the given generators in a weight."""
    held = [
        {k for terms in pair for k in _generators(terms)}
        for pair in zip(determinant.take, determinant.leave, strict=True)
    ]

    def lives(generators: Iterable[int]) -> tuple[str, ...]:
        asked = set(generators)
        return tuple(dict.fromkeys(name for name, names in zip(owners, held, strict=True) if names & asked))

    return lives


def _generators(terms: Terms) -> set[int]:
    return {k for _, powers in terms for k, _ in powers}


def at_origin(determinant: Determinant, owners: Sequence[str]) -> tuple[str, ...]:
    """The owners of the pieces by which s divides the determinant.

    A loop of inductors leaves one of them out, a cutset of capacitors takes one of them, in every term: these are the
    pieces that bring an s into some term of the lowest power of s. Found by two passes over the diagram, in the
    arithmetic of lowest degrees.
    """
    diagram, far = determinant.diagram, float("inf")
    lowest = [
        [min((dict(powers).get(0, 0) for _, powers in terms), default=far) for terms in side]
        for side in (determinant.take, determinant.leave)
    ]
    size = len(diagram)
    up, down = (
        [far] * size + [0.0, far],
        [0.0] + [far] * (size + 1),
    )  # the last entry stands for "nothing follows"

    def ways(k: int) -> tuple[tuple[int, float], tuple[int, float]]:
        i = diagram.piece[k]
        return (diagram.take[k], lowest[0][i]), (diagram.leave[k], lowest[1][i])

    for k in range(size - 1, -1, -1):
        up[k] = min(up[child] + degree for child, degree in ways(k))
    found: dict[int, None] = {}
    for k in range(size):
        for child, degree in ways(k):
            down[child] = min(down[child], down[k] + degree) if child >= 0 else far
            if 0 < degree < far and down[k] + degree + up[child] == up[0]:
                found[diagram.piece[k]] = None
    return tuple(dict.fromkeys(owners[i] for i in sorted(found)))
