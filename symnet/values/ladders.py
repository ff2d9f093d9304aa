"""Element values of low-pass LC ladders without finite zeros, between two resistors or from an ideal source.

Darlington's way (S. Darlington, J. Math. Phys. 18 (1939), 257-353): the response fixes the product F(s) F(-s) of the
reflection coefficient F/D, every way to share its zeros out gives an F, and the continued fraction of
(D + F)/(D - F) gives the elements. All shares are tried, so the list is complete up to the precision of the roots.
Every set is multiplied out again, and the largest relative error of a coefficient goes with it.

Arithmetic is that of mpmath at `DIGITS` digits: roots of multiplicity two keep half of them.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import product
from numbers import Rational
from typing import Any, Final

import mpmath

from symnet.errors import LimitError, UndefinedError

__all__ = ["LadderSet", "doubly_terminated", "singly_terminated"]

DIGITS: Final = 120
_ORDER: Final = 20  # 2^10 shares where all zeros of reflection are complex
_SAME: Final = 40  # digits in which two numbers agree that are taken as equal: double roots keep 60


@dataclass(frozen=True, slots=True)
class LadderSet:
    """Elements from the source to the load in ohm, henry, farad (D in rad/s), and the check of the set.

    ``error`` is the largest relative difference of a coefficient of D from the target, multiplied out again.
    """

    elements: tuple[float, ...]
    error: float

    @property
    def spread(self) -> float:
        """Largest element over smallest, as numbers."""
        return max(self.elements) / min(self.elements)


def doubly_terminated(
    denominator: Sequence[Any], *, source: Any, load: Any, series_first: bool
) -> tuple[LadderSet, ...]:
    """All ladders between ``source`` and ``load`` (ohm) with H(s) = H(0) D(0)/D(s), smallest spread first.

    F(s) F(-s) = D(s) D(-s) - 4 Rs RL/(Rs + RL)^2 D(0)^2. ``denominator`` is D, ascending, of whole
    numbers, fractions or mpmath numbers; so are the resistors.

    Raises :class:`~symnet.errors.UndefinedError` where no such ladder exists, with the reason, and
    :class:`~symnet.errors.LimitError` beyond order 20, where the shares are too many to try.

    >>> found = doubly_terminated([1, 2, 2, 1], source=1, load=1, series_first=True)
    >>> [[round(g, 6) for g in one.elements] for one in found]
    [[1.0, 2.0, 1.0]]
    """
    if len(denominator) - 1 > _ORDER:
        raise LimitError(
            f"Order {len(denominator) - 1} has too many shares of its reflection zeros to try them all; "
            f"the limit is order {_ORDER}."
        )
    with mpmath.workdps(DIGITS):
        d = [_number(c) / _number(denominator[0]) for c in denominator]
        source, load = _number(source), _number(load)
        through = 4 * source * load / (source + load) ** 2
        mirror = load - source if series_first else source - load
        found: list[tuple[Any, ...]] = []
        for f in _reflections(d, through, mirror):
            elements = _fraction([a + b for a, b in zip(d, f, strict=True)], _less(d, f))
            if elements is None or min(elements) <= 0 or any(_equal(elements, other) for other in found):
                continue
            found.append(elements)
        out = []
        for elements in found:
            values = tuple(
                g * source if (k % 2 == 0) == series_first else g / source for k, g in enumerate(elements)
            )
            error = _error(values, d, source, load, series_first=series_first)
            if error < mpmath.mpf(10) ** -15:
                out.append(LadderSet(tuple(float(v) for v in values), float(error)))
    if not out:
        raise UndefinedError("No choice of the reflection zeros gives a ladder of positive elements.")
    return tuple(sorted(out, key=lambda one: (one.spread, one.elements)))


def singly_terminated(denominator: Sequence[Any], *, load: Any) -> tuple[LadderSet, ...]:
    """The one ladder from an ideal voltage source to ``load`` (ohm); its first element is in series.

    The even and the odd part of D are the open and short figures at the load; their continued fraction begins there.

    >>> [[round(g, 4) for g in one.elements] for one in singly_terminated([1, 2, 2, 1], load=1)]
    [[1.5, 1.3333, 0.5]]
    """
    with mpmath.workdps(DIGITS):
        d = [_number(c) / _number(denominator[0]) for c in denominator]
        order = len(d) - 1
        high = [c if (order - k) % 2 == 0 else mpmath.mpf(0) for k, c in enumerate(d)]
        elements = _fraction(high, _less(d, high)[:-1])
        if elements is None or min(elements) <= 0:
            raise UndefinedError("D has roots on the right: no ladder of positive parts has it.")
        load = _number(load)
        values = tuple(g * load if k % 2 == 0 else g / load for k, g in enumerate(elements[::-1]))
        error = _error(values, d, mpmath.mpf(0), load, series_first=True)
    return (LadderSet(tuple(float(v) for v in values), float(error)),)


def _reflections(d: list[Any], through: Any, mirror: Any) -> Iterator[list[Any]]:
    """Every real F with the leading coefficient of D and the sign at DC that the resistors ask for."""
    order = len(d) - 1
    square = [
        sum(d[i] * d[2 * k - i] * (-1) ** i for i in range(max(0, 2 * k - order), min(order, 2 * k) + 1))
        for k in range(order + 1)
    ]
    square[0] = 1 - through
    size = max(abs(c) for c in square)
    at_zero = next(k for k, c in enumerate(square) if abs(c) > size * mpmath.mpf(10) ** -_SAME)
    rest = square[at_zero:][::-1]
    roots = mpmath.polyroots(rest, maxsteps=2000, extraprec=600) if len(rest) > 1 else []
    close = mpmath.mpf(10) ** -_SAME
    factors: list[list[list[Any]]] = []
    axis = sorted(mpmath.re(x) for x in roots if abs(mpmath.im(x)) < close * abs(x) and mpmath.re(x) < 0)
    if len(axis) % 2 or any(abs(b / a - 1) > close for a, b in zip(axis[::2], axis[1::2], strict=True)):
        raise UndefinedError(
            "H rises further above its value at DC than these resistors allow: no more than "
            f"{float(-10 * mpmath.log10(through)):.3f} dB, "
            "at which all power that the source has reaches the load. Make Rs and RL more unequal, "
            "or lower the ripple or the peak."
        )
    factors.extend([[-a, mpmath.mpf(0), mpmath.mpf(1)]] for a in axis[::2])
    for x in roots:
        if abs(mpmath.im(x)) < close * abs(x):
            if mpmath.re(x) > 0:
                factors.append([[mpmath.sqrt(x.real), mpmath.mpf(1)], [-mpmath.sqrt(x.real), mpmath.mpf(1)]])
        elif mpmath.im(x) > 0:
            p = mpmath.sqrt(x)
            factors.append([[abs(x), 2 * p.real, mpmath.mpf(1)], [abs(x), -2 * p.real, mpmath.mpf(1)]])
    for share in product(*factors):
        f = [mpmath.mpf(0)] * at_zero + [d[-1]]
        for factor in share:
            f = _times(f, factor)
        if f[0] * mirror > 0 or (at_zero and not mirror):
            yield f


def _number(x: Any) -> Any:
    """An exact number, or one of mpmath, in the working precision."""
    return mpmath.mpf(x.numerator) / x.denominator if isinstance(x, Rational) else mpmath.mpf(x)


def _times(a: list[Any], b: list[Any]) -> list[Any]:
    out = [mpmath.mpf(0)] * (len(a) + len(b) - 1)
    for i, x in enumerate(a):
        for j, y in enumerate(b):
            out[i + j] += x * y
    return out


def _less(a: list[Any], b: list[Any]) -> list[Any]:
    return [x - y for x, y in zip(a, b, strict=True)]


def _fraction(high: list[Any], low: list[Any]) -> tuple[Any, ...] | None:
    """The quotients of the continued fraction high/low, one power of s at a time; None where it breaks off."""
    order = len(high) - 1
    low = low[:order]
    out = []
    for n in range(order, 0, -1):
        if abs(low[n - 1]) < mpmath.mpf(10) ** -_SAME * max(abs(c) for c in low):
            return None
        g = high[n] / low[n - 1]
        rest = [high[k] - (g * low[k - 1] if k else 0) for k in range(n)]
        out.append(g)
        high, low = low, rest[: n - 1]
    return tuple(out)


def _error(elements: tuple[Any, ...], d: list[Any], source: Any, load: Any, *, series_first: bool) -> Any:
    """The chain matrices multiplied out, from the load to the source, against D."""
    zero, one = mpmath.mpf(0), mpmath.mpf(1)
    n = len(elements)
    v, i = [one] + [zero] * n, [1 / load] + [zero] * n
    for k in range(n - 1, -1, -1):
        if (k % 2 == 0) == series_first:
            v = [a + elements[k] * b for a, b in zip(v, [zero, *i[:-1]], strict=True)]
        else:
            i = [a + elements[k] * b for a, b in zip(i, [zero, *v[:-1]], strict=True)]
    whole = [a + source * b for a, b in zip(v, i, strict=True)]
    return max(abs(w / whole[0] / c - 1) for w, c in zip(whole, d, strict=True))


def _equal(a: tuple[Any, ...], b: tuple[Any, ...]) -> bool:
    return all(abs(x / y - 1) < mpmath.mpf(10) ** -_SAME for x, y in zip(a, b, strict=True))
