"""Which pole went where: the poles (or zeros) of H beside those of an H that stands in for it.

A coefficient that changes by half a per cent may move a pole by ten: two poles that lie close together hang on a
small difference. So an approximation is judged by its poles too. Poles are paired nearest first, by their distance
in proportion to their size; where the approximation has fewer, those left over have gone to infinity.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Final, Literal

from symnet.exact.doubles import double
from symnet.exact.roots import Root, roots

__all__ = ["Move", "moves"]

_DIGITS: Final = 34  # of a pole, so that a move of 1e-17 of it is still seen


@dataclass(frozen=True, slots=True)
class Move:
    """One pole or zero, and what has become of it: ``exact`` and ``shortened`` in rad/s, None when it has gone.

    A repeated one has a record for each time it occurs.
    """

    kind: Literal["pole", "zero"]
    exact: Root
    shortened: Root | None

    @property
    def shift_percent(self) -> float:
        """The distance |p' - p| in per cent of |p|; infinite when it has gone."""
        if self.shortened is None:
            return math.inf
        distance = abs(_complex_distance(self.exact, self.shortened))
        return 100 * distance / abs(self.exact.value) if distance else 0.0

    @property
    def f0(self) -> float:
        """|p|/2 pi of the exact one in Hz."""
        return abs(self.exact.value) / (2 * math.pi)

    @property
    def shortened_f0(self) -> float:
        """|p'|/2 pi in Hz, infinite when it has gone."""
        return math.inf if self.shortened is None else abs(self.shortened.value) / (2 * math.pi)

    @property
    def f0_percent(self) -> float:
        """The change of f0 in per cent of the exact one, signed."""
        return 100 * (self.shortened_f0 / self.f0 - 1) if self.f0 else 0.0

    @property
    def q(self) -> float | None:
        """Q = |p|/(-2 Re p) of the exact one, where it is complex."""
        return _quality(self.exact)

    @property
    def shortened_q(self) -> float | None:
        """The same of the shortened one."""
        return None if self.shortened is None else _quality(self.shortened)

    @property
    def q_percent(self) -> float | None:
        """The change of Q in per cent, signed; None unless both are complex and off the jw axis."""
        before, after = self.q, self.shortened_q
        if before is None or after is None or math.isinf(before) or math.isinf(after):
            return None
        return 100 * (after / before - 1)

    def __repr__(self) -> str:
        if self.shortened is None:
            return f"<{self.kind} at {self.f0:.5g} Hz has gone to infinity>"
        moved = f"{self.f0:.5g} Hz -> {self.shortened_f0:.5g} Hz, {self.shift_percent:.3g} %"
        change = self.q_percent
        return f"<{self.kind} {moved}{'' if change is None else f', Q {change:+.3g} %'}>"


def moves(
    kind: Literal["pole", "zero"], exact: Sequence[Fraction], shortened: Sequence[Fraction]
) -> tuple[Move, ...]:
    """The roots of a polynomial, each with the root of another one that has taken its place.

    Both are coefficients in ascending powers of s, not all zero.

    >>> moves("pole", [Fraction(1), Fraction(201, 10**6), Fraction(1, 10**8)],
    ...       [Fraction(1), Fraction(200, 10**6), Fraction(1, 10**8)])
    (<pole 1440.2 Hz -> 1591.5 Hz, 10.5 %>, <pole 1758.9 Hz -> 1591.5 Hz, 9.51 %>)
    """
    before, after = (
        [root for root in roots(p, _DIGITS) for _ in range(root.multiplicity)] for p in (exact, shortened)
    )
    distances = sorted(
        (abs(_complex_distance(a, b)) / (max(abs(a.value), abs(b.value)) or 1.0), i, k)
        for i, a in enumerate(before)
        for k, b in enumerate(after)
    )
    partner: dict[int, Root] = {}
    taken: set[int] = set()
    for _, i, k in distances:
        if i not in partner and k not in taken:
            partner[i] = after[k]
            taken.add(k)
    return tuple(Move(kind, root, partner.get(i)) for i, root in enumerate(before))


def _complex_distance(a: Root, b: Root) -> complex:
    """The way from a to b, from the proven points, so that a small move keeps its digits."""
    return complex(double(b.real - a.real), double(b.imag - a.imag))


def _quality(root: Root) -> float | None:
    if root.is_real:
        return None
    return math.inf if root.is_imaginary else abs(root.value) / (-2 * root.value.real)
