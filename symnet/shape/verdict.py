"""What recognition says: candidates with their distances, the verdict, and every figure behind it as a row.

These are values only; :mod:`symnet.shape.recognise` makes them. Bounds are rounded upwards when they are printed,
and every frequency carries its unit and what it is.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass
from decimal import ROUND_CEILING, Decimal, localcontext
from fractions import Fraction
from typing import Final

from symnet.quantities import HERTZ, engineering
from symnet.shape.families.family import Family
from symnet.shape.families.prototype import LOW_PASS, Prototype, Reference
from symnet.typeset.displayed import Displayed

__all__ = [
    "DELAY_PERCENT",
    "POLES_PERCENT",
    "POLES_RESPONSE_DB",
    "RESPONSE_DB",
    "Candidate",
    "Recognition",
    "hertz",
]

#: A match by response needs both of these. Measured: parts rounded to four digits stay within 0.0004 dB and 0.04 %
#: for published ladders up to order 10; parts of 1 % (60 random draws of Butterworth, Bessel and Chebyshev ladders
#: of order 3, 5 and 7) within 0.041 dB and 2.1 %. Of the shapes that are no family of the catalogue the nearest to
#: one are the Gaussian-to-12-dB ladders of order 5 (0.04 dB but 4.5 % from Bessel) and the linear-phase sets of
#: 0.05 degree (0.012 dB but 7.5 %): magnitude alone does not tell them apart.
RESPONSE_DB: Final = 0.1
DELAY_PERCENT: Final = 3.0

#: A match by poles, for a network whose parts are a few per cent off: the pole error, and not more than this in the
#: response. With a free ripple the poles of a stranger can come near by accident: those of the Gaussian-to-6-dB set of
#: order 8 lie within 4.6 % of a Chebyshev filter's, 2.6 dB apart in response; the next nearest is at 7.7 %.
POLES_PERCENT: Final = 5.0
POLES_RESPONSE_DB: Final = 0.5
#: A match by poles alone, far below those accidents. Poles of high Q moved by 1 % change the response by some dB.
POLES_ALONE_PERCENT: Final = 2.0

#: A reference that lies this near to 1 rad/s is what the coefficients are normalised to (tables print 5 digits).
NORMALISED_WITHIN: Final = 1e-4


@dataclass(frozen=True, slots=True)
class Candidate:
    """A family member fitted to H: the prototype in rad/s and in the band of H, and its distances from H.

    ``response_error_db`` is the largest difference of |H| in dB, each relative to its own pass-band gain (at DC, for
    a high-pass at infinite frequency), over the pass band of the prototype up to its -3.0103 dB frequency, the
    frequency scale fitted. ``delay_error_percent`` is the largest relative difference of the group delay there.
    ``pole_error_percent`` is the largest distance between the poles of H and of the prototype, both divided by
    their w0, in per cent of the prototype's pole. ``exact`` says how it is known that H is exactly this shape,
    and is empty when it is not.
    """

    family: Family
    prototype: Prototype
    uncertainties: tuple[float, ...]
    response_error_db: float
    delay_error_percent: float
    pole_error_percent: float
    exact: str = ""

    @property
    def matches(self) -> bool:
        """Whether H may be called by this name: near in response and delay, or near in poles."""
        by_response = self.response_error_db <= RESPONSE_DB and self.delay_error_percent <= DELAY_PERCENT
        by_poles = self.pole_error_percent <= POLES_PERCENT and self.response_error_db <= POLES_RESPONSE_DB
        return by_response or by_poles or self.pole_error_percent <= POLES_ALONE_PERCENT

    @property
    def is_tested(self) -> bool:
        """Whether the shape has more freedom than the family has parameters, so that a match means something."""
        return self.prototype.order - 1 > len(self.prototype.settings)

    @property
    def is_degenerate(self) -> bool:
        """Whether a fitted parameter vanished: the family's limit, which a family without it holds already."""
        parameters = self.family.parameters(self.prototype.order)
        return any(
            setting.value <= parameter.lower
            for parameter, setting in zip(parameters, self.prototype.settings, strict=True)
        )

    @property
    def name(self) -> str:
        """The prototype in words, each fitted parameter with the digits that H tells."""
        p = self.prototype
        return ", ".join([p.family, f"order {p.order}", *self._settings(), p.band])

    def _settings(self) -> Iterator[str]:
        parameters = self.family.parameters(self.prototype.order)
        for parameter, setting, plus in zip(
            parameters, self.prototype.settings, self.uncertainties, strict=True
        ):
            side = (
                "below "
                if setting.value <= parameter.lower
                else "above "
                if setting.value >= parameter.upper
                else ""
            )
            yield f"{setting.name} {side}{_shortest(setting.value, plus)} {setting.unit}"

    @property
    def distance(self) -> str:
        """The three distances in words."""
        poles, response = _upwards(self.pole_error_percent), _upwards(self.response_error_db)
        return f"poles within {poles} %, pass band within {response} dB and {_upwards(self.delay_error_percent)} % of delay"

    def fitted(self) -> tuple[str, ...]:
        """The fitted parameters with their uncertainty, the change that doubles the sum of squares of the fit."""
        return tuple(
            f"{setting.name} {setting.value:.6g} {setting.unit} +- {_upwards(plus)} {setting.unit}"
            for setting, plus in zip(self.prototype.settings, self.uncertainties, strict=True)
        )


