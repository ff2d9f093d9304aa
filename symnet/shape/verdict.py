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
from symnet.shape.families.prototype import (
    ALL_PASS,
    BAND_PASS,
    BAND_STOP,
    CENTRE,
    HIGH_PASS,
    PASS_BAND,
    W3DB,
    Prototype,
    Reference,
)
from symnet.shape.pairing import paired
from symnet.shape.thresholds import (
    DELAY_PERCENT,
    FARTHEST_POLES_PERCENT,
    NORMALISED_WITHIN,
    POLES_ALONE_PERCENT,
    POLES_PERCENT,
    POLES_RESPONSE_DB,
    RESPONSE_DB,
    TIE_RATIO,
    ZEROS_PERCENT,
)
from symnet.typeset.displayed import Displayed

__all__ = ["Candidate", "Change", "Recognition", "hertz"]

#: So many runners-up are told in words; all of them are in :attr:`Recognition.candidates`.
_MOST_TOLD: Final = 5
_MOST_SECTIONS: Final = 8


@dataclass(frozen=True, slots=True)
class Candidate:
    """A family member fitted to H: the prototype in rad/s and in the band of H, and its distances from H.

    ``response_error_db`` is the largest difference of |H| in dB, each relative to its own pass-band gain (at DC, of
    a high-pass at infinite frequency, of a band-pass or band-stop fitted), over the pass band of the prototype up to
    its -3.0103 dB frequencies, the frequency scale fitted; of an all-pass it is that of its denominator alone.
    ``delay_error_percent`` is the largest relative difference of the group delay there. ``pole_error_percent`` is
    the largest distance between the poles of H and of the prototype, as low-passes divided by their w0, in per cent
    of the prototype's pole, and ``zero_error_percent`` that of the finite zeros. ``exact`` says how it is known that
    H is exactly this shape, and is empty when it is not.
    """

    family: Family
    prototype: Prototype
    uncertainties: tuple[float, ...]
    response_error_db: float
    delay_error_percent: float
    pole_error_percent: float
    zero_error_percent: float = 0.0
    exact: str = ""

    @property
    def meets_response(self) -> bool:
        """Whether the pass band agrees: |H| and group delay, of an all-pass the delay; and the finite zeros."""
        in_level = self.prototype.band == ALL_PASS or self.response_error_db <= RESPONSE_DB
        near = self.delay_error_percent <= DELAY_PERCENT and self.pole_error_percent <= FARTHEST_POLES_PERCENT
        return in_level and near and self._meets_zeros

    @property
    def meets_poles(self) -> bool:
        """Whether the poles agree, closely, or less closely with a response that is not far off; and the zeros."""
        if self.pole_error_percent <= POLES_ALONE_PERCENT:
            return self._meets_zeros
        in_level = self.prototype.band == ALL_PASS or self.response_error_db <= POLES_RESPONSE_DB
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
        in_level = 0.0 if self.prototype.band == ALL_PASS else self.response_error_db / RESPONSE_DB
        return max(
            in_level, self.delay_error_percent / DELAY_PERCENT, self.zero_error_percent / ZEROS_PERCENT
        )

    @property
    def nearness(self) -> float:
        """What candidates are ranked by: by response, or by poles if these agree better, in units of the limits."""
        by_poles = max(self.pole_error_percent / POLES_PERCENT, self.zero_error_percent / ZEROS_PERCENT)
        return min(self.response, by_poles)

    @property
    def freedom(self) -> int:
        """How many numbers of the shape the family does not fit."""
        p = self.prototype
        return p.order - 1 + self.family.finite_zeros(p.order) // 2 - len(p.settings)

    @property
    def is_tested(self) -> bool:
        """Whether the shape has more freedom than the family has parameters, so that a match means something."""
        return self.freedom > 0

    @property
    def is_at_the_end(self) -> bool:
        """Whether a fitted parameter came to an end of the range in which it was looked for."""
        parameters = self.family.parameters(self.prototype.order)
        return any(
            min(setting.value - parameter.lower, parameter.upper - setting.value)
            <= 1e-6 * parameter.lower + 1e-9
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
            yield f"{setting.name} {side}{_shortest(setting.value, plus)} {setting.unit}".rstrip()

    @property
    def distance(self) -> str:
        """The distances in words."""
        roots = f"poles within {_upwards(self.pole_error_percent)} %"
        if self.zero_error_percent:
            roots += f", finite zeros within {_upwards(self.zero_error_percent)} %"
        delay = f"{_upwards(self.delay_error_percent)} % of delay"
        if self.prototype.band == ALL_PASS:
            return f"{roots}, within {delay}"
        return f"{roots}, pass band within {_upwards(self.response_error_db)} dB and {delay}"

    def fitted(self) -> tuple[str, ...]:
        """The fitted parameters with their uncertainty, the change that doubles the sum of squares of the fit."""
        return tuple(
            " ".join(
                f"{setting.name} {setting.value:.6g} {setting.unit} +- {_upwards(plus)} {setting.unit}".split()
            )
            for setting, plus in zip(self.prototype.settings, self.uncertainties, strict=True)
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


@dataclass(frozen=True, slots=True, repr=False)
class Recognition(Displayed):
    """The verdict on H, the best candidate, the runners-up, and why there are none when there are none.

    True in a condition when H is a member of a family, exactly or nearly. ``candidates`` begin with the one of the
    verdict. ``own`` are the frequencies of H itself: w0 and the -3.0103 dB frequency, of a band-pass or band-stop the
    centre, the -3.0103 dB edges and their difference; ``q`` is the quality of a pair of poles where H is no more
    than that, else None; ``level_at_1_db`` is |H| at w = 1 rad/s in dB relative to the pass-band gain. ``notes`` are
    further findings, as pairs of words and figures: equal sections, the two halves of a product, corners of a shelf.
    ``misfit_percent`` is how far H is from any transformed low-pass, in its pole pairs. ``poles`` are those of H in
    rad/s.
    """

    verdict: str
    order: int
    band: str = ""
    candidates: tuple[Candidate, ...] = ()
    q: float | None = None
    own: tuple[Reference, ...] = ()
    level_at_1_db: float | None = None
    notes: tuple[tuple[str, str], ...] = ()
    misfit_percent: float = 0.0
    poles: tuple[complex, ...] = ()

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
    def ties(self) -> tuple[Candidate, ...]:
        """The other matches that H cannot be told from: as many fitted parameters, and as near in response."""
        first = self.match
        if first is None or first.exact:
            return ()
        return tuple(
            c
            for c in self.runners_up
            if c.matches
            and len(c.prototype.settings) == len(first.prototype.settings)
            and c.nearness <= TIE_RATIO * first.nearness
        )

    @property
    def centre(self) -> Reference | None:
        """The centre of a band-pass or band-stop: that of the match, else that of H itself."""
        return self._reference(CENTRE)

    @property
    def bandwidth(self) -> Reference | None:
        """The -3.0103 dB bandwidth of a band-pass or band-stop: that of the match, else that of H itself."""
        return self._reference(f"{W3DB}_bandwidth")

    def _reference(self, name: str) -> Reference | None:
        references = self.match.prototype.references if self.match else self.own
        return next((r for r in references if r.name == name), None)

    @property
    def normalised_to(self) -> tuple[Reference, ...]:
        """The references of the match that lie at 1 rad/s: what the coefficients are normalised to."""
        references = self.match.prototype.references if self.match else self.own
        return tuple(r for r in references if abs(r.w - 1) <= NORMALISED_WITHIN)

    def changes(self) -> tuple[Change, ...]:
        """What would have to change for H to be the nearest candidate: its sections, the one that is most off first."""
        if not self.candidates or self.candidates[0].exact:
            return ()
        wanted = self.candidates[0].prototype.poles
        found = []
        for q, k in zip(wanted, paired(self.poles, wanted), strict=True):
            p = self.poles[k]
            if p.imag >= 0 and (p.imag > 0 or q.imag >= 0):
                found.append(Change(abs(p), _quality(p), abs(q), _quality(q)))
        return tuple(sorted(found, key=lambda c: -c.size))

    def rows(self) -> tuple[tuple[str, str], ...]:
        """The verdict and everything behind it, line by line, each figure with its unit and convention."""
        rows = [("verdict", self.verdict), *self.notes]
        if self.q is not None:
            rows.append(("Q", f"{self.q:.5g}"))
        match = self.match
        rows += [(r.label, _frequency(r.w)) for r in (match.prototype.references if match else self.own)]
        rows += [("normalised", f"{r.label}, is 1 rad/s") for r in self.normalised_to]
        if self.normalised_to and self.level_at_1_db is not None:
            rows.append(
                ("|H| at w = 1 rad/s", f"{self.level_at_1_db:.3f} dB relative to {PASS_BAND[self.band]}")
            )
        for k, candidate in enumerate(self.candidates[: _MOST_TOLD + 1]):
            if k == 0:
                rows += [("fitted", text) for text in candidate.fitted()]
                rows += [("exactly", candidate.exact)] if candidate.exact else _distances(candidate)
            else:
                label = "also fits" if candidate.matches else "runner-up"
                rows.append((label, f"{candidate.name}; {candidate.distance}"))
        if len(self.candidates) > 2 or self.match:
            rows += [("to change", str(change)) for change in self.changes()[:_MOST_SECTIONS]]
        return tuple(rows)


def _quality(p: complex) -> float | None:
    return abs(p) / (-2 * p.real) if p.imag and p.real else None


def _distances(candidate: Candidate) -> list[tuple[str, str]]:
    p = candidate.prototype
    ends = {HIGH_PASS: "down to -3.0103 dB", BAND_PASS: "between its -3.0103 dB edges"}
    ends[BAND_STOP] = "outside its -3.0103 dB edges"
    band = f"over the pass band {ends.get(p.band, 'up to -3.0103 dB')}"
    met = "met" if candidate.meets_response else "not met"
    limits = (
        f"limits {RESPONSE_DB} dB and {DELAY_PERCENT:g} % of delay, poles {FARTHEST_POLES_PERCENT:g} %"
        if p.band != ALL_PASS
        else ""
    )
    limits = limits or f"limit {DELAY_PERCENT:g} %"
    found = []
    if p.band != ALL_PASS:
        found = [
            (
                "response error",
                f"{_upwards(candidate.response_error_db)} dB, the largest difference of |H| {band}, scale fitted",
            )
        ]
    where = "there" if found else "up to where 1/|D| is 3.0103 dB down"
    found += [
        ("delay error", f"{_upwards(candidate.delay_error_percent)} % of the group delay {where}"),
        (
            "pole error",
            f"{_upwards(candidate.pole_error_percent)} % of the magnitude of each pole, both sets divided by w0"
            + (" as low-passes" if p.band in {BAND_PASS, BAND_STOP} else ""),
        ),
    ]
    if candidate.zero_error_percent:
        found.append(
            ("zero error", f"{_upwards(candidate.zero_error_percent)} % of each finite zero, likewise")
        )
    found.append(("response criterion", f"{met} ({limits})"))
    met = "met" if candidate.meets_poles else "not met"
    bounds = f"limit {POLES_PERCENT:g} % with {POLES_RESPONSE_DB} dB, or {POLES_ALONE_PERCENT:g} % alone"
    found.append(("pole criterion", f"{met} ({bounds})"))
    return found


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
        short = float(f"{value:.{digits}g}")
        if abs(short - value) <= max(plus, 1e-3 * abs(value)):
            break
    return f"{short:.16g}"  # 20, not 2e+01


def hertz(w: float) -> str:
    """A frequency in Hz as text, from the angular frequency w in rad/s."""
    return engineering(Fraction(w / (2 * math.pi)), HERTZ, digits=5)


def _frequency(w: float) -> str:
    return f"{engineering(Fraction(w), unit='rad/s', digits=5)}, {hertz(w)}"
