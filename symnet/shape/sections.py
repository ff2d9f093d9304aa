"""H as first- and second-order sections: what each pole and each pair does, in the trade's words.

A complex pair is s^2/w0^2 + s/(Q w0) + 1, a real pole s/w0 + 1 with tau = 1/w0, poles at the origin stand apart;
zeros are treated alike. Numbers come from certified roots and are good to the last digit of a double, Q of a pair
next to the jw axis included; rational factors stay exact. In symbols D is factored over the rationals only: a
quadratic in symbols reports w0 and Q, whether its roots are real or not, and what has neither factor of degree 1 nor
of degree 2 is kept whole. The order-2 H always has its Q, by :attr:`Sections.whole`, with real poles too.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from fractions import Fraction
from typing import Final, Literal, TypeAlias

from symnet.errors import Fault, UndefinedError
from symnet.exact.roots import Root, roots
from symnet.quantities import HERTZ, NUMBER, SECOND, Dimension
from symnet.shape.closed import Closed, Coefficient, Figure, figure, one, power_product, quotient
from symnet.shape.factors import factors_in_s
from symnet.shape.plain import Pair, Plain, Response, plain, sign
from symnet.typeset.displayed import Displayed

__all__ = ["Section", "Sections", "combined", "sections"]

Kind: TypeAlias = Literal["origin", "first order", "pair", "quadratic", "polynomial"]
Side: TypeAlias = Literal["left", "right", "axis"]


@dataclass(frozen=True, slots=True)
class Section:
    """One section of poles (or of zeros).

    ``kind`` is "origin" (the factor s), "first order", "pair" (complex conjugates), "quadratic" (w0 and Q known, the
    roots may be real) or "polynomial" (higher degree, in symbols only). ``coefficients`` are those of the factor with
    constant term 1, ascending: (1, +-tau) or (1, 1/(Q w0), 1/w0^2). ``w0`` is in rad/s, ``f0`` in Hz, ``tau`` in s
    (first order only). Q = 1/(2 zeta) is infinite on the jw axis and negative in the right half plane. ``side`` says
    where the roots are, None while symbols leave it open. ``roots`` are the certified roots of a section in numbers.
    """

    kind: Kind
    multiplicity: int
    coefficients: tuple[Figure, ...]
    side: Side | None
    w0: Figure | None = None
    f0: float | None = None
    tau: Figure | None = None
    q: Figure | None = None
    zeta: Figure | None = None
    roots: tuple[Root, ...] = field(default=(), repr=False)

    @property
    def degree(self) -> int:
        """The degree of the factor, its multiplicity not counted."""
        return 1 if self.kind == "origin" else len(self.coefficients) - 1

    def __repr__(self) -> str:
        times = f" x{self.multiplicity}" if self.multiplicity > 1 else ""
        match self.kind:
            case "origin":
                return f"<origin{times}>"
            case "polynomial":
                return f"<polynomial of degree {self.degree}{times}>"
            case _:
                at = f"w0 = {self.w0!r}" if self.f0 is None else f"f0 = {self.f0:.4g} Hz"
                quality = "" if self.q is None else f", Q = {self.q!r}"
                right = {"right": ", right half plane", "axis": ", on the jw axis"}.get(self.side or "", "")
                return f"<{self.kind}{times}: {at}{quality}{right}>"


@dataclass(frozen=True, slots=True)
class Sections(Displayed):
    """H = gain * s^power * (product of the zeros' factors)/(product of the poles' factors), constant terms 1.

    ``whole`` is D' as one quadratic where its degree is 2, ``whole_zeros`` the same for N'. ``complete`` is False when
    a polynomial of degree above 2 is left in symbols. ``numbers`` are the sections of the exact numbers, where H is
    in symbols and all have values.
    """

    label: str
    gain: Figure
    power: int
    poles: tuple[Section, ...]
    zeros: tuple[Section, ...]
    whole: Section | None
    whole_zeros: Section | None
    numbers: Sections | None = field(default=None, repr=False)

    @property
    def complete(self) -> bool:
        """True when every factor is of degree 1 or 2."""
        return all(section.kind != "polynomial" for section in (*self.poles, *self.zeros))

    def __repr__(self) -> str:
        return f"<Sections of {self.label}: poles {list(self.poles)}, zeros {list(self.zeros)}>"


def sections(H: Response) -> Sections:
    """The poles and zeros of H as first- and second-order sections, with w0, f0, Q, zeta and tau of each.

    D'(s) = product of (s/w + 1) and (s^2/w0^2 + s/(Q w0) + 1). Sections are ordered by w0, then by rising Q.
    Raises :class:`~symnet.errors.UndefinedError` for H = 0.

    >>> from symnet.exact.ratio import Ratio
    >>> sections(Ratio.of([1], [1, 2, 2, 1])).poles
    (<first order: f0 = 0.1592 Hz>, <pair: f0 = 0.1592 Hz, Q = 1>)

    A Wien arm has real poles and Q = 1/3 all the same:

    >>> wien = sections(Ratio.of([0, 1], [1, 3, 1]))
    >>> [section.kind for section in wien.poles], wien.whole.q, wien.whole.zeta
    (['first order', 'first order'], 1/3 = 0.333333, 3/2 = 1.5)
    """
    h = plain(H)
    if not h.pair.num:
        raise UndefinedError(Fault("H = 0 has no sections.", "Is the read connected to the drive?"))
    numbers = _of_numbers(h) if h.numbers is not None else None
    if h.symbols is None:
        assert numbers is not None  # noqa: S101 - there are symbols or numbers
        return numbers
    return _of_symbols(h, h.symbols, numbers, h.values)


# -- one section -----------------------------------------------------------------------------------------------

_Values: TypeAlias = Mapping[str, Fraction]


def _figure(closed: Closed, values: _Values, exact: bool, dimension: Dimension = NUMBER) -> Figure:
    """The figure; without its closed form where the roots that it is made of are approximations."""
    found = figure(closed, values, dimension)
    return found if exact else replace(found, closed=None)


def _coefficients(a: tuple[Coefficient, ...], values: _Values, exact: bool) -> tuple[Figure, ...]:
    return tuple(_figure(quotient(c, a[0]), values, exact, SECOND**k) for k, c in enumerate(a))


def _first_order(a: tuple[Coefficient, ...], values: _Values, exact: bool = True) -> Section:
    """a_0 + a_1 s: w0 = |a_0/a_1|."""
    slope = sign(a[1]), sign(a[0])
    product = None if None in slope else slope[0] == slope[1]
    magnitude = a[1] if product is not False else -a[1]
    w0 = _figure(quotient(a[0], magnitude), values, exact, HERTZ)
    tau = _figure(quotient(magnitude, a[0]), values, exact, SECOND)
    side: Side | None = None if product is None else "left" if product else "right"
    return Section("first order", 1, _coefficients(a, values, exact), side, w0, _hertz(w0), tau)


def _second_order(a: tuple[Coefficient, ...], values: _Values, exact: bool = True) -> Section:
    """a_0 + a_1 s + a_2 s^2: w0 = sqrt(a_0/a_2), Q = sqrt(a_0 a_2)/a_1; no w0 for roots on both sides."""
    if sign(a[0]) == -1:
        a = tuple(-c for c in a)
    plain_section = Section("quadratic", 1, _coefficients(a, values, exact), None)
    first, linear, square = a
    if sign(square) == -1:
        return plain_section
    unit = one(first)
    half = Fraction(1, 2)
    w0 = _figure(_powers(unit, unit, (first, half), (square, -half)), values, exact, HERTZ)
    if not linear:
        q, zeta = Figure(None, math.inf), Figure(quotient(linear, unit), 0.0)
    else:
        q = _figure(_powers(unit, linear, (first, half), (square, half)), values, exact)
        zeta = _figure(_powers(linear, 2 * unit, (first, -half), (square, -half)), values, exact)
    leaning = sign(linear)
    side: Side | None = None if leaning is None else ("axis", "left", "right")[leaning]
    if sign(first) is None or sign(square) is None:
        side = None
    return replace(plain_section, side=side, w0=w0, f0=_hertz(w0), q=q, zeta=zeta)


def _powers(num: Coefficient, den: Coefficient, *shares: tuple[Coefficient, Fraction]) -> Closed:
    powers: dict[Coefficient, Fraction] = {}
    for base, share in shares:
        powers[base] = powers.get(base, Fraction(0)) + share
    return power_product(num, den, powers)


def _hertz(w0: Figure) -> float | None:
    return None if w0.value is None else w0.value / (2 * math.pi)


# -- numbers ---------------------------------------------------------------------------------------------------


def _of_numbers(h: Plain) -> Sections:
    pair = h.numeric_pair
    z, m = pair.zeros_at_origin, pair.poles_at_origin
    poles, zeros = _numeric(pair.den), _numeric(pair.num)
    gain = _figure(quotient(pair.num[z], pair.den[m]), {}, True, h.dimension * SECOND ** (z - m))
    wholes = _whole(pair.den[m:], poles), _whole(pair.num[z:], zeros)
    return Sections(h.label, gain, z - m, poles, zeros, *wholes)


def _numeric(coefficients: tuple[Fraction, ...]) -> tuple[Section, ...]:
    found = []
    for root in roots(coefficients):
        closed = root.closed
        if root.exact == 0:
            section = _ORIGIN
        elif root.is_real:
            section = _first_order((-root.real, Fraction(1)), {}, exact=root.exact is not None)
        elif root.imag > 0:
            size = root.real**2 + root.imag**2 if closed is None else closed.rational**2 - closed.radicand
            section = _second_order((size, -2 * root.real, Fraction(1)), {}, exact=closed is not None)
            section = replace(section, kind="pair")
        else:
            continue
        both = (root,) if root.is_real else (root, root.conjugate())
        found.append(replace(section, multiplicity=root.multiplicity, roots=both))
    return tuple(found)


def _whole(coefficients: tuple[Fraction, ...], found: tuple[Section, ...]) -> Section | None:
    """All of a polynomial of degree 2 as one quadratic, with its roots."""
    if len(coefficients) != 3:
        return None
    both = tuple(root for section in found if section.kind != "origin" for root in section.roots)
    return replace(_second_order(coefficients, {}), roots=both)


def combined(a: Section, b: Section) -> Section:
    """Two first-order sections in numbers, on the same side, as one quadratic with its w0 and Q.

    Raises :class:`~symnet.errors.UndefinedError` for other sections.

    >>> from symnet.exact.ratio import Ratio
    >>> slow, fast = sections(Ratio.of([1], [1, 5, 4])).poles
    >>> combined(slow, fast).q
    2/5 = 0.4
    """
    if not (a.kind == b.kind == "first order" and a.side == b.side and a.roots and b.roots):
        raise UndefinedError(
            Fault(
                "Only two real poles (or zeros) on the same side make a quadratic with a Q.",
                "Take two first-order sections in numbers from sections(H).poles or .zeros.",
            )
        )
    p, q = a.roots[0], b.roots[0]
    exact = p.exact is not None and q.exact is not None
    section = _second_order((p.real * q.real, -(p.real + q.real), Fraction(1)), {}, exact)
    return replace(section, roots=(p, q))


# -- symbols ---------------------------------------------------------------------------------------------------


def _of_symbols(h: Plain, pair: Pair, numbers: Sections | None, values: _Values) -> Sections:
    z, m = pair.zeros_at_origin, pair.poles_at_origin
    gain = _figure(quotient(pair.num[z], pair.den[m]), values, True, h.dimension * SECOND ** (z - m))
    poles, zeros = _symbolic(pair.den, values), _symbolic(pair.num, values)
    wholes = [_second_order(p, values) if len(p) == 3 else None for p in (pair.den[m:], pair.num[z:])]
    return Sections(h.label, gain, z - m, poles, zeros, wholes[0], wholes[1], numbers)


def _symbolic(coefficients: tuple[Coefficient, ...], values: _Values) -> tuple[Section, ...]:
    start = next(k for k, c in enumerate(coefficients) if c)
    found = [replace(_ORIGIN, multiplicity=start)] if start else []
    for factor, multiplicity in factors_in_s(coefficients[start:]):
        make = {2: _first_order, 3: _second_order}.get(len(factor), _polynomial)
        found.append(replace(make(factor, values), multiplicity=multiplicity))
    return tuple(found)


def _polynomial(a: tuple[Coefficient, ...], values: _Values) -> Section:
    return Section("polynomial", 1, _coefficients(a, values, exact=True), None)


_ORIGIN: Final = Section("origin", 1, (), "axis")
