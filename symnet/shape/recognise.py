"""Which filter family H(s) is, how nearly, and at which frequencies: the verdict on numbers.

Shapes are compared, not tables: H is divided by its w0, a high-pass is turned into a low-pass by s -> 1/s, and
every family of the catalogue that has members of that order and that number of finite zeros is fitted to it
(:mod:`symnet.shape.matching`). Candidates are ranked by response, those that match before those that do not. The
thresholds, here and in :mod:`symnet.shape.verdict`, say what counts as a match; the figures behind the verdict are
always shown, so that nobody has to believe in the thresholds.

A family with fewer fitted parameters stands before one with more that is hardly nearer, because a free parameter
always makes something of the errors: Butterworth is the Chebyshev of zero ripple.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from typing import TYPE_CHECKING, Any, Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.errors import Fault, NotationError
from symnet.exact.ratio import Ratio
from symnet.exact.roots import Root, roots
from symnet.shape.families import CATALOGUE
from symnet.shape.families.curves import attenuation
from symnet.shape.families.family import LARGEST_ORDER, Family
from symnet.shape.families.prototype import HIGH_PASS, LOW_PASS, W0, W3DB, Reference
from symnet.shape.matching import Fit, Target, fit, fit_by_poles
from symnet.shape.verdict import Candidate, Recognition, hertz

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer
    from symnet.shape.stated import Conditions

__all__ = ["Candidate", "Recognition", "recognise"]

Number: TypeAlias = int | float | Fraction | Decimal | str

#: "Exactly", where exact arithmetic does not decide: poles within this, far above the rounding of doubles and far
#: below any printed digits.
EXACT_PERCENT: Final = 1e-7

#: A match with fewer fitted parameters stands first when its response error is below the first of these, which is
#: what 1 % parts do to it, or below that of the other times the second: with 5 % parts the fit of a ripple halves
#: the response error of a Butterworth ladder in every second draw without meaning anything.
SIMPLER_DB: Final = 0.05
SIMPLER_RATIO: Final = 10.0
#: Where nothing matches, a nearest one with more parameters must at least halve the error of the simpler one.
SIMPLER_RATIO_WITHOUT_MATCH: Final = 2.0


def recognise(
    h_or_descending: Transfer | Ratio | Sequence[Number] | NDArray[Any],
) -> Recognition | Conditions:
    """Which family H(s) is: Butterworth, Bessel or Chebyshev, low-pass or high-pass, of any order, or none of these.

    Parameters
    ----------
    h_or_descending
        A transfer function; or the coefficients of a denominator D(s) in *descending* powers of s, as textbooks
        print them ([1, 6, 15, 15] is s^3 + 6 s^2 + 15 s + 15), for the low-pass 1/D(s). Decimal numbers are taken
        as printed, so 0.1 is 1/10.

    Returns
    -------
    Recognition
        When every value is known: the verdict, the candidates by growing response error, their frequencies in
        rad/s and Hz, and three distances (:class:`Candidate` defines them). The words: "exactly" when the
        coefficients satisfy the family's equations in exact arithmetic or the poles agree within 1e-9; "nearest"
        when H agrees in response (0.1 dB and 3 % of the group delay over the pass band) or in its poles (5 %, and
        0.5 dB in response; or 2 % alone); else "none of these". Order 1 has one shape only and is called first order; order 2 is a matter of Q.
    Conditions
        When H has symbols without a value: the exact conditions on them for each family.

    Raises
    ------
    NotationError
        Coefficients that are no numbers, or none that is not 0.

    Examples
    --------
    >>> print(recognise([1, 2, 2, 1]))
    Butterworth, order 3, low-pass, exactly
    >>> found = recognise([1, 6, 15, 15])
    >>> print(found)
    Bessel, order 3, low-pass, exactly
    >>> for label, text in found.rows()[1:6]:
    ...     print(f"{label}: {text}")
    w0, geometric mean of the pole magnitudes: 2.4662 rad/s, 392.51 mHz
    -3.0103 dB relative to DC: 1.7557 rad/s, 279.42 mHz
    unit-delay frequency 1/T, T the group delay at DC: 1 rad/s, 159.15 mHz
    normalised: unit-delay frequency 1/T, T the group delay at DC, is 1 rad/s
    |H| at w = 1 rad/s: -0.903 dB relative to DC
    >>> print(recognise([1, 1.25291, 1.53490, 0.71569]).match.name)
    Chebyshev, order 3, ripple 0.5 dB, low-pass

    Two equal Butterworth sections of order 2 are no Butterworth of order 4:

    >>> print(recognise([1, 2 * 2**0.5, 4, 2 * 2**0.5, 1]))
    none of these; nearest is ...
    """
    if isinstance(h_or_descending, Ratio):
        return _on_numbers(h_or_descending)
    if isinstance(h_or_descending, Sequence | np.ndarray):
        return _on_numbers(_all_pole(h_or_descending))
    if not h_or_descending.is_numeric:
        from symnet.shape.conditions import conditions

        return conditions(h_or_descending)
    return _on_numbers(h_or_descending.numeric())


def _all_pole(descending: Sequence[Number] | NDArray[Any]) -> Ratio:
    """1/D(s) from the coefficients of D, highest power first."""
    try:
        ascending = [Fraction(str(c)) if not isinstance(c, Fraction) else c for c in descending][::-1]
    except (ValueError, ZeroDivisionError):
        raise NotationError(
            Fault(
                f"the coefficients of a denominator are numbers, highest power first; these are not: {descending!r}",
                hint="write 1 kohm * 1 nF as its value in seconds, 1e-6",
            )
        ) from None
    if isinstance(descending, str) or not any(ascending):
        raise NotationError(f"a denominator has a coefficient that is not 0; {descending!r} has none")
    return Ratio.of((Fraction(1),), tuple(ascending))


def _on_numbers(h: Ratio) -> Recognition:
    order = len(h.den) - 1
    refusal = _not_compared(h, order)
    if refusal:
        return Recognition(refusal, order)
    poles = _values(roots(h.den))
    views = [
        (band, target, _candidates(target, band, h, order)) for band, target in _as_low_pass(h, order, poles)
    ]
    views = [view for view in views if view[2] or (order == 1 and not view[1].zeros)]
    if not views:
        return Recognition(_other_zeros(h, order), order)
    band, target, candidates = min(views, key=lambda view: view[2][0].response_error_db if view[2] else 0.0)
    own = _own_references(target, band)
    level = _level_at_1(target)
    if order == 1:
        return Recognition(
            f"first order, {band}: f0 = f3dB = {hertz(own[0].w)}", 1, band, (), None, own, level
        )
    q = _quality(h) if order == 2 else None
    return Recognition(_verdict(candidates, q), order, band, candidates, q, own, level)


def _own_references(target: Target, band: str) -> tuple[Reference, ...]:
    """w0 and the -3.0103 dB frequency of H itself; those of the low-pass are the inverses for a high-pass."""
    edges = ((W0, target.w0), (W3DB, target.w3dB * target.w0))
    return tuple(Reference.named(name, w if band == LOW_PASS else 1 / w, band=band) for name, w in edges)


def _values(found: Sequence[Root]) -> tuple[complex, ...]:
    return tuple(root.value for root in found for _ in range(root.multiplicity))


def _not_compared(h: Ratio, order: int) -> str:
    """Why nothing can be said, or an empty text."""
    if not h.num:
        return "H is 0: there is no response to recognise"
    if order > LARGEST_ORDER:
        return f"order {order}: shapes are compared up to order {LARGEST_ORDER}"
    if order == 0 and len(h.num) == 1:
        return "H is a constant: order 0, no poles, no filter family"
    if len(h.num) - 1 > order:
        return (
            f"improper: H grows with s^{len(h.num) - 1 - order} towards high frequencies, "
            "which no filter family does"
        )
    for root in roots(h.den):
        if root.value == 0:
            return "a pole at s = 0 (an integrator): no filter family has one"
        if root.value.real >= 0:
            where = "on the jw axis" if root.value.real == 0 else "in the right half plane"
            return f"unstable: a pole {where}, at {_point(root.value)}; no filter family has one"
    return ""


def _other_zeros(h: Ratio, order: int) -> str:
    """What kind of response it is that no family of the catalogue has."""
    n, z = len(h.num) - 1, next(k for k, c in enumerate(h.num) if c)
    mirrored = [c if k % 2 == 0 else -c for k, c in enumerate(h.num)]
    if n == order and all(a * h.den[0] == b * mirrored[0] for a, b in zip(mirrored, h.den, strict=True)):
        kind = "an all-pass"
    elif z and n == z and n < order:
        kind = f"a band-pass ({_times(z)} at s = 0, {_times(order - n)} at infinite frequency)"
    else:
        kind = f"a response with {_times(n - z)} at finite frequencies other than 0"
    return f"{kind}: not a low-pass or high-pass without finite zeros, so not compared in this release"


def _times(n: int) -> str:
    return "one zero" if n == 1 else f"{n} zeros"


def _as_low_pass(h: Ratio, order: int, poles: tuple[complex, ...]) -> Iterator[tuple[str, Target]]:
    """H as a low-pass to compare: itself if H(0) is not 0, and by s -> 1/s if H is not 0 at infinite frequency."""
    zeros = [z for z in _values(roots(h.num)) if z]
    if h.num[0]:
        target = Target.of(poles, zeros)
        if target is not None:
            yield LOW_PASS, target
    if len(h.num) - 1 == order:
        target = Target.of([1 / p.conjugate() for p in poles], [1 / z.conjugate() for z in zeros])
        if target is not None:
            yield HIGH_PASS, target


def _candidates(target: Target, band: str, h: Ratio, order: int) -> tuple[Candidate, ...]:
    if order < 2:
        return ()
    ascending = h.den if band == LOW_PASS else h.den[::-1]
    found = []
    for family in CATALOGUE:
        if not family.has_order(order) or family.finite_zeros(order) != len(target.zeros):
            continue
        found.append(_candidate(family, fit(family, target), band))
    if not any(c.matches for c in found):
        by_poles = [
            _candidate(c.family, fit_by_poles(c.family, target), band) for c in found if c.prototype.settings
        ]
        found = [next((p for p in by_poles if p.family is c.family and p.matches), c) for c in found]
    # a ripple that vanishes is Butterworth, and is said once
    simplest = min((len(c.prototype.settings) for c in found), default=0)
    found = [c for c in found if not c.is_degenerate or len(c.prototype.settings) == simplest]
    return _ranked([_with_exactness(c, ascending, target) for c in found])


def _with_exactness(candidate: Candidate, ascending: Sequence[Fraction], target: Target) -> Candidate:
    if candidate.pole_error_percent > EXACT_PERCENT:
        return candidate
    if not candidate.is_tested:
        return replace(candidate, exact="as any shape of that order and Q is")
    exact = "in exact arithmetic" if _is_exact(candidate.family, ascending, target) else "poles within 1e-9"
    return replace(candidate, exact=exact)


def _candidate(family: Family, result: Fit, band: str) -> Candidate:
    return Candidate(
        family,
        result.prototype if band == LOW_PASS else result.prototype.high_pass(),
        result.uncertainties,
        result.response_error_db,
        result.delay_error_percent,
        result.pole_error_percent,
    )


def _is_exact(family: Family, ascending: Sequence[Fraction], target: Target) -> bool:
    """Whether the coefficients satisfy the equations of the family in exact arithmetic."""
    conditions = None if target.zeros else family.conditions(ascending)
    return conditions is not None and not any(conditions) and all(p > 0 for p in family.positives(ascending))


def _ranked(candidates: list[Candidate]) -> tuple[Candidate, ...]:
    """Matches first, then by response; then a simpler one before one with more parameters that is hardly nearer."""
    ranked: list[Candidate] = []
    for candidate in sorted(candidates, key=lambda c: (not c.matches, c.response_error_db)):
        place = len(ranked)
        while place and _stands_before(candidate, ranked[place - 1]):
            place -= 1
        ranked.insert(place, candidate)
    return tuple(ranked)


def _stands_before(simpler: Candidate, other: Candidate) -> bool:
    """Whether a candidate with the larger response error goes first all the same, for having fewer parameters."""
    if len(simpler.prototype.settings) >= len(other.prototype.settings):
        return False
    if simpler.matches:
        return simpler.response_error_db <= max(SIMPLER_DB, SIMPLER_RATIO * other.response_error_db)
    return (
        not other.matches
        and simpler.response_error_db <= SIMPLER_RATIO_WITHOUT_MATCH * other.response_error_db
    )


def _verdict(candidates: tuple[Candidate, ...], q: float | None) -> str:
    best = candidates[0]
    quality = "" if q is None else f"; Q = {q:.4g}"
    if not best.matches:
        return f"none of these; nearest is {best.name}: {best.distance}{quality}"
    if best.exact and best.is_tested:
        return f"{best.name}, exactly{quality}"
    if best.exact:
        return f"{best.name}{quality}, for which some {best.prototype.settings[0].name} can always be found"
    also = "".join(f"; exactly {c.name}" for c in candidates[1:] if c.exact and c.is_tested)
    return f"nearest: {best.name}; {best.distance}{quality}{also}"


def _quality(h: Ratio) -> float:
    """Q of the second order: Q^2 = a0 a2/a1^2."""
    return math.sqrt(h.den[0] * h.den[2] / h.den[1] ** 2)


def _level_at_1(target: Target) -> float:
    """|H| in dB at 1 rad/s relative to the pass-band gain."""
    w = 1 / target.w0  # the target is a low-pass divided by its w0; s -> 1/s leaves 1 rad/s where it is
    return -float(attenuation(np.asarray(w), target.poles, target.zeros))


def _point(s: complex) -> str:
    if s.imag == 0:
        return f"s = {s.real:.4g} rad/s"
    real = f"{s.real:.4g} " if s.real else ""
    return f"s = {real}+- j{abs(s.imag):.4g} rad/s"
