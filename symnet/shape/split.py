"""Split poles: when real poles lie far apart, each is a ratio of two neighbouring coefficients.

D = a_0 + a_1 s + ... with all poles far apart is nearly a_0 (1 + s a_1/a_0)(1 + s a_2/a_1) ..., so that every pole has
a formula in the parts that no root sign spoils. How far apart is told by the separations r_k = tau_k/tau_(k+1) =
a_k^2/(a_(k-1) a_(k+1)) of the neighbouring time constants tau_k = a_k/a_(k-1): to first order the formula for pole k
is off by 1/r_(k-1) - 1/r_k of it. When every r_k is above 4 and all coefficients are positive, the poles are real and distinct
(D. C. Kurtz, "A sufficient condition for all the roots of a polynomial to be real", American Mathematical Monthly 99
(1992), 259-263, from memory); at 10 and above the formulas are within some ten per cent (common practice, no source).
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.errors import Fault, UndefinedError
from symnet.exact.doubles import double
from symnet.exact.roots import Root, roots
from symnet.quantities import HERTZ, SECOND
from symnet.response.frequency import in_numbers
from symnet.shape.closed import Coefficient, Figure, figure, quotient, value_of
from symnet.shape.plain import Pair, Response, plain
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from symnet.typeset.tree import Tree

__all__ = ["FAR_APART", "SplitPole", "SplitPoles", "split_poles"]

#: Time constants that differ at least by this factor count as far apart (common practice, no source).
FAR_APART: Final = 10


@dataclass(frozen=True, slots=True)
class SplitPole:
    """One pole: ``approximation`` = -a_(k-1)/a_k in rad/s, ``tau`` = a_k/a_(k-1) in s, and the ``exact`` one beside."""

    approximation: Figure
    tau: Figure
    exact: Root
    error_percent: float
    """The approximate pole minus the exact one, in per cent of the exact one: positive when it is too fast."""

    @property
    def f0(self) -> float:
        """|p|/2 pi of the exact pole in Hz."""
        return abs(self.exact.value) / (2 * math.pi)

    def __repr__(self) -> str:
        return (
            f"<pole {self.approximation!r}, exact {self.exact.value.real:.6g}, {self.error_percent:+.2g} %>"
        )


@dataclass(frozen=True, slots=True)
class SplitPoles(Displayed):
    """H = N/D with D as a product of first-order factors, for poles that are real and far apart.

    ``poles`` are in the order of their size, ``at_origin`` counts those at s = 0, which stand apart and are exact.
    ``separations`` are tau_k/tau_(k+1), one less than there are poles. ``tree`` is the split form as a formula.
    """

    label: str
    poles: tuple[SplitPole, ...]
    at_origin: int
    separations: tuple[float, ...]
    tree: Tree

    @property
    def far_apart(self) -> bool:
        """Whether every time constant is at least ten times the next one: the criterion for using this form."""
        return all(separation >= FAR_APART for separation in self.separations)

    @property
    def error_percent(self) -> float:
        """The largest error of a pole in per cent."""
        return max(abs(pole.error_percent) for pole in self.poles)

    def __repr__(self) -> str:
        apart = "" if self.far_apart else "NOT far apart: "
        return f"<{self.label}, {apart}{len(self.poles)} split poles within {self.error_percent:.2g} %>"


def split_poles(H: Response) -> SplitPoles:
    """Every real pole as -a_(k-1)/a_k in the names of the parts, with the exact pole and the error in per cent.

    p_k = -a_(k-1)/a_k approximately, for D = s^m (a_0 + a_1 s + ... + a_n s^n). The form is for poles that are far
    apart; :attr:`SplitPoles.far_apart` says whether they are, and the errors say what comes of it if they are not.

    Raises :class:`~symnet.errors.MissingValueError` while a name has no number, and
    :class:`~symnet.errors.UndefinedError` for H = 0, for an H without poles away from the origin, for complex pairs
    and for a coefficient that is 0.

    >>> import symnet as sn
    >>> H = sn.derive(sn.network('''
    ...     in -- R1 -- a -- R2 -- out;  a -- C1 -- gnd;  out -- C2 -- gnd;  drive in;  read out
    ...     R1 = 1 kohm;  R2 = 100 kohm;  C1, C2 = 10 nF                   # (invented)
    ... '''))
    >>> found = split_poles(H)
    >>> for pole in found.poles:
    ...     print(pole)
    <pole -1/(R1*C1 + (R1 + R2)*C2) = -980.392 1/s, exact -990.001, -0.97 %>
    <pole -((1/R1 + 1/R2)/C1 + 1/(R2*C2)) = -102000 1/s, exact -101010, +0.98 %>
    >>> found.separations, found.far_apart
    ((104.04,), True)
    """
    in_numbers(H)
    h = plain(H)
    pair = h.pair
    numbers = tuple(value_of(c, h.values) for c in pair.den)
    if not pair.num or not any(value_of(c, h.values) for c in pair.num):
        raise UndefinedError(Fault("H = 0 has no poles.", "Is the read connected to the drive?"))
    m = next(k for k, c in enumerate(numbers) if c)
    last = max(k for k, c in enumerate(numbers) if c)
    if m == last:
        away = " away from the origin" if m else ""
        raise UndefinedError(Fault(f"H has no poles{away}, so that there is nothing to split."))
    values = numbers[m : last + 1]
    exact = _real(values)
    missing = [m + k for k, c in enumerate(values) if not c]
    if missing:
        raise UndefinedError(
            Fault(
                f"The coefficient of s^{missing[0]} in the denominator is 0: its ratio to its neighbours is no pole.",
                "sections(H) has the exact poles.",
            )
        )
    poles = []
    for k, root in enumerate(exact):
        below, above = pair.den[m + k], pair.den[m + k + 1]
        place = -values[k] / values[k + 1]
        error = 100 * double(place / root.real - 1)
        approximation = figure(quotient(-below, above), h.values, HERTZ)
        poles.append(SplitPole(approximation, figure(quotient(above, below), h.values, SECOND), root, error))
    separations = tuple(
        abs(double(values[k] ** 2 / (values[k - 1] * values[k + 1]))) for k in range(1, len(values) - 1)
    )
    return SplitPoles(h.label, tuple(poles), m, separations, _tree(pair, m, poles))


def _real(values: Sequence[Fraction]) -> list[Root]:
    """The roots, a repeated one as often as it occurs; UndefinedError when some are complex, saying which."""
    found = roots(values)
    pairs = [root for root in found if root.imag > 0]
    if pairs:
        shown = "; ".join(_in_words(root) for root in pairs[:4])
        more = f"; and {len(pairs) - 4} more" if len(pairs) > 4 else ""
        raise UndefinedError(
            Fault(
                f"Complex poles cannot be split into real ones: {shown}{more}.",
                "sections(H) gives each pair its f0 and Q.",
            )
        )
    return [root for root in found for _ in range(root.multiplicity)]


def _in_words(root: Root) -> str:
    size, real = abs(root.value), root.value.real
    quality = "on the jw axis" if root.is_imaginary else f"Q = {size / (-2 * real):.4g}"
    place = f"{real:.5g} ± j{root.value.imag:.5g} rad/s" if real else f"± j{root.value.imag:.5g} rad/s"
    return f"the pair {place} (f0 = {size / (2 * math.pi):.5g} Hz, {quality})"


def _tree(pair: Pair, m: int, poles: Sequence[SplitPole]) -> Tree:
    """N/(s^m a_m) over the product of 1 + s*tau."""
    from symnet.typeset.tree import ONE, Atom, over, plus, power, times

    s = Atom("s")
    factors = []
    for pole in poles:
        assert pole.tau.closed is not None  # noqa: S101 - made by quotient()
        factors.append(plus(ONE, times(s, pole.tau.closed.tree())))
    return over(_polynomial(pair.num), times(power(s, m), _polynomial((pair.den[m],)), *factors))


def _polynomial(coefficients: Sequence[Coefficient]) -> Tree:
    from symnet.exact.readable.forms import readable
    from symnet.typeset.tree import Atom, number, plus, power, times

    if isinstance(coefficients[0], Fraction):
        return plus(*(times(number(c), power(Atom("s"), k)) for k, c in enumerate(coefficients) if c))
    s = coefficients[0].ring.gens[0]
    return readable(sum((c * s**k for k, c in enumerate(coefficients)), coefficients[0].ring.zero))
