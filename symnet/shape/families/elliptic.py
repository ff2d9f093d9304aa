"""Elliptic (Cauer): equal ripples in the pass band and in the stop band, the narrowest transition there is.

The degree equation N K'(k)/K(k) = K'(k1)/K(k1) joins the selectivity k (ripple edge over stop-band edge), the
discrimination k1 = e/E and the order N. In nomes it reads q = q1^(1/N), so it is solved, not iterated; the
elliptic functions are then computed by Landen's descending transformation, whose moduli fall quadratically and in
which only positive numbers are added, so that nothing cancels at any order or selectivity. The poles come out of
real arithmetic, real and imaginary part each to full precision, however near to the jw axis the last pair is.
"""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

import math
from typing import Any, ClassVar, Final, NamedTuple

from symnet.errors import Fault, LimitError, NotationError
from symnet.shape.families.arithmetic import measured
from symnet.shape.families.chebyshev import LARGEST_RIPPLE_DB, ripple_of, squared_epsilon
from symnet.shape.families.curves import HALF_POWER_DB, last_crossing
from symnet.shape.families.family import (
    Family,
    Parameter,
    Points,
    Roots,
    checked_order,
    member,
    with_conjugates,
)
from symnet.shape.families.inverse_chebyshev import LARGEST_ATTENUATION_DB
from symnet.shape.families.prototype import RIPPLE_EDGE, STOP_EDGE, W3DB, W3DB_PEAK, Prototype, Reference

__all__ = ["ELLIPTIC", "ELLIPTIC_B", "ELLIPTIC_C", "elliptic"]

_NEAREST_EDGE: Final = 1 + 1e-9
_FARTHEST_EDGE: Final = 1e6


def elliptic(
    order: int,
    ripple: str = "0.1 dB",
    attenuation: str | None = None,
    *,
    edge: float | None = None,
    variant: str = "a",
) -> Prototype:
    """The elliptic (Cauer) low-pass of that order, ripple and stop-band attenuation, the edge of the ripple at w = 1 rad/s.

    Definition: |H(jw)|^2 = 1/(1 + e^2 R_N(w)^2), e^2 = 10^(ripple/10 dB) - 1, where the rational function R_N swings
    between -1 and 1 up to w = 1 and between E/e and infinity from the stop-band edge on,
    E^2 = 10^(attenuation/10 dB) - 1. With cd, sn the Jacobi functions, k the inverse of the stop-band edge, k1 = e/E
    and u = (2i - 1)/N: R_N(cd(uK, k)) = cd(NuK1, k1); zeros at +-j/(k cd(uK, k)); poles at j cd((u - jv)K, k) where
    sn(jNvK1, k1) = j/e. Both levels count from the largest |H|.

    Give the attenuation ("50 dB", also taken when nothing is said) or ``edge``, the stop-band edge over the ripple
    edge; the order and the ripple decide the other one. An even order comes in three variants, as in tables of ladders:

    * "a": as it is: the ripple minimum at DC, |H| not 0 at infinite frequency; no ladder of coils and capacitors without
      transformer or mutual inductance has it;
    * "b": the highest pair of zeros moved to infinite frequency: w^2 -> w^2 (w_z^2 - 1)/(w_z^2 - w^2);
    * "c": also the first peak of the pass band moved to DC, so that equal terminations are possible:
      w^2 -> (w^2 - w_p^2)(w_z^2 - 1)/((w_z^2 - w^2)(1 - w_p^2)).

    Sources: W. Cauer, Theorie der linearen Wechselstromschaltungen, 1941; S. Darlington, "Synthesis of reactance
    4-poles", J. Math. Phys. 18 (1939), 257-353; the form above after S. J. Orfanidis, Lecture Notes on Elliptic Filter
    Design, 2006; variants after R. Saal and E. Ulbrich, "On the design of filters by synthesis", IRE Trans. Circuit
    Theory 5 (1958), 284-327 (all from memory).

    Raises :class:`~symnet.errors.NotationError` for a ripple or an attenuation that is not a number of dB in its
    range (the attenuation more than 3.0103 dB above the ripple), for both attenuation and edge, for a variant "b" or
    "c" of an order that is odd or 2; :class:`~symnet.errors.LimitError` for an order beyond 60 or a stop band that
    begins within 1e-9 of the ripple edge.

    >>> p = elliptic(3, "0.5 dB", "40 dB")
    >>> for r in p.references[1:4]:
    ...     print(f"{r.w:.4f} rad/s  {r.label}")
    1.1526 rad/s  -3.0103 dB relative to DC (a ripple peak)
    1.0000 rad/s  ripple edge (-0.5 dB relative to the peak)
    2.7115 rad/s  stop-band edge (-40 dB relative to the peak)
    >>> print(elliptic(5, "1 dB", edge=1.2))
    elliptic, order 5, ripple 1 dB, attenuation 38.76 dB, low-pass
    >>> c = elliptic(4, "0.1 dB", edge=2, variant="c")
    >>> len(c.zeros), c.gain
    (2, 1.0)
    """
    order = checked_order(order)
    family = _variant(variant, order)
    ripple_db = ripple_of(ripple)
    if edge is not None:
        if attenuation is not None:
            raise NotationError(
                Fault(
                    "attenuation and edge both given; with order and ripple, one of them decides the other",
                    hint="leave one of them out",
                )
            )
        db = _attenuation_for(family, order, ripple_db, float(edge))
    else:
        db = measured(
            "50 dB" if attenuation is None else attenuation,
            "dB",
            what="a stop-band attenuation",
            above=ripple_db + HALF_POWER_DB,
            up_to=LARGEST_ATTENUATION_DB,
        )
    edge = 1 / _Shape.of(math, order, ripple_db, db).selectivity.k
    if edge < _NEAREST_EDGE:
        raise LimitError(
            Fault(
                f"order {order}, ripple {ripple_db:g} dB, attenuation {db:g} dB: the stop band would begin within "
                "1e-9 of the ripple edge, where doubles cannot tell the two apart",
                hint="take a lower order or a deeper stop band",
            )
        )
    return member(family, order, (ripple_db, db))


