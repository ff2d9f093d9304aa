"""What recognition says: candidates with their distances, the verdict, and every figure behind it as a row.

These are values only; :mod:`symnet.shape.recognise` makes them. Bounds are rounded upwards when they are printed,
and every frequency carries its unit and what it is.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Final

from symnet.quantities import engineering
from symnet.shape.candidate import Candidate, Change, hertz, quality, upwards
from symnet.shape.families.prototype import (
    ALL_PASS,
    BAND_PASS,
    BAND_STOP,
    CENTRE,
    HIGH_PASS,
    PASS_BAND,
    W3DB,
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
)
from symnet.typeset.displayed import Displayed

__all__ = ["Recognition", "ties"]

#: So many runners-up are told in words; all of them are in :attr:`Recognition.candidates`.
_MOST_TOLD: Final = 5
_MOST_SECTIONS: Final = 8


def ties(candidates: Sequence[Candidate]) -> tuple[Candidate, ...]:
    """Those behind the first that match as it does: as many fitted parameters, and as near within a factor."""
    if not candidates or not candidates[0].matches or candidates[0].exact:
        return ()
    first = candidates[0]
    return tuple(
        c
        for c in candidates[1:]
        if c.matches
        and len(c.member.values) == len(first.member.values)
        and c.nearness <= TIE_RATIO * first.nearness
    )


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
        return ties(self.candidates)

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
                found.append(Change(abs(p), quality(p), abs(q), quality(q)))
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
                f"{upwards(candidate.response_error_db)} dB, the largest difference of |H| {band}, scale fitted",
            )
        ]
    where = "there" if found else "up to where 1/|D| is 3.0103 dB down"
    found += [
        ("delay error", f"{upwards(candidate.delay_error_percent)} % of the group delay {where}"),
        (
            "pole error",
            f"{upwards(candidate.pole_error_percent)} % of the magnitude of each pole, both sets divided by w0"
            + (" as low-passes" if p.band in {BAND_PASS, BAND_STOP} else ""),
        ),
    ]
    if candidate.zero_error_percent:
        found.append(
            ("zero error", f"{upwards(candidate.zero_error_percent)} % of each finite zero, likewise")
        )
    found.append(("response criterion", f"{met} ({limits})"))
    met = "met" if candidate.meets_poles else "not met"
    bounds = f"limit {POLES_PERCENT:g} % with {POLES_RESPONSE_DB} dB, or {POLES_ALONE_PERCENT:g} % alone"
    found.append(("pole criterion", f"{met} ({bounds})"))
    return found


def _frequency(w: float) -> str:
    return f"{engineering(Fraction(w), unit='rad/s', digits=5)}, {hertz(w)}"
