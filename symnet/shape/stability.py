"""Whether H is stable: from the places of the poles where there are numbers, from Hurwitz' conditions in symbols.

With positive parts most networks have coefficients and Hurwitz determinants that are sums of positive terms, or that
squares cover; that is a proof for all values. Where a sign stays open, the polynomials that must be positive are given
as conditions. D is taken factor by factor, and of the equivalent sets of conditions that Lienard and Chipart have
found (every other coefficient, every other determinant) the one with the fewest open signs. A mode that H hides is
part of the network all the same: it is judged too, and the worst verdict is that of the whole.
(A. Hurwitz, Math. Ann. 46, 1895; E. J. Routh 1877; A. Lienard, M. H. Chipart, J. Math. Pures Appl. 10, 1914.)
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import lru_cache
from typing import TYPE_CHECKING, Any, Final, Literal, TypeAlias

from symnet.circuit.parts import Branch
from symnet.errors import LimitError
from symnet.exact import dense
from symnet.exact.derive import determinant_of
from symnet.exact.polynomials import by_powers_of_s
from symnet.exact.ratio import Ratio
from symnet.exact.transfer import Transfer
from symnet.quantities import Dimension
from symnet.shape.closed import Coefficient, value_of
from symnet.shape.factors import factors_in_s
from symnet.shape.inequalities import inequality, put_numbers_in, sure_sign
from symnet.shape.plain import MOST_TERMS_BESIDE_NUMBERS, Pair, Plain, Response, plain
from symnet.shape.positive import as_squares, content, divide_content
from symnet.shape.routh import HalfPlanes, half_planes, hurwitz
from symnet.shape.stated import Relation
from symnet.typeset.displayed import Displayed
from symnet.typeset.writing import to_text

if TYPE_CHECKING:
    from symnet.exact.hidden import HiddenMode

__all__ = [
    "Stability",
    "Verdict",
    "cancelled_by_values",
    "stability",
    "stability_of",
    "stability_of_factor",
    "stability_of_mode",
]

Verdict: TypeAlias = Literal["stable", "marginal", "unstable", "conditional", "undecided"]

#: From the best to the worst; what is made of several is as good as the worst of them.
_RANK: Final[tuple[Verdict, ...]] = ("stable", "marginal", "conditional", "undecided", "unstable")
_PASSIVE: Final = (
    "a network of positive R, L and C alone has no pole in the right half plane, whatever the values"
)
_LONGEST_REPR: Final = 300  # characters; all of it is in the text
_MOST_PROVEN: Final = 12  # terms of a discriminant that is written out


@dataclass(frozen=True, slots=True)
class Stability(Displayed):
    """What the poles of H say, and why.

    ``verdict`` is "stable" (all poles in the open left half plane), "marginal" (single poles on the jw axis, none to
    the right), "unstable", "conditional" (at best if and only if every polynomial in ``conditions`` is positive) or
    "undecided". In symbols it holds for all positive values. ``relations`` are the conditions as they are written:
    left, sign, right. ``remark`` says what else is known for all values, as that both poles are always real.

    With numbers: ``planes`` counts the poles to the left, on and to the right of the jw axis, exactly; ``largest_real``
    is the largest real part of a pole in rad/s, negative for a stable H: the slowest part of the answer dies out as
    exp(largest_real t); ``damping`` is the smallest zeta = -Re p/|p| of a pole, Q = 1/(2 zeta). Both are None where
    there is no pole, ``damping`` also where there is a pole at the origin. ``hidden`` are the modes that H does not
    show, each with what it is made of and what becomes of it.
    """

    verdict: Verdict
    reason: str
    conditions: tuple[Coefficient, ...] = ()
    relations: tuple[Relation, ...] = ()
    remark: str = ""
    planes: HalfPlanes | None = None
    largest_real: float | None = None
    damping: float | None = None
    hidden: tuple[tuple[tuple[str, ...], Stability], ...] = ()

    def __str__(self) -> str:
        listed = "; ".join(f"{to_text(left)} {sign} {to_text(right)}" for left, sign, right in self.relations)
        return f"{self.verdict}: {self.reason}{': ' if listed else ''}{listed}"

    def __repr__(self) -> str:
        shown = str(self)
        if len(shown) > _LONGEST_REPR:
            shown = f"{self.verdict}: {self.reason[:_LONGEST_REPR]}"
            shown += f" ({len(self.relations)} conditions, see .relations)" if self.relations else ""
        return f"<{shown}>"


def stability(H: Response) -> Stability:
    """Whether H, and what it hides of its network, is stable; in symbols the conditions on the parts.

    Names that have a value count as numbers while another is free. Where all have one, the verdict is that of the
    numbers, and the conditions in symbols stand beside it.

    >>> from symnet.exact.ratio import Ratio
    >>> stability(Ratio.of([1], [1, 2, 2, 1]))
    <stable: all 3 poles in the left half plane>
    >>> stability(Ratio.of([1], [1, 0, 1]))
    <marginal: single poles on the jw axis, none to the right of it>
    >>> import symnet as sn
    >>> feedback = sn.network('''
    ...     in -- R1 -- x -- R2 -- p -- C2 -- gnd;  x -- C1 -- out
    ...     hold out = K*p;  drive in;  read out
    ... ''')
    >>> stability(sn.derive(feedback))
    <conditional: stable if and only if: K < 1 + (1 + R2/R1)*C2/C1>
    >>> stability(sn.derive(feedback.with_values(R1="1k", R2="1k", C1="1n", C2="1n")))
    <conditional: stable if and only if: K < 3>
    """
    h = plain(H)
    found = stability_of(h)
    if h.numbers is not None and h.symbols is not None:
        stated = _from_signs(Pair((), h.symbols.den), h.dimensions)
        if stated.verdict == "conditional" and stated.reason.startswith("stable"):
            found = replace(found, conditions=stated.conditions, relations=stated.relations)
        found = replace(found, remark=stated.remark)
    if not isinstance(H, Transfer):
        return found
    if found.verdict in {"conditional", "undecided"} and _is_passive(H):
        found = _of_passive(found, H, h)
    return _with_hidden(found, H)


def stability_of_factor(coefficients: Sequence[Coefficient]) -> Stability:
    """Where the roots of a polynomial in s lie, as of the poles of 1/polynomial; coefficients ascending.

    >>> from fractions import Fraction
    >>> stability_of_factor([Fraction(1), Fraction(-2)])
    <unstable: 1 of 1 poles in the right half plane>
    """
    if all(isinstance(c, Fraction) for c in coefficients):
        return _from_poles(Ratio.of([1], [Fraction(c) for c in coefficients]))
    return _from_signs(Pair((), tuple(coefficients)), {})


def stability_of_mode(mode: HiddenMode, transfer: Transfer) -> Stability:
    """What becomes of a mode that H hides, with the values that its network has."""
    try:
        return stability_of_factor(mode.coefficients(transfer.values))
    except KeyError:
        if mode.factor is None:
            return Stability("undecided", "the mode is too long in symbols; give values and the poles decide")
        return _from_signs(
            Pair((), put_numbers_in(by_powers_of_s(mode.factor), transfer.values)), transfer.dimensions
        )


def cancelled_by_values(H: Transfer) -> Sequence[Fraction]:
    """The factor that N and D, in lowest terms in symbols, have in common once the values are put in; ascending in s.

    Empty where there is none, where a name has no value, and where H is too long to be written out.
    """
    if not H.is_numeric or not H.quotient.is_writable:
        return ()
    n, d = (
        [value_of(coefficient, H.values) for coefficient in by_powers_of_s(polynomial)]
        for polynomial in (H.numerator, H.denominator)
    )
    if len(d) - 1 == H.numeric().order or not any(n) or not any(d):
        return ()
    return Ratio.reduced(n, d)[1]


def stability_of(h: Plain) -> Stability:
    """As :func:`stability`, for plain data: what H itself says."""
    if h.numbers is not None:
        return _from_poles(h.numbers)
    return _from_signs(Pair((), put_numbers_in(h.pair.den, h.values)), h.dimensions)


def _of_passive(found: Stability, H: Transfer, h: Plain) -> Stability:
    """What physics proves where signs do not: energy is only lost, and with one kind of store it cannot swing."""
    kinds = sorted({part.kind for part in H.network.parts if isinstance(part, Branch)})
    if {"C", "L"} <= set(kinds) or not sure_sign(h.pair.den[0]):
        return replace(found, remark=_PASSIVE)
    reason = (
        f"a network of positive {' and '.join(reversed(kinds))} alone has its poles on the negative real axis"
    )
    return Stability("stable", reason, remark=found.remark)


def _is_passive(H: Transfer) -> bool:
    """Whether the network is made of R, L and C alone, none of them negative."""
    parts = H.network.parts
    kinds = all(isinstance(part, Branch) and part.kind in {"R", "L", "C"} for part in parts)
    return kinds and not H.network.couplings and all(value >= 0 for value in H.values.values())


def _hidden(H: Transfer) -> tuple[tuple[tuple[str, ...], Stability], ...]:
    """What H hides: mode by mode, or in numbers as one where H is too long in symbols for that."""
    numbers = all(name in H.values for name in H.naming.generators.names[1:]) and not H.naming.irrational
    if numbers and sum(H.terms) > MOST_TERMS_BESIDE_NUMBERS:
        pieces, determinant = determinant_of(H.network)
        values = [pieces.naming.numbers[name] for name in pieces.naming.generators.names[1:]]
        whole, shown = (dense.primitive(c)[1] for c in (determinant.coefficients(values), H.numeric().den))
        rest = dense.gcd(whole, shown)[1]
        return (((), stability_of_factor([Fraction(c) for c in rest])),) if len(rest) > 1 else ()
    found = tuple((mode.parts, stability_of_mode(mode, H)) for mode in H.hidden)
    common = cancelled_by_values(H)
    return (*found, ((), stability_of_factor(common))) if len(common) > 1 else found


def _with_hidden(found: Stability, H: Transfer) -> Stability:
    hidden = _hidden(H)
    if not hidden:
        return found
    parts, worst = max(hidden, key=lambda one: _RANK.index(one[1].verdict))
    if _RANK.index(worst.verdict) <= _RANK.index(found.verdict):
        return replace(found, hidden=hidden)
    where = f" in {', '.join(parts)}" if parts else ""
    reason = f"H is {found.verdict} ({found.reason}), but a mode that it hides{where} is {worst.verdict} ({worst.reason})"
    return replace(
        found,
        verdict=worst.verdict,
        reason=reason,
        conditions=worst.conditions,
        relations=worst.relations,
        hidden=hidden,
    )


# -- numbers ---------------------------------------------------------------------------------------------------


def _from_poles(ratio: Ratio) -> Stability:
    if not ratio.order:
        return Stability("stable", "no poles")
    planes = half_planes(ratio.den)
    verdict, reason = _judged(planes, ratio.order)
    poles = ratio.poles()
    largest = max(pole.value.real for pole in poles)
    dampings = [-pole.value.real / abs(pole.value) for pole in poles if pole.value]
    damping = min(dampings) if len(dampings) == len(poles) else None
    return Stability(verdict, reason, planes=planes, largest_real=largest + 0.0, damping=damping)


def _judged(planes: HalfPlanes, order: int) -> tuple[Verdict, str]:
    if planes.right:
        return "unstable", f"{planes.right} of {order} poles in the right half plane"
    if planes.repeated > 1:
        return "unstable", "repeated poles on the jw axis"
    if planes.axis:
        return "marginal", "single poles on the jw axis, none to the right of it"
    count = {1: "the pole", 2: "both poles"}.get(order, f"all {order} poles")
    return "stable", f"{count} in the left half plane"


# -- symbols ---------------------------------------------------------------------------------------------------


def _from_signs(pair: Pair, dimensions: Mapping[str, Dimension | None]) -> Stability:
    return _in_symbols(pair, tuple(dimensions.items()))


@lru_cache(maxsize=64)
def _in_symbols(pair: Pair, dimensions: tuple[tuple[str, Dimension | None], ...]) -> Stability:
    m = pair.poles_at_origin
    coefficients = pair.den[m:]
    if m > 1:
        return Stability("unstable", f"{m} poles at the origin")
    if len(coefficients) == 1:
        return Stability("marginal", "a single pole at the origin") if m else Stability("stable", "no poles")
    judged = []
    for factor, times in factors_in_s(coefficients):
        one = _factor(factor)
        if times > 1 and one.verdict == "marginal":
            one = Stability("unstable", "repeated poles on the jw axis, for all positive values")
        judged.append(one)
    worst = max(judged, key=lambda one: _RANK.index(one.verdict))
    found = worst
    if worst.verdict == "conditional":
        conditions = tuple(dict.fromkeys(c for one in judged for c in one.conditions))
        lossless = any(one.verdict == "marginal" or one.reason == "marginal" for one in judged)
        at_best = "marginal" if m or lossless else "stable"
        relations = tuple(inequality(c, dict(dimensions)) for c in conditions)
        origin = " (beside a single pole at the origin)" if m else ""
        found = Stability("conditional", f"{at_best} if and only if{origin}", conditions, relations)
    elif m and worst.verdict == "stable":
        found = Stability("marginal", f"{worst.reason}, beside a single pole at the origin")
    elif m and worst.verdict == "marginal":
        found = Stability("marginal", f"{worst.reason} and one at the origin")
    return replace(found, remark=_remark(coefficients))


def _factor(coefficients: tuple[Coefficient, ...]) -> Stability:
    """The verdict on a polynomial in s that has no root at the origin; its conditions without their relations."""
    signs = [sure_sign(c) for c in coefficients]
    if {1, -1} <= set(signs):
        return Stability("unstable", "the coefficients of D differ in sign for all positive values")
    if not {1, -1} & set(signs):
        return Stability("undecided", "the signs of the coefficients of D depend on the values")
    if -1 in signs:
        coefficients = tuple(-c for c in coefficients)
        signs = [None if one is None else -one for one in signs]
    if 0 in signs:
        return _with_gaps(coefficients, signs)
    n = len(coefficients) - 1
    sets: list[list[int]] = [sorted({0, n, *range(start, n, 2)}) for start in (0, 1)]
    chosen = min(sets, key=lambda ks: sum(signs[k] is None for k in ks))
    wanted = [coefficients[k] for k in chosen if signs[k] is None]
    try:
        determinants, mirrored = hurwitz(coefficients)
    except LimitError as error:
        fault = error.faults[0]
        return Stability("undecided", f"{fault.message}; {fault.hint}")
    if mirrored:
        return Stability("undecided", "poles lie in mirror images about the origin; give values to see where")
    if not all(determinants):
        return Stability("unstable", "a Hurwitz determinant is 0 for all values")
    for determinant in determinants[n % 2 == 1 :: 2]:
        sign = sure_sign(determinant)
        if sign is not None and sign < 0:
            return Stability("unstable", "a Hurwitz determinant is negative for all positive values")
        if sign is None:
            wanted.append(determinant)
    if wanted:
        return Stability("conditional", "stable", tuple(dict.fromkeys(map(_without_content, wanted))))
    return Stability("stable", "for all positive values, by Hurwitz' conditions")


def _with_gaps(coefficients: tuple[Coefficient, ...], signs: Sequence[int | None]) -> Stability:
    """A power of s is missing: never stable. With even powers only the poles may all be on the jw axis."""
    if any(coefficients[1::2]) and any(coefficients[0::2]):
        return Stability("unstable", "a power of s is missing in D, so that not all poles are to the left")
    if len(coefficients) > 5 or None in signs[0::2]:
        return Stability("undecided", "D holds even powers only; give values and the poles decide")
    if len(coefficients) == 3:
        return Stability("marginal", "a pair of poles on the jw axis")
    a, b, c = coefficients[0::2]
    apart = b**2 - 4 * a * c if b else b - 1  # without a term in s^2 a root of s^2 is not negative
    match sure_sign(apart):
        case 1:
            return Stability("marginal", "two pairs of poles on the jw axis")
        case None:
            return Stability("conditional", "marginal", (_without_content(apart),))
        case _:
            return Stability("unstable", "D holds even powers only, and its poles are not on the jw axis")


def _without_content(polynomial: Any) -> Any:
    return divide_content(polynomial, *content(polynomial))


def _remark(coefficients: tuple[Coefficient, ...]) -> str:
    """Whether both poles of the second order are always real, or always a pair, with the proof."""
    if len(coefficients) != 3:
        return ""
    a0, a1, a2 = coefficients
    discriminant = a1**2 - 4 * a0 * a2
    for sign, kind, left in (
        (1, "real", "a1^2 - 4*a0*a2"),
        (-1, "a complex pair", "4*a0*a2 - a1^2"),
    ):
        squares = as_squares(sign * discriminant) if discriminant else None
        if squares is not None and (sign > 0 or squares.is_positive):
            proof = to_text(squares.tree()) if len(discriminant) <= _MOST_PROVEN else "a sum of squares"
            return f"the poles are always {kind}, because {left} = {proof}"
    return ""
