"""Whether H is stable: from the poles where there are numbers, from Hurwitz' conditions in symbols up to order 4.

With positive parts most networks have coefficients and Hurwitz determinants that are sums of positive terms; that
is a proof for all values. Where a sign stays open, the polynomials that must be positive are given as conditions.
(A. Hurwitz, Math. Ann. 46, 1895; E. J. Routh 1877.)
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Final, Literal, TypeAlias

from symnet.exact.ratio import Ratio
from symnet.shape.closed import Coefficient
from symnet.shape.plain import Pair, Plain, Response, plain, sign

__all__ = ["Stability", "Verdict", "stability", "stability_of_factor"]

Verdict: TypeAlias = Literal["stable", "marginal", "unstable", "conditional", "undecided"]

_HIGHEST_ORDER: Final = 4
_MOST_TERMS: Final = 4000  # of a product in a Hurwitz determinant


@dataclass(frozen=True, slots=True)
class Stability:
    """What the poles of H say, and why.

    ``verdict`` is "stable" (all poles in the open left half plane), "marginal" (single poles on the jw axis, none to
    the right), "unstable", "conditional" (stable if and only if every polynomial in ``conditions`` is positive) or
    "undecided". In symbols it holds for all positive values. Cancelled modes do not show in H and are not counted.
    """

    verdict: Verdict
    reason: str
    conditions: tuple[Coefficient, ...] = ()

    def __repr__(self) -> str:
        return f"<{self.verdict}: {self.reason}>"


def stability(H: Response) -> Stability:
    """The stability of H from its poles.

    >>> from symnet.exact.ratio import Ratio
    >>> stability(Ratio.of([1], [1, 2, 2, 1]))
    <stable: all 3 poles in the left half plane>
    >>> stability(Ratio.of([1], [1, 0, 1]))
    <marginal: single poles on the jw axis, none to the right of it>
    """
    return stability_of(plain(H))


def stability_of_factor(coefficients: Sequence[Coefficient]) -> Stability:
    """Where the roots of a polynomial in s lie, as of the poles of 1/polynomial; coefficients ascending.

    >>> from fractions import Fraction
    >>> stability_of_factor([Fraction(1), Fraction(-2)])
    <unstable: 1 of 1 poles in the right half plane>
    """
    if all(isinstance(c, Fraction) for c in coefficients):
        return _from_poles(Ratio.of([1], [Fraction(c) for c in coefficients]))
    return _from_signs(Pair((), tuple(coefficients)))


def stability_of(h: Plain) -> Stability:
    """As :func:`stability`, for plain data."""
    if h.numbers is not None:
        return _from_poles(h.numbers)
    return _from_signs(h.pair)


def _from_poles(ratio: Ratio) -> Stability:
    poles = ratio.poles()
    if not poles:
        return Stability("stable", "no poles")
    right = sum(pole.multiplicity for pole in poles if pole.real > 0)
    if right:
        return Stability("unstable", f"{right} of {ratio.order} poles in the right half plane")
    on_axis = [pole for pole in poles if pole.is_imaginary]
    if any(pole.multiplicity > 1 for pole in on_axis):
        return Stability("unstable", "repeated poles on the jw axis")
    if on_axis:
        return Stability("marginal", "single poles on the jw axis, none to the right of it")
    count = {1: "the pole", 2: "both poles"}.get(ratio.order, f"all {ratio.order} poles")
    return Stability("stable", f"{count} in the left half plane")


def _from_signs(pair: Pair) -> Stability:
    m = pair.poles_at_origin
    coefficients = pair.den[m:]
    if m > 1:
        return Stability("unstable", f"{m} poles at the origin")
    if len(coefficients) == 1:
        return Stability("marginal", "a single pole at the origin") if m else Stability("stable", "no poles")
    signs = [sign(c) for c in coefficients]
    if {1, -1} <= set(signs):
        return Stability("unstable", "the coefficients of D differ in sign for all positive values")
    if 0 in signs:
        return _with_gaps(coefficients, m)
    if set(signs) <= {-1, None}:
        coefficients = tuple(-c for c in coefficients)
        signs = [None if one is None else -one for one in signs]
    if signs[0] is None and signs[-1] is None:
        return Stability("undecided", "the signs of the coefficients of D depend on the values")
    if len(coefficients) - 1 > _HIGHEST_ORDER:
        return Stability(
            "undecided", f"order {len(coefficients) - 1} in symbols; give values and the poles decide"
        )
    conditions = tuple(c for c, one in zip(coefficients, signs, strict=True) if one is None)
    last = _hurwitz(coefficients)
    if last is not None:
        if isinstance(last, str):
            return Stability("undecided", last)
        positive = _is_positive(last)
        if positive is False:
            return Stability("unstable", "a Hurwitz determinant is negative for all positive values")
        if positive is None:
            conditions = (*conditions, last)
    at_best: Verdict = "marginal" if m else "stable"
    origin = ", beside a single pole at the origin" if m else ""
    if conditions:
        shown = "this polynomial is" if len(conditions) == 1 else f"these {len(conditions)} polynomials are"
        return Stability("conditional", f"{at_best} if and only if {shown} positive{origin}", conditions)
    return Stability(at_best, f"for all positive values, by Hurwitz' conditions{origin}")


def _with_gaps(coefficients: tuple[Coefficient, ...], m: int) -> Stability:
    """A power of s is missing in D': never stable. Order 2 without its middle term is the lossless pair."""
    if len(coefficients) == 3 and sign(coefficients[0] * coefficients[2]) == 1:
        where = " and one at the origin" if m else ""
        return Stability("marginal", f"a pair of poles on the jw axis{where}")
    if any(coefficients[1::2]) and any(coefficients[0::2]):
        return Stability("unstable", "a power of s is missing in D, so that not all poles are to the left")
    return Stability("undecided", "D holds even powers only; give values and the poles decide")


def _hurwitz(a: tuple[Coefficient, ...]) -> Coefficient | str | None:
    """The one determinant beyond the coefficients that decides orders 3 and 4 (Lienard and Chipart 1914)."""
    if len(a) <= 3:
        return None
    if max(map(len, a)) ** (len(a) - 2) > _MOST_TERMS:
        return "Hurwitz' conditions are too long in symbols; give values and the poles decide"
    if len(a) == 4:
        return a[1] * a[2] - a[0] * a[3]
    return a[1] * a[2] * a[3] - a[1] ** 2 * a[4] - a[0] * a[3] ** 2


def _is_positive(polynomial: Coefficient) -> bool | None:
    from symnet.shape.positive import as_squares

    known = sign(polynomial)
    if known is not None:
        return known > 0
    squares = as_squares(polynomial)
    return True if squares is not None and squares.is_positive else None
