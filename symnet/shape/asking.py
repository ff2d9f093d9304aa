"""Every question that is put to one H in symbols, and the rows that answer it.

Which families are asked, of which coefficients, depends on the band alone: of a low-pass those of D, of a high-pass the
same in reverse, of a band-pass, a band-stop and an all-pass those of the low-pass behind it, and where N leaves finite
zeros, first of all whether they can go away.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.errors import LimitError
from symnet.exact.readable.forms import readable_ratio
from symnet.shape.bounded import Bounded
from symnet.shape.families import CATALOGUE
from symnet.shape.families.family import Family
from symnet.shape.families.prototype import ALL_PASS, BAND_PASS, BAND_STOP, HIGH_PASS, LOW_PASS, W0, W3DB
from symnet.shape.given import Given
from symnet.shape.irrational import solved_by_coefficients
from symnet.shape.judging import judged
from symnet.shape.positive import sign_of
from symnet.shape.radicals import centre_frequency
from symnet.shape.stated import Condition, Formula
from symnet.shape.topology import forced, poles_forbidden
from symnet.shape.transformed import low_pass_behind, notch_equations
from symnet.shape.zeros import (
    all_pass_rows,
    can_be_all_pass,
    one_pole_one_zero,
    pole_meets_zero,
    quality_row,
    stop_rows,
    without_zeros,
)
from symnet.typeset.tree import Atom

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["Question", "band_in_symbols"]

#: Terms of one product of two coefficients; beyond it the conditions would be pages long.
_MOST_TERMS: Final = 3000


def band_in_symbols(top: Sequence[PolyElement], a: Sequence[PolyElement]) -> str:
    """The band by the powers of s in N alone; "" where finite zeros leave it to the parts."""
    order, present = len(a) - 1, [k for k, c in enumerate(top) if c]
    if present == [0]:
        return LOW_PASS
    if present == [order]:
        return HIGH_PASS
    if present == [order // 2] and order % 2 == 0:
        return BAND_PASS
    if len(present) == 1:
        return "band-pass, of unequal slopes"
    if present[-1] < order:
        return "band-pass with finite zeros" if present[0] else "low-pass with finite zeros"
    return "high-pass with finite zeros" if present[0] else "with finite zeros"


@dataclass(frozen=True, slots=True)
class Question:
    """One H by its coefficients ascending in s, ``top`` of N and ``a`` of D, and all that is known and asked besides.

    ``wanted`` are the generators to solve for, ``places`` what is known of the poles, ``quality`` the Q^2 asked for
    and ``q`` its text.
    """

    top: Sequence[PolyElement]
    a: Sequence[PolyElement]
    band: str
    given: Given
    wanted: frozenset[int]
    places: tuple[str, str]
    quality: Fraction | None
    q: str | Fraction | None

    @property
    def order(self) -> int:
        """The degree of D."""
        return len(self.a) - 1

    def rows(self) -> Iterator[Condition]:
        """The answers, one condition for each family and each other shape."""
        order, a, top = self.order, self.a, self.top
        match self.band:
            case "low-pass" | "high-pass" if order == 1:
                formula = Formula("f0 = f3dB", centre_frequency(a[0], a[1], 1))
                yield Condition(f"first order, {self.band}", "always", formulas=(formula,))
            case "low-pass" | "high-pass":
                indices = range(order + 1) if self.band == LOW_PASS else range(order, -1, -1)
                low = [a[k] for k in indices]
                for family in self.families(order):
                    yield self.of_family(family, low, self.band, indices)
            case "band-pass" if order == 2:
                gain = Formula("H at f0", readable_ratio(*top[1].cancel(a[1])))
                width = Formula("B3dB", centre_frequency(a[1], a[2], 1))
                yield quality_row(f"second order, {self.band}", a, width, gain)
            case "band-pass":
                yield from self.transformed(BAND_PASS)
            case "band-pass, of unequal slopes":
                at_zero = len(top) - 1
                reason = f"{at_zero} of its zeros are at s = 0 and {order - at_zero} at infinite frequency; a transformed low-pass has as many here as there"
                yield Condition("a low-pass transformed to a band-pass", "never", reason=reason)
            case _:
                yield from self.finite()
        if self.quality is not None:
            equation = self.quality.denominator * a[0] * a[2] - self.quality.numerator * a[1] ** 2
            formulas = (Formula("f0", centre_frequency(a[0], a[2], 2)),)
            yield judged(
                f"Q = {self.q}",
                [equation],
                given=self.given,
                wanted=self.wanted,
                formulas=formulas,
                quality=(a, self.quality),
            )

    def finite(self) -> Iterator[Condition]:
        """H with finite zeros: what they make of it, and that families without zeros are out of reach."""
        order, arguments = self.order, (self.top, self.a, self.given, self.wanted)
        yield without_zeros(*arguments)
        meets = pole_meets_zero(*arguments)
        if meets is not None:
            yield meets
        yield from stop_rows(*arguments)
        if order == len(self.top) - 1 == 1 and all(sign_of(c) == 1 for c in (*self.top, *self.a)):
            yield one_pole_one_zero(self.top, self.a)
        if len(self.top) - 1 == order and self.top[0] and can_be_all_pass(self.top, self.a):
            found = all_pass_rows(*arguments)
            yield found
            if found.status == "always" and order > 1:
                for family in self.families(order):
                    yield self.of_family(family, self.a, ALL_PASS, range(order + 1))
        both_ends = len(self.top) - 1 == order and bool(self.top[0])
        if both_ends and order > 2 and order % 2 == 0 and not any(self.top[1::2]):
            yield from self.transformed(BAND_STOP)

    def transformed(self, band: str) -> Iterator[Condition]:
        """The families of the low-pass behind a band-pass or a band-stop."""
        work = max(map(len, self.a)) ** (self.order // 2)
        if work > _MOST_TERMS:
            reason = (
                f"products of {work} terms would have to be written out; give values to most of the parts"
            )
            yield Condition(f"a low-pass transformed to a {band}", "open", reason=reason)
            return
        equations, low = low_pass_behind(self.a)
        if band == BAND_STOP:
            equations += notch_equations(self.top, self.a)
            low = low[::-1]
        m = self.order // 2
        f0 = Formula("f0", centre_frequency(self.a[m - 1], self.a[m + 1], 2))
        yield judged(
            f"a low-pass of order {m} transformed to a {band}",
            equations,
            given=self.given,
            wanted=self.wanted,
            formulas=(f0,),
        )
        for family in self.families(m):
            yield self.of_family(family, low, band, range(m + 1), more=equations, formulas=(f0,))

    def families(self, order: int) -> list[Family]:
        """The families of that order without finite zeros that have conditions in symbols."""
        return [f for f in _all_pole(order) if f.conditions((1,) * (order + 1)) is not None]

    def notes(self) -> list[str]:
        """What the answers presume or leave out."""
        notes = []
        if self.order > 3 or any(sign_of(c) != 1 for c in self.a):
            notes.append(
                "all of this for a stable H: the equations fix |H(jw)|, which an unstable H can have too"
            )
        if self.band in {LOW_PASS, HIGH_PASS} and self.order > 1:
            known = self.families(self.order)
            open_ones = [f.name for f in _all_pole(self.order) if f not in known]
            if open_ones:
                notes.append(f"no polynomial condition in symbols, only with values: {', '.join(open_ones)}")
        elif self.band.endswith("finite zeros") and self.order > 1:
            notes.append(
                "families with finite zeros (inverse Chebyshev, elliptic) are compared with values only"
            )
        return notes

    def of_family(
        self,
        family: Family,
        low: Sequence[PolyElement],
        band: str,
        indices: Sequence[int],
        *,
        more: Sequence[PolyElement] = (),
        formulas: tuple[Formula, ...] = (),
    ) -> Condition:
        """The condition for one family on the coefficients of the low-pass (ascending), ``more`` being asked besides."""
        order = len(low) - 1
        parameters = family.parameters(order)
        some = f" of some {' and '.join(p.name for p in parameters)}" if parameters else ""
        name = f"{family.name}{some}, order {order}, {band}"
        impossible = "" if more else forced(family, low, self.given, indices)
        if order > 2 and not impossible:
            impossible = poles_forbidden(family, self.order, self.places)
        if impossible:
            return Condition(name, "never", reason=impossible)
        if band in {LOW_PASS, HIGH_PASS}:
            formulas = _formulas(family, low, band)
        try:
            wide = [Bounded(c) for c in low]
            equations = [e.element for e in family.conditions(wide) or ()]
            positives = [p.element for p in family.positives(wide)]
        except LimitError as stopped:
            reason = f"{stopped} would have to be written out; give values to most of the parts"
            found = Condition(name, "open", reason=reason)
        else:
            square = _exact_quality(family, order)
            if square is not None:  # order 2 is a matter of Q
                equations = [square.denominator * low[0] * low[2] - square.numerator * low[1] ** 2]
                positives = []
            found = judged(
                name,
                (*more, *equations),
                positives,
                given=self.given,
                wanted=self.wanted,
                formulas=() if parameters else formulas,
                quality=(low, square) if square is not None and not more else None,
            )
        if not parameters and not more and family.exact(order, ()) is None:
            found = solved_by_coefficients(found, family, low, self.given, self.wanted)
        if order <= 2 and found.status in {"if", "open"}:
            impossible = poles_forbidden(family, self.order, self.places)
            return Condition(name, "never", reason=impossible) if impossible else found
        return found


def _all_pole(order: int) -> list[Family]:
    return [f for f in CATALOGUE if f.has_order(order) and not f.finite_zeros(order)]


def _exact_quality(family: Family, order: int) -> Fraction | None:
    """Q^2 of a family of order 2 where that is a rational number."""
    shape = family.prototype(2) if order == 2 and not family.parameters(2) else None
    if shape is None or shape.exact is None:
        return None
    b = shape.exact
    square = b[0] * b[2] / b[1] ** 2
    return Fraction(str(square)) if square.is_Rational else None


def _formulas(family: Family, a: Sequence[PolyElement], band: str) -> tuple[Formula, ...]:
    """f0, f3dB and the delay at DC of a member without parameters, in the parts."""
    order = len(a) - 1
    if family.parameters(order):
        return ()
    shape = family.prototype(order)
    ends = (a[0], a[-1]) if band == LOW_PASS else (a[-1], a[0])
    f0 = centre_frequency(*ends, order)
    ratio = shape.reference(W3DB).w / shape.reference(W0).w
    ratio = ratio if band == LOW_PASS else 1 / ratio
    if abs(ratio - 1) < 1e-12:
        return (Formula("f0 = f3dB", f0),)
    delay = (Formula("T", readable_ratio(*a[1].cancel(a[0]))),) if band == LOW_PASS else ()
    return (Formula("f0", f0), Formula("f3dB", Atom("f0"), ratio), *delay)
