"""H as a product of first- and second-order factors in doubles, which is the form that survives being carried away.

The coefficients of a high order in SI units span more decades than a double has digits to spare for: what a program
far from here does with b and a is another matter than what they are. Factors lose nothing: each is good to the last
digit, zeros are paired with the poles that they are nearest to, and the gain stands apart.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from symnet.errors import Fault, LimitError

if TYPE_CHECKING:
    from fractions import Fraction

    from symnet.exact.ratio import Ratio
    from symnet.exact.roots import Root

__all__ = ["Factor", "factors_of"]

_LARGEST_ORDER = 200


@dataclass(frozen=True, slots=True)
class Factor:
    """``(b0 + b1 s + b2 s^2)/(a0 + a1 s + a2 s^2)``, s in rad/s; absent powers are zero."""

    b: tuple[float, float, float]
    a: tuple[float, float, float]


def factors_of(h: Ratio) -> tuple[float, tuple[Factor, ...]]:
    """The gain and the factors, by growing Q of the poles; each factor's lowest coefficients are 1.

    >>> from symnet.exact.ratio import Ratio
    >>> factors_of(Ratio.of([0, 3], [1, 2, 1]))
    (3.0, (Factor(b=(0.0, 1.0, 0.0), a=(1.0, 2.0, 1.0)),))
    """
    if h.order > _LARGEST_ORDER or len(h.num) > _LARGEST_ORDER + 1:
        raise LimitError(
            Fault(f"order {h.order}: factors are given up to order {_LARGEST_ORDER}", "split it")
        )
    if not h.num:
        return 0.0, ()
    gain = float(_lowest(h.num) / _lowest(h.den))
    below = _polynomials(h.poles())
    above = _polynomials(h.zeros())
    below.sort(key=lambda each: (_quality(each), each))
    found: list[Factor] = []
    for a in below:
        b = _nearest(a, above)
        if b is not None:
            above.remove(b)
        found.append(Factor(b or (1.0, 0.0, 0.0), a))
    found += [Factor(b, (1.0, 0.0, 0.0)) for b in above]
    return gain, tuple(found)


def _lowest(side: tuple[Fraction, ...]) -> Fraction:
    return next(c for c in side if c)


def _polynomials(roots: tuple[Root, ...]) -> list[tuple[float, float, float]]:
    """Each pair, and each two real roots, as a quadratic; one left over, and the origin, as s and 1 + s/w."""
    found: list[tuple[float, float, float]] = []
    real: list[float] = []
    origin = 0
    for root in roots:
        for _ in range(root.multiplicity):
            z = root.value
            if z == 0:
                origin += 1
            elif root.is_real:
                real.append(z.real)
            elif z.imag > 0:
                size = math.hypot(z.real, z.imag)
                found.append((1.0, -2 * (z.real / size) / size, 1 / size / size))
    real.sort(key=abs)
    while len(real) > 1:
        one, two = real.pop(), real.pop()
        found.append((1.0, -(1 / one + 1 / two), 1 / one / two))
    if real:
        last = (1.0, -1 / real[0], 0.0)
        if origin:
            found.append((0.0, 1.0, -1 / real[0]))
            origin -= 1
        else:
            found.append(last)
    while origin > 1:
        found.append((0.0, 0.0, 1.0))
        origin -= 2
    if origin:
        found.append((0.0, 1.0, 0.0))
    return found


def _quality(a: tuple[float, float, float]) -> float:
    return math.sqrt(abs(a[0] * a[2])) / abs(a[1]) if a[1] else math.inf


def _nearest(
    a: tuple[float, float, float], above: list[tuple[float, float, float]]
) -> tuple[float, float, float] | None:
    """The polynomial whose size in s is nearest to that of ``a``; those of s alone go last."""

    def distance(b: tuple[float, float, float]) -> float:
        sizes = [math.log(abs(c[2] or c[1] or 1.0)) for c in (a, b)]
        return abs(sizes[0] - sizes[1])

    return min(above, key=distance, default=None)
