"""The normal form of H: K, w0 and coefficients that no unit and no frequency scale can change.

H is written as

    H(s) = K0 * s^(z-m) * (1 + n_1 x + n_2 x^2 + ...)/(1 + c_1 x + ... + c_n x^n),    x = s*tau = s/w0,

with D = s^m D', N = s^z N' (poles and zeros at the origin split off) and w0 = |a_0/a_n|^(1/n) of D', the geometric
mean of the magnitudes of its poles. Then c_k = a_k/(a_0 tau^k), c_0 = 1 and c_n = +1 or -1. Two networks have the
same shape exactly when these coefficients agree. For order 2 c_1 is 1/Q.

Every figure is exact in symbols (a quotient times a root, see :mod:`symnet.shape.closed`) and a double wherever all
values are known. w0 and tau take a root, so they presume that a_0/a_n is positive where its sign is open in symbols.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field, replace
from fractions import Fraction
from typing import Final

from symnet.exact.doubles import double
from symnet.quantities import HERTZ, SECOND, Dimension
from symnet.shape.bands import Band, band_of
from symnet.shape.closed import Closed, Coefficient, Figure, figure, nth_root, one, power_product, quotient
from symnet.shape.plain import Pair, Plain, Response, plain, sign
from symnet.shape.stability import Stability, stability, stability_of
from symnet.typeset.displayed import Displayed

__all__ = ["CONVENTIONS", "Gain", "NormalForm", "normalise"]

#: What the words of a normal form mean; printed with results.
CONVENTIONS: Final[tuple[tuple[str, str], ...]] = (
    ("order n", "degree of the denominator in lowest terms"),
    ("split", "poles and zeros at the origin are split off first: D = s^m D', N = s^z N'"),
    (
        "w0, f0, tau",
        "of D': w0 = |a0/an|^(1/n) in rad/s, the geometric mean of the pole magnitudes; f0 = w0/2π in Hz; tau = 1/w0",
    ),
    (
        "normalised coefficients",
        "c_k = a_k/(a0 tau^k): c_0 = 1, c_n = ±1; free of units and of frequency scale",
    ),
    (
        "K",
        "H(0); H(infinity) for high-pass; signed |H| at w0 for band-pass; the coefficient of s^(z-m) for integrators and differentiators",
    ),
    ("Q, zeta", "Q = 1/(2 zeta); D = 1 + s/(Q w0) + s^2/w0^2"),
)

_MOST_TERMS: Final = 1000  # of a coefficient that is still given in closed form


@dataclass(frozen=True, slots=True)
class Gain:
    """A gain with its name: "H(0)", "H(infinity)", "|H(j w0)|, signed", "coefficient of s^-1", ..."""

    name: str
    figure: Figure

    def __repr__(self) -> str:
        return f"<{self.name} = {self.figure!r}>"


@dataclass(frozen=True, slots=True)
class NormalForm(Displayed):
    """H in normal form; see the module for the defining equation and :data:`CONVENTIONS` for the words.

    ``order`` is the degree of D and ``scale_order`` that of D'. ``w0`` (rad/s), ``f0`` (Hz) and ``tau`` (s) are None
    where D' is a constant. ``denominator`` and ``numerator`` hold c_0 ... c_n and n_0 ... n_q; without a w0 the
    numerator is empty. ``gain`` is K under its name, None for H = 0; ``gain_at_infinity`` is H(infinity) where
    that is a second finite gain; ``leading`` is K0. ``assumed`` are polynomials in the names that are taken to be
    positive. ``numbers`` is the normal form of the exact numbers, where H is in symbols and all have values.
    """

    label: str
    dimension: Dimension
    band: Band
    order: int
    scale_order: int
    numerator_degree: int
    poles_at_origin: int
    zeros_at_origin: int
    gain: Gain | None
    gain_at_infinity: Gain | None
    leading: Figure | None
    w0: Figure | None
    f0: float | None
    tau: Figure | None
    denominator: tuple[Figure, ...]
    numerator: tuple[Figure, ...]
    stability: Stability
    assumed: tuple[Coefficient, ...] = ()
    notes: tuple[str, ...] = ()
    numbers: NormalForm | None = field(default=None, repr=False)

    @property
    def c(self) -> tuple[float, ...]:
        """The normalised coefficients c_0 ... c_n as doubles; empty while a value is missing."""
        return _values(self.denominator)

    @property
    def n(self) -> tuple[float, ...]:
        """The normalised coefficients n_0 ... n_q of the numerator as doubles; empty while a value is missing."""
        return _values(self.numerator)

    @property
    def K(self) -> float | None:
        """The gain as a double, where values allow one; what it is stands in ``gain.name``."""
        return None if self.gain is None else self.gain.figure.value

    def __repr__(self) -> str:
        at = "" if self.f0 is None else f", f0 = {self.f0:.4g} Hz"
        gain = "" if self.gain is None else f", {self.gain.name} = {self.gain.figure!r}"
        return f"<{self.band}, order {self.order}{gain}{at}>"


def _values(figures: tuple[Figure, ...]) -> tuple[float, ...]:
    values = tuple(figure.value for figure in figures if figure.value is not None)
    return values if len(values) == len(figures) else ()


def normalise(H: Response) -> NormalForm:
    """The normal form of a transfer function or of a ratio of numbers: K, w0, and coefficients free of units.

    H(s) = K0 s^(z-m) (1 + n_1 x + ...)/(1 + c_1 x + ... + c_n x^n) with x = s/w0, w0 = |a_0/a_n|^(1/n) of D'.

    >>> import symnet as sn
    >>> H = sn.derive(sn.network("in -- R -- a -- R2 -- out; a -- C -- gnd; out -- C2 -- gnd;"
    ...     "R2 = R; C2 = C; drive in; read out"))
    >>> form = normalise(H)
    >>> form.w0, form.denominator
    (1/(R*C) 1/s, (1, 3, 1))
    >>> form.gain, form.band, form.stability
    (<H(0) = 1>, 'low-pass', <stable: for all positive values, by Hurwitz' conditions>)

    With numbers every figure is a double as well:

    >>> from symnet.exact.ratio import Ratio
    >>> normalise(Ratio.of([1], [1, 2, 2, 1])).c
    (1.0, 2.0, 2.0, 1.0)
    """
    h = plain(H)
    return replace(_normal_form(h), stability=stability(H))


def _normal_form(h: Plain) -> NormalForm:
    pair = h.pair
    band = band_of(h.decisive)
    numbers: NormalForm | None = None
    notes: list[str] = []
    exact = h.numeric_pair if h.numbers is not None else None
    if h.symbols is not None and h.numbers is not None:
        numbers = _normal_form(Plain(h.label, h.dimension, None, h.numbers, h.dimensions))
        if h.symbols.layout != h.numeric_pair.layout:
            exact = None
            notes.append(
                f"for these values factors cancel or vanish: order {h.symbols.order} in symbols, "
                f"{h.numeric_pair.order} with the values; the figures of the values stand apart"
            )
            band = band_of(pair)
    scale = _Scale.of(pair, exact)
    q, n, z, m = pair.layout
    w0, tau = scale.w0(), scale.tau()
    return NormalForm(
        label=h.label,
        dimension=h.dimension,
        band=band,
        order=n,
        scale_order=n - m,
        numerator_degree=q,
        poles_at_origin=m,
        zeros_at_origin=z,
        gain=_gain(h, pair, exact, band),
        gain_at_infinity=_second_gain(h, pair, exact, band),
        leading=_ratio(h, pair, exact, z, m) if pair.num else None,
        w0=w0,
        f0=None if w0 is None or w0.value is None else w0.value / (2 * math.pi),
        tau=tau,
        denominator=tuple(scale.c(k) for k in range(n - m + 1)),
        numerator=() if w0 is None or not pair.num else tuple(scale.n(k) for k in range(q - z + 1)),
        stability=stability_of(h),
        assumed=scale.assumed,
        notes=tuple(notes),
        numbers=numbers,
    )


@dataclass(frozen=True, slots=True)
class _Scale:
    """The frequency scale of D' = a_0 + ... + a_n s^n: a_0 and a_n made positive, and w0 exactly or to 2^-160."""

    pair: Pair
    exact: Pair | None
    first: Coefficient
    last: Coefficient
    degree: int
    unit: int
    w0_exact: Fraction | None

    @classmethod
    def of(cls, pair: Pair, exact: Pair | None) -> _Scale:
        m, degree = pair.poles_at_origin, pair.order - pair.poles_at_origin
        first_sign, first = _positive(pair.den[m])
        last_sign, last = _positive(pair.den[-1])
        w0: Fraction | None = None
        if exact is not None and degree:
            w0 = nth_root(abs(exact.den[m] / exact.den[-1]), degree)
        return cls(pair, exact, first, last, degree, first_sign * last_sign, w0)

    @property
    def assumed(self) -> tuple[Coefficient, ...]:
        return tuple(c for c in (self.first, self.last) if sign(c) is None) if self.degree else ()

    def _power_of_w0(self, exponent: int, value: float | None, dimension: Dimension) -> Figure:
        """w0 or tau: w0^exponent."""
        unit = one(self.first)
        return Figure(self._closed(exponent, unit, unit, longest=self.degree), value, dimension)

    def w0(self) -> Figure | None:
        if not self.degree:
            return None
        return self._power_of_w0(1, None if self.w0_exact is None else double(self.w0_exact), HERTZ)

    def tau(self) -> Figure | None:
        if not self.degree:
            return None
        return self._power_of_w0(-1, None if self.w0_exact is None else double(1 / self.w0_exact), SECOND)

    def c(self, k: int) -> Figure:
        """c_k = a_k/a_0 * w0^k."""
        if k == self.degree:
            last = self.unit if k else 1
            return Figure(quotient(one(self.first) * last, one(self.first)), float(last))
        m = self.pair.poles_at_origin
        return self._normalised(self.pair.den[m:], None if self.exact is None else self.exact.den[m:], k)

    def n(self, k: int) -> Figure:
        """n_k = b_k/b_0 * w0^k."""
        z = self.pair.zeros_at_origin
        return self._normalised(self.pair.num[z:], None if self.exact is None else self.exact.num[z:], k)

    def _normalised(
        self, coefficients: tuple[Coefficient, ...], numbers: tuple[Coefficient, ...] | None, k: int
    ) -> Figure:
        value: float | None = None
        if numbers is not None and self.w0_exact is not None:
            value = double(numbers[k] / numbers[0] * self.w0_exact**k)
        if not coefficients[k]:
            return Figure(quotient(coefficients[k], one(self.first)), 0.0)
        closed = self._closed(k, coefficients[k], coefficients[0], longest=2)
        if value is None and closed is not None:  # no name may be left in it: 3 in 1 + 3sRC + (sRC)^2
            return figure(closed, {})
        return Figure(closed, value)

    def _closed(self, exponent: int, num: Coefficient, den: Coefficient, longest: int) -> Closed | None:
        """num/den * w0^exponent in closed form; None where it is too long, or a root of numbers beyond ``longest``.

        A denominator of known sign goes in among the powers, so that a_1/a_0*sqrt(a_0/a_2) is a_1/sqrt(a_0*a_2).
        """
        numeric = isinstance(num, Fraction)
        if not numeric and max(len(num), len(den), len(self.first), len(self.last)) > _MOST_TERMS:
            return None
        share = Fraction(exponent, self.degree)
        shares = [(self.first, share), (self.last, -share)]
        den_sign, positive = _positive(den)
        if sign(positive) == 1:
            shares.append((positive, Fraction(-1)))
            num, den = num * den_sign, one(den)
        powers: dict[Coefficient, Fraction] = {}
        for base, times in shares:
            powers[base] = powers.get(base, Fraction(0)) + times
        closed = power_product(num, den, powers)
        return None if numeric and closed.degree > longest else closed


def _positive(coefficient: Coefficient) -> tuple[int, Coefficient]:
    """The sign and the coefficient without it, where it is negative for all positive values; else 1."""
    return (-1, -coefficient) if sign(coefficient) == -1 else (1, coefficient)


def _ratio(h: Plain, pair: Pair, exact: Pair | None, b: int, a: int) -> Figure:
    """The figure num[b]/den[a], the coefficient of s^(b-a) at one end of the frequency axis."""
    num, den = pair.num[b], pair.den[a]
    long = not isinstance(num, Fraction) and max(len(num), len(den)) > _MOST_TERMS
    value = None if exact is None else double(exact.num[b] / exact.den[a])
    return Figure(None if long else quotient(num, den), value, h.dimension * SECOND ** (b - a))


def _gain(h: Plain, pair: Pair, exact: Pair | None, band: Band) -> Gain | None:
    q, n, z, m = pair.layout
    match band:
        case "zero":
            return None
        case "high-pass" if z:
            return Gain("H(infinity)", _ratio(h, pair, exact, q, n))
        case "band-pass":
            return Gain("|H(j w0)|, signed", _at_w0(h, pair, exact))
        case _ if z == m:
            return Gain("H(0)", _ratio(h, pair, exact, z, m))
        case _:
            power = z - m
            return Gain(f"coefficient of s{'' if power == 1 else f'^{power}'}", _ratio(h, pair, exact, z, m))


def _second_gain(h: Plain, pair: Pair, exact: Pair | None, band: Band) -> Gain | None:
    q, n, z, m = pair.layout
    if band in {"zero", "constant"} or q != n or z or m:
        return None
    return Gain("H(infinity)", _ratio(h, pair, exact, q, n))


def _at_w0(h: Plain, pair: Pair, exact: Pair | None) -> Figure:
    """|H(j w0)| with the sign of the lowest coefficient of N over that of D."""
    closed: Closed | None = None
    value: float | None = None
    resonant = pair.order == 2 and pair.num_degree == pair.zeros_at_origin == 1
    if resonant and pair.den[1]:
        closed = quotient(pair.num[1], pair.den[1])
    if exact is not None:
        value = math.inf if resonant and not exact.den[1] else _magnitude_at_w0(exact)
        first = exact.num[exact.zeros_at_origin] / exact.den[0]
        value = math.copysign(value, first)
    return Figure(closed, value, h.dimension)


def _magnitude_at_w0(exact: Pair) -> float:
    """|H(j w0)| from |N|^2/|D|^2 with w0 to 2^-160, so that no double rounds twice."""
    w0 = nth_root(abs(exact.den[0] / exact.den[-1]), exact.order)
    squares = []
    for p in (exact.num, exact.den):
        even = sum(((-1) ** (k // 2) * c * w0**k for k, c in enumerate(p) if k % 2 == 0), Fraction(0))
        odd = sum(((-1) ** (k // 2) * c * w0**k for k, c in enumerate(p) if k % 2), Fraction(0))
        squares.append(even * even + odd * odd)
    return double(nth_root(squares[0] / squares[1], 2)) if squares[1] else math.inf
