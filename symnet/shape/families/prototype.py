"""A member of a filter family as a value: its poles and zeros and every frequency reference it has.

Filter tables disagree about what "unit frequency" means: the -3 dB point, the edge of the ripple, the inverse of
the delay, the geometric mean of the poles. A :class:`Prototype` therefore carries all of them as data, each with
a label that says what it is, and is put at a frequency by :meth:`Prototype.at` (text with its unit) or
:meth:`Prototype.scaled` (rad/s), and moved to another band by :meth:`Prototype.high_pass`, ``band_pass`` and
``band_stop``. Invariants: poles are sorted and come in conjugate pairs; every reference belongs to exactly these
poles.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable
from dataclasses import dataclass, field, replace
from typing import Any, TypeAlias, overload

import numpy as np
from numpy.typing import NDArray
from sympy import Expr

from symnet.errors import Fault, NotationError
from symnet.shape.families.curves import geometric_mean, group_delay
from symnet.shape.families.references import (
    ALL_PASS,
    BAND_PASS,
    BAND_STOP,
    CENTRE,
    HIGH_PASS,
    LOW_PASS,
    PASS_BAND,
    PHASE_EDGE,
    PHASE_LINE,
    RIPPLE_EDGE,
    STOP_EDGE,
    UNIT_DELAY,
    W0,
    W3DB,
    W3DB_PEAK,
    W6DB,
    Reference,
    angular,
    of_band,
    read_band,
    read_frequency,
    unknown,
    with_common_references,
)
from symnet.shape.families.steps import step
from symnet.shape.families.transformation import to_band_pass, to_band_stop
from symnet.typeset.displayed import Displayed

__all__ = [
    "ALL_PASS",
    "BAND_PASS",
    "BAND_STOP",
    "CENTRE",
    "HIGH_PASS",
    "LOW_PASS",
    "PASS_BAND",
    "PHASE_EDGE",
    "PHASE_LINE",
    "RIPPLE_EDGE",
    "STOP_EDGE",
    "UNIT_DELAY",
    "W0",
    "W3DB",
    "W3DB_PEAK",
    "W6DB",
    "Prototype",
    "Reference",
    "Setting",
    "in_order",
    "with_common_references",
]

_Complexes: TypeAlias = NDArray[np.complex128]


@dataclass(frozen=True, slots=True)
class Setting:
    """The value of a continuous parameter of a family: ripple 0.5 dB."""

    name: str
    value: float
    unit: str

    def __str__(self) -> str:
        return f"{self.name} {self.value:.4g} {self.unit}".rstrip()


def in_order(roots: Iterable[Any]) -> tuple[Any, ...]:
    """The roots by growing Q, that is from the real axis outwards; of a pair the upper one first."""
    return tuple(sorted(roots, key=lambda r: (-abs(r.real) / (abs(r) or 1.0), abs(r), -r.imag)))


@dataclass(frozen=True, slots=True, repr=False)
class Prototype(Displayed):
    """A member of a filter family: poles, zeros, gain and frequency references.

    ``poles`` and ``zeros`` are in rad/s; ``order`` is that of the low-pass, also when a band-pass has twice as many
    poles. ``gain`` is |H| at DC (of a high-pass: at infinite frequency; of a band-pass: at the centre) when the
    largest |H| in the pass band is 1. ``unit`` is the w in rad/s at which it was put by one of its references.
    ``exact`` holds the denominator as exact numbers, ascending powers of s, where they can be read by a person;
    otherwise it is None. More digits than doubles have: :meth:`precise`.

    >>> from symnet.shape.families.bessel import bessel
    >>> p = bessel(3)
    >>> print(p)
    Bessel, order 3, low-pass
    >>> [f"{r.w:.5f} rad/s: {r.label}" for r in p.references][1]
    '1.75567 rad/s: -3.0103 dB relative to DC'
    >>> print(p.scaled("w3dB", 1.0).reference("unit_delay").w.__round__(5))
    0.56958
    """

    family: str
    order: int
    poles: tuple[complex, ...]
    zeros: tuple[complex, ...] = ()
    gain: float = 1.0
    references: tuple[Reference, ...] = ()
    settings: tuple[Setting, ...] = ()
    equation: str = field(default="", compare=False)
    band: str = LOW_PASS
    unit: float = 1.0
    exact: tuple[Expr, ...] | None = field(default=None, compare=False, repr=False)
    refined: Callable[[int], tuple[tuple[Any, ...], tuple[Any, ...]]] | None = field(
        default=None, compare=False, repr=False
    )

    def __repr__(self) -> str:
        return f"<Prototype: {self}>"

    def __str__(self) -> str:
        settings = "".join(f", {setting}" for setting in self.settings)
        poles = f" ({len(self.poles)} poles)" if len(self.poles) != self.order else ""
        return f"{self.family}, order {self.order}{settings}, {self.band}{poles}"

    def reference(self, name: str) -> Reference:
        """The reference of that name; f3dB is another way to write w3dB.

        Raises :class:`~symnet.errors.UnknownNameError` for one it does not have.

        >>> from symnet.shape.families.bessel import bessel
        >>> bessel(3).at(f3dB="20 kHz").reference("f3dB").f.__round__(6)
        20000.0
        """
        known = [reference.name for reference in self.references]
        wanted = angular(name, known)
        for reference in self.references:
            if reference.name == wanted:
                return reference
        raise unknown(str(self), name, known)

    def at(self, **reference: str) -> Prototype:
        """The same shape with one of its references at a stated frequency: ``at(f3dB="20 kHz")``.

        The keyword is the name of a reference. Those that begin with w take rad/s, and the same name with f takes
        hertz: ``at(w3dB="125.7 krad/s")``; the others take either: ``at(ripple_edge="3.4 kHz")``. A delay is given
        as the time it is: ``at(delay="50 us")``, the group delay at DC.

        Raises :class:`~symnet.errors.NotationError` for anything but one positive frequency with its unit and
        :class:`~symnet.errors.UnknownNameError` for a reference that the prototype does not have.

        >>> from symnet.shape.families.bessel import bessel
        >>> p = bessel(3).at(f3dB="20 kHz")
        >>> [f"{r.f:.0f} Hz: {r.label.partition(',')[0]}" for r in p.references]
        ['28094 Hz: w0', '20000 Hz: -3.0103 dB relative to DC', '11392 Hz: unit-delay frequency 1/T']
        >>> f"{bessel(3).at(delay='10 us').reference('f3dB').f:.0f} Hz"
        '27942 Hz'
        """
        if len(reference) != 1:
            raise NotationError(
                Fault(
                    f"a prototype is put at one frequency, not at {len(reference)}",
                    hint='name one reference: at(f3dB="20 kHz")',
                )
            )
        ((name, text),) = reference.items()
        return self.scaled(self.reference(name).name, read_frequency(name, text))

    def scaled(self, reference: str, w: float) -> Prototype:
        """The same shape with the named reference at the angular frequency w in rad/s: s -> s * (reference / w).

        Raises :class:`~symnet.errors.UnknownNameError` for a reference it does not have and
        :class:`~symnet.errors.NotationError` for a frequency that is not positive.

        >>> from math import pi
        >>> from symnet.shape.families.chebyshev import chebyshev
        >>> p = chebyshev(3, "0.5 dB").scaled("w3dB", 2 * pi * 1000)
        >>> round(p.reference("ripple_edge").f, 2)
        856.54
        """
        if not (w > 0 and math.isfinite(w)):
            raise NotationError(f"a prototype is scaled to a positive frequency, not to w = {w!r} rad/s")
        k = w / self.reference(reference).w
        if k == 1:
            return self if w == self.unit else replace(self, unit=w)
        return replace(
            self,
            unit=w,
            poles=tuple(p * k for p in self.poles),
            zeros=tuple(z * k for z in self.zeros),
            references=tuple(r.scaled(k) for r in self.references),
            equation=f"{self.equation}, with s for s*{1 / k:.9g}" if self.equation else "",
            exact=None,
            refined=None,
        )

    def high_pass(self) -> Prototype:
        """The high-pass that s -> u^2/s gives: the frequency u that the prototype was put at stays, the others turn over.

        u is where :meth:`at` or :meth:`scaled` put the reference that was named, 1 rad/s for a prototype as its
        constructor gives it. The zeros at infinity come to s = 0.

        >>> from symnet.shape.families.butterworth import butterworth
        >>> p = butterworth(2).high_pass()
        >>> p.zeros, p.reference("w3dB").label
        ((0j, 0j), '-3.0103 dB relative to infinite frequency')
        >>> from symnet.shape.families.bessel import bessel
        >>> bessel(4).at(f3dB="80 Hz").high_pass().reference("f3dB").f.__round__(9)
        80.0
        """
        self._is_low_pass("s -> 1/s does not make a high-pass of it")
        square = self.unit**2
        at_infinity = self.order - len(self.zeros)
        return replace(
            self,
            poles=in_order((square / p).conjugate() for p in self.poles),
            zeros=(0j,) * at_infinity + in_order((square / z).conjugate() for z in self.zeros),
            references=tuple(r.inverted(self.unit) for r in self.references),
            equation=f"{self.equation}, with {square:.9g}/s for s" if self.equation else "",
            band=HIGH_PASS,
            exact=self.exact[::-1] if self.exact and not self.zeros else None,
            refined=None,
        )

    def precise(self, digits: int = 50) -> tuple[tuple[Any, ...], tuple[Any, ...]]:
        """Poles and finite zeros in rad/s as mpmath numbers of so many decimal digits, in the order of :attr:`poles`.

        Parameters of the family count as typed: a ripple of 0.1 dB is one tenth. Raises
        :class:`~symnet.errors.NotationError` for a prototype that was scaled or turned into a high-pass, since the
        frequency that it was scaled to is a double; and :class:`~symnet.errors.LimitError` for more than 500 digits.

        >>> from symnet.shape.families.bessel import bessel
        >>> poles, zeros = bessel(2).precise(30)
        >>> poles[0]
        mpc(real='-1.5', imag='0.866025403784438646763723170752918')
        """
        if self.refined is None:
            raise NotationError(
                Fault(
                    f"{self}: more digits belong to the frequency scale of the definition, and this one was scaled",
                    hint="ask the prototype as its constructor gives it, then scale the digits",
                )
            )
        poles, zeros = self.refined(digits)
        return in_order(poles), in_order(zeros)

    def band_pass(self, *, bandwidth: str, f0: str = "", w0: str = "", edges: str = W3DB) -> Prototype:
        """The band-pass that s -> r (s^2 + w0^2)/(B s) gives, B the bandwidth between the edges named by ``edges``.

        The centre is given in hertz as ``f0`` or in rad/s as ``w0``; it is the geometric mean of both edges. The
        bandwidth is a frequency or a part of the centre ("10 %"), and r is the low-pass frequency that becomes the
        edges, ``edges`` its name: the -3.0103 dB frequency unless said otherwise. Order n stays the order of the
        low-pass; the band-pass has 2n poles. Its references are the centre, the unit delay there, and for every
        other one of the low-pass its lower edge, upper edge and bandwidth.

        Raises :class:`~symnet.errors.NotationError` for a frequency without its unit or a prototype that is no
        low-pass, and :class:`~symnet.errors.UnknownNameError` for edges that the low-pass does not have.

        >>> from symnet.shape.families.chebyshev import chebyshev
        >>> p = chebyshev(3, "0.5 dB").band_pass(f0="10 kHz", bandwidth="10 %", edges="ripple_edge")
        >>> print(p)
        Chebyshev, order 3, ripple 0.5 dB, band-pass (6 poles)
        >>> for name in ("ripple_edge_lower", "ripple_edge_upper", "ripple_edge_bandwidth", "w3dB_bandwidth"):
        ...     print(f"{name}: {p.reference(name).f:.2f} Hz")
        ripple_edge_lower: 9512.49 Hz
        ripple_edge_upper: 10512.49 Hz
        ripple_edge_bandwidth: 1000.00 Hz
        w3dB_bandwidth: 1167.49 Hz
        """
        self._is_low_pass("it does not become a band-pass")
        centre, width = read_band(bandwidth, f0, w0)
        return self.moved(BAND_PASS, centre, width, self.reference(edges).w)

    def band_stop(self, *, bandwidth: str, f0: str = "", w0: str = "", edges: str = W3DB) -> Prototype:
        """The band-stop that s -> r B s/(s^2 + w0^2) gives; arguments as for :meth:`band_pass`.

        The zeros that the low-pass has at infinite frequency come to the centre, +- j w0.

        >>> from symnet.shape.families.butterworth import butterworth
        >>> p = butterworth(1).band_stop(f0="50 Hz", bandwidth="5 Hz")
        >>> [f"{p.decibels(p.reference(name).w):.4f} dB" for name in ("f3dB_lower", "f3dB_upper")]
        ['-3.0103 dB', '-3.0103 dB']
        >>> p.decibels(p.reference("f0").w)
        -inf
        """
        self._is_low_pass("it does not become a band-stop")
        centre, width = read_band(bandwidth, f0, w0)
        return self.moved(BAND_STOP, centre, width, self.reference(edges).w)

    def moved(self, band: str, centre: float, width: float, edge: float = 1.0) -> Prototype:
        """The band-pass or band-stop with everything in rad/s: ``edge`` of this low-pass becomes the edges of the width."""
        self._is_low_pass(f"it does not become a {band}")
        if not (centre > 0 and width > 0 and math.isfinite(centre) and math.isfinite(width)):
            raise NotationError(
                f"a {band} has a positive centre and width in rad/s, not {centre!r} and {width!r}"
            )
        at_infinity = self.order - len(self.zeros)
        if band == BAND_PASS:
            transform, ratio, zeros = to_band_pass, width / edge, (0j,) * at_infinity
            what = f"{edge:.9g}*(s^2 + {centre:.9g}^2)/({width:.9g}*s) for s"
        else:
            transform, ratio = to_band_stop, width * edge
            zeros = (complex(0.0, centre), complex(0.0, -centre)) * at_infinity
            what = f"{edge:.9g}*{width:.9g}*s/(s^2 + {centre:.9g}^2) for s"
        return replace(
            self,
            poles=in_order(transform(self.poles, centre, ratio)),
            zeros=zeros + in_order(transform(self.zeros, centre, ratio)),
            references=of_band(self.references, band, centre, ratio),
            equation=f"{self.equation}, with {what}" if self.equation else "",
            band=band,
            exact=None,
            refined=None,
        )

    def _is_low_pass(self, otherwise: str) -> None:
        if self.band != LOW_PASS:
            raise NotationError(f"{self} is not a low-pass, so {otherwise}")

    @overload
    def __call__(self, s: complex) -> complex: ...
    @overload
    def __call__(self, s: _Complexes) -> _Complexes: ...
    def __call__(self, s: complex | _Complexes) -> complex | _Complexes:
        """H(s) of this prototype, its largest magnitude in the pass band being 1; s in rad/s, a number or an array.

        H is ``gain`` at DC, of a high-pass at infinite frequency, of a band-pass at its centre.
        """
        at = np.asarray(s, dtype=complex)
        value = np.full(at.shape, self.gain, dtype=complex)
        middle = self._middle
        for k, p in enumerate(self.poles):
            z = self.zeros[k] if k < len(self.zeros) else None
            if self.band == HIGH_PASS:
                value *= (at - (z or 0j)) / (at - p)
            else:
                value *= (middle - p) / (at - p) * (1 if z is None else (at - z) / (middle - z))
        return value if value.ndim else complex(value)

    def decibels(self, w: float) -> float:
        """20 log10 |H(jw)| in dB at the angular frequency w in rad/s, relative to the largest |H| of the pass band."""
        size = abs(self(1j * w))
        return 20 * math.log10(size) if size else -math.inf

    def delay(self, w: float) -> float:
        """The group delay in seconds at the angular frequency w in rad/s."""
        return float(group_delay(np.asarray(w, dtype=float), self.poles, self.zeros))

    def step(self, end: float, points: int = 401) -> NDArray[np.float64]:
        """The response to a unit step at that many times, equally spaced from 0 to ``end`` in seconds.

        >>> from symnet.shape.families.butterworth import butterworth
        >>> y = butterworth(3).step(40.0)
        >>> f"overshoot {max(y) - 1:.1%}, final value {y[-1]:.6f}"
        'overshoot 8.1%, final value 1.000000'
        """
        unit = self._middle.imag or geometric_mean(self.poles)
        poles, zeros = ([r / unit for r in roots] for roots in (self.poles, self.zeros))
        factor = self.gain + 0j
        if self.band != HIGH_PASS:
            factor *= complex(np.prod([self._middle / unit - p for p in poles]))
            factor /= complex(np.prod([self._middle / unit - z for z in zeros]))
        return step(poles, zeros, factor.real, end * unit, points)

    @property
    def _middle(self) -> complex:
        """The s at which H is ``gain``, unless that is infinity."""
        return 1j * self.reference(CENTRE).w if self.band == BAND_PASS else 0j

    def denominator(self) -> tuple[float, ...]:
        """The coefficients of D(s) in ascending powers of s, the highest one being 1; coefficient k in (rad/s)^(n-k).

        Nothing cancels in the products since the real parts of all poles have one sign.

        >>> from symnet.shape.families.bessel import bessel
        >>> [round(c, 9) for c in bessel(3).denominator()]
        [15.0, 15.0, 6.0, 1.0]
        """
        total = [1.0]
        for w, q in self.sections():
            factor = [w, 1.0] if q is None else [w * w, w / q, 1.0]
            product = [0.0] * (len(total) + len(factor) - 1)
            for i, a in enumerate(total):
                for j, b in enumerate(factor):
                    product[i + j] += a * b
            total = product
        return tuple(total)

    def sections(self) -> tuple[tuple[float, float | None], ...]:
        """The first- and second-order sections by growing Q: (w in rad/s, Q), with Q None for a real pole.

        >>> from symnet.shape.families.butterworth import butterworth
        >>> [round(q, 4) for _, q in butterworth(4).sections()]
        [0.5412, 1.3066]
        """
        found: list[tuple[float, float | None]] = []
        for p in self.poles:
            if p.imag == 0:
                found.append((-p.real, None))
            elif p.imag > 0:
                found.append((abs(p), abs(p) / (-2 * p.real)))
        return tuple(found)

    def rows(self) -> tuple[tuple[str, str], ...]:
        """What it is, line by line, as pairs of words and figures with their units."""
        rows = [("prototype", str(self))]
        if self.equation:
            rows.append(("definition", self.equation))
        rows += [(r.label, f"w = {r.w:.6g} rad/s, f = {r.f:.6g} Hz") for r in self.references]
        for w, q in self.sections():
            rows.append(
                ("real pole", f"w = {w:.6g} rad/s")
                if q is None
                else ("pole pair", f"w0 = {w:.6g} rad/s, Q = {q:.5g}")
            )
        for z in self.zeros:
            if z.imag >= 0:
                rows.append(("zero", f"s = {_complex_text(z)} rad/s"))
        rows.append((f"|H| at {PASS_BAND[self.band]}", f"{self.gain:.6g} of the peak"))
        return tuple(rows)


def _complex_text(z: complex) -> str:
    if z.imag == 0:
        return f"{z.real:.6g}"
    real = f"{z.real:.6g} " if z.real else ""
    return f"{real}+- j{z.imag:.6g}"