def _variant(variant: str, order: int) -> _Elliptic:
    family = {"a": ELLIPTIC, "b": ELLIPTIC_B, "c": ELLIPTIC_C}.get(variant)
    if family is None:
        raise NotationError(f'the variants of an elliptic filter are "a", "b" and "c", not {variant!r}')
    if not family.has_order(order):
        raise NotationError(
            Fault(
                f"variant {variant!r} is one of the even orders from 4 upwards, not of order {order}",
                hint="an odd order has one zero at infinite frequency and |H| = 1 at DC as it is",
            )
        )
    return family


def _attenuation_for(family: _Elliptic, order: int, ripple: float, edge: float) -> float:
    """The attenuation in dB that puts the stop-band edge there, the ripple edge being 1."""
    if not _NEAREST_EDGE <= edge <= _FARTHEST_EDGE:
        raise NotationError(
            Fault(
                f"a stop-band edge lies beyond the ripple edge at 1 and below {_FARTHEST_EDGE:g}, not at {edge!r}",
                hint="edge is the quotient of the two frequencies",
            )
        )
    e2 = squared_epsilon(math, ripple)

    def shape_at(x: float) -> _Shape:
        k = _Modulus.of_log_nome(math, x)
        return _Shape(order, e2, _Modulus.of_log_nome(math, order * x), k)

    def edge_at(x: float) -> float:
        shape = shape_at(x)
        moved, w = family.moved(math, shape), 1 / shape.selectivity.k
        return w if moved is None else float(moved.frequency(math, w))

    # the edge grows with -ln q of k, and -ln q1 of k1 is N times that
    low, high = 1e-3, 60.0
    while high - low > 4e-16 * high:
        middle = (low + high) / 2
        if not low < middle < high:
            break
        low, high = (middle, high) if edge_at(middle) < edge else (low, middle)
    if order * high > 200:  # k1 = 4 sqrt(q1), and soon too small for a double
        db = 10 * math.log10(e2 / 16) + 10 / math.log(10) * order * high
    else:
        db = 10 * math.log10(1 + e2 / shape_at(high).discrimination.k ** 2)
    if not ripple + HALF_POWER_DB < db <= LARGEST_ATTENUATION_DB:
        raise NotationError(
            Fault(
                f"order {order} with a ripple of {ripple:g} dB and the stop band from {edge:g} times the ripple edge on "
                f"would have an attenuation of {db:.4g} dB; it must lie {HALF_POWER_DB:.4f} dB above the ripple "
                f"and up to {LARGEST_ATTENUATION_DB:g} dB",
                hint="take a higher order or a wider transition"
                if db < LARGEST_ATTENUATION_DB
                else "take a lower order",
            )
        )
    return db


