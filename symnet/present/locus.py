"""Poles on the move, as blocks: against the value of one name, and from the ideal to the real op amp."""

from __future__ import annotations

import math
from collections.abc import Iterator
from fractions import Fraction

from symnet.present.blocks import Block, Items, Line, Paragraph, Table, without_empty_columns
from symnet.present.formulas import amount
from symnet.quantities import HERTZ, NUMBER, Dimension
from symnet.shape.locus import Happening, Locus, Range
from symnet.shape.real import RealOpAmps, Step
from symnet.typeset.numbers import Written, complex_quantity, plain_number, quantity
from symnet.typeset.tree import Tree

__all__ = ["locus_blocks", "real_opamps_blocks"]

_DIGITS = 5
_MOST_ROWS = 60


def locus_blocks(found: Locus) -> tuple[Block, ...]:
    """What happens at which value, where the network is stable, and the poles for each value."""
    dimension = found.dimension
    blocks: list[Block] = [
        Paragraph(f"Poles of {found.label} for {len(found.values)} values of {found.name}, in rad/s.")
    ]
    lines = tuple(_said(each, found.name, dimension) for each in found.happenings)
    if lines:
        blocks.append(Items(lines))
    blocks.append(Items(tuple(_range(each, found.name, dimension) for each in found.ranges)))
    header = (found.name, *(f"pole {k}" for k in range(1, len(found.branches) + 1)))
    rows = tuple(
        (_worth(value, dimension), *(_place(branch[i]) for branch in found.branches))
        for i, value in enumerate(found.values)
    )
    blocks.append(Table(header, rows[:_MOST_ROWS], max(0, len(rows) - _MOST_ROWS)))
    return tuple(blocks)


def _worth(value: Fraction | float, dimension: Dimension | None) -> Written:
    return amount(value, dimension if dimension is not None else NUMBER, _DIGITS)


def _said(each: Happening, name: str, dimension: Dimension | None) -> Line:
    at: tuple[str | Tree | Written, ...] = (f"{name} = ", _worth(each.value, dimension))
    exact = each.exact is not None and dimension in {None, NUMBER} and float(each.value) % 1
    if exact and each.exact is not None:
        at = (f"{name} = ", each.exact, " = ", _worth(each.value, dimension))
    match each.kind:
        case "poles meet":
            said = "two poles meet"
        case "on the jw axis":
            said = "a pair lies on the jw axis"
        case "at the origin":
            said = "a pole lies at the origin"
        case _:
            said = "a pole is at infinity"
    place: tuple[str | Tree | Written, ...] = ()
    if each.place:
        place = (" at ", complex_quantity(each.place, "rad/s", _DIGITS, pair=bool(each.place.imag)))
        if each.kind == "on the jw axis":
            place = (*place, ", f = ", amount(abs(each.place) / (2 * math.pi), HERTZ, _DIGITS, angular=False))
    return (*at, f": {said}", *place)


def _range(each: Range, name: str, dimension: Dimension | None) -> Line:
    lower, upper = ("" if math.isinf(end) else _worth(end, dimension) for end in (each.lower, each.upper))
    count = "all poles" if not each.right and not each.axis else ""
    verdict = (
        f"stable, {count} to the left"
        if count
        else f"{each.right} to the right of the jw axis, {each.axis} on it"
    )
    if not lower and not upper:
        return f"{name} of any value: {verdict}"
    if not upper:
        return (f"{name} > ", lower, f": {verdict}")
    if not lower:
        return (f"{name} < ", upper, f": {verdict}")
    return (lower, f" < {name} < ", upper, f": {verdict}")


def _place(pole: complex | None) -> Line:
    return "at infinity" if pole is None else complex_quantity(pole, "rad/s", _DIGITS)


def real_opamps_blocks(found: RealOpAmps) -> tuple[Block, ...]:
    """Each step with its poles beside the ideal ones, the poles that are new, and whether it is stable."""
    said = f"{', '.join(found.opamps)}: from ideal to real, one property after the other; changes against the ideal."
    rows = [row for step in found for row in _rows(step)]
    header = ("step", "pole", "f0", "change of f0", "Q", "change of Q", "stability")
    return (Paragraph(said), without_empty_columns(header, rows))


def _rows(step: Step) -> Iterator[tuple[Line, ...]]:
    label, verdict = step.added, str(step.stability.verdict)
    for move in step.poles:
        if move.exact.imag < 0 and (move.shortened is None or move.shortened.imag):
            continue  # stands for both of a pair
        ideal = step.added == "ideal"
        change, turned = move.f0_percent, move.q_percent
        yield (
            label,
            "pair" if move.shortened is not None and move.shortened.imag else "real",
            "infinite"
            if move.shortened is None
            else amount(move.shortened_f0, HERTZ, _DIGITS, angular=False),
            "" if ideal or move.shortened is None else _percent(change),
            "" if move.shortened_q is None else plain_number(move.shortened_q, _DIGITS),
            "" if ideal or turned is None else _percent(turned),
            verdict,
        )
        label = verdict = ""
    for root in step.more:
        if root.imag < 0:
            continue
        f0 = amount(abs(root.value) / (2 * math.pi), HERTZ, _DIGITS, angular=False)
        q = (
            ""
            if root.is_real or root.is_imaginary
            else plain_number(abs(root.value) / (-2 * root.value.real), _DIGITS)
        )
        yield (label, "new pair" if root.imag else "new, real", f0, "", q, "", verdict)
        label = verdict = ""


def _percent(value: float) -> Written:
    return quantity(value, "%", 3)
