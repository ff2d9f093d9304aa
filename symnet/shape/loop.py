"""How far a feedback loop is from swinging: where its gain is 1, and what gain and phase may do before it swings.

T is the return ratio (:mod:`symnet.exact.ports.loop`): positive at DC where the feedback is negative, and the network
swings where T = -1. On the jw axis T = N conj(D)/|D|^2, and both halves of that product are exact polynomials in
x = w^2: |T| = 1 at the positive roots of |N|^2 - |D|^2, and T is real at those of the half that carries j. So all
crossovers are found, each with proof, and none is looked for on a grid. What a margin means hangs on one thing only,
that the network as it stands is stable: this is decided exactly from all its natural frequencies, and where it is not
so there is no margin to be told.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from itertools import zip_longest
from typing import Any, Final, Literal, TypeAlias

from symnet.circuit.network import Network
from symnet.errors import Fault, LimitError, SymnetError, UndefinedError
from symnet.exact import dense
from symnet.exact.doubles import double
from symnet.exact.polynomials import by_powers_of_s
from symnet.exact.ports.figures import Parameter
from symnet.exact.ports.loop import ReturnRatio, return_ratio
from symnet.exact.ratio import Ratio
from symnet.exact.readable.forms import readable
from symnet.exact.roots import Root as Place
from symnet.exact.roots import roots
from symnet.quantities import HERTZ
from symnet.response.axis import halves
from symnet.response.frequency import squared_magnitude
from symnet.shape.closed import Closed, Figure, power_product
from symnet.shape.figures import frequency_of_square, signs_around
from symnet.shape.positive import sign_of
from symnet.shape.stability import Stability, stability_of_factor
from symnet.typeset.displayed import Displayed
from symnet.typeset.length import length
from symnet.typeset.tree import Root, Tree, minus, over, plus

__all__ = ["Crossover", "GainLimit", "LoopGain", "loop_gain"]

Direction: TypeAlias = Literal["falling", "rising", "touching"]

#: What |T| = 1 in symbols may come to before it is left alone.
_MOST_TERMS: Final = 60
_LONGEST_FORMULA: Final = 400


@dataclass(frozen=True, slots=True)
class Crossover:
    """A frequency where |T| = 1: ``w`` in rad/s (exact where w^2 is rational), ``f`` in Hz.

    ``phase`` is that of T in degrees, more than -180 and at most 180; ``distance`` is how far T must turn to reach -1:
    180 degrees + ``phase`` where more lag does it, ``phase`` - 180 degrees (negative) where less lag does it sooner.
    """

    w: Figure
    f: float
    direction: Direction
    phase: float

    @property
    def distance(self) -> float:
        """The signed angle, in degrees, by which T may lag (positive) or lead (negative) before it is -1."""
        return self.phase + 180 if self.phase <= 0 else self.phase - 180

    def __repr__(self) -> str:
        return f"<|T| = 1 at {self.f:.6g} Hz, {self.direction}; phase of T {self.phase:.4g} deg>"


@dataclass(frozen=True, slots=True)
class GainLimit:
    """A frequency where T is real and negative; T times ``factor`` is -1 there. ``where`` is "DC", "inside" or "infinity".

    A factor above 1 says how far the gain may rise, one below 1 how far it may fall.
    """

    where: Literal["DC", "inside", "infinity"]
    w: Figure
    f: float
    factor: float

    @property
    def decibels(self) -> float:
        """20*log10 of the factor."""
        return 20 * math.log10(self.factor)

    def __repr__(self) -> str:
        at = f"{self.f:.6g} Hz" if self.where == "inside" else self.where
        return f"<T = -1 at {at} with {self.factor:.6g} times the gain>"


@dataclass(frozen=True, eq=False)
class LoopGain(Displayed):
    """The feedback around one dependent source.

    ``source`` names it, ``exact`` holds the determinants. ``T`` is the return ratio and ``difference`` the return
    difference 1 + T = D/D0, both exact quotients in s and the names of the parts. What needs numbers is a method.
    """

    source: str
    exact: ReturnRatio

    @property
    def T(self) -> Parameter:
        """The return ratio."""
        return self.exact.ratio

    @property
    def difference(self) -> Parameter:
        """The return difference 1 + T."""
        return self.exact.difference

    def numeric(self) -> Ratio:
        """T as an exact rational function of s; MissingValueError while a name has no value."""
        return self.exact.numeric()

    @cached_property
    def stability(self) -> Stability:
        """Whether the network as it stands is stable, from all its natural frequencies, the drives at zero."""
        return stability_of_factor(self.exact.numbers[1])

    @cached_property
    def _crossovers(self) -> tuple[Crossover, ...]:
        T = self.numeric()
        square = squared_magnitude(T)
        difference = dense.primitive(_difference(square.num, square.den))[1]
        if not difference:
            raise UndefinedError(Fault(f"|T| of {self.source} is 1 at every frequency: it has no crossover"))
        found = [root for root in roots(difference) if root.is_real and root.real > 0]
        crossovers = []
        for root, (before, after) in zip(found, signs_around(difference, found), strict=True):
            direction: Direction = (
                "touching" if before == after else "falling" if before > after else "rising"
            )
            w, f = frequency_of_square(root)
            at = T(1j * (w.value or 0.0))
            crossovers.append(Crossover(w, f, direction, math.degrees(math.atan2(at.imag, at.real))))
        closed = self._closed_crossover
        if closed is not None and len(crossovers) == 1:
            only = crossovers[0]
            crossovers = [Crossover(Figure(closed, only.w.value, HERTZ), only.f, only.direction, only.phase)]
        return tuple(crossovers)

    def crossovers(self) -> tuple[Crossover, ...]:
        """All frequencies where |T| = 1, in rising order. MissingValueError while a name has no value."""
        return self._crossovers

    @cached_property
    def _closed_crossover(self) -> Closed | None:
        try:
            return _closed_crossover(self.T)
        except LimitError:
            return None

    @property
    def crossover_in_symbols(self) -> Tree | None:
        """The angular frequency w where |T| = 1, as a formula, where there is exactly one for all values; else None.

        It is read where |T|^2 = 1 is of first or second degree in w^2, or holds two powers of it only.
        """
        closed = self._closed_crossover
        if closed is not None:
            return closed.tree()
        try:
            return _quadratic_crossover(self.T)
        except LimitError:
            return None

    @cached_property
    def _gain_limits(self) -> tuple[GainLimit, ...]:
        T = self.numeric()
        even, odd = (_times_conjugate(T.num, T.den, part) for part in ("even", "odd"))
        found = []
        zero = Figure(power_product(Fraction(0), Fraction(1), {}), 0.0, HERTZ)
        ends: list[tuple[Literal["DC", "infinity"], Figure, float, Fraction | None]] = [
            ("DC", zero, 0.0, T.num[0] / T.den[0] if T.num and T.den[0] else None),
            (
                "infinity",
                Figure(None, math.inf, HERTZ),
                math.inf,
                T.num[-1] / T.den[-1] if len(T.num) == len(T.den) else None,
            ),
        ]
        inside = []
        square = _squared(T.den)
        for root in _real_roots_apart(odd, even):
            if root.real > 0:
                value = _value(even, root.real) / _value(square, root.real)
                if value < 0:
                    w, f = frequency_of_square(root)
                    inside.append(GainLimit("inside", w, f, double(-1 / value)))
        for where, w, f, value_there in ends:
            if value_there is not None and value_there < 0:
                found.append(GainLimit(where, w, f, double(-1 / value_there)))
        dc = [limit for limit in found if limit.where == "DC"]
        return (*dc, *inside, *(limit for limit in found if limit.where == "infinity"))

    def gain_limits(self) -> tuple[GainLimit, ...]:
        """All frequencies, DC and infinity among them, where T is real and negative, in rising order.

        UndefinedError unless the network is stable: then they are not limits of anything.
        """
        self._needs_stable()
        return self._gain_limits

    def phase_margin(self) -> float:
        """The smallest angle, in degrees, by which T may turn, at a frequency where |T| = 1, before T = -1 there.

        180 degrees + arg T at the crossover, T being positive at DC for negative feedback; where |T| is 1 at several
        frequencies the smallest of the distances, be it by more lag or by less (see :attr:`Crossover.distance`).
        Infinite where |T| is nowhere 1. UndefinedError, with the reason, unless the network is stable.
        """
        self._needs_stable()
        return min((abs(crossover.distance) for crossover in self._crossovers), default=math.inf)

    def gain_margin(self) -> float:
        """By how many dB the gain of the source may rise before the network swings; infinite where it may for ever.

        UndefinedError, with the reason, unless the network is stable.
        """
        return min((each.decibels for each in self.gain_limits() if each.factor > 1), default=math.inf)

    def gain_reduction(self) -> float:
        """By how many dB it may fall, as a positive number, where a fall makes the network swing; else infinite."""
        return min((-each.decibels for each in self.gain_limits() if each.factor < 1), default=math.inf)

    @property
    def _closed_loop(self) -> list[Fraction]:
        """The numerator of 1 + T, without what D and D0 have in common."""
        T = self.numeric()
        return [a + b for a, b in zip_longest(T.num, T.den, fillvalue=Fraction(0))]

    def _needs_stable(self) -> None:
        found = self.stability
        if found.verdict != "stable":
            outside = stability_of_factor(self._closed_loop).verdict == "stable"
            raise UndefinedError(
                Fault(
                    f"the loop of {self.source} has no margins: with its feedback closed the network is "
                    f"{found.verdict}, {found.reason}",
                    "these poles lie outside the loop, which neither makes nor moves them"
                    if outside
                    else "a margin is what is left of stability; make the network stable first",
                    parts=(self.source,),
                )
            )
        if self.numeric().is_zero:
            raise UndefinedError(
                Fault(
                    f"no signal of {self.source} comes back to it: T = 0, there is no loop and no margin",
                    parts=(self.source,),
                )
            )

    def __repr__(self) -> str:
        shown = [str(self.T)] if self.exact.determinant.terms <= _MOST_TERMS else []
        try:
            shown.append(
                f"phase margin {self.phase_margin():.4g} deg, gain margin {self.gain_margin():.4g} dB"
            )
        except SymnetError as error:
            shown.append(error.faults[0].message)
        return f"<loop of {self.source}: {'; '.join(shown)}>"


def loop_gain(network: Network, source: str, symbols: str | Iterable[str] | None = None) -> LoopGain:
    """The loop gain around a dependent source: return ratio, return difference, crossovers and margins.

    ``source`` is the name of a law (``hold ... as amp``), or of a device that holds one (an op amp ``U1`` with a gain
    has the law ``U1.amp``). Drives are at zero: a voltage drive is a wire, a current drive a gap. ``symbols`` as for
    :func:`symnet.derive`.

    Raises UndefinedError for an ideal op amp (make it real: :meth:`Network.with_opamp`), SingularError where nothing
    but the source ties the network down, UnknownNameError, NotationError.

    >>> import symnet as sn
    >>> net = sn.network('''
    ...     # photodiode amplifier (invented)
    ...     drive current into m;  m -- Cin -- gnd;  m -- Rf || Cf -- out
    ...     U1: opamp(plus=gnd, minus=m, out=out, gbw=10 MHz);  read out
    ...     Rf = 100 kohm;  Cin = 20 pF;  Cf = 2 pF
    ... ''')
    >>> loop = loop_gain(net, "U1")
    >>> print(loop.T)
    T = U1.gbw/s * (1 + s*Rf*Cf)/(1 + s*Rf*(Cin + Cf))
    >>> loop.crossovers()
    (<|T| = 1 at 1.11465e+06 Hz, falling; phase of T -121.8 deg>,)
    >>> round(loop.phase_margin(), 2), loop.gain_margin()
    (58.19, inf)
    """
    exact = return_ratio(network, source, symbols)
    return LoopGain(exact.source, exact)


# -- polynomials -----------------------------------------------------------------------------------------------


def _difference(p: Sequence[Any], q: Sequence[Any]) -> list[Any]:
    return [(p[k] if k < len(p) else 0) - (q[k] if k < len(q) else 0) for k in range(max(len(p), len(q)))]


def _product(p: Sequence[Any], q: Sequence[Any]) -> list[Any]:
    total: list[Any] = [0] * (len(p) + len(q) - 1) if p and q else []
    for i, a in enumerate(p):
        for k, b in enumerate(q):
            total[i + k] = total[i + k] + a * b
    return total


def _squared(p: Sequence[Any]) -> list[Any]:
    """|P(jw)|^2 in x = w^2."""
    return _times_conjugate(p, p, "even")


def _times_conjugate(p: Sequence[Any], q: Sequence[Any], part: Literal["even", "odd"]) -> list[Any]:
    """The real part of P(jw) conj(Q(jw)) in x = w^2, or its imaginary part divided by w."""
    (a, b), (c, d) = halves(p), halves(q)
    if part == "even":
        return _difference(_product(a, c), [0, *(-each for each in _product(b, d))])
    return _difference(_product(b, c), _product(a, d))


def _real_roots_apart(p: Sequence[Fraction], q: Sequence[Fraction]) -> list[Place]:
    """The real roots of p at which q is not zero: at the others T is 0 or infinite; none where p is 0 throughout."""
    one, other = (dense.primitive(each)[1] for each in (p, q))
    if not one or not other:
        return []
    common, rest, _ = dense.gcd(one, other)
    while len(common) > 1:
        common, rest, _ = dense.gcd(rest, other)
    return [root for root in roots(rest) if root.is_real]


def _value(p: Sequence[Fraction], x: Fraction) -> Fraction:
    total = Fraction(0)
    for c in reversed(p):
        total = total * x + c
    return total


def _unit_gain(T: Parameter) -> list[tuple[int, Any]]:
    """|N|^2 - |D|^2 by powers of x = w^2, those that are there; nothing where it would be long."""
    n, d = by_powers_of_s(T.numerator), by_powers_of_s(T.denominator)
    if sum(map(len, n)) * sum(map(len, d)) > _MOST_TERMS or not n:
        return []
    return [(k, c) for k, c in enumerate(_difference(_squared(n), _squared(d))) if c]


def _closed_crossover(T: Parameter) -> Closed | None:
    """Where |T|^2 = 1 is a binomial in x = w^2 with terms of opposite sign, its only positive root."""
    there = _unit_gain(T)
    if len(there) != 2:
        return None
    (low, a), (high, b) = there
    signs = sign_of(a), sign_of(b)
    if None in signs or signs[0] == signs[1]:
        return None
    a, b = (c if sign == 1 else -c for c, sign in zip((a, b), signs, strict=True))
    exponent = Fraction(1, 2 * (high - low))
    return power_product(a.ring.one, a.ring.one, {a: exponent, b: -exponent})


def _quadratic_crossover(T: Parameter) -> Tree | None:
    """Where it is a x^2 + b x + c with a and c of opposite sign: sqrt((sqrt(b^2 - 4 a c) - b)/(2 a)), b of any sign."""
    there = _unit_gain(T)
    powers = [k for k, _ in there]
    if len(there) != 3 or powers != list(range(powers[0], powers[0] + 3)):
        return None
    c, b, a = (coefficient for _, coefficient in there)
    signs = sign_of(a), sign_of(c)
    if None in signs or signs[0] == signs[1]:
        return None
    if signs[0] == -1:
        a, b, c = -a, -b, -c
    inner = Root(readable(b * b - 4 * a * c), 2)
    tree = Root(over(plus(inner, minus(readable(b))), readable(2 * a)), 2)
    return tree if length(tree) <= _LONGEST_FORMULA else None