class _Modulus(NamedTuple):
    """A modulus of elliptic functions and its complement, k^2 + k'^2 = 1, both to full relative precision."""

    k: Any
    complement: Any

    def descending(self, m: Any) -> list[Any]:
        """Landen's moduli k_1, k_2 ...: k_(n+1) = (k_n/(1 + k_n'))^2, until nothing is left."""
        k, c = self
        found = []
        smallest = 1e-18 if isinstance(m.pi, float) else m.eps * m.mpf(2) ** -4
        while k > smallest:
            k, c = (k / (1 + c)) ** 2, 2 * m.sqrt(c) / (1 + c)
            found.append(k)
        return found

    def log_nome(self, m: Any) -> Any:
        """-ln q = pi K'/K = pi agm(1, k')/agm(1, k)."""
        return m.pi * _agm(m, self.complement) / _agm(m, self.k)

    @classmethod
    def of_log_nome(cls, m: Any, x: Any) -> _Modulus:
        """The modulus with -ln q = x: k = (theta_2/theta_3)^2, k' = (theta_4/theta_3)^2, of the smaller nome of q, q'."""
        swap = x < m.pi
        q = m.exp(-m.pi * m.pi / x if swap else -x)
        two, three, four, j = 1, 1, 1, 1
        while True:
            term = q ** (j * j)
            more = (two + q ** (j * (j + 1)), three + 2 * term, four + 2 * (-1) ** j * term)
            if more == (two, three, four):
                break
            two, three, four = more
            j += 1
        k, c = 4 * m.sqrt(q) * (two / three) ** 2, (four / three) ** 2
        return cls(c, k) if swap else cls(k, c)


def _agm(m: Any, b: Any) -> Any:
    """The arithmetic-geometric mean of 1 and b."""
    a, far = 1, True
    while far:
        a, b = (a + b) / 2, m.sqrt(a * b)
        far = abs(a - b) > 1e-8 * a if isinstance(m.pi, float) else abs(a - b) > m.sqrt(m.eps) * a
    return (a + b) / 2


def _at_real(moduli: list[Any], start: Any) -> Any:
    """sn(uK, k) from sin(u pi/2), cd(uK, k) from cos(u pi/2): w -> (1 + k_n) w/(1 + k_n w^2), from the last k_n back."""
    w = start
    for k in reversed(moduli):
        w = (1 + k) * w / (1 + k * w * w)
    return w


def _at_imaginary(moduli: list[Any], start: Any) -> Any:
    """sc(x, k') from sinh: the same steps for sn(jx, k) = j sc(x, k')."""
    r = start
    for k in reversed(moduli):
        r = (1 + k) * r / (1 - k * r * r)
    return r


def _to_imaginary(m: Any, modulus: _Modulus, r: Any) -> Any:
    """The inverse: a with sinh(a) leading to sc(x, k') = r."""
    k = modulus.k
    for following in modulus.descending(m):
        r = 2 * r / ((1 + following) * (1 + m.sqrt(1 + (k * r) ** 2)))
        k = following
    return m.asinh(r)


