"""A candidate: a family member laid beside H with its distances, the criteria of a match, and what would have to change.

There are two criteria. By poles: they decide everything, pass band, stop band and transient alike, so H whose poles are
those of a family within what parts of a few per cent do to them is that family, even if their Q is so high that 1 %
changes the response by some dB. By response: |H| and group delay over the pass band, which is what an engineer buys; at
high orders element values of four digits leave it alone and move the poles by a fifth.

So candidates that match by poles stand first, ordered by their poles; then those that match by response alone, ordered
by response; then those that do not match. Both figures are always shown, and the verdict says which criterion was met.
Ranking by the better of the two figures was measured as well: of 2 185 shaken prototypes that no other family was near
to, ten were named after one that happens to have the same pass band; now none is (DEVELOPERS.md).
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass
from decimal import ROUND_CEILING, Decimal, localcontext
from fractions import Fraction

from symnet.quantities import HERTZ, engineering
from symnet.shape.families.family import Family
from symnet.shape.families.prototype import ALL_PASS, Prototype
from symnet.shape.placing import Placed
from symnet.shape.thresholds import (
    DELAY_PERCENT,
    FARTHEST_POLES_PERCENT,
    POLES_ALONE_PERCENT,
    POLES_PERCENT,
    POLES_RESPONSE_DB,
    RESPONSE_DB,
    ZEROS_PERCENT,
)

__all__ = ["Candidate", "Change", "hertz", "limits", "quality", "upwards"]


@dataclass(frozen=True, slots=True)
class Candidate:
    """A family member fitted to H, in rad/s and in the band of H, and its distances from H.

    ``shape`` are the poles of the low-pass divided by their w0.
    ``response_error_db`` is the largest difference of |H| in dB, each relative to its own pass-band gain (at DC, of
    a high-pass at infinite frequency, of a band-pass or band-stop fitted), over the pass band of the prototype up to
    its -3.0103 dB frequencies, the frequency scale fitted; of an all-pass it is that of its denominator alone.
    ``delay_error_percent`` is the largest relative difference of the group delay there. ``pole_error_percent`` is
    the largest distance between the poles of H and of the prototype, as low-passes divided by their w0, in per cent
    of the prototype's pole, and ``zero_error_percent`` that of the finite zeros. ``exact`` says how it is known that
    H is exactly this shape, and is empty when it is not.
    """

    member: Placed
    shape: tuple[complex, ...]
    uncertainties: tuple[float, ...]
    response_error_db: float
    delay_error_percent: float
    pole_error_percent: float
    zero_error_percent: float = 0.0
    exact: str = ""

    @property
    def family(self) -> Family:
        """The family that was fitted."""
        return self.member.family

    @property
    def prototype(self) -> Prototype:
        """The member with poles, zeros and every frequency reference, in rad/s."""
        return self.member.prototype

    @property
    def criteria(self) -> str:
        """By what it is a match: response, poles, or both; empty when it is none."""
        met = [("response", self.meets_response), ("poles", self.meets_poles)]
        return " and ".join(name for name, is_met in met if is_met)

    @property
    def meets_response(self) -> bool:
        """Whether the pass band agrees: |H| and group delay, of an all-pass the delay; and the finite zeros."""
        in_level = self.member.band == ALL_PASS or self.response_error_db <= RESPONSE_DB
        near = self.delay_error_percent <= DELAY_PERCENT and self.pole_error_percent <= FARTHEST_POLES_PERCENT
        return in_level and near and self._meets_zeros

    @property
    def meets_poles(self) -> bool:
        """Whether the poles agree, closely, or less closely with a response that is not far off; and the zeros."""
        if self.pole_error_percent <= POLES_ALONE_PERCENT:
            return self._meets_zeros
        in_level = self.member.band == ALL_PASS or self.response_error_db <= POLES_RESPONSE_DB
        return self.pole_error_percent <= POLES_PERCENT and in_level and self._meets_zeros

    @property
    def _meets_zeros(self) -> bool:
        return self.zero_error_percent <= ZEROS_PERCENT

    @property
    def matches(self) -> bool:
        """Whether H may be called by this name: near in response and delay, or near in poles."""
        return self.meets_response or self.meets_poles

    @property
    def response(self) -> float:
        """The response errors in units of the limits of the response criterion, the largest of them: 1 is just met."""
        in_level = 0.0 if self.member.band == ALL_PASS else self.response_error_db / RESPONSE_DB
        return max(
            in_level, self.delay_error_percent / DELAY_PERCENT, self.zero_error_percent / ZEROS_PERCENT
        )

    @property
    def by_poles(self) -> float:
        """The pole and zero errors in units of the limits of the pole criterion, the larger of them."""
        return max(self.pole_error_percent / POLES_PERCENT, self.zero_error_percent / ZEROS_PERCENT)

    @property
    def nearness(self) -> float:
        """By response, or by poles if these agree better, in units of the limits."""
        return min(self.response, self.by_poles)

    @property
    def rank(self) -> tuple[bool, bool, float]:
        """What candidates are ranked by: matches by poles by their poles, matches by response alone, then the others."""
        return (not self.matches, not self.meets_poles, self.by_poles if self.meets_poles else self.nearness)

    @property
    def freedom(self) -> int:
        """How many numbers of the shape the family does not fit."""
        order = self.member.order
        return order - 1 + self.family.finite_zeros(order) // 2 - len(self.member.values)

    @property
    def is_tested(self) -> bool:
        """Whether the shape has more freedom than the family has parameters, so that a match means something."""
        return self.freedom > 0

    @property
    def is_at_the_end(self) -> bool:
        """Whether a fitted parameter came to an end of the range in which it was looked for."""
        parameters = self.family.parameters(self.member.order)
        return any(
            min(value - parameter.lower, parameter.upper - value) <= 1e-6 * parameter.lower + 1e-9
            for parameter, value in zip(parameters, self.member.values, strict=True)
        )

    @property
    def name(self) -> str:
        """The prototype in words, each fitted parameter with the digits that H tells."""
        m = self.member
        return ", ".join([m.family.name, f"order {m.order}", *self._settings(), m.band])

    def _settings(self) -> Iterator[str]:
        parameters = self.family.parameters(self.member.order)
        for parameter, setting, plus in zip(
            parameters, self.member.settings, self.uncertainties, strict=True
        ):
            side = (
                "below "
                if setting.value <= parameter.lower
                else "above "
                if setting.value >= parameter.upper
                else ""
            )
            yield f"{setting.name} {side}{_shortest(setting.value, plus)} {setting.unit}".rstrip()

    @property
    def distance(self) -> str:
        """The distances in words."""
        roots = f"poles within {upwards(self.pole_error_percent)} %"
        if self.zero_error_percent:
            roots += f", finite zeros within {upwards(self.zero_error_percent)} %"
        delay = f"{upwards(self.delay_error_percent)} % of delay"
        if self.member.band == ALL_PASS:
            return f"{roots}, within {delay}"
        return f"{roots}, pass band within {upwards(self.response_error_db)} dB and {delay}"

    def fitted(self) -> tuple[str, ...]:
        """The fitted parameters with their uncertainty, the change that doubles the sum of squares of the fit."""
        return tuple(
            " ".join(
                f"{setting.name} {setting.value:.6g} {setting.unit} +- {upwards(plus)} {setting.unit}".split()
            )
            for setting, plus in zip(self.member.settings, self.uncertainties, strict=True)
        )


def limits(*, all_pass: bool = False) -> str:
    """What counts as a match, in one sentence."""
    level, low = ("", "") if all_pass else (f"{RESPONSE_DB} dB and ", f" with {POLES_RESPONSE_DB} dB")
    return (
        f"match by response: within {level}{DELAY_PERCENT:g} % of delay, poles {FARTHEST_POLES_PERCENT:g} %; "
        f"by poles: within {POLES_PERCENT:g} %{low}, or {POLES_ALONE_PERCENT:g} %"
        f"; finite zeros within {ZEROS_PERCENT:g} % in both"
    )


@dataclass(frozen=True, slots=True)
class Change:
    """One section of H beside that of the nearest prototype: w in rad/s of each, and Q of each, None for a real pole.

    >>> print(Change(6283.2, 0.6, 6283.2, 0.5))
    f0 = 1 kHz is right, Q = 0.6 to become 0.5 (-17 %)
    """

    w: float
    q: float | None
    wanted_w: float
    wanted_q: float | None

    @property
    def size(self) -> float:
        """The larger of the relative changes of f0 and Q; a pole pair to become two real poles counts as 1."""
        of_w = abs(self.wanted_w / self.w - 1)
        if self.q is None and self.wanted_q is None:
            return of_w
        if self.q is None or self.wanted_q is None:
            return max(of_w, 1.0)
        return max(of_w, abs(self.wanted_q / self.q - 1))

    def __str__(self) -> str:
        said = [_change("f0", hertz(self.w), hertz(self.wanted_w), self.wanted_w / self.w)]
        if self.q is None or self.wanted_q is None:
            if self.q != self.wanted_q:
                q = self.q or self.wanted_q or 0.0
                said.append(
                    f"a real pole to become one of a pair of Q = {q:.4g}"
                    if self.q is None
                    else f"one of a pair of Q = {q:.4g} to become a real pole"
                )
        else:
            said.append(_change("Q", f"{self.q:.4g}", f"{self.wanted_q:.4g}", self.wanted_q / self.q))
        return ", ".join(said)


def _change(name: str, own: str, wanted: str, ratio: float) -> str:
    if own == wanted:
        return f"{name} = {own} is right"
    return f"{name} = {own} to become {wanted} ({100 * (ratio - 1):+.2g} %)"


def quality(p: complex) -> float | None:
    """Q of a pole of a pair; None for a real one."""
    return abs(p) / (-2 * p.real) if p.imag and p.real else None


def upwards(value: float) -> str:
    """Two digits of a bound, rounded up; what is below 1e-12 is rounding."""
    if value < 1e-12:
        return "1e-12"
    with localcontext() as context:
        context.prec, context.rounding = 2, ROUND_CEILING
        number = +Decimal(repr(value))
    return f"{number:f}" if 1e-4 <= value < 1e6 else f"{number:e}"


def _shortest(value: float, plus: float) -> str:
    """The shortest decimal within the uncertainty of the value, or within a thousandth of it."""
    for digits in range(1, 17):
        short = float(f"{value:.{digits}g}")
        if abs(short - value) <= max(plus, 1e-3 * abs(value)):
            break
    return f"{short:.16g}"  # 20, not 2e+01


def hertz(w: float) -> str:
    """A frequency in Hz as text, from the angular frequency w in rad/s."""
    return engineering(Fraction(w / (2 * math.pi)), HERTZ, digits=5)
