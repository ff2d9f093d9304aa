"""H in the standard form that was asked for, as data: powers of s ascending, N and D treated alike.

The forms differ only in what is divided out. Which one a reader wants depends on the trade and on the day, so every
form is one word; setting it in type is the business of the display.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal, TypeAlias, get_args

from symnet.errors import Fault, UndefinedError, UnknownNameError, nearest
from symnet.quantities import HERTZ, SECOND
from symnet.shape.closed import Figure, figure, one, quotient
from symnet.shape.plain import Pair, Plain, Response, plain
from symnet.shape.sections import Sections, sections
from symnet.typeset.displayed import Displayed

__all__ = ["Form", "Style", "form"]

Style: TypeAlias = Literal[
    "coefficients", "constant term 1", "monic", "poles and zeros", "w0/Q", "time constants"
]


@dataclass(frozen=True, slots=True)
class Form(Displayed):
    """H = gain * s^power * N/D in one of the standard forms.

    ``numerator`` and ``denominator`` are coefficients in ascending powers of s; they are whole polynomials, whatever
    the style. For the factored styles ``sections`` holds the factors:

    - "coefficients": N and D as they are, gain 1 and power 0;
    - "constant term 1": poles and zeros at the origin in s^power, N and D begin with 1, gain = b_z/a_m;
    - "monic": the highest coefficients of N and D are 1, gain = b_q/a_n, power 0;
    - "poles and zeros": as monic, with the factors (s - pole) in ``sections``; closed forms in ``Root.closed``;
    - "w0/Q": as constant term 1, factors s/w0 + 1 and s^2/w0^2 + s/(Q w0) + 1;
    - "time constants": as constant term 1, factors 1 + s*tau and 1 + 2 zeta tau s + tau^2 s^2 with tau = 1/w0.

    The gain has the dimension of H times second^power in the styles with constant term 1, and of H times
    (1/second)^(n-q) in the monic ones.
    """

    label: str
    style: Style
    gain: Figure
    power: int
    numerator: tuple[Figure, ...]
    denominator: tuple[Figure, ...]
    sections: Sections | None = None

    def __repr__(self) -> str:
        degrees = f"{len(self.numerator) - 1}/{len(self.denominator) - 1}"
        return f"<{self.label} in the form {self.style!r}, gain {self.gain!r}, s^{self.power}, degrees {degrees}>"


def form(H: Response, style: Style) -> Form:
    """H in a standard form: "coefficients", "constant term 1", "monic", "poles and zeros", "w0/Q", "time constants".

    Raises :class:`~symnet.errors.UnknownNameError` for another word, :class:`~symnet.errors.UndefinedError` for
    H = 0 in a form that divides by its coefficients.

    >>> from symnet.exact.ratio import Ratio
    >>> H = Ratio.of([0, 3], [2, 4])
    >>> f = form(H, "constant term 1")
    >>> f.gain, f.power, f.numerator, f.denominator
    (3/2 = 1.5 s, 1, (1,), (1, 2 s))
    >>> form(H, "monic").gain
    3/4 = 0.75
    >>> form(H, "w0/Q").sections.poles
    (<first order: f0 = 0.07958 Hz>,)
    """
    if style not in get_args(Style):
        known = get_args(Style)
        close = nearest(str(style), known)
        hint = f"Did you mean {close[0]!r}?" if close else "Known: " + ", ".join(repr(word) for word in known)
        raise UnknownNameError(Fault(f"There is no form called {style!r}.", hint))
    h = plain(H)
    pair = h.pair
    if style == "coefficients":
        unit = one(pair.den[-1])
        num, den = (
            tuple(figure(quotient(c, one(c)), h.values, None) for c in coefficients)
            for coefficients in (pair.num, pair.den)
        )
        return Form(h.label, style, Figure(quotient(unit, unit), 1.0), 0, num, den)
    if not pair.num:
        raise UndefinedError(Fault(f"H = 0 has no form {style!r}.", "Is the read connected to the drive?"))
    factored = sections(H) if style in {"poles and zeros", "w0/Q", "time constants"} else None
    if style in {"monic", "poles and zeros"}:
        return _monic(h, pair, style, factored)
    return _constant_term_1(h, pair, style, factored)


def _constant_term_1(h: Plain, pair: Pair, style: Style, factored: Sections | None) -> Form:
    z, m = pair.zeros_at_origin, pair.poles_at_origin
    gain = figure(quotient(pair.num[z], pair.den[m]), h.values, h.dimension * SECOND ** (z - m))
    num, den = (
        tuple(figure(quotient(c, part[0]), h.values, SECOND**k) for k, c in enumerate(part))
        for part in (pair.num[z:], pair.den[m:])
    )
    return Form(h.label, style, gain, z - m, num, den, factored)


def _monic(h: Plain, pair: Pair, style: Style, factored: Sections | None) -> Form:
    q, n = pair.num_degree, pair.order
    gain = figure(quotient(pair.num[-1], pair.den[-1]), h.values, h.dimension * HERTZ ** (n - q))
    num, den = (
        tuple(
            figure(quotient(c, part[-1]), h.values, HERTZ ** (len(part) - 1 - k)) for k, c in enumerate(part)
        )
        for part in (pair.num, pair.den)
    )
    return Form(h.label, style, gain, 0, num, den, factored)
