"""A joint choice of values as blocks: the values and their figures, the proof, the runners-up, what to beware of.

Every error stands beside what was wanted. What was kept and which lists were allowed is said with the values, since
the best choice is the best of those lists and no more.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING, Final

from symnet.present.blocks import Block, Items, Line, Paragraph, Table, without_empty_columns
from symnet.present.formulas import amount
from symnet.quantities import Dimension
from symnet.typeset.numbers import Written, plain_number, quantity

if TYPE_CHECKING:
    from symnet.values.choosing_result import Candidate, Choice, Chosen, Outcome
    from symnet.values.preferred import Entry, Preferred

__all__ = ["choice_blocks", "preferred_blocks"]

_DIGITS: Final = 4
_MOST_ROWS: Final = 40
_CAUTIONS: Final = (
    (
        "The figures are those of the values as marked. Each part has a tolerance besides, and moves f0, Q or the"
        " response by an amount of that order or more: rows that differ by less than the tolerances are equally good."
    ),
    (
        "A preferred value is not always one that can be bought: capacitors are rarely made beyond E12, precise ones"
        " and very large or small resistors come in few values (common practice, no source). Look before you order."
    ),
)


def choice_blocks(choice: Choice) -> tuple[Block, ...]:
    """The choice, its figures, what was searched, the runners-up, and the cautions."""
    best = choice.best
    first = f"{choice.label}, {choice.goal}: {choice.written(best.error)}; {choice.proof}."
    blocks: list[Block] = [Paragraph(first), without_empty_columns(*_values(choice))]
    blocks.append(
        without_empty_columns(("figure", "wanted", "obtained", "error", "at f"), _figures(best.outcomes))
    )
    if best.alike:
        blocks.append(Paragraph(_alike(best)))
    rows = [
        _row("best", best, choice),
        *(_row(str(k + 2), r, choice) for k, r in enumerate(choice.runners_up)),
    ]
    if choice.rounded is not None:
        rows.append(_row("each exact value rounded by itself", choice.rounded, choice))
    if len(rows) > 1:
        names = [part.name for part in best.parts]
        figures = [_heading(outcome) for outcome in best.outcomes]
        if all(len(row) == 2 + len(names) + len(figures) for row in rows):
            blocks.append(Table(("", *names, "error", *figures), tuple(rows)))
        else:
            cut = 2 + len(names)
            blocks.append(Table(("", *names, "error"), tuple(row[:cut] for row in rows)))
    blocks.append(Items((*choice.notes, *_CAUTIONS)))
    return tuple(blocks)


def _values(choice: Choice) -> tuple[tuple[str, ...], list[tuple[Line, ...]]]:
    rows: list[tuple[Line, ...]] = []
    for part, (_, allowed) in zip(choice.best.parts, choice.lists, strict=True):
        made = _made(part.entry, part.dimension) if part.entry.how or part.entry.labels else ""
        rows.append(
            (part.name, amount(part.entry.value, part.dimension, _DIGITS), made, f"chosen from {allowed}")
        )
    rows += [(name, amount(value.value, value.dimension, _DIGITS), "", "kept") for name, value in choice.kept]
    return ("part", "value", "made of", "list"), rows


def _made(entry: Entry, dimension: Dimension) -> Line:
    """One part or two, with the names that the stock has for them."""
    line: list[str | Written] = []
    labels = entry.labels if len(entry.labels) == len(entry.parts) else ("",) * len(entry.parts)
    for k, (value, label) in enumerate(zip(entry.parts, labels, strict=True)):
        if k:
            line.append(" in series with " if entry.how == "series" else " in parallel with ")
        line.append(amount(value, dimension, _DIGITS))
        if label:
            line.append(f" ({label})")
    return tuple(line)


def _figures(outcomes: Sequence[Outcome]) -> list[tuple[Line, ...]]:
    rows: list[tuple[Line, ...]] = []
    for outcome in outcomes:
        wanted: Line = "" if outcome.wanted is None else _number(outcome, outcome.wanted)
        error: Line = "" if outcome.error is None else _percent(outcome.error)
        where: Line = "" if outcome.where is None else quantity(outcome.where, "Hz", _DIGITS)
        rows.append((outcome.name, wanted, _number(outcome, outcome.obtained), error, where))
    return rows


def _number(outcome: Outcome, value: float) -> Written:
    if outcome.unit:
        return quantity(value, outcome.unit, 3 if outcome.unit == "dB" else _DIGITS)
    return amount(value, outcome.dimension, _DIGITS)


def _percent(error: float) -> Written:
    shown = quantity(100 * error, "%", 2)
    if error <= 0:
        return shown
    return Written(f"+{shown.text}", f"+{shown.latex}", f"+{shown.html}")


def _heading(outcome: Outcome) -> str:
    return "error in dB" if outcome.unit == "dB" else outcome.name


def _row(label: str, candidate: Candidate, choice: Choice) -> tuple[Line, ...]:
    figures: list[Line] = []
    for outcome in candidate.outcomes:
        shown = _number(outcome, outcome.obtained)
        figures.append(shown if outcome.error is None else (shown, " (", _percent(outcome.error), ")"))
    return (label, *_cells(candidate.parts), choice.written(candidate.error), *figures)


def _cells(parts: Sequence[Chosen]) -> Iterator[Line]:
    for part in parts:
        if part.entry.how is None:
            yield amount(part.entry.value, part.dimension, _DIGITS)
        else:
            sign = " + " if part.entry.how == "series" else " || "
            one, two = (amount(value, part.dimension, _DIGITS) for value in part.entry.parts)
            yield (one, sign, two)


def _alike(best: Candidate) -> Line:
    said = "; ".join(", ".join(str(part) for part in parts) for parts in best.alike[:3])
    more = best.alike_count - min(3, len(best.alike))
    return (
        "The same response, with parts exchanged or at another impedance level, have: "
        f"{said}{f'; and {more} more' if more > 0 else ''}."
    )


def preferred_blocks(values: Preferred) -> tuple[Block, ...]:
    """The list in words, and its first values, one a row where they are made of two parts."""
    blocks: list[Block] = [Paragraph(f"{values}.")]
    if not values.entries:
        figures = [str(plain_number(figure)) for figure in values.decade]
        return (*blocks, Paragraph(f"{' '.join(figures)}, times powers of ten (IEC 60063)."))
    if any(entry.how or entry.labels for entry in values.entries):
        rows = [
            (amount(e.value, values.dimension, _DIGITS), _made(e, values.dimension))
            for e in values.entries[:_MOST_ROWS]
        ]
        return (*blocks, Table(("value", "made of"), tuple(rows), max(0, len(values) - _MOST_ROWS)))
    line: list[str | Written] = []
    for k, entry in enumerate(values.entries[:_MOST_ROWS]):
        line += [", " * bool(k), amount(entry.value, values.dimension, _DIGITS)]
    line.append(" ..." if len(values) > _MOST_ROWS else "")
    return (*blocks, Paragraph(tuple(piece for piece in line if piece != "")))
