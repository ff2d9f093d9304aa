"""A comparison as blocks: the parts first, then H, coefficient by coefficient, gains, -3.0103 dB and poles.

What is equal is said in few words and what differs has a row, so that a page without rows means that nothing changed.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import replace
from typing import TYPE_CHECKING, Final

from symnet.circuit.names import dimensions
from symnet.circuit.parts import CurrentLaw, Part, VoltageLaw
from symnet.circuit.series import spoken
from symnet.circuit.spelling import write_expression
from symnet.circuit.writing import write_coupling, write_drive
from symnet.exact.naming import Naming
from symnet.expressions import Number
from symnet.present.blocks import Block, Heading, Items, Line, Paragraph, Table, without_empty_columns
from symnet.present.formulas import amount
from symnet.present.network import parts_table
from symnet.present.results import transfer_formula
from symnet.quantities import HERTZ, NUMBER, Dimension
from symnet.typeset.notation import tree_of
from symnet.typeset.numbers import Written, complex_quantity, plain_number, quantity
from symnet.typeset.tree import Atom, Tree, power

if TYPE_CHECKING:
    from symnet.circuit.changes import Moved, Revalued
    from symnet.circuit.network import Network
    from symnet.circuit.parts import Value
    from symnet.exact.roots import Root
    from symnet.shape.closed import Closed, Figure
    from symnet.shape.coefficients import CoefficientChange, GainChange
    from symnet.shape.difference import Comparison, FunctionChange, PoleChange
    from symnet.shape.figures import Crossing, HalfPower

__all__ = ["comparison_blocks"]

_DIGITS: Final = 5
_SHIFT_DIGITS: Final = 4
#: A coefficient of more terms is not written into a cell.
_LONGEST_CLOSED: Final = 40
_MOST_ROWS: Final = 40


def comparison_blocks(comparison: Comparison) -> tuple[Block, ...]:
    """The changes of the drawing and of H."""
    blocks: list[Block] = []
    if not comparison:
        blocks.append(Paragraph(f"Nothing changed{_in_h(comparison)}."))
    else:
        blocks += _drawing(comparison)
    if comparison.note:
        blocks.append(Paragraph(comparison.note))
    if comparison and comparison.function is not None:
        blocks += _function(comparison.function)
    return tuple(blocks)


def _in_h(comparison: Comparison) -> str:
    return ", in the drawing and in H" if comparison.same_function else " in the drawing"


# -- the drawing ---------------------------------------------------------------------------------------------------


def _drawing(comparison: Comparison) -> Iterator[Block]:
    found = comparison.changes
    if not found:
        yield Paragraph("The drawing is the same.")
        return
    for title, parts, network in (
        ("Added", found.added, comparison.after),
        ("Removed", found.removed, comparison.before),
    ):
        if parts:
            yield Heading(f"{title}: {len(parts)} part{'s' * (len(parts) > 1)}")
            yield _parts(parts, network)
    if found.moved:
        yield Heading("Moved")
        yield Table(("part", "before", "after"), tuple(_moved_row(each) for each in found.moved))
    rows = [*(_law_row(each) for each in found.relaid), *_value_rows(found.values, comparison)]
    if rows:
        yield Heading("Values")
        yield without_empty_columns(("name", "before", "after", "change"), rows)
    lines = [f"node {old} is now called {new}" for old, new in found.renamed]
    for word, texts in (
        ("no longer", [write_coupling(each) for each in found.couplings[0]]),
        ("new:", [write_coupling(each) for each in found.couplings[1]]),
        ("no longer", [write_drive(drive) for drive in found.drives[0]]),
        ("new:", [write_drive(drive) for drive in found.drives[1]]),
        ("no longer", [f"read {write_expression(read)}" for read in found.reads[0]]),
        ("new:", [f"read {write_expression(read)}" for read in found.reads[1]]),
    ):
        lines += [f"{word} {text}" for text in texts]
    if lines:
        yield Items(tuple(lines))


def _parts(parts: Sequence[Part], network: Network) -> Table:
    """The table of parts, of these alone."""
    names = {part.name for part in parts}
    values = tuple((name, value) for name, value in network.values if name in names)
    table = parts_table(replace(network, parts=tuple(parts), values=values), Naming.of(network).numbers)
    return without_empty_columns(table.header, table.rows)


def _moved_row(moved: Moved) -> tuple[Line, ...]:
    turned = ", the other way round" if moved.is_turned else ""
    return (moved.name, _where(moved.before), _where(moved.after) + turned)


def _where(part: Part) -> str:
    return ", ".join(spoken(node).removeprefix("node ") for node in part.nodes)


def _law_row(moved: Moved) -> tuple[Line, ...]:
    return (moved.name, _law(moved.before), _law(moved.after), "")


def _law(part: Part) -> Line:
    if not isinstance(part, VoltageLaw | CurrentLaw):
        return ""
    return (f"{'hold' if isinstance(part, VoltageLaw) else 'push'} = ", tree_of(part.value))


def _value_rows(values: Sequence[Revalued], comparison: Comparison) -> Iterator[tuple[Line, ...]]:
    units = {**dimensions(comparison.before), **dimensions(comparison.after)}
    for each in values:
        unit = units.get(each.name)
        change = each.relative
        tolerances = each.before is not None and each.after is not None
        shown: Line = "" if change is None else _percent(float(100 * change))
        if change == 0 and tolerances:
            shown = "the tolerance"
        yield (each.name, _value(each.before, unit), _value(each.after, unit), shown)


def _value(value: Value | None, unit: Dimension | None) -> Line:
    if value is None:
        return "symbol, no value"
    tolerance = "" if value.tolerance is None else f" ±{plain_number(100 * value.tolerance)} %"
    if isinstance(value.expression, Number):
        return (amount(value.expression.value, unit, _DIGITS), tolerance)
    return ("= ", tree_of(value.expression), tolerance)


# -- H -------------------------------------------------------------------------------------------------------------


def _function(found: FunctionChange) -> Iterator[Block]:
    yield Heading("H")
    if found.same:
        yield Paragraph("H is the same function, before and after.")
        return
    for when, transfer in (("before", found.before), ("after", found.after)):
        formula = transfer_formula(transfer)
        if formula is not None:
            yield Paragraph((f"{when}: {transfer.label} = ", formula.sides[-1]))
    if found.coefficients:
        yield Paragraph(f"H = N/D, divided so that {found.normalised} in both:")
        yield _coefficients(found.coefficients)
    rows = [_gain_row(gain) for gain in found.gains]
    rows += list(_half_power_rows(*found.half_power))
    rows += [_pole_row(pole) for pole in found.poles]
    if rows:
        yield _cut(("figure", "before", "after", "change"), rows)
    if found.notes:
        yield Items(found.notes)


def _coefficients(coefficients: Sequence[CoefficientChange]) -> Table:
    header = ("", "before", "after", "change", "number before", "number after", "change")
    return _cut(header, [_coefficient_row(c) for c in coefficients])


def _cut(header: Sequence[str], rows: Sequence[tuple[Line, ...]]) -> Table:
    table = without_empty_columns(header, rows[:_MOST_ROWS])
    return replace(table, omitted=len(rows) - len(table.rows))


def _coefficient_row(c: CoefficientChange) -> tuple[Line, ...]:
    name: Line = (power(Atom("s"), c.power), f" in {c.side}") if c.power else f"constant in {c.side}"
    figures = (c.before, c.after)
    in_symbols: tuple[Line, ...] = ("", "")
    change: Line = ""
    closed = [figure.closed for figure in figures if figure.closed is not None]
    if any(not _is_number(each) for each in closed) or c.numbers is None:
        in_symbols = tuple(_tree(each) for each in closed)
        change = _tree(c.change) if c.change is not None and c.change.num else "only the values"
    if c.unchanged:
        return (name, *in_symbols, "unchanged", *(_number(figure) for figure in figures), "")
    return (name, *in_symbols, change, *(_number(figure) for figure in figures), _number_change(c))


def _number_change(c: CoefficientChange) -> Line:
    if c.numbers is None:
        return ""
    before, after = c.numbers
    if before == after:
        return "the same"
    relative = c.relative
    return "new" if not before else "gone" if not after or relative is None else _percent(100 * relative)


def _tree(closed: Closed) -> Line:
    terms = 0 if _is_number(closed) else len(closed.num) + len(closed.den)
    return closed.tree() if terms <= _LONGEST_CLOSED else f"{terms} terms"


def _is_number(closed: Closed) -> bool:
    return all(not hasattr(piece, "ring") or piece.is_ground for piece in (closed.num, closed.den))


def _number(figure: Figure) -> Line:
    return "" if figure.value is None else amount(figure.value, figure.dimension, _DIGITS)


def _percent(value: float) -> Written:
    sign = "+" if value > 0 else ""
    number = plain_number(value, _SHIFT_DIGITS)
    return Written(f"{sign}{number.text} %", rf"{sign}{number.latex}\,\%", f"{sign}{number.html} %")


def _gain_row(gain: GainChange) -> tuple[Line, ...]:
    return (gain.where, _level(gain.before), _level(gain.after), _gain_change(gain.before, gain.after))


def _gain_change(before: Figure | None, after: Figure | None) -> Line:
    if before is None or after is None:
        return "unchanged" if before is after else ""
    if not before.value or not after.value:
        return "unchanged" if before == after else ""
    shift = 20 * math.log10(abs(after.value / before.value))
    if before.value * after.value < 0:
        return (quantity(shift, "dB"), ", sign turned")
    return quantity(shift, "dB") if shift else "unchanged"


def _level(figure: Figure | None) -> Line:
    if figure is None:
        return "infinite"
    if figure.value is None:
        return "" if figure.closed is None else _tree(figure.closed)
    number = amount(figure.value, figure.dimension, _DIGITS)
    if figure.dimension != NUMBER or not figure.value:
        return number
    return (number, "\u00a0(", quantity(20 * math.log10(abs(figure.value)), "dB"), ")")


def _half_power_rows(before: HalfPower | None, after: HalfPower | None) -> Iterator[tuple[Line, ...]]:
    """Crossings of the same direction side by side, in rising order, as far as both have them."""
    if before is None and after is None:
        return
    lists = [list(found.crossings) if found is not None else [] for found in (before, after)]
    words = [found.reference for found in (before, after) if found is not None]
    relative = f"relative to {words[0]}"
    if words[0] != words[-1]:
        relative = f"relative to {words[0]} before and {words[-1]} after"
    for direction in ("rising", "falling", "touching"):
        old, new = ([c for c in found if c.direction == direction] for found in lists)
        for k in range(max(len(old), len(new))):
            a, b = (found[k] if k < len(found) else None for found in (old, new))
            comparable = a is not None and b is not None and words[0] == words[-1]
            change: Line = _shift(a.f, b.f) if comparable and a and b else ""
            yield (f"f3dB, {direction}, {relative}", _crossing(a), _crossing(b), change)


def _crossing(crossing: Crossing | None) -> Line:
    return "none" if crossing is None else amount(crossing.f, HERTZ, _DIGITS, angular=False)


def _shift(before: float, after: float) -> Line:
    return "unchanged" if before == after else _percent(100 * (after / before - 1))


def _pole_row(pole: PoleChange) -> tuple[Line, ...]:
    relative = pole.relative
    change: Line = ""
    if relative is not None and pole.before is not None and pole.after is not None:
        same = pole.before.value == pole.after.value
        change = "unchanged" if same else ("|s| ", _percent(100 * relative))
    return ("pole s =", _place(pole.before), _place(pole.after), change)


def _place(root: Root | None) -> str | Tree | Written | tuple[str | Tree | Written, ...]:
    if root is None:
        return "none"
    f0 = amount(abs(root.value) / (2 * math.pi), HERTZ, _SHIFT_DIGITS, angular=False)
    place = complex_quantity(root.value, "rad/s", _SHIFT_DIGITS, pair=root.imag > 0)
    return (place, " (f0 = ", f0, ")") if root.value else place
