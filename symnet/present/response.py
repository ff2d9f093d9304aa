"""The figures of H(jw) as blocks: where |H| is 3 dB down, how high it gets, how wide it is, the delay at DC."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction
from math import log10
from typing import TYPE_CHECKING

from symnet.errors import UndefinedError
from symnet.present.blocks import Block, Line, Paragraph, Table
from symnet.present.formulas import amount
from symnet.quantities import HERTZ, NUMBER, SECOND, Dimension
from symnet.typeset.numbers import Written, plain_number, quantity

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer
    from symnet.response.time import StepResponse
    from symnet.shape.figures import Extreme, HalfPower

__all__ = ["half_power_rows", "response_blocks", "step_blocks"]

_DIGITS = 5


def response_blocks(transfer: Transfer) -> tuple[Block, ...]:
    """The peak, all -3.0103 dB frequencies, the band of a band-pass, the delay. MissingValueError without a value."""
    return (Table(("figure", "f", "w", "remark"), tuple(_rows(transfer))),)


def _rows(transfer: Transfer) -> Iterator[tuple[Line, ...]]:
    from symnet.response.frequency import delay_over_square
    from symnet.shape.figures import bandwidth, f3db, peak

    dimension = transfer.dimension
    try:
        highest = peak(transfer)
    except UndefinedError as error:
        yield ("peak of |H|", "", "", error.faults[0].message)
    else:
        yield ("peak of |H|", *_place(highest), ("|H| = ", *_level(highest.value, dimension)))
    try:
        yield from half_power_rows(f3db(transfer), dimension)
    except UndefinedError as error:
        yield ("f3dB", "", "", error.faults[0].message)
    try:
        band = bandwidth(transfer)
    except UndefinedError:
        pass  # no band around a peak: the rows above say what there is
    else:
        width = amount(band.width, HERTZ, _DIGITS, angular=False)
        q = amount(band.q, NUMBER, _DIGITS)
        yield ("bandwidth", width, "", ("between the -3.0103 dB frequencies; Q = f/width = ", q))
    try:
        delay = delay_over_square(transfer).at(Fraction(0))
    except UndefinedError:
        return  # H is 0, or has a pole at the origin
    yield ("group delay", "at DC", "", amount(delay, SECOND, _DIGITS))


def half_power_rows(found: HalfPower, dimension: Dimension) -> Iterator[tuple[Line, ...]]:
    """One row for each frequency at which |H| is 1/sqrt(2) of the reference."""
    level = found.level.value
    where = "the peak" if found.reference == "peak" else found.reference
    reference: Line = f"-3.0103 dB relative to {where}"
    if level is not None:
        reference = (f"-3.0103 dB relative to {where}, where |H| = ", *_level(level, dimension))
    if not found.crossings:
        yield ("f3dB", "none", "", reference)
    for crossing in found.crossings:
        f = amount(crossing.f, HERTZ, _DIGITS, angular=False)
        w = "" if crossing.w.value is None else amount(crossing.w.value, HERTZ, _DIGITS)
        yield (f"f3dB, {crossing.direction}", f, w, reference)


def _place(extreme: Extreme) -> tuple[Line, Line]:
    if extreme.where != "inside":
        return (f"at {extreme.where}", "")
    w = extreme.w.value
    return (amount(extreme.f, HERTZ, _DIGITS, angular=False), "" if w is None else amount(w, HERTZ, _DIGITS))


def _level(value: float, dimension: Dimension) -> tuple[str | Written, ...]:
    number = amount(value, dimension)
    if dimension != NUMBER or not value:
        return (number,)
    return (number, "\u00a0(", quantity(20 * log10(value), "dB"), ")")


def step_blocks(found: StepResponse) -> tuple[Block, ...]:
    """The figures of a step response, each with its unit."""
    rows = tuple(
        (what, _figure(value, unit), "" if value is None or unit == "s" else unit or "unit of H")
        for what, unit, value in found.rows()
    )
    said = "Response to a step of 1 at t = 0, t in s."
    if not found.settles:
        said += " It does not settle: a pole lies on the jw axis or to the right of it."
    return (Paragraph(said), Table(("figure", "value", "unit"), rows))


def _figure(value: float | None, unit: str) -> Line:
    if value is None:
        return "none"
    return amount(value, SECOND) if unit == "s" else plain_number(value, 5)