class _Shape(NamedTuple):
    """What every figure of a member follows from."""

    order: int
    e2: Any
    discrimination: _Modulus
    selectivity: _Modulus

    @classmethod
    def of(cls, m: Any, order: int, ripple: float, attenuation: float) -> _Shape:
        e2, E2 = squared_epsilon(m, ripple), squared_epsilon(m, attenuation)
        k1 = _Modulus(m.sqrt(e2 / E2), m.sqrt((E2 - e2) / E2))
        return cls(order, e2, k1, _Modulus.of_log_nome(m, k1.log_nome(m) / order))

    def cd(self, m: Any, moduli: list[Any], i: int) -> Any:
        """cd((2i - 1)K/N, k): where the pass band is at its i-th peak, counted from the edge."""
        return _at_real(moduli, m.sin((self.order - 2 * i + 1) * m.pi / (2 * self.order)))

    def roots(self, m: Any) -> tuple[list[tuple[Any, Any]], list[Any], list[Any]]:
        """Poles of the upper half plane, real poles, and cd at the peaks from the edge inwards, of variant a.

        With s = sn(uK, k), g = cd(uK, k) and r = sc(vK, k'), by the addition theorem of cd:
        p = (-(1 - k^2 g^2) s r + j g sqrt((1 + k^2 r^2)(1 + r^2)))/(1 + k^2 r^2 g^2).
        """
        n, (k, complement) = self.order, self.selectivity
        moduli = self.selectivity.descending(m)
        a = _to_imaginary(m, self.discrimination, 1 / m.sqrt(self.e2))
        r = _at_imaginary(moduli, m.sinh(a / n))
        along = m.sqrt((1 + (k * r) ** 2) * (1 + r * r))
        poles, peaks = [], []
        for i in range(1, n // 2 + 1):
            s, g = _at_real(moduli, m.sin((2 * i - 1) * m.pi / (2 * n))), self.cd(m, moduli, i)
            across = (complement**2 / (1 - (k * s) ** 2) if s < g else 1 - (k * g) ** 2) * s * r
            below = 1 + (k * r * g) ** 2
            poles.append((-across / below, g * along / below))
            peaks.append(g)
        return poles, [-r] if n % 2 else [], peaks

    def outside(self, m: Any, excess: float) -> Any:
        """The w in the transition band where e^2 R_N(w)^2 = excess: R_N and w are both 1/dn, of arguments in the ratio N."""
        rho2 = excess / self.e2
        a = _to_imaginary(m, self.discrimination, m.sqrt((rho2 - 1) / (1 - self.discrimination.k**2 * rho2)))
        r = _at_imaginary(self.selectivity.descending(m), m.sinh(a / self.order))
        return m.sqrt((1 + r * r) / (1 + (self.selectivity.k * r) ** 2))


class _Moved(NamedTuple):
    """w^2 -> (w^2 - peak)(zero - 1)/((zero - w^2)(1 - peak)): what makes variants b (peak = 0) and c of variant a."""

    peak: Any
    zero: Any

    def frequency(self, m: Any, w: Any) -> Any:
        return m.sqrt((w * w - self.peak) * (self.zero - 1) / ((self.zero - w * w) * (1 - self.peak)))

    def pole(self, m: Any, pole: tuple[Any, Any]) -> tuple[Any, Any]:
        """The same for s^2 = -w^2, the imaginary part of s^2 kept apart so that a high Q loses nothing."""
        x, y = pole
        re, im = (x - y) * (x + y), 2 * x * y
        scale = (self.zero - 1) / ((1 - self.peak) * ((self.zero + re) ** 2 + im * im))
        real = scale * ((re + self.peak) * (self.zero + re) + im * im)
        imag = scale * im * (self.zero - self.peak)
        size = m.hypot(real, imag)
        if real < 0:
            along = m.sqrt((size - real) / 2)
            return imag / (2 * along), along
        across = m.sqrt((size + real) / 2)
        return -across, -imag / (2 * across)


class _Elliptic(Family):
    name: ClassVar[str] = "elliptic"
    source: ClassVar[str] = "W. Cauer 1941, S. Darlington 1939, S. J. Orfanidis 2006 (from memory)"

    def parameters(self, order: int) -> tuple[Parameter, ...]:
        """The ripple and the attenuation, as far as anybody goes with them."""
        return (
            Parameter("ripple", "dB", 1e-5, LARGEST_RIPPLE_DB, logarithmic=True),
            Parameter("attenuation", "dB", 16.0, 200.0, logarithmic=True),
        )

    def finite_zeros(self, order: int) -> int:
        """All but the one of an odd order."""
        return order - order % 2

    def moved(self, m: Any, shape: _Shape) -> _Moved | None:
        """The transformation of the frequency that makes this variant of variant a."""
        return None

    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """Poles and zeros in real arithmetic throughout."""
        poles, zeros = self.points(math, order, values)
        return tuple(complex(*p) for p in poles), tuple(complex(*z) for z in zeros)

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """The same points."""
        shape = _Shape.of(m, order, *values)
        upper, real, peaks = shape.roots(m)
        zeros = [1 / (shape.selectivity.k * g) for g in peaks]
        moved = self.moved(m, shape)
        if moved is not None:
            upper = [moved.pole(m, p) for p in upper]
            zeros = [moved.frequency(m, z) for z in zeros[:-1]]
        return with_conjugates(upper, real), with_conjugates([(0, z) for z in zeros])

    def gain(self, order: int, values: tuple[float, ...]) -> float:
        """1 for an odd order; an even one has a ripple minimum at DC."""
        return 1.0 if order % 2 else float(10 ** (-values[0] / 20))

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """The edge of the ripple, 1 by definition, that of the stop band, and the -3 dB points in closed form."""
        ripple, attenuation = values
        shape = _Shape.of(math, order, ripple, attenuation)
        moved = self.moved(math, shape)

        def place(w: float) -> float:
            return w if moved is None else float(moved.frequency(math, w))

        found = [
            Reference.named(RIPPLE_EDGE, 1.0, f"-{ripple:.4g} dB relative to the peak"),
            Reference.named(
                STOP_EDGE, place(1 / shape.selectivity.k), f"-{attenuation:.5g} dB relative to the peak"
            ),
        ]
        at_peak = self.gain(order, values) == 1.0
        if not at_peak:
            note = f"a ripple minimum, {ripple:.4g} dB below the peak"
            found.append(Reference.named(W3DB, place(shape.outside(math, 1 + 2 * shape.e2)), note))
        if shape.e2 <= 1:
            w = place(shape.outside(math, 1.0))
            found.append(
                Reference.named(W3DB, w, "a ripple peak") if at_peak else Reference.named(W3DB_PEAK, w)
            )
        elif not at_peak:
            poles, zeros = self.roots(order, values)
            w = last_crossing(poles, zeros, HALF_POWER_DB - ripple) or math.nan
            found.append(Reference.named(W3DB_PEAK, w))
        return tuple(found)

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """|H|^2."""
        return (
            f"|H(jw)|^2 = 1/(1 + e^2 R_{order}(w)^2), e^2 = 10^({values[0]:.6g}/10) - 1, "
            f"|R_{order}| >= sqrt((10^({values[1]:.6g}/10) - 1)/e^2) in the stop band"
        )


class _EllipticB(_Elliptic):
    name: ClassVar[str] = "elliptic, variant b"

    def has_order(self, order: int) -> bool:
        """Even orders that keep a pair of zeros."""
        return order >= 4 and order % 2 == 0

    def finite_zeros(self, order: int) -> int:
        """All but the pair that was moved to infinite frequency."""
        return order - 2

    def moved(self, m: Any, shape: _Shape) -> _Moved | None:
        """The highest pair of zeros goes to infinite frequency."""
        peak = self.first_peak(m, shape)
        return _Moved(0, 1 / (shape.selectivity.k**2 * peak))

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """|H|^2 of variant a, and what was moved."""
        return super().equation(order, values) + "; in w^2 the highest zeros moved to infinite frequency"

    def first_peak(self, m: Any, shape: _Shape) -> Any:
        """The square of the frequency of the pass-band peak next to DC; the highest zeros are at its inverse over k."""
        return shape.cd(m, shape.selectivity.descending(m), shape.order // 2) ** 2


class _EllipticC(_EllipticB):
    name: ClassVar[str] = "elliptic, variant c"

    def moved(self, m: Any, shape: _Shape) -> _Moved | None:
        """The first peak of the pass band goes to DC as well."""
        peak = self.first_peak(m, shape)
        return _Moved(peak, 1 / (shape.selectivity.k**2 * peak))

    def gain(self, order: int, values: tuple[float, ...]) -> float:
        """DC is a ripple peak."""
        return 1.0

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """|H|^2 of variant a, and what was moved."""
        return super().equation(order, values) + " and the first peak of the pass band to DC"


ELLIPTIC: Final = _Elliptic()
ELLIPTIC_B: Final = _EllipticB()
ELLIPTIC_C: Final = _EllipticC()
