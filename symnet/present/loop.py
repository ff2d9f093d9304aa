"""The feedback of a source and the stability of H, as blocks: T and 1 + T, crossovers, margins, conditions on the parts."""

from __future__ import annotations

import math
from collections.abc import Iterator

from symnet.errors import LimitError, MissingValueError, SymnetError
from symnet.present.blocks import Block, Formula, Items, Line, Paragraph, Table
from symnet.present.formulas import amount
from symnet.quantities import HERTZ
from symnet.shape.loop import GainLimit, LoopGain
from symnet.shape.stability import Stability
from symnet.typeset.numbers import plain_number, quantity

__all__ = ["loop_blocks", "stability_blocks"]

_DIGITS = 5
_CONVENTION = (
    "T is positive at DC where the feedback is negative; the drives are at zero and every load is in its place. Phase "
    "margin: the angle from T, where |T| = 1, to -1 (180 degrees + arg T for a loop that lags). Gain margin: by how many "
    "dB |T| may rise before T = -1."
)


def loop_blocks(found: LoopGain) -> tuple[Block, ...]:
    """T and 1 + T, where |T| is 1, where T is real and negative, and the margins or why there are none."""
    blocks: list[Block] = [
        Paragraph(f"Feedback of {found.source}: return ratio T, return difference 1 + T = D/D0.")
    ]
    try:
        blocks += [Formula((found.T.tree,), "T"), Formula((found.difference.tree,), "1 + T")]
    except LimitError as error:
        blocks.append(Paragraph(f"T is not written out: {error.faults[0].message}."))
    by_formula = found.crossover_in_symbols
    if by_formula is not None:
        blocks.append(Paragraph(("|T| = 1 at w = ", by_formula, ".")))
    try:
        rows = tuple(_rows(found))
    except MissingValueError as error:
        blocks.append(Paragraph(f"No margins in numbers: {error.faults[0].message}."))
    except SymnetError as error:
        blocks.append(Paragraph(error.faults[0].message + "."))
    else:
        blocks.append(Table(("figure", "f", "w", "value"), rows))
    blocks.append(Paragraph(_CONVENTION))
    return tuple(blocks)


def _rows(found: LoopGain) -> Iterator[tuple[Line, ...]]:
    for crossover in found.crossovers():
        w = crossover.w.value
        yield (
            f"|T| = 1, {crossover.direction}",
            amount(crossover.f, HERTZ, _DIGITS, angular=False),
            "" if w is None else amount(w, HERTZ, _DIGITS),
            ("phase of T ", quantity(crossover.phase, "deg", _DIGITS)),
        )
    try:
        limits = found.gain_limits()
        phase, gain, reduction = found.phase_margin(), found.gain_margin(), found.gain_reduction()
    except MissingValueError:
        raise
    except SymnetError as error:
        yield ("margins", "", "", f"none: {error.faults[0].message}; {error.faults[0].hint}".rstrip("; "))
        return
    for limit in limits:
        yield (*_limit(limit), ("T = -1 there with ", plain_number(limit.factor, _DIGITS), " times the gain"))
    said = "infinite: |T| is nowhere 1" if math.isinf(phase) else quantity(phase, "deg", _DIGITS)
    yield ("phase margin", "", "", said)
    more = "infinite: no higher gain makes T = -1" if math.isinf(gain) else quantity(gain, "dB", _DIGITS)
    yield ("gain margin", "", "", more)
    if not math.isinf(reduction):
        yield ("gain may fall by", "", "", quantity(reduction, "dB", _DIGITS))


def _limit(limit: GainLimit) -> tuple[Line, Line, Line]:
    if limit.where != "inside" or limit.w.value is None:
        return "T real and negative", f"at {limit.where}", ""
    f = amount(limit.f, HERTZ, _DIGITS, angular=False)
    return "T real and negative", f, amount(limit.w.value, HERTZ, _DIGITS)


def stability_blocks(found: Stability) -> tuple[Block, ...]:
    """The verdict with its reason, the conditions on the parts, and how far the poles are from the jw axis."""
    conditional = found.verdict == "conditional"
    blocks: list[Block] = [Paragraph(f"{found.verdict}: {found.reason}{':' if conditional else '.'}")]
    if found.relations:
        if not conditional:
            blocks.append(Paragraph("In symbols it is stable if and only if:"))
        blocks.append(Items(tuple((left, f" {sign} ", right) for left, sign, right in found.relations)))
        blocks.append(Paragraph("All parts are taken to be positive."))
    if found.remark:
        blocks.append(Paragraph(f"{found.remark[0].upper()}{found.remark[1:]}."))
    rows = tuple(_figures(found))
    if rows:
        blocks.append(Table(("figure", "value", "remark"), rows))
    hidden = tuple(
        f"hidden mode{' in ' + ', '.join(parts) if parts else ''}: {mode.verdict}, {mode.reason}"
        for parts, mode in found.hidden
    )
    if hidden:
        blocks.append(Items(hidden))
    return tuple(blocks)


def _figures(found: Stability) -> Iterator[tuple[Line, ...]]:
    if found.planes is not None:
        planes = found.planes
        counts = f"{planes.left} left, {planes.axis} on the jw axis, {planes.right} right"
        yield ("poles", counts, "counted exactly")
    if found.largest_real is not None:
        remark: Line = ""
        if found.largest_real < 0:
            remark = ("dies out with the time constant ", quantity(-1 / found.largest_real, "s", _DIGITS))
        yield ("largest real part of a pole", amount(found.largest_real, HERTZ, _DIGITS), remark)
    if found.damping is not None:
        remark = ("Q = ", plain_number(1 / (2 * found.damping), _DIGITS)) if found.damping > 0 else ""
        yield ("smallest damping zeta", plain_number(found.damping, _DIGITS), remark)
