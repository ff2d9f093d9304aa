"""All-pass responses: judged by their delay, which is twice that of the denominator alone.

H = +-D(-s)/D(s) has the magnitude 1 at every frequency, so only phase and delay can be compared, and both are those of
1/D twice over. The denominator is therefore put through the catalogue like that of a low-pass, and ranked by delay.
The all-pass whose D is the reverse Bessel polynomial of order n is the Pade approximant of exp(-sT) with n poles and
n zeros: its numerator and denominator are exactly these.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace
from fractions import Fraction

from symnet.exact.ratio import Ratio
from symnet.quantities import SECOND, engineering
from symnet.shape.candidate import Candidate, hertz
from symnet.shape.families.prototype import ALL_PASS, UNIT_DELAY, W0, Reference
from symnet.shape.pairing import distance_of_roots
from symnet.shape.placing import AS_FREQUENCY
from symnet.shape.ranking import candidates, ranked
from symnet.shape.thresholds import ZEROS_PERCENT
from symnet.shape.undoing import views
from symnet.shape.verdict import Recognition

__all__ = ["all_pass", "is_all_pass"]


def is_all_pass(poles: Sequence[complex], zeros: Sequence[complex]) -> bool:
    """Whether every zero mirrors a pole, exactly or as nearly as parts of a per cent allow."""
    if len(zeros) != len(poles) or min(z.real for z in zeros) < min(-p.real for p in poles) / 2:
        return False  # zeros of a narrow band-stop are near to the mirrored poles too, but on the jw axis
    return 100 * _unmirrored(poles, zeros) <= ZEROS_PERCENT


def _unmirrored(poles: Sequence[complex], zeros: Sequence[complex]) -> float:
    return distance_of_roots(zeros, [-p.conjugate() for p in poles])


def all_pass(h: Ratio, poles: tuple[complex, ...], zeros: tuple[complex, ...]) -> Recognition:
    """The verdict on an all-pass, exact or nearly one."""
    order = len(poles)
    mirrored = all(
        (-c if k % 2 else c) * h.num[0] == d * h.den[0]
        for k, (c, d) in enumerate(zip(h.den, h.num, strict=True))
    )
    apart = 0.0 if mirrored else 100 * _unmirrored(poles, zeros)
    notes = (
        ()
        if mirrored
        else (("mirrored", f"zeros within {apart:.2g} % of the mirrored poles, so |H| is not flat"),)
    )
    w0 = math.exp(math.fsum(math.log(abs(p)) for p in poles) / order)
    delay = -2 * math.fsum((1 / p).real for p in poles)
    own = (
        Reference.named(W0, w0),
        Reference(UNIT_DELAY, 1 / delay, AS_FREQUENCY),
    )
    said = f"T = {engineering(Fraction(delay), SECOND, digits=5)} of delay at DC"
    kind = "all-pass" if mirrored else "nearly an all-pass"
    sections = tuple(_section(p) for p in poles if p.imag >= 0)
    if order == 1:
        verdict = f"first order, {kind}: f0 = {hertz(w0)} (where the phase is half way), {said}"
        return Recognition(verdict, 1, ALL_PASS, own=own, notes=notes, poles=poles)
    q = math.sqrt(abs(poles[0] * poles[1])) / -(poles[0] + poles[1]).real if order == 2 else None
    view = next(iter(views(poles, ())))
    found = ranked([_turned(c) for c in candidates(view, h.den)])
    best = found[0]
    quality = "" if q is None else f"; f0 = {hertz(w0)}, Q = {q:.4g}"
    if best.exact and not best.is_tested:
        verdict = f"second order, {kind}{quality}, {said}"
    elif best.matches:
        nearness = "exactly" if best.exact else f"nearest; {best.distance}"
        verdict = f"{kind}, D(s) of {best.name.removesuffix(f', {ALL_PASS}')}, {nearness}{_pade(best)}; {said}{quality}"
    else:
        verdict = f"{kind}, order {order}; {said}{quality}; D(s) is none of these, nearest is {best.name}: {best.distance}"
    return Recognition(verdict, order, ALL_PASS, found, q, own, notes=(*notes, *sections), poles=poles)


def _pade(best: Candidate) -> str:
    n = best.member.order
    return (
        f" (the Pade approximant of a delay, {n} poles and {n} zeros)" if best.family.name == "Bessel" else ""
    )


def _turned(c: Candidate) -> Candidate:
    return replace(c, member=replace(c.member, band=ALL_PASS))


def _section(p: complex) -> tuple[str, str]:
    if p.imag:
        return ("section", f"f0 = {hertz(abs(p))}, Q = {abs(p) / (-2 * p.real):.4g}")
    return ("section", f"first order, f0 = {hertz(-p.real)}")
