"""Which filter family H(s) is, how nearly, and at which frequencies: the verdict on numbers.

Shapes are compared, not tables. H is seen as a low-pass in every way that its zeros allow: as it is, by s -> 1/s, as a
band-pass or a band-stop (:mod:`symnet.shape.undoing`); an all-pass is judged by its denominator. Every family of the
catalogue that has members of that order and that number of finite zeros is fitted (:mod:`symnet.shape.matching`),
and the candidates are ranked (:mod:`symnet.shape.ranking`). What counts as a match is written down in one place
(:mod:`symnet.shape.thresholds`); the figures behind the verdict are always shown, so that nobody has to believe in
it. What no family stands behind is told by its own figures: shelves by levels and corners, second orders by Q.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from decimal import Decimal
from fractions import Fraction
from typing import TYPE_CHECKING, Any, Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.errors import Fault, NotationError
from symnet.exact.ratio import Ratio
from symnet.exact.roots import roots
from symnet.shape.allpass import all_pass, is_all_pass
from symnet.shape.candidate import Candidate, hertz
from symnet.shape.cascades import equal_sections, halves
from symnet.shape.families.family import LARGEST_ORDER
from symnet.shape.families.prototype import BAND_PASS, HIGH_PASS, LOW_PASS
from symnet.shape.frequencies import level_at_1, own_references
from symnet.shape.ranking import candidates
from symnet.shape.shelving import shelf
from symnet.shape.thresholds import POLES_PERCENT, SETTLED, ZEROS_PERCENT
from symnet.shape.undoing import View, views
from symnet.shape.verdict import Recognition, ties

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer
    from symnet.shape.stated import Conditions

__all__ = ["Candidate", "Recognition", "recognise"]

#: Notes that are told beside the verdict, not in it.
_APART: Final = {"equal sections"}

Number: TypeAlias = int | float | Fraction | Decimal | str


def recognise(
    h_or_descending: Transfer | Ratio | Sequence[Number] | NDArray[Any] | None = None,
    *,
    numerator: Sequence[Number] | NDArray[Any] | None = None,
    poles: Sequence[complex] | NDArray[Any] | None = None,
    zeros: Sequence[complex] | NDArray[Any] = (),
    solve: str = "",
    Q: str | Fraction | None = None,
    f0: str | None = None,
    gain: str | Fraction | None = None,
) -> Recognition | Conditions:
    """Which family H(s) is, in which band and of which order, or none of these.

    Parameters
    ----------
    h_or_descending
        A transfer function; or the coefficients of a denominator D(s) in *descending* powers of s, as textbooks
        print them ([1, 6, 15, 15] is s^3 + 6 s^2 + 15 s + 15). Decimal numbers are taken as printed, so 0.1 is 1/10.
    numerator
        The coefficients of N(s), likewise, where coefficients of D(s) are given; a constant if it is left out.
    poles, zeros
        Instead of all that: every pole and every finite zero in rad/s, repeated ones repeated, conjugates both.
    solve
        For a transfer function: the parts to solve for, as in "R1 R2", whatever values they have; the answer is
        always conditions then. At order 2 one part is solved for Q, two for Q and f0, three for Q, f0 and |gain|.
    Q, f0, gain
        Numbers for these, such as "0.7071" and "1 kHz"; symbols stand for those that are left out.

    Returns
    -------
    Recognition
        When every value is known: the verdict, the candidates by growing response error, their frequencies in
        rad/s and Hz, and their distances (:class:`Candidate` defines them). The words: "exactly" when the
        coefficients satisfy the family's equations in exact arithmetic or the poles agree within 1e-9; "nearest"
        when H agrees in response (0.1 dB and 3 % of the group delay over the pass band, poles within 30 %) or in its poles (5 %, and
        0.5 dB in response; or 2 % alone), and in its finite zeros (5 %); else "none of these". Order 1 has one
        shape only and is called first order; order 2 is a matter of Q. Bands: low-pass, high-pass, band-pass,
        band-stop, all-pass; shelves and peaks are told by their levels and corners.
    Conditions
        When H has symbols without a value, or where parts are solved for: the exact conditions for each family.

    Raises
    ------
    NotationError
        Coefficients or roots that are no numbers, or none that is not 0; a root without its conjugate.

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

    A band-pass, by its poles, with its centre and its bandwidth in rad/s:

    >>> from symnet.shape.families.bessel import bessel
    >>> made = bessel(2).band_pass(w0="1 krad/s", bandwidth="100 rad/s")
    >>> found = recognise(poles=made.poles, zeros=made.zeros)
    >>> found.match.name, round(found.centre.w, 6), round(found.bandwidth.w, 6)
    ('Bessel, order 2, band-pass', 1000.0, 100.0)
    """
    if poles is not None:
        if h_or_descending is not None or numerator is not None:
            raise NotationError(
                "a response is given by H, by coefficients or by poles and zeros, not by two of them"
            )
        return _on_numbers(Ratio.of(_product(zeros, "zeros"), _product(poles, "poles")))
    if h_or_descending is None:
        raise NotationError(
            Fault("there is nothing to recognise", hint="give H, the coefficients of D(s), or poles=[...]")
        )
    if isinstance(h_or_descending, Sequence | np.ndarray):
        den = _ascending(h_or_descending, "a denominator")
        return _on_numbers(
            Ratio.of((Fraction(1),) if numerator is None else _ascending(numerator, "a numerator"), den)
        )
    if numerator is not None:
        raise NotationError("a numerator goes with the coefficients of a denominator, not with an H")
    if isinstance(h_or_descending, Ratio):
        return _on_numbers(h_or_descending)
    asked = bool(solve) or not (Q is None and f0 is None and gain is None)
    if asked or not h_or_descending.is_numeric:
        from symnet.shape.conditions import conditions

        return conditions(h_or_descending, Q, solve=solve, f0=f0, gain=gain)
    return _on_numbers(h_or_descending.numeric())


def _ascending(descending: Sequence[Number] | NDArray[Any], what: str) -> tuple[Fraction, ...]:
    """Coefficients as exact numbers, lowest power first."""
    try:
        ascending = [Fraction(str(c)) if not isinstance(c, Fraction) else c for c in descending][::-1]
    except (ValueError, ZeroDivisionError):
        raise NotationError(
            Fault(
                f"the coefficients of {what} are numbers, highest power first; these are not: {descending!r}",
                hint="write 1 kohm * 1 nF as its value in seconds, 1e-6",
            )
        ) from None
    if isinstance(descending, str) or not any(ascending):
        raise NotationError(f"{what} has a coefficient that is not 0; {descending!r} has none")
    return tuple(ascending)


def _product(given: Sequence[complex] | NDArray[Any], what: str) -> tuple[Fraction, ...]:
    """The polynomial with these roots, doubles taken as the exact numbers they are; pairs within 1e-9 are conjugates."""
    try:
        left = [complex(r) for r in given]
    except (TypeError, ValueError):
        left = [complex(math.nan)]
    if not all(math.isfinite(abs(r)) for r in left):
        raise NotationError(
            Fault(
                f"{what} are finite numbers in rad/s; these are not: {given!r}",
                hint="write [-1, -1+2j, -1-2j]",
            )
        )
    total = [Fraction(1)]
    while left:
        r = left.pop(0)
        factor = [-Fraction(r.real), Fraction(1)]
        if r.imag:
            partner = min(left, key=lambda other: abs(other - r.conjugate()), default=None)
            if partner is None or abs(partner - r.conjugate()) > 1e-9 * abs(r):
                raise NotationError(
                    Fault(f"{what}: {r:.6g} rad/s is without its conjugate", hint=f"add {r.conjugate():.6g}")
                )
            left.remove(partner)
            a, b = Fraction(r.real), Fraction(abs(r.imag))
            factor = [a * a + b * b, -2 * a, Fraction(1)]
        product = [Fraction(0)] * (len(total) + len(factor) - 1)
        for i, x in enumerate(total):
            for j, y in enumerate(factor):
                product[i + j] += x * y
        total = product
    return tuple(total)


def _on_numbers(h: Ratio) -> Recognition:
    order = len(h.den) - 1
    refusal = _not_compared(h, order)
    if refusal:
        return Recognition(refusal, order)
    poles, zeros = _values(h.den), _values(h.num)
    if is_all_pass(poles, zeros):
        return all_pass(h, poles, zeros)
    both_ends = len(zeros) == order and all(zeros)
    if both_ends and any(map(_is_off_axis, zeros)):
        return shelf(h, poles, zeros)
    seen = []
    for view in views(poles, zeros):
        if view.order <= LARGEST_ORDER and not any(map(_is_off_axis, view.zeros.tolist())):
            seen.append((view, _candidates(view, h)))
            if seen[-1][1] and seen[-1][1][0].nearness <= SETTLED:
                break
    seen = [(view, found) for view, found in seen if found or (view.order == 1 and not len(view.low_zeros))]
    if not seen:
        return _without_family(poles, zeros)
    view, found = min(seen, key=_nearness)
    own, level = own_references(view), level_at_1(view)
    q = _quality(poles) if order == 2 else None
    if view.order == 1:
        return Recognition(
            _first_order(view, own, q),
            order,
            view.band,
            (),
            q,
            own,
            level,
            misfit_percent=view.misfit_percent,
            poles=poles,
        )
    notes = _notes(view, poles, zeros, found)
    verdict = _verdict(view, found, q if view.order == 2 else None, notes)
    return Recognition(verdict, order, view.band, found, q, own, level, notes, view.misfit_percent, poles)


def _is_off_axis(zero: complex) -> bool:
    return 100 * abs(zero.real) > ZEROS_PERCENT * abs(zero)


def _candidates(view: View, h: Ratio) -> tuple[Candidate, ...]:
    return candidates(view, h.den) if view.order > 1 else ()


def _nearness(seen: tuple[View, tuple[Candidate, ...]]) -> tuple[bool, float]:
    found = seen[1]
    return (not found[0].matches, found[0].nearness) if found else (False, 0.0)


def _values(ascending: Sequence[Fraction]) -> tuple[complex, ...]:
    return tuple(root.value for root in roots(ascending, closed=False) for _ in range(root.multiplicity))


def _not_compared(h: Ratio, order: int) -> str:
    """Why nothing can be said, or an empty text."""
    if not h.num:
        return "H is 0: there is no response to recognise"
    if order > 2 * LARGEST_ORDER:
        return (
            f"order {order}: shapes are compared up to order {LARGEST_ORDER}, of a band-pass up to twice that"
        )
    if order == 0 and len(h.num) == 1:
        return "H is a constant: order 0, no poles, no filter family"
    if len(h.num) - 1 > order:
        return (
            f"improper: H grows with s^{len(h.num) - 1 - order} towards high frequencies, "
            "which no filter family does"
        )
    for root in roots(h.den, closed=False):
        if root.value == 0:
            return "a pole at s = 0 (an integrator): no filter family has one"
        if root.value.real >= 0:
            where = "on the jw axis" if root.value.real == 0 else "in the right half plane"
            return f"unstable: a pole {where}, at {_point(root.value)}; no filter family has one"
    return ""


def _without_family(poles: tuple[complex, ...], zeros: tuple[complex, ...]) -> Recognition:
    """What kind of response it is that no family of the catalogue has."""
    order, origin = len(poles), sum(1 for z in zeros if not z)
    infinity = order - len(zeros)
    finite = [z for z in zeros if z]
    off = [z for z in finite if _is_off_axis(z)]
    if order > LARGEST_ORDER:
        kind = f"order {order}: shapes are compared up to order {LARGEST_ORDER}"
        return Recognition(kind, order, poles=poles)
    band = BAND_PASS if origin and infinity else HIGH_PASS if origin else LOW_PASS
    ends = f"{_times(origin)} at s = 0, {_times(infinity)} at infinite frequency"
    if band == BAND_PASS and not finite:
        kind = f"a band-pass ({ends}) that is no transformed low-pass"
        if order % 2 == 0 and origin == infinity:
            kind = f"a band-pass ({ends})"
    else:
        kind = f"a {band} with {_times(len(finite))} at finite frequencies other than 0"
    if off:
        where = ", ".join(_point(z) for z in off if z.imag >= 0)
        kind += f", off the jw axis ({where}): none of these, whose finite zeros all lie on it"
        alone = _of_poles(poles, len(poles) if band == HIGH_PASS else 0)
        said = f"{kind}; D(s) alone would be {alone.verdict}" if band != BAND_PASS else kind
        return Recognition(said, order, band, poles=poles, own=alone.own[:1])
    notes = _product_notes(poles, zeros) if band == BAND_PASS and not finite else ()
    verdict = (
        f"{kind}: {notes[0][1]}" if notes else f"{kind}: none of these families has members of this kind"
    )
    return Recognition(verdict, order, band, notes=notes, poles=poles)


def _times(n: int) -> str:
    return "one zero" if n == 1 else f"{n or 'no'} zeros"


def _first_order(view: View, own: Sequence[Any], q: float | None) -> str:
    """The only shape of order 1, in its band; as a band-pass or band-stop it has two poles and a Q."""
    if not view.is_two_sided:
        return f"first order, {view.band}: f0 = f3dB = {hertz(own[0].w)}"
    centre, bandwidth = own[0].w, own[1].w
    return (
        f"second order, {view.band}: f0 = {hertz(centre)}, Q = {q:.4g}, "
        f"-3.0103 dB bandwidth f0/Q = {hertz(bandwidth)}"
    )


def _notes(
    view: View, poles: tuple[complex, ...], zeros: tuple[complex, ...], found: tuple[Candidate, ...]
) -> tuple[tuple[str, str], ...]:
    """Findings besides the families: equal sections, a product of two filters, pole pairs that do not fit."""
    notes: list[tuple[str, str]] = []
    matched = bool(found) and found[0].matches
    if view.is_two_sided and view.misfit_percent > POLES_PERCENT:
        notes.append(
            (
                "transformed low-pass",
                f"no: pole pairs differ by up to {view.misfit_percent:.2g} % (as low-pass poles, in the mean centre)",
            )
        )
    if view.band == BAND_PASS and not matched:
        notes += _product_notes(poles, zeros)
    if not view.is_two_sided and not len(view.zeros):
        equal = equal_sections([complex(p) * (view.w0 if view.band == LOW_PASS else 1) for p in view.poles])
        if equal is not None:
            notes.append(("equal sections", _equal(view, *equal)))
    return tuple(notes)


def _equal(view: View, m: int, few: tuple[complex, ...]) -> str:
    back = [p if view.band == LOW_PASS else view.w0 / p.conjugate() for p in few]
    section = _of_poles(back, len(back) if view.band == HIGH_PASS else 0)
    return f"{m} equal sections, each {section.verdict}"


def _product_notes(poles: tuple[complex, ...], zeros: tuple[complex, ...]) -> tuple[tuple[str, str], ...]:
    origin = sum(1 for z in zeros if not z)
    parts = halves(poles, origin) if len(zeros) == origin else None
    if parts is None:
        return ()
    high, low = _of_poles(parts[0], len(parts[0])), _of_poles(parts[1], 0)
    known = all(part.match or part.order == 1 for part in (high, low))
    if not known or _corner(high) >= _corner(low):
        return ()
    said = f"{_with_corner(high)}, times {_with_corner(low)}"
    return (("a product", said),)


def _of_poles(poles: Sequence[complex], at_origin: int) -> Recognition:
    return _on_numbers(Ratio.of((0,) * at_origin + (1,), _product(poles, "poles")))


def _corner(part: Recognition) -> float:
    return (part.match.prototype.reference("w3dB") if part.match else part.own[0]).w


def _with_corner(part: Recognition) -> str:
    if part.match is None:
        return part.verdict
    return f"{part.match.name} (f3dB = {hertz(_corner(part))})"


def _verdict(
    view: View, found: tuple[Candidate, ...], q: float | None, notes: tuple[tuple[str, str], ...]
) -> str:
    best = found[0]
    quality = "" if q is None or view.is_two_sided else f"; Q = {q:.4g}"
    where = _where(best) if view.is_two_sided else ""
    if not best.matches:
        extra = "".join(f"; {label}: {text}" for label, text in notes if label not in _APART)
        return f"none of these; nearest is {best.name}: {best.distance}{where}{quality}{extra}"
    also = "".join(f"; exactly {c.name}" for c in found[1:] if c.exact and c.is_tested)
    if quality:
        also += "".join(f"; of that Q: {c.name}" for c in found[1:] if c.exact and not c.is_tested)
    if best.exact and best.is_tested:
        return f"{best.name}, exactly{where}{quality}{also}"
    if best.exact:
        return f"{best.name}{where}{quality}, for which some {best.prototype.settings[0].name} can always be found"
    tied = "".join(f"; cannot be told from {c.name}: {c.distance}" for c in ties(found))
    return f"nearest: {best.name}; {best.distance}; {_by(best)}{where}{quality}{also}{tied}"


def _by(best: Candidate) -> str:
    """Which criterion decided."""
    if best.meets_response and best.meets_poles:
        return "a match by response and by poles"
    return "a match by response, not by poles" if best.meets_response else "a match by poles, not by response"


def _where(best: Candidate) -> str:
    p = best.prototype
    return f"; centre {hertz(p.reference('centre').w)}, -3.0103 dB bandwidth {hertz(p.reference('w3dB_bandwidth').w)}"


def _quality(poles: tuple[complex, ...]) -> float:
    """Q of a second order: w0/(sum of the pole magnitudes on the real axis)."""
    return math.sqrt(abs(poles[0] * poles[1])) / -(poles[0] + poles[1]).real


def _point(s: complex) -> str:
    if s.imag == 0:
        return f"s = {s.real:.4g} rad/s"
    real = f"{s.real:.4g} " if s.real else ""
    return f"s = {real}+- j{abs(s.imag):.4g} rad/s"
