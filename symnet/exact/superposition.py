"""What every one of many drives does to one read: all numerators from one determinant, read backwards.

The numerator of H is the determinant bordered by the read's row and the drive's column (:mod:`symnet.exact.derive`).
Give the border column one piece for each drive, of weight t_k: the determinant is then the sum of t_k N_k, linear in
every t_k, and N_k is its derivative by t_k. The derivatives by all weights of a diagram come from two passes over it,
one upwards for the values and one downwards for what stands in front of them (the reverse mode of differentiation; in
the words of networks the adjoint network of S. W. Director and R. A. Rohrer, IEEE Trans. Circuit Theory 16, 1969). So
a hundred sources of noise cost about as much as three evaluations of one H.

Every set of numerators is confirmed: with all drives at random values at once, a single elimination of the nodal
equations modulo a prime must give the same read as the sum of their parts (superposition).
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from math import lcm, prod
from random import Random
from typing import TYPE_CHECKING, Any, Final

from symnet.errors import Fault, SingularError
from symnet.exact.confirm import UnconfirmedError, random_point, read_at, undetermined
from symnet.exact.determinant import Determinant, coefficients_at, too_long
from symnet.exact.digits import packed, unpacked
from symnet.exact.matrices import Matrix
from symnet.exact.modular import PRIME
from symnet.exact.mutual import coefficients
from symnet.exact.naming import Naming
from symnet.exact.pieces import Pieces, named_currents
from symnet.exact.polynomials import ONE
from symnet.exact.structure import structure_of
from symnet.exact.trees import ZERO, Diagram, Piece

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.circuit.network import Network
    from symnet.exact.polynomials import Terms
    from symnet.expressions import Expression

__all__ = ["Superposition", "slopes", "superposition"]

_MOST_TERMS: Final = 2000
_MOST_TRIES: Final = 4


@dataclass(frozen=True, eq=False)
class Superposition:
    """The read of a network as the sum of what its drives do: N_k/D for every drive, D once.

    ``whole`` is the determinant, of which nothing is cancelled; ``bordered`` holds the pieces of ``whole`` first, then
    those of the read, then one for each drive, in the order of the network.
    """

    network: Network
    naming: Naming
    whole: Determinant
    bordered: Determinant

    @property
    def _drives(self) -> range:
        """The places of the drives among the pieces of the bordered determinant."""
        last = len(self.bordered.take)
        return range(last - len(self.network.drives), last)

    @property
    def missing(self) -> tuple[str, ...]:
        """The names without a number."""
        return tuple(name for name in self.naming.generators.names[1:] if name not in self.naming.numbers)

    def symbolic(self) -> tuple[tuple[PolyElement, ...], PolyElement]:
        """The numerators, drive by drive, and D, in the ring of the names; LimitError when they are too long."""
        terms = max(self.whole.terms, self.bordered.terms)
        if terms > _MOST_TERMS:
            raise too_long("this sum over all sources", terms, _MOST_TERMS)
        generators = self.naming.generators
        take, leave = (
            [generators.element(weight) for weight in side]
            for side in (self.bordered.take, self.bordered.leave)
        )
        one = generators.ring.one
        found = slopes(self.bordered.diagram, take, leave, self._drives, one)
        below = self.whole.diagram.evaluate(take, leave, one) * generators.element(self.whole.factor)
        return tuple(-found.get(k, generators.ring.zero) for k in self._drives), below

    def numbers(self) -> tuple[tuple[list[Fraction], ...], list[Fraction]]:
        """The coefficients, ascending in s, of the numerators and of D; every name must have its number.

        Raises SingularError where these values leave no single solution.
        """
        if self.naming.irrational:
            tops, bottom = self.symbolic()
            *above, below = coefficients((*tops, bottom), self.naming.numbers, self.naming.irrational)
        else:
            above, below = self._exact()
        if not any(below):
            fault = undetermined(self.network, self.naming, self.naming.numbers)
            raise SingularError(replace(fault, message=f"for these values {fault.message}"))
        return tuple(above), below

    def _exact(self) -> tuple[list[list[Fraction]], list[Fraction]]:
        """By Kronecker substitution, as :mod:`symnet.exact.determinant` does it for a single H."""
        values = [self.naming.numbers[name] for name in self.naming.generators.names[1:]]
        take: list[list[int]] = []
        leave: list[list[int]] = []
        scales: list[int] = []
        for pair in zip(self.bordered.take, self.bordered.leave, strict=True):
            found = [coefficients_at(terms, values) for terms in pair]
            scale = lcm(*(c.denominator for side in found for c in side))
            for side, each in zip((take, leave), found, strict=True):
                side.append([int(c * scale) for c in each])
            scales.append(scale)
        whole = Fraction(-1, prod(scales))
        tops = [[c * whole for c in top] for top in self._integers(take, leave)]
        return tops, self.whole.coefficients(values)

    def _integers(self, take: list[list[int]], leave: list[list[int]]) -> Iterator[list[int]]:
        """The coefficients of the derivative by each drive."""
        form = self.bordered.form
        if isinstance(form, Matrix):  # linear in every drive: one at a time
            for k in self._drives:
                alone = [weight if k == j or j not in self._drives else [0] for j, weight in enumerate(take)]
                yield form.coefficients(alone, leave)
            return
        sizes = [[sum(map(abs, weight)) for weight in side] for side in (take, leave)]
        bits = max(form.bound(*sizes), 1).bit_length() + 2
        takes, leaves = ([packed(weight, bits) for weight in side] for side in (take, leave))
        found = slopes(form, takes, leaves, self._drives, 1)
        for k in self._drives:
            yield unpacked(found.get(k, 0), bits)

    def confirm(self, read: Expression) -> None:
        """Hold the numerators against the nodal equations, all drives at random values; UnconfirmedError if not."""
        random = Random("superposition")
        strengths = {name: random.randrange(1, PRIME) for name in self.network.drive_names}
        for trial in range(_MOST_TRIES):
            point = random_point(self.naming, trial)
            expected = read_at(self.network, self.naming, read, point, strengths)
            take, leave = self.bordered.weights_modulo(point, PRIME)
            below = self.whole.modulo(point, PRIME)
            if expected is not None and below:
                break
        else:
            raise SingularError(undetermined(self.network, self.naming))
        form, given = self.bordered.form, dict(zip(self._drives, strengths.values(), strict=True))
        if isinstance(form, Matrix):
            total = -form.evaluate_modulo([given.get(k, w) for k, w in enumerate(take)], leave, PRIME)
        else:
            found = slopes(form, take, leave, self._drives, 1)
            total = -sum(found.get(k, 0) * strength for k, strength in given.items())
        if (total - expected * below) % PRIME:
            raise UnconfirmedError(
                Fault(
                    "two independent derivations of what the sources do disagree; this result must not be used",
                    "this is a defect of symnet: please report the network",
                )
            )


def superposition(network: Network, read: Expression) -> Superposition:
    """What each drive of a network, with every other one at zero, does to a read.

    Raises SingularError when the equations have no single solution. The wiring is not looked at: that is done before
    sources are added to a network.
    """
    pieces = Pieces.of(network, None, named_currents(network, read))
    structure = structure_of(pieces.size, pieces.pieces)
    if structure is None:
        raise SingularError(undetermined(network, pieces.naming))
    factor, terms = pieces.form(read, "the read")
    last = pieces.size
    border = [Piece(last, None, plus, minus) for _, plus, minus in terms]
    border += [Piece(*pieces.drive_rows(drive), last, None) for drive in network.drives]
    bordered = structure_of(last + 1, (*pieces.pieces, *border), structure.tree)
    ones: list[Terms] = [ONE] * len(network.drives)
    generators = pieces.naming.generators
    found = Superposition(
        network,
        pieces.naming,
        Determinant(generators, structure.whole, pieces.take, pieces.leave, factor),
        Determinant(
            generators,
            ZERO if bordered is None else bordered.whole,
            (*pieces.take, *(weight for weight, _, _ in terms), *ones),
            (*pieces.leave, *(ONE for _ in terms), *ones),
        ),
    )
    found.confirm(read)
    return found


def slopes(
    diagram: Diagram, take: Sequence[Any], leave: Sequence[Any], pieces: Iterable[int], one: Any
) -> dict[int, Any]:
    """The derivatives of a diagram by the ``take`` of some of its pieces, in any arithmetic; none where it is zero.

    >>> product = Diagram((0, 1), (-1, -1), (1, 2), (1, -1), 0)          # -take[0]*take[1]
    >>> slopes(product, [5, 7], [1, 1], (0, 1), 1)
    {0: -7, 1: -5}
    """
    if diagram.is_zero:
        return {}
    size = len(diagram)
    values: list[Any] = [None] * size + [one]
    for k in range(size - 1, -1, -1):
        piece, there = diagram.piece[k], diagram.take[k]
        value = leave[piece] * values[diagram.leave[k]] if diagram.leave[k] >= 0 else None
        if there >= 0:
            taken = take[piece] * values[there]
            taken = taken if diagram.sign[k] > 0 else -taken
            value = taken if value is None else value + taken
        values[k] = value
    found: dict[int, Any] = {}
    wanted = frozenset(pieces)
    before: list[Any] = [None] * (size + 1)
    before[diagram.root] = one if diagram.overall > 0 else -one

    def arrive(k: int, weight: Any) -> None:
        before[k] = weight if before[k] is None else before[k] + weight

    for k in range(size):
        piece, here = diagram.piece[k], before[k]
        before[k] = None
        if diagram.leave[k] >= 0:
            arrive(diagram.leave[k], here * leave[piece])
        there = diagram.take[k]
        if there >= 0:
            signed = here if diagram.sign[k] > 0 else -here
            arrive(there, signed * take[piece])
            if piece in wanted:
                slope = signed * values[there]
                found[piece] = found[piece] + slope if piece in found else slope
    return found
