"""Candidates in their order: matches by poles, matches by response, the others; the simpler one where that decides nothing.

A family with fewer fitted parameters stands before one with more that is hardly nearer, because a free parameter
always makes something of the errors: Butterworth is the Chebyshev of zero ripple. A family whose parameter ran to
the end of its range, and which is there another family of the catalogue, is not listed twice.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace
from fractions import Fraction

from symnet.shape.candidate import Candidate
from symnet.shape.families.family import Family
from symnet.shape.families.prototype import HIGH_PASS, LOW_PASS
from symnet.shape.matching import fits, fits_by_poles, rivals
from symnet.shape.thresholds import (
    AS_GOOD_AS_SIMPLER,
    EXACT_PERCENT,
    EXACT_RESPONSE,
    ROUNDING,
    SAME_SHAPE_PERCENT,
    SETTLED,
    SIMPLER_POLES,
    SIMPLER_RATIO,
    SIMPLER_RESPONSE,
    TOLD_APART,
)
from symnet.shape.undoing import View

__all__ = ["candidates", "ranked"]


def candidates(view: View, ascending: Sequence[Fraction] = ()) -> tuple[Candidate, ...]:
    """Every family fitted to this view of H, ranked. ``ascending`` is the exact denominator of H, for exact equations.

    Each family is there once, as its nearest member by response or by poles, whichever is nearer; poles are not asked
    where the response has settled it, or where no other family with parameters comes near.
    """
    found = list(fits(view))
    if min((c.nearness for c in found), default=0.0) > SETTLED:
        near = rivals(view, ranked(found)[0])
        by_poles = {c.family: c for c in fits_by_poles(view, near)}
        found = [min(c, by_poles.get(c.family, c), key=lambda c: c.rank) for c in found]
    found = [c for c in found if not _is_another(c, found)]
    return ranked([_with_exactness(c, view, ascending) for c in found])


def _is_another(candidate: Candidate, found: Sequence[Candidate]) -> bool:
    """Whether a fitted parameter came to the end of its range, where the family is another one with fewer."""
    if not candidate.is_at_the_end:
        return False
    return any(
        len(other.member.values) < len(candidate.member.values) and _are_one_shape(candidate, other)
        for other in found
    )


def _are_one_shape(a: Candidate, b: Candidate) -> bool:
    """Both in the order of their imaginary parts, which pairs what is near."""
    return all(100 * abs(p - q) <= SAME_SHAPE_PERCENT * abs(q) for p, q in zip(a.shape, b.shape, strict=True))


def _with_exactness(candidate: Candidate, view: View, ascending: Sequence[Fraction]) -> Candidate:
    by_roots = max(candidate.pole_error_percent, candidate.zero_error_percent, view.misfit_percent)
    by_response = max(
        candidate.response_error_db, candidate.delay_error_percent, candidate.zero_error_percent
    )
    if not (by_roots <= EXACT_PERCENT or by_response <= EXACT_RESPONSE):
        return candidate
    if not candidate.is_tested:
        return replace(candidate, exact="as any shape of that order and Q is")
    if view.band in {LOW_PASS, HIGH_PASS} and not len(view.zeros) and ascending:
        low_pass = ascending if view.band == LOW_PASS else ascending[::-1]
        if _is_exact(candidate.family, low_pass):
            return replace(candidate, exact="in exact arithmetic")
    what = "poles and zeros" if len(view.zeros) else "poles"
    said = (
        f"{what} within 1e-9" if by_roots <= EXACT_PERCENT else "pass band within 1e-10 dB, poles coincident"
    )
    return replace(candidate, exact=said)


def _is_exact(family: Family, ascending: Sequence[Fraction]) -> bool:
    """Whether the coefficients satisfy the equations of the family in exact arithmetic."""
    conditions = family.conditions(ascending)
    return conditions is not None and not any(conditions) and all(p > 0 for p in family.positives(ascending))


def ranked(found: Sequence[Candidate]) -> tuple[Candidate, ...]:
    """Matches first, of them those by poles; then by nearness, a simpler one before its likes."""
    order: list[Candidate] = []
    for candidate in sorted(found, key=lambda c: (*c.rank[:2], _rounded(c.rank[2]))):
        place = len(order)
        while place and _stands_before(candidate, order[place - 1]):
            place -= 1
        order.insert(place, candidate)
    return tuple(order)


def _rounded(nearness: float) -> float:
    """To four digits, so that rounding ranks nobody: the order of the catalogue does."""
    return float(f"{max(nearness, ROUNDING):.4g}")


def _stands_before(simpler: Candidate, other: Candidate) -> bool:
    """Whether a candidate that is less near goes first all the same, for having fewer parameters.

    Errors of n - 1 numbers in which a family has k parameters shrink by about sqrt((n - 1 - k)/(n - 1)) when these
    are fitted to nothing; so much, times a margin, is no evidence for the family with the parameters.
    """
    if len(simpler.member.values) >= len(other.member.values) or simpler.matches != other.matches:
        return False
    if other.freedom <= 0:  # it can be anything
        return simpler.nearness <= AS_GOOD_AS_SIMPLER
    if other.nearness <= TOLD_APART:
        return simpler.nearness <= SIMPLER_RATIO * other.nearness
    told_by_poles = other.freedom > 1 and (
        simpler.pole_error_percent > SIMPLER_POLES * other.pole_error_percent
        or (other.meets_poles and not simpler.meets_poles)
    )
    if told_by_poles and not _are_one_shape(simpler, other):
        return False
    if simpler.meets_response and simpler.response <= SIMPLER_RESPONSE:
        return True
    shrink = math.sqrt(simpler.freedom / other.freedom)
    return simpler.nearness <= SIMPLER_RATIO * shrink * other.nearness
