"""What recognition said: the verdict, the candidates with their distances, what would have to change, the frequencies."""

from __future__ import annotations

import math
from collections.abc import Iterator
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.present.blocks import Block, Line, Paragraph, Table
from symnet.present.formulas import amount
from symnet.quantities import HERTZ, SECOND
from symnet.shape.candidate import limits
from symnet.shape.families.prototype import ALL_PASS, LOW_PASS, UNIT_DELAY
from symnet.typeset.numbers import Written, plain_number

if TYPE_CHECKING:
    from symnet.shape.candidate import Candidate
    from symnet.shape.families.prototype import Reference
    from symnet.shape.verdict import Recognition

__all__ = ["recognition_blocks"]

#: So many rows of a table are shown; all of them are in the value.
MOST_CANDIDATES: Final = 6
MOST_SECTIONS: Final = 20
#: Where nothing matches, sections that are further off than this are no repair of anything.
WORTH_CHANGING: Final = 0.5


def recognition_blocks(found: Recognition) -> tuple[Block, ...]:
    """The verdict, the candidates with their distances, what would have to change, and the frequencies of both."""
    blocks: list[Block] = [Paragraph(found.verdict)]
    if found.notes:
        blocks.append(Table(("also", ""), found.notes))
    if found.candidates:
        zeros = any(candidate.zero_error_percent for candidate in found.candidates)
        columns = ["poles within", "pass band within", "group delay within"]
        if found.band == ALL_PASS:
            columns.remove("pass band within")
        if zeros:
            columns.insert(1, "finite zeros within")
        shown = found.candidates[:MOST_CANDIDATES]
        rows = tuple(_candidate_row(found, candidate, zeros=zeros) for candidate in shown)
        blocks.append(Table(("candidate", *columns, ""), rows, len(found.candidates) - len(shown)))
        blocks.append(Paragraph(limits(all_pass=found.band == ALL_PASS)))
        blocks += _changes(found)
    if found.own:
        blocks.append(_references(found))
    if found.normalised_to:
        said = ", ".join(reference.label for reference in found.normalised_to)
        blocks.append(Paragraph(f"normalised so that 1 rad/s is: {said}"))
    return tuple(blocks)


def _candidate_row(found: Recognition, candidate: Candidate, *, zeros: bool) -> tuple[Line, ...]:
    if candidate is found.match:
        role = f"match, exact: {candidate.exact}" if candidate.exact else f"match by {candidate.criteria}"
    elif candidate in found.ties:
        role = "fits as well"
    elif candidate.matches:
        role = f"fits too, by {candidate.criteria}"
    else:
        role = "nearest" if candidate is found.candidates[0] else "runner-up"
    figures = [f"{_bound(candidate.pole_error_percent)} %"]
    if zeros:
        figures.append(f"{_bound(candidate.zero_error_percent)} %")
    if found.band != ALL_PASS:
        figures.append(f"{_bound(candidate.response_error_db)} dB")
    figures.append(f"{_bound(candidate.delay_error_percent)} %")
    return (candidate.name, *(Written(text, text.replace("%", r"\%"), text) for text in figures), role)


def _changes(found: Recognition) -> Iterator[Block]:
    """The sections of this H beside those of the nearest candidate, what is most off first."""
    changes = found.changes()
    if not changes or (not found.match and changes[0].size > WORTH_CHANGING):
        return
    nearest = found.candidates[0].prototype.family
    rows = []
    for change in changes[:MOST_SECTIONS]:
        f0 = [
            amount(Fraction(w / (2 * math.pi)), HERTZ, 5, angular=False) for w in (change.w, change.wanted_w)
        ]
        off = f"{100 * (change.wanted_w / change.w - 1):+.2g} %"
        q = ["real pole" if x is None else f"{x:.4g}" for x in (change.q, change.wanted_q)]
        pair = change.q is not None and change.wanted_q is not None
        q_off = f"{100 * ((change.wanted_q or 1) / (change.q or 1) - 1):+.2g} %" if pair else ""
        percent = (Written(text, text.replace("%", r"\%"), text) if text else "" for text in (off, q_off))
        rows.append((f0[0], f0[1], next(percent), q[0], q[1], next(percent)))
    header = ("f0 of this H", f"of the {nearest}", "by", "Q of this H", f"of the {nearest}", "by")
    yield Paragraph(f"sections, and what would have to change for {nearest}:")
    yield Table(header, tuple(rows))


def _references(found: Recognition) -> Table:
    """Every frequency reference, of this H and of the nearest candidate, whose scale was fitted."""
    own = {reference.name: reference for reference in found.own}
    candidate = found.candidates[0] if found.candidates else None
    theirs = {} if candidate is None else {r.name: r for r in candidate.prototype.references}
    columns = [own] if candidate is None else [own, theirs]
    header = (
        "reference",
        "of this H",
        "",
        *(() if candidate is None else (f"of the {candidate.prototype.family}", "")),
    )
    rows = []
    for name, reference in {**own, **theirs}.items():
        label = (
            "T, the group delay at DC"
            if name == UNIT_DELAY and found.band in {LOW_PASS, ALL_PASS}
            else reference.label
        )
        rows.append((label, *(cell for column in columns for cell in _reference_cells(column.get(name)))))
    return Table(header, tuple(rows))


def _reference_cells(reference: Reference | None) -> tuple[Line, Line]:
    if reference is None:
        return ("", "")
    if reference.name == UNIT_DELAY:
        return (amount(1 / reference.w, SECOND, 5), "")
    return (amount(reference.f, HERTZ, 5, angular=False), amount(reference.w, HERTZ, 5))


def _bound(value: float) -> str:
    """Two digits, rounded up; what is below 1e-9 is rounding."""
    if value < 1e-9:
        return "1e-9"
    places = 1 - math.floor(math.log10(value))
    return plain_number(math.ceil(value * 10.0**places) / 10.0**places, 2, pad=True).text
