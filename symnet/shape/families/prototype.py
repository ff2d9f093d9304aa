"""A member of a filter family as a value: its poles and zeros and every frequency reference it has.

Filter tables disagree about what "unit frequency" means: the -3 dB point, the edge of the ripple, the inverse of
the delay, the geometric mean of the poles. A :class:`Prototype` therefore carries all of them as data, each with
a label that says what it is, and is moved from one to another by :meth:`Prototype.scaled` alone. Invariants:
poles are sorted and come in conjugate pairs; every reference belongs to exactly these poles.
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Callable, Iterable
from dataclasses import dataclass, field, replace
from typing import Any, Final, TypeAlias, overload

import numpy as np
from numpy.typing import NDArray
from sympy import Expr

from symnet.errors import Fault, NotationError, UnknownNameError, nearest
from symnet.shape.families.curves import geometric_mean, group_delay, last_crossing
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
    "Prototype",
    "Reference",
    "Setting",
    "in_order",
    "with_common_references",
]

LOW_PASS: Final = "low-pass"  # noqa: S105 - a band
HIGH_PASS: Final = "high-pass"  # noqa: S105
BAND_PASS: Final = "band-pass"  # noqa: S105
BAND_STOP: Final = "band-stop"
ALL_PASS: Final = "all-pass"  # noqa: S105

W0: Final = "w0"
W3DB: Final = "w3dB"
W3DB_PEAK: Final = "w3dB_peak"
RIPPLE_EDGE: Final = "ripple_edge"
STOP_EDGE: Final = "stop_edge"
PHASE_LINE: Final = "phase_line"
PHASE_EDGE: Final = "phase_edge"
UNIT_DELAY: Final = "unit_delay"
CENTRE: Final = "centre"

#: Where the level of the pass band is counted from.
PASS_BAND: Final = {
    LOW_PASS: "DC",
    HIGH_PASS: "infinite frequency",
    BAND_PASS: "the centre",
    BAND_STOP: "DC",
    ALL_PASS: "every frequency",
}

_LABELS: Final = {
    W0: "w0, geometric mean of the pole magnitudes",
    W3DB: "-3.0103 dB relative to DC",
    W3DB_PEAK: "-3.0103 dB relative to the ripple peak",
    RIPPLE_EDGE: "ripple edge",
    STOP_EDGE: "stop-band edge",
    PHASE_LINE: "1/T, T the slope of the straight line that the phase keeps to",
    PHASE_EDGE: "edge of the linear phase",
    UNIT_DELAY: "unit-delay frequency 1/T, T the group delay at DC",
}
_HIGH_PASS_LABELS: Final = _LABELS | {
    W3DB: "-3.0103 dB relative to infinite frequency",
    PHASE_LINE: "T of the low-pass that s -> 1/s gives (the slope of its line of phase), as a frequency",
    PHASE_EDGE: "edge of the linear phase of the low-pass that s -> 1/s gives",
    UNIT_DELAY: "T of the low-pass that s -> 1/s gives (its group delay at DC), as a frequency",
}

_Complexes: TypeAlias = NDArray[np.complex128]


@dataclass(frozen=True, slots=True)
class Reference:
    """One frequency that a table may be normalised to: its name, the angular frequency w in rad/s, its label."""

    name: str
    w: float
    label: str

    @classmethod
    def named(cls, name: str, w: float, note: str = "", band: str = LOW_PASS) -> Reference:
        """The reference of that name with its usual label, and a note in brackets where there is more to say."""
        label = (_LABELS if band == LOW_PASS else _HIGH_PASS_LABELS)[name]
        return cls(name, w, label + (f" ({note})" if note else ""))

    @property
    def f(self) -> float:
        """The frequency in Hz."""
        return self.w / (2 * math.pi)


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

    ``poles`` and ``zeros`` are in rad/s. ``gain`` is |H| at DC (of a high-pass: at infinite frequency) when the
    largest |H| in the pass band is 1. ``exact`` holds the denominator as exact numbers, ascending powers of s,
    where they can be read by a person; otherwise it is None. More digits than doubles have: :meth:`precise`.

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
    exact: tuple[Expr, ...] | None = field(default=None, compare=False, repr=False)
    refined: Callable[[int], tuple[tuple[Any, ...], tuple[Any, ...]]] | None = field(
        default=None, compare=False, repr=False
    )

    def __repr__(self) -> str:
        return f"<Prototype: {self}>"

    def __str__(self) -> str:
        settings = "".join(f", {setting}" for setting in self.settings)
        return f"{self.family}, order {self.order}{settings}, {self.band}"

    def reference(self, name: str) -> Reference:
        """The reference of that name. Raises :class:`~symnet.errors.UnknownNameError` for one it does not have."""
        for reference in self.references:
            if reference.name == name:
                return reference
        known = [reference.name for reference in self.references]
        guess = nearest(name, known)
        hint = f"did you mean {guess[0]}? It" if guess else "it"
        raise UnknownNameError(
            Fault(f"{self} has no frequency reference {name!r}", hint=f"{hint} has {', '.join(known)}")
        )

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
            return self
        return replace(
            self,
            poles=tuple(p * k for p in self.poles),
            zeros=tuple(z * k for z in self.zeros),
            references=tuple(replace(r, w=r.w * k) for r in self.references),
            equation=f"{self.equation}, with s for s*{1 / k:.17g}" if self.equation else "",
            exact=None,
            refined=None,
        )

    def high_pass(self) -> Prototype:
        """The high-pass that s -> 1/s gives: every frequency becomes its inverse, the missing zeros come to s = 0.

        >>> from symnet.shape.families.butterworth import butterworth
        >>> p = butterworth(2).high_pass()
        >>> p.zeros, p.reference("w3dB").label
        ((0j, 0j), '-3.0103 dB relative to infinite frequency')
        """
        if self.band != LOW_PASS:
            raise NotationError(f"{self} is not a low-pass, so s -> 1/s does not make a high-pass of it")
        at_infinity = self.order - len(self.zeros)
        return replace(
            self,
            poles=in_order((1 / p).conjugate() for p in self.poles),
            zeros=(0j,) * at_infinity + in_order((1 / z).conjugate() for z in self.zeros),
            references=tuple(
                replace(r, w=1 / r.w, label=r.label.replace(_LABELS[r.name], _HIGH_PASS_LABELS[r.name]))
                for r in self.references
            ),
            equation=f"{self.equation}, with 1/s for s" if self.equation else "",
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

    def band_pass(self, centre: float, width: float) -> Prototype:
        """The band-pass that s -> (s/c + c/s) c/b makes: centre c in rad/s; 1 rad/s of this low-pass becomes the width b.

        Each pole q gives the two roots of p^2 - q b p + c^2 = 0, each zero likewise, each zero at infinity one at the
        origin. Every frequency reference becomes two edges and their difference, the bandwidth, all in rad/s; their
        geometric mean is c.

        >>> from symnet.shape.families.butterworth import butterworth
        >>> p = butterworth(2).band_pass(1000.0, 100.0)
        >>> round(p.reference("w3dB_bandwidth").w, 9), round(p.reference("w3dB_upper").w, 4)
        (100.0, 1051.2492)
        >>> round(p.decibels(1000.0), 9), round(p.decibels(p.reference("w3dB_lower").w), 4)
        (0.0, -3.0103)
        """
        return self._between(BAND_PASS, centre, width)

    def band_stop(self, centre: float, width: float) -> Prototype:
        """The band-stop that s -> b/(s + c^2/s) makes: centre c in rad/s; 1 rad/s of this low-pass becomes the width b.

        The inverse of each pole and zero goes through the same equation as for :meth:`band_pass`; zeros at infinity
        come to s = +-jc.

        >>> from symnet.shape.families.butterworth import butterworth
        >>> p = butterworth(1).band_stop(1000.0, 100.0)
        >>> p.zeros, p.decibels(0.0), round(p.reference("w3dB_bandwidth").w, 9)
        ((1000j, -1000j), 0.0, 100.0)
        """
        return self._between(BAND_STOP, centre, width)

    def _between(self, band: str, centre: float, width: float) -> Prototype:
        if self.band != LOW_PASS:
            raise NotationError(f"{self} is not a low-pass, so it does not become a {band}")
        if not (centre > 0 and width > 0 and math.isfinite(centre) and math.isfinite(width)):
            raise NotationError(
                f"a {band} has a positive centre and width in rad/s, not {centre!r} and {width!r}"
            )
        stops = band == BAND_STOP

        def split(roots: tuple[complex, ...]) -> Iterable[complex]:
            for root in roots:
                yield from _two_roots(width / root if stops else width * root, centre)

        at_infinity = self.order - len(self.zeros)
        far = (1j * centre, -1j * centre) * at_infinity if stops else (0j,) * at_infinity
        references = [Reference(CENTRE, centre, "centre, geometric mean of the edges")]
        for r in self.references:
            if r.name not in {W0, UNIT_DELAY, PHASE_LINE}:
                references += _edges(r, centre, width / r.w if stops else width * r.w)
        return replace(
            self,
            poles=in_order(split(self.poles)),
            zeros=far + in_order(split(self.zeros)),
            references=tuple(references),
            equation=f"{self.equation}, transformed to a {band}" if self.equation else "",
            band=band,
            exact=None,
            refined=None,
        )

    @overload
    def __call__(self, s: complex) -> complex: ...
    @overload
    def __call__(self, s: _Complexes) -> _Complexes: ...
    def __call__(self, s: complex | _Complexes) -> complex | _Complexes:
        """H(s) of this prototype, its largest magnitude in the pass band being 1; s in rad/s, a number or an array."""
        at = np.asarray(s, dtype=complex)
        if self.band in {BAND_PASS, BAND_STOP}:
            value = self._relative(at) * (
                self.gain / abs(self._relative(np.asarray(0j if self.band == BAND_STOP else self._centre)))
            )
            return value if value.ndim else complex(value)
        value = np.full(at.shape, self.gain, dtype=complex)
        for k, p in enumerate(self.poles):
            z = self.zeros[k] if k < len(self.zeros) else None
            if self.band == HIGH_PASS:
                value *= (at - (z or 0j)) / (at - p)
            else:
                value *= (1 if z is None else 1 - at / z) / (1 - at / p)
        return value if value.ndim else complex(value)

    @property
    def _centre(self) -> complex:
        return 1j * self.reference(CENTRE).w

    def _relative(self, at: _Complexes) -> _Complexes:
        """The product of (s - z) over that of (s - p), each divided by the centre frequency."""
        unit = abs(self._centre)
        value = np.ones(at.shape, dtype=complex)
        for k, p in enumerate(self.poles):
            value *= (((at - self.zeros[k]) / unit) if k < len(self.zeros) else 1) / ((at - p) / unit)
        return value

    def decibels(self, w: float) -> float:
        """20 log10 |H(jw)| in dB at the angular frequency w in rad/s, relative to the largest |H| of the pass band."""
        size = abs(self(1j * w))
        return 20 * math.log10(size) if size else -math.inf

    def delay(self, w: float) -> float:
        """The group delay in seconds at the angular frequency w in rad/s."""
        return float(group_delay(np.asarray(w, dtype=float), self.poles, self.zeros))

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


def _two_roots(sum_of_both: complex, centre: float) -> tuple[complex, complex]:
    """The roots of p^2 - sum p + centre^2 = 0, neither of them lost by cancellation."""
    half = sum_of_both / 2
    root = cmath.sqrt(half * half - centre * centre)
    larger = half + root if abs(half + root) >= abs(half - root) else half - root
    return larger, centre * centre / larger


def _edges(r: Reference, centre: float, width: float) -> tuple[Reference, Reference, Reference]:
    """The two frequencies that the transformation makes of a reference, and their difference."""
    upper = width / 2 + math.hypot(width / 2, centre)
    label = r.label.replace(" relative to DC", " relative to the pass band")
    label = label if "DC" not in label else label.partition(" (")[0]
    return (
        Reference(f"{r.name}_bandwidth", width, f"bandwidth, {label}"),
        Reference(f"{r.name}_lower", centre * centre / upper, f"lower edge, {label}"),
        Reference(f"{r.name}_upper", upper, f"upper edge, {label}"),
    )


def with_common_references(
    poles: tuple[complex, ...], zeros: tuple[complex, ...], own: tuple[Reference, ...]
) -> tuple[Reference, ...]:
    """The references that every low-pass has (w0, -3.0103 dB, unit delay) and the family's own, in a fixed order.

    A family that knows one of the common ones in closed form gives it among its own.
    """
    found = {reference.name: reference for reference in own}
    if W0 not in found:
        found[W0] = Reference.named(W0, geometric_mean(poles))
    if W3DB not in found and (w := last_crossing(poles, zeros)) is not None:
        found[W3DB] = Reference.named(W3DB, w)
    if UNIT_DELAY not in found and (delay := float(group_delay(np.asarray(0.0), poles, zeros))) > 0:
        found[UNIT_DELAY] = Reference.named(UNIT_DELAY, 1 / delay)
    return tuple(found[name] for name in _LABELS if name in found)
