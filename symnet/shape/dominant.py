"""Dominant terms: H shortened by whole terms, with the largest error over a band and what it does to every pole.

With numbers for its parts most terms of an H in symbols are small, and what is left shows which parts make which pole.
Which terms can go is found in :mod:`symnet.shape.shortening`; that the bounds hold is proven in
:mod:`symnet.shape.deviation`; where the poles have gone is told by :mod:`symnet.shape.moves`. All three are reported,
since they differ: half a per cent of a coefficient can be a tenth of a pole, and nothing at all of |H| in the band.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from typing import TYPE_CHECKING, Final, Literal, TypeAlias

from symnet.errors import DimensionError, Fault, LimitError, NotationError, UndefinedError
from symnet.exact.doubles import double
from symnet.exact.polynomials import by_powers_of_s
from symnet.exact.ratio import Ratio
from symnet.exact.roots import Root, roots
from symnet.quantities import HERTZ, NUMBER, Dimension, read_quantity
from symnet.shape.closed import value_of
from symnet.shape.deviation import Deviation, Worst
from symnet.shape.moves import Move, moves
from symnet.shape.plain import Response
from symnet.shape.shortening import Search, all_terms, trimmed
from symnet.typeset.displayed import Displayed
from symnet.typeset.numbers import quantity
from symnet.typeset.polynomials import plain

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.exact.transfer import Transfer
    from symnet.typeset.tree import Tree

__all__ = ["Change", "Dominant", "Dropped", "dominant"]

Side: TypeAlias = Literal["numerator", "denominator"]

_SIDES: Final[tuple[Side, Side]] = ("numerator", "denominator")
_MOST_TERMS: Final = 2000
_MOST_DB: Final = 40.0
_PI: Final = Fraction(314159265358979323846264338327950288419716939937510, 10**50)


@dataclass(frozen=True, slots=True)
class Dropped:
    """A term that was left out: ``term`` with its power of s, and ``percent``, its signed share of its coefficient.

    ``weight`` is the largest part of |N(jw)| or |D(jw)| that it makes in the band. Where the terms of a coefficient
    cancel to 0, the share is infinite.
    """

    side: Side
    power: int
    term: PolyElement
    percent: float
    weight: float

    @property
    def tree(self) -> Tree:
        """The term as a formula."""
        return plain(self.term)

    def __repr__(self) -> str:
        from symnet.typeset.writing import to_text

        return f"<{to_text(self.tree)}: {self.percent:.3g} % of its coefficient in the {self.side}>"


@dataclass(frozen=True, slots=True)
class Change:
    """What the coefficient of s^``power`` was and is: exact, in SI units of ``dimension`` (None when not known)."""

    side: Side
    power: int
    exact: Fraction
    shortened: Fraction
    dimension: Dimension | None

    @property
    def percent(self) -> float:
        """The change in per cent, signed; infinite where the exact one is 0."""
        if self.exact == self.shortened:
            return 0.0
        return 100 * double(self.shortened / self.exact - 1) if self.exact else math.inf

    def __repr__(self) -> str:
        return f"<s^{self.power} in the {self.side}: {self.percent:+.3g} %>"


@dataclass(frozen=True, slots=True)
class Dominant(Displayed):
    """H by its dominant terms, and everything that has changed by it.

    ``numerator`` and ``denominator`` are elements of the ring of H, ``ratio`` is the same in numbers. ``band`` is in
    Hz. ``error_db`` (20 log10 of shortened over exact) and ``error_deg`` (phase of shortened minus exact) are the
    largest ones in the band, with sign and frequency. ``coefficients``, ``poles`` and ``zeros`` hold every
    coefficient, pole and zero of the exact N and D with what has become of it; ``proof`` says how the errors are
    known. ``held`` terms could have gone by their error, but a pole would have crossed into the right half plane.
    """

    label: str
    numerator: PolyElement
    denominator: PolyElement
    ratio: Ratio
    dropped: tuple[Dropped, ...]
    band: tuple[float, float]
    within_db: float
    within_deg: float
    error_db: Worst
    error_deg: Worst
    coefficients: tuple[Change, ...]
    poles: tuple[Move, ...]
    zeros: tuple[Move, ...]
    proof: str
    proven: bool
    exact_terms: tuple[int, int] = field(repr=False)
    held: int = 0

    @property
    def terms(self) -> tuple[int, int]:
        """The number of terms of the shortened numerator and denominator."""
        return len(self.numerator), len(self.denominator)

    @property
    def tree(self) -> Tree:
        """The shortened H as a formula, in its readable form."""
        from symnet.exact.readable.forms import readable_transfer

        return readable_transfer(self.numerator, self.denominator)

    def __repr__(self) -> str:
        (n, d), (exact_n, exact_d) = self.terms, self.exact_terms
        error = f"{self.error_db.value:+.3g} dB, {self.error_deg.value:+.3g} deg"
        band = " to ".join(quantity(f, "Hz").text for f in self.band)
        return f"<{self.label} by {n} over {d} of {exact_n} over {exact_d} terms; largest error {error} from {band}>"


def dominant(
    H: Transfer,
    within_db: float = 0.5,
    within_deg: float = 5.0,
    band: tuple[str | float, str | float] | None = None,
) -> Dominant:
    """H without the terms that do not matter: |H| and phase stay within the bounds over the whole band.

    Parameters
    ----------
    H
        A transfer function with a number for every name.
    within_db, within_deg
        The most by which 20 log10 |H| and the phase may change at any frequency of the band: up to 40 dB and less
        than 90 degrees.
    band
        From where to where: text with a unit, such as ("10 Hz", "100 kHz"), or numbers in Hz. Without it the band
        reaches from a tenth of the lowest to ten times the highest |pole| or |zero|/2 pi away from the origin.

    Returns
    -------
    Dominant
        The shortened H with the largest errors, where they occur, and every coefficient, pole and zero before and
        after. Nothing is dropped where nothing may be.

    Raises
    ------
    MissingValueError
        A name has no number.
    UndefinedError
        H = 0; H in numbers only; no pole or zero to take a band from.
    NotationError, DimensionError
        A bound or a band that is none.
    LimitError
        More than 2000 terms.

    Examples
    --------
    A coefficient hardly changes, and yet the poles move by a tenth:

    >>> import symnet as sn
    >>> H = sn.derive(sn.network('''
    ...     in -- R1 -- a -- R2 -- out;  a -- C1 -- gnd;  out -- C2 -- gnd;  drive in;  read out
    ...     R1 = 1 kohm;  C1 = 100 nF;  R2 = 100 kohm;  C2 = 1 nF        # (invented)
    ... '''))
    >>> short = dominant(H, within_db=0.1, within_deg=1)
    >>> short
    <out/in by 1 over 4 of 1 over 5 terms; largest error +0.0433 dB, +0.143 deg from 144 Hz to 17.59 kHz>
    >>> short.dropped
    (<s*R1*C2: 0.498 % of its coefficient in the denominator>,)
    >>> short.poles
    (<pole 1440.2 Hz -> 1591.5 Hz, 10.5 %>, <pole 1758.9 Hz -> 1591.5 Hz, 9.51 %>)
    """
    _refuse_bounds(within_db, within_deg)
    sides = _written_out(H)
    exact = tuple(tuple(value_of(c, H.values) for c in by_powers_of_s(side)) for side in sides)
    both = trimmed(exact[0]), trimmed(exact[1])
    if not both[0]:
        raise UndefinedError(
            Fault(
                f"H = 0{' with these values' if sides[0] else ''} has no dominant terms.",
                "Is the read connected to the drive?",
            )
        )
    found = roots(both[0]), roots(both[1])
    low, high = _band(band, (*found[0], *found[1]))
    search = Search(all_terms(sides, H), (both[0], both[1]), found, low, high, within_db, within_deg)
    chosen, error = search.run()
    return _result(H, sides, search, chosen, error)


def _refuse_bounds(within_db: float, within_deg: float) -> None:
    for value, unit, most in ((within_db, "dB", _MOST_DB), (within_deg, "degrees", 90.0)):
        if not 0 <= value <= most or value == 90.0:
            raise NotationError(
                Fault(
                    f"the error may be from 0 to {'40 dB' if unit == 'dB' else 'less than 90 degrees'}, not {value:g} {unit}",
                    "dominant(H, within_db=0.5, within_deg=5)",
                )
            )


def _written_out(H: Response) -> tuple[PolyElement, PolyElement]:
    """N and D in symbols, where they are short enough to be gone through term by term."""
    if isinstance(H, Ratio):
        raise UndefinedError(
            Fault(
                "This H holds numbers only: there are no terms to drop.", "Give the H that derive() returns."
            )
        )
    H.numeric()
    n = H.numerator if H.quotient.is_writable else None
    count = sum(H.terms) if n is None else len(n) + len(H.denominator)
    if n is None or count > _MOST_TERMS:
        raise LimitError(
            Fault(
                f"H has {'up to ' if n is None else ''}{count} terms; dominant terms are sought among {_MOST_TERMS} at most.",
                'Keep fewer names as symbols, as in derive(net, symbols="R1 C1").',
            )
        )
    return n, H.denominator


def _band(band: Sequence[str | float] | None, found: Sequence[Root]) -> tuple[Fraction, Fraction]:
    """The two ends in rad/s."""
    if band is None:
        sizes = [Fraction(abs(root.value)) for root in found if root.value]
        if not sizes:
            raise UndefinedError(
                Fault(
                    "H has no pole and no zero away from the origin, so that no band follows from it.",
                    'Give one: dominant(H, band=("10 Hz", "100 kHz")).',
                )
            )
        return min(sizes) / 10, max(sizes) * 10
    if isinstance(band, str) or len(band) != 2:
        raise NotationError(
            Fault(f"a band has two ends, not {band!r}", 'as in band=("10 Hz", "100 kHz"); numbers are in Hz')
        )
    low, high = (_angular(end) for end in band)
    if not 0 < low < high:
        raise NotationError(
            Fault(
                f"a band goes from a lower to a higher frequency, both above 0, not from {band[0]} to {band[1]}",
                'as in band=("10 Hz", "100 kHz"); numbers are in Hz',
            )
        )
    return low, high


def _angular(end: str | float) -> Fraction:
    """The frequency in rad/s; text says its unit, a number is in Hz."""
    if isinstance(end, str):
        given = read_quantity(end)
        if given.dimension not in {HERTZ, NUMBER}:
            raise DimensionError(
                Fault(
                    f"a band ends at a frequency; {end} is in {given.dimension}",
                    'write "10 Hz" or "60 rad/s"',
                )
            )
        return given.value if end.rstrip().endswith("rad/s") else 2 * _PI * given.value
    if not math.isfinite(end):
        raise NotationError(Fault(f"the band ends at {end} Hz", "give a finite frequency"))
    return 2 * _PI * Fraction(end)


# -- the result -------------------------------------------------------------------------------------------------


def _result(
    H: Transfer, sides: Sequence[PolyElement], search: Search, chosen: Sequence[int], error: Deviation
) -> Dominant:
    from symnet.shape.dimensions import coefficient_dimensions

    ring = sides[0].ring
    rest = [dict(side) for side in sides]
    dropped = []
    for i in chosen:
        term = search.terms[i]
        del rest[term.side][term.monomial]
        whole = search.exact[term.side][term.power : term.power + 1]
        percent = (
            100 * double(term.value / whole[0]) if whole and whole[0] else math.inf if term.value else 0.0
        )
        element = ring.from_dict({term.monomial: term.coefficient})
        dropped.append(Dropped(_SIDES[term.side], term.power, element, percent, search.weights[i]))
    n, d = search.shortened(chosen)
    changes = []
    for side, (before, after, dimensions) in enumerate(
        zip(search.exact, (n, d), coefficient_dimensions(H), strict=True)
    ):
        for power, value in enumerate(before):
            if value or after[power : power + 1] not in {(), (value,)}:
                now = after[power] if power < len(after) else Fraction(0)
                changes.append(Change(_SIDES[side], power, value, now, dimensions[power]))
    if error.proven:
        proof = "proven: every frequency at which an error turns was isolated exactly"
    else:
        proof = f"read on a grid of {error.points} points, dense around poles and zeros; too long to prove"
    return Dominant(
        H.label,
        ring.from_dict(rest[0]),
        ring.from_dict(rest[1]),
        Ratio.of(n, d),
        tuple(dropped),
        (double(search.low / (2 * _PI)), double(search.high / (2 * _PI))),
        float(search.within_db),
        float(search.within_deg),
        error.decibels,
        error.degrees,
        tuple(changes),
        moves("pole", search.exact[1], d),
        moves("zero", search.exact[0], n),
        proof,
        error.proven,
        (len(sides[0]), len(sides[1])),
        search.held,
    )
