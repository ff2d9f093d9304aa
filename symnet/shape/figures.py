"""Figures of the frequency response: half-power frequencies, turning points of |H|, bandwidth, the largest delay.

|H(jw)|^2 and the group delay are exact rational functions of x = w^2, so each figure is a real positive root of an
exact polynomial in x: all of them are found, none is guessed by a search, and each is good to the last digit of a
double. Rising or falling, maximum or minimum is decided by exact signs between the roots.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise
from typing import TYPE_CHECKING, Final, Literal, TypeAlias

from symnet.errors import Fault, UndefinedError
from symnet.exact import dense
from symnet.exact.doubles import double
from symnet.exact.ratio import Ratio
from symnet.exact.roots import Root, roots
from symnet.quantities import HERTZ, NUMBER, Dimension
from symnet.response.frequency import delay_over_square, in_numbers, squared_magnitude
from symnet.shape.bands import band_of
from symnet.shape.closed import Closed, Figure, nth_root, power_product
from symnet.shape.plain import Pair
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer

__all__ = [
    "Bandwidth",
    "Crossing",
    "Extreme",
    "HalfPower",
    "bandwidth",
    "delay_extremes",
    "f3db",
    "frequency_of_square",
    "peak",
    "signs_around",
    "turning_points",
]

Reference: TypeAlias = Literal["DC", "peak", "infinity"]
Direction: TypeAlias = Literal["falling", "rising", "touching"]

_PEAK_DIGITS: Final = 40  # of an irrational peak frequency; |H| there is then good to twice as many


@dataclass(frozen=True, slots=True)
class Crossing:
    """A frequency where |H| passes the half-power level: ``w`` in rad/s (exact where w^2 is rational), ``f`` in Hz."""

    w: Figure
    f: float
    direction: Direction

    def __repr__(self) -> str:
        return f"<{self.f:.6g} Hz, {self.direction}>"


@dataclass(frozen=True, slots=True)
class HalfPower(Displayed):
    """All frequencies where |H| is 1/sqrt(2) (3.0103 dB) below the reference, in rising order; a sequence of them.

    ``reference`` is "DC", "peak" or "infinity", ``level`` is |H| there, in the unit of H.
    """

    reference: Reference
    level: Figure
    crossings: tuple[Crossing, ...]

    def __iter__(self) -> Iterator[Crossing]:
        return iter(self.crossings)

    def __len__(self) -> int:
        return len(self.crossings)

    def __getitem__(self, index: int) -> Crossing:
        return self.crossings[index]

    def __repr__(self) -> str:
        found = ", ".join(repr(crossing) for crossing in self.crossings) or "none"
        return f"<-3.0103 dB relative to {self.reference}: {found}>"


@dataclass(frozen=True, slots=True)
class Extreme:
    """A turning point: of |H| (``value`` in the unit of H) or of the group delay (``value`` in seconds).

    ``where`` is "DC", "infinity" (not reached) or "inside"; ``w`` is in rad/s and ``f`` in Hz, both 0 at DC and
    infinite at infinity.
    """

    kind: Literal["maximum", "minimum"]
    where: Literal["DC", "inside", "infinity"]
    w: Figure
    f: float
    value: float

    @property
    def decibels(self) -> float:
        """20*log10 of the value: for |H| only."""
        return 20 * math.log10(self.value) if self.value else -math.inf

    def __repr__(self) -> str:
        at = f"at {self.f:.6g} Hz" if self.where == "inside" else f"at {self.where}"
        return f"<{self.kind} {self.value:.6g} {at}>"


@dataclass(frozen=True, slots=True)
class Bandwidth:
    """The pass band around the peak: half-power frequencies in Hz, their geometric mean, width, and Q = centre/width."""

    lower: float
    upper: float
    centre: float
    width: float
    q: float


def f3db(H: Transfer | Ratio, reference: Reference | None = None) -> HalfPower:
    """All frequencies where |H|^2 = |H_ref|^2/2: every real positive root of the exact polynomial in w^2.

    The reference is |H| at DC, at infinity, or at its peak; without a word it is DC where H(0) is neither 0 nor
    infinite, else infinity where H(infinity) is neither, else the peak (band-pass). A pass that only touches the level
    is reported as "touching".

    Raises UndefinedError where the reference is 0 or infinite, MissingValueError while a name has no value.

    >>> f3db(Ratio.of([1], [1, 3, 1]))[0].w                    # two equal RC sections: 0.3742/(RC)
    0.374239 1/s
    >>> f3db(Ratio.of([1], [1, 1])).reference
    'DC'
    >>> len(f3db(Ratio.of([0, 1], [1, 1, 1]))), f3db(Ratio.of([0, 1], [1, 1, 1])).reference
    (2, 'peak')
    """
    h = in_numbers(H)
    square = squared_magnitude(h)
    chosen = reference or _usual_reference(square)
    level = _level(square, chosen, _dimension(H))
    difference = dense.primitive([2 * a - level.square * b for a, b in _padded(square.num, square.den)])[1]
    if not difference:
        return HalfPower(chosen, level.figure, ())
    found = [root for root in roots(difference) if root.is_real and root.real > 0]
    signs = signs_around(difference, found)
    crossings = []
    for root, (before, after) in zip(found, signs, strict=True):
        direction: Direction = "touching" if before == after else "falling" if before > after else "rising"
        w, f = frequency_of_square(root)
        crossings.append(Crossing(w, f, direction))
    return HalfPower(chosen, level.figure, tuple(crossings))


@dataclass(frozen=True, slots=True)
class _Level:
    square: Fraction
    figure: Figure


def _usual_reference(square: Ratio) -> Reference:
    at_dc = square.num and square.num[0] and square.den[0]
    return "DC" if at_dc else "infinity" if len(square.num) == len(square.den) else "peak"


def _level(square: Ratio, reference: Reference, dimension: Dimension) -> _Level:
    match reference:
        case "DC":
            value = None if not square.den[0] else square.num[0] if square.num else Fraction(0)
        case "infinity":
            at_infinity = square.num[-1] / square.den[-1] if square.num else Fraction(0)
            value = None if len(square.num) > len(square.den) else at_infinity
            value = Fraction(0) if len(square.num) < len(square.den) else value
        case "peak":
            value = _peak_square(square)
        case _:
            raise UndefinedError(
                Fault(f"There is no reference called {reference!r}.", "Use 'DC', 'peak' or 'infinity'.")
            )
    if not value:
        size = "infinite" if value is None else "0"
        raise UndefinedError(
            Fault(
                f"|H| at the reference ({reference}) is {size}: nothing can be 3 dB below it.",
                "Choose another reference: 'DC', 'peak' or 'infinity'.",
            )
        )
    exact = nth_root(value, 2)
    closed = power_product(exact, Fraction(1), {}) if exact * exact == value else None
    return _Level(value, Figure(closed, double(exact), dimension))


def _dimension(H: Transfer | Ratio) -> Dimension:
    return NUMBER if isinstance(H, Ratio) else H.dimension


def frequency_of_square(root: Root) -> tuple[Figure, float]:
    """The frequency whose square is the root."""
    closed: Closed | None = None
    if root.exact is not None:
        closed = power_product(Fraction(1), Fraction(1), {root.exact: Fraction(1, 2)})
    w = nth_root(root.real, 2)
    return Figure(closed, double(w), HERTZ), double(w) / (2 * math.pi)


def _padded(p: Sequence[Fraction], q: Sequence[Fraction]) -> list[tuple[Fraction, Fraction]]:
    length = max(len(p), len(q))
    first, second = ([*c, *([Fraction(0)] * (length - len(c)))] for c in (p, q))
    return list(zip(first, second, strict=True))


def signs_around(polynomial: dense.Integers, found: Sequence[Root]) -> list[tuple[int, int]]:
    """The exact signs of the polynomial below and above each of its positive roots."""
    if not found:
        return []
    points = [found[0].real / 2]
    points += [(a.real + b.real) / 2 for a, b in pairwise(found)]
    points.append(found[-1].real * 2)
    return list(pairwise(_sign_at(polynomial, point) for point in points))


def _sign_at(polynomial: dense.Integers, point: Fraction) -> int:
    value = dense.value_at(polynomial, point)
    return (value > 0) - (value < 0)


# -- turning points --------------------------------------------------------------------------------------------


def _inner_extremes(function: Ratio) -> list[tuple[Literal["maximum", "minimum"], Root]]:
    """Where the derivative of a rational function of x changes sign, for x > 0."""
    num, den = (dense.primitive(p) for p in (function.num, function.den))
    slope = dense.add(
        dense.multiply(dense.derivative(num[1]), den[1]), dense.multiply(num[1], dense.derivative(den[1])), -1
    )
    if not slope:
        return []
    # A double root of the denominator is a root of the numerator of the slope too: lowest terms drop it.
    rising = Ratio.of(slope, dense.multiply(den[1], den[1]))
    numerator = dense.primitive(rising.num)[1]
    found = [root for root in roots(numerator, _PEAK_DIGITS) if root.is_real and root.real > 0]
    signs = signs_around(numerator, found)
    # num[0], den[0] and all squares are positive, so that this numerator carries the sign of the slope up to the
    # sign of the reduced denominator.
    below = dense.primitive(rising.den)[1]
    extremes: list[tuple[Literal["maximum", "minimum"], Root]] = []
    for root, (before, after) in zip(found, signs, strict=True):
        if before != after:
            upward = _sign_at(below, root.real) * before > 0
            extremes.append(("maximum" if upward else "minimum", root))
    return extremes


def turning_points(H: Transfer | Ratio) -> tuple[Extreme, ...]:
    """Every local maximum and minimum of |H(jw)| between DC and infinity, the two ends not counted, in rising order.

    >>> turning_points(Ratio.of([1], [1, 1, 1]))                   # Q = 1: peak 2/sqrt(3) at w0/sqrt(2)
    (<maximum 1.1547 at 0.11254 Hz>,)
    """
    square = squared_magnitude(H)
    found = []
    for kind, root in _inner_extremes(square):
        w, f = frequency_of_square(root)
        found.append(Extreme(kind, "inside", w, f, _magnitude(square, root)))
    return tuple(found)


def _magnitude(square: Ratio, root: Root) -> float:
    return double(nth_root(max(square.at(root.real), Fraction(0)), 2))


def _peak_square(square: Ratio) -> Fraction | None:
    """The largest |H|^2, also where it is only approached; None where it has no bound."""
    return None if _unbounded(square) is not None else max(_candidates(square), default=Fraction(0))


def _candidates(square: Ratio) -> list[Fraction]:
    found = [square.num[0] if square.num else Fraction(0)]
    if len(square.num) == len(square.den):
        found.append(square.num[-1] / square.den[-1])
    return found + [square.at(root.real) for kind, root in _inner_extremes(square) if kind == "maximum"]


def _unbounded(square: Ratio) -> str | None:
    if not square.den[0]:
        return "DC"
    if len(square.num) > len(square.den):
        return "infinity"
    for root in roots(square.den):
        if root.is_real and root.real > 0:
            return f"{frequency_of_square(root)[1]:.6g} Hz"
    return None


def peak(H: Transfer | Ratio) -> Extreme:
    """The largest |H(jw)|: inside, at DC, or approached at infinity.

    Raises :class:`~symnet.errors.UndefinedError` where |H| has no bound (a pole on the jw axis).

    >>> peak(Ratio.of([0, 1], [1, 1, 1]))
    <maximum 1 at 0.159155 Hz>
    >>> peak(Ratio.of([2], [1, 1]))
    <maximum 2 at DC>
    """
    square = squared_magnitude(H)
    where = _unbounded(square)
    if where is not None:
        raise UndefinedError(
            Fault(f"|H| grows without bound at {where}: it has no peak.", "Is a loss left out?")
        )
    inside = [root for kind, root in _inner_extremes(square) if kind == "maximum"]
    candidates = _candidates(square)
    best = max(candidates)
    zero = Fraction(0)
    if best == candidates[0]:
        at_dc = Figure(power_product(zero, Fraction(1), {}), 0.0, HERTZ)
        return Extreme("maximum", "DC", at_dc, 0.0, double(nth_root(best, 2)))
    ends = len(candidates) - len(inside)
    if ends == 2 and best == candidates[1]:
        return Extreme(
            "maximum", "infinity", Figure(None, math.inf, HERTZ), math.inf, double(nth_root(best, 2))
        )
    w, f = frequency_of_square(inside[candidates.index(best) - ends])
    return Extreme("maximum", "inside", w, f, double(nth_root(best, 2)))


def bandwidth(H: Transfer | Ratio) -> Bandwidth:
    """The band between the half-power frequencies next to the peak of a band-pass, in Hz.

    For s/(Q w0)/(1 + s/(Q w0) + s^2/w0^2) the width is f0/Q. Raises UndefinedError where the peak is not inside, or has
    no half-power frequency on one side.

    >>> round(bandwidth(Ratio.of([0, 1], [4, 1, 4])).q, 12)
    4.0
    """
    top = peak(H)
    crossings = f3db(H, "peak")
    below = [crossing.f for crossing in crossings if crossing.f < top.f and crossing.direction == "rising"]
    above = [crossing.f for crossing in crossings if crossing.f > top.f and crossing.direction == "falling"]
    if top.where != "inside" or not below or not above:
        h = in_numbers(H)
        raise UndefinedError(
            Fault(
                f"This {band_of(Pair(h.num, h.den))} has no band with two half-power edges around a peak.",
                "f3db(H) lists the half-power frequencies that there are.",
            )
        )
    lower, upper = below[-1], above[0]
    centre, width = math.sqrt(lower * upper), upper - lower
    return Bandwidth(lower, upper, centre, width, centre / width)


def delay_extremes(H: Transfer | Ratio) -> tuple[Extreme, ...]:
    """Every local maximum and minimum of the group delay (in seconds) between DC and infinity, in rising order.

    >>> delay_extremes(Ratio.of([1], [1, 2, 2, 1]))               # Butterworth 3, w0 = 1 rad/s
    (<maximum 2.74286 at 0.130082 Hz>,)
    """
    delay = delay_over_square(H)
    found = []
    for kind, root in _inner_extremes(delay):
        w, f = frequency_of_square(root)
        found.append(Extreme(kind, "inside", w, f, double(delay.at(root.real))))
    return tuple(found)
