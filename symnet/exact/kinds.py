"""A determinant with equal parts: a term is known by how many parts of each kind it takes.

Pieces with the same take and leave are of one kind, as the resistors and the capacitors of a ladder of equal
sections. Every path takes as many pieces as the matrix has rows, so that the counts of all kinds but one tell its
monomial, and the determinant is a polynomial in those counts with few coefficients. Each kind's take becomes a
power of two, far enough apart that no coefficient reaches the next (Kronecker substitution): one pass over the
diagram in integers holds all coefficients, and no path is ever looked at. All integers of a pass have 32 MB at
most, so that it is over before there would be progress to show.

A ladder of 30 equal sections has 2.5e12 paths, two kinds and so 31 counts: its 31 coefficients take 123 additions
of integers of 1400 bits.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from math import prod
from typing import TYPE_CHECKING, Final

from symnet.exact.digits import unpacked
from symnet.exact.polynomials import Terms, highest_exponents

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from symnet.exact.expansion import Expansion
    from symnet.exact.trees import Diagram

__all__ = ["Kinds"]

#: Bits that all integers of a pass may have together: 32 MB.
_MOST_BITS: Final = 2**28


@dataclass(frozen=True, eq=False)
class Kinds:
    """The pieces of a determinant by kind.

    ``of_piece`` is the kind of each piece, ``weights`` what one piece of each kind weighs (take, leave), ``sizes``
    how many pieces there are of it, ``taken`` how many of all kinds each path takes. Pieces that every path takes,
    or leaves, as those of ideal sources, are of no kind (-1): their weights are ``fixed``.
    """

    diagram: Diagram
    of_piece: tuple[int, ...]
    weights: tuple[tuple[Terms, Terms], ...]
    sizes: tuple[int, ...]
    taken: int
    fixed: tuple[Terms, ...]

    @classmethod
    def of(cls, diagram: Diagram, take: Sequence[Terms], leave: Sequence[Terms]) -> Kinds | None:
        """The kinds of these pieces; None where there are none or a weight has several terms."""
        if not take or any(len(terms) != 1 for side in (take, leave) for terms in side):
            return None
        taken = {i for i, to_take in zip(diagram.piece, diagram.take, strict=True) if to_take >= 0}
        left = {i for i, to_leave in zip(diagram.piece, diagram.leave, strict=True) if to_leave >= 0}
        kinds: dict[tuple[Terms, Terms], int] = {}
        of_piece = [
            kinds.setdefault(pair, len(kinds)) if i in taken and i in left else -1
            for i, pair in enumerate(zip(take, leave, strict=True))
        ]
        sizes = Counter(of_piece)
        return cls(
            diagram,
            tuple(of_piece),
            tuple(kinds),
            tuple(sizes[k] for k in range(len(kinds))),
            _taken(diagram) - len(taken - left),
            tuple((take if i in taken else leave)[i] for i, kind in enumerate(of_piece) if kind < 0),
        )

    @cached_property
    def counts(self) -> int:
        """How many different counts there are: a bound on the number of terms."""
        return prod(size + 1 for size in self.sizes) // (max(self.sizes, default=0) + 1)

    def is_short(self, paths: int) -> bool:
        """Whether counting is less work than writing out so many paths."""
        return self.counts < paths and self.counts * paths.bit_length() * len(self.diagram) < _MOST_BITS

    def expansion(self, generators: int, factor: Terms, paths: int) -> Expansion:
        """``factor`` times the determinant, in so many generators; ``paths`` is a bound on its coefficients."""
        import numpy as np

        from symnet.exact.expansion import Expansion, Fields, merged

        take, leave = ([self.weights[k][side] for k in self.of_piece if k >= 0] for side in (0, 1))
        once = (factor, *self.fixed)
        fields = Fields.for_degrees(highest_exponents(generators, [*take, *once], [*leave, *once]))
        numbers, taken = self._counted(paths)
        keys = np.zeros((fields.words, len(numbers)), dtype=np.int64)
        for (((c, up),), ((d, down),)), size, count in zip(self.weights, self.sizes, taken, strict=True):
            left = fields.column(down)
            keys += size * left + count * (fields.column(up) - left)
            if (c, d) != (1, 1):
                numbers = [n * c ** int(k) * d ** int(size - k) for n, k in zip(numbers, count, strict=True)]
        scale = 1
        for ((c, powers),) in self.fixed:
            keys += fields.column(powers)
            scale *= c
        scaled = [scale * c * n for c, _ in factor for n in numbers]
        dtype = np.int64 if max(map(abs, scaled), default=0) < 2**62 else object
        moved = np.concatenate([keys + fields.column(powers) for _, powers in factor], axis=1)
        return Expansion(fields, *merged(moved, np.array(scaled, dtype=dtype)))

    def _counted(self, paths: int) -> tuple[list[int], NDArray[np.int64]]:
        """The coefficients, and for each how many pieces of each kind are taken (kinds x coefficients)."""
        import numpy as np

        free = sorted(range(len(self.sizes)), key=self.sizes.__getitem__)[
            :-1
        ]  # the count of the last follows
        strides, digits = [0] * len(self.sizes), 1
        for kind in free:
            strides[kind] = digits
            digits *= self.sizes[kind] + 1
        bits = paths.bit_length() + 2
        steps = [1 << bits * strides[kind] if kind in free else 1 for kind in self.of_piece]
        found = unpacked(self.diagram.evaluate(steps, [1] * len(steps)), bits)
        places = np.flatnonzero(np.array(found, dtype=bool))
        taken = np.zeros((len(self.sizes), len(places)), dtype=np.int64)
        for kind in free:
            taken[kind] = places // strides[kind] % (self.sizes[kind] + 1)
        for last in set(range(len(self.sizes))) - set(free):
            taken[last] = self.taken - taken.sum(axis=0)
        return [found[place] for place in places], taken


def _taken(diagram: Diagram) -> int:
    """How many pieces a path takes: the same for all."""
    node, count = diagram.root, 0
    while 0 <= node < len(diagram):
        takes = diagram.leave[node] < 0
        count += takes
        node = diagram.take[node] if takes else diagram.leave[node]
    return count