@dataclass(frozen=True, slots=True, repr=False)
class Recognition(Displayed):
    """The verdict on H, the best candidate, the runners-up, and why there are none when there are none.

    True in a condition when H is a member of a family, exactly or nearly. ``candidates`` begin with the one of the
    verdict. ``own`` are w0 and the -3.0103 dB frequency of H itself; ``q`` is the quality of a second-order H, else
    None; ``level_at_1_db`` is |H| at w = 1 rad/s in dB relative to the pass-band gain.
    """

    verdict: str
    order: int
    band: str = ""
    candidates: tuple[Candidate, ...] = ()
    q: float | None = None
    own: tuple[Reference, ...] = ()
    level_at_1_db: float | None = None

    def __bool__(self) -> bool:
        return self.match is not None

    def __str__(self) -> str:
        return self.verdict

    def __repr__(self) -> str:
        return f"<Recognition: {self.verdict}>"

    @property
    def match(self) -> Candidate | None:
        """The candidate that H is, exactly or nearly; None when it is none of the families."""
        return self.candidates[0] if self.candidates and self.candidates[0].matches else None

    @property
    def runners_up(self) -> tuple[Candidate, ...]:
        """The other candidates, nearest first."""
        return self.candidates[1:]

    @property
    def normalised_to(self) -> tuple[Reference, ...]:
        """The references of the match that lie at 1 rad/s: what the coefficients are normalised to."""
        references = self.match.prototype.references if self.match else self.own
        return tuple(r for r in references if abs(r.w - 1) <= NORMALISED_WITHIN)

    def rows(self) -> tuple[tuple[str, str], ...]:
        """The verdict and everything behind it, line by line, each figure with its unit and convention."""
        rows = [("verdict", self.verdict)]
        if self.q is not None:
            rows.append(("Q", f"{self.q:.5g}"))
        match = self.match
        rows += [(r.label, _frequency(r.w)) for r in (match.prototype.references if match else self.own)]
        rows += [("normalised", f"{r.label}, is 1 rad/s") for r in self.normalised_to]
        if self.normalised_to and self.level_at_1_db is not None:
            where = "DC" if self.band == LOW_PASS else "infinite frequency"
            rows.append(("|H| at w = 1 rad/s", f"{self.level_at_1_db:.3f} dB relative to {where}"))
        for k, candidate in enumerate(self.candidates):
            if k == 0:
                rows += [("fitted", text) for text in candidate.fitted()]
                rows += [("exactly", candidate.exact)] if candidate.exact else _distances(candidate)
            else:
                label = "also fits" if candidate.matches else "runner-up"
                rows.append((label, f"{candidate.name}; {candidate.distance}"))
        return tuple(rows)


def _distances(candidate: Candidate) -> list[tuple[str, str]]:
    p = candidate.prototype
    band = f"over the pass band {'up' if p.band == LOW_PASS else 'down'} to -3.0103 dB"
    return [
        (
            "response error",
            f"{_upwards(candidate.response_error_db)} dB, the largest difference of |H| {band}, scale fitted",
        ),
        ("delay error", f"{_upwards(candidate.delay_error_percent)} % of the group delay there"),
        (
            "pole error",
            f"{_upwards(candidate.pole_error_percent)} % of the magnitude of each pole, both sets divided by w0",
        ),
    ]


def _upwards(value: float) -> str:
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
        text = f"{value:.{digits}g}"
        if abs(float(text) - value) <= max(plus, 1e-3 * abs(value)):
            break
    return text


def hertz(w: float) -> str:
    """A frequency in Hz as text, from the angular frequency w in rad/s."""
    return engineering(Fraction(w / (2 * math.pi)), HERTZ, digits=5)


def _frequency(w: float) -> str:
    return f"{engineering(Fraction(w), unit='rad/s', digits=5)}, {hertz(w)}"
