"""Dominant terms and split poles as blocks: the formula, then every error with its unit and where it occurs.

H' is the shortened H throughout. What a term was worth stands beside what its loss has done: to the coefficient, to
every pole and zero, and to |H| and phase in the band; for these three can differ by orders of magnitude.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING, Final

from symnet.present.blocks import Block, Formula, Line, Paragraph, Table, without_empty_columns
from symnet.present.formulas import amount
from symnet.present.results import FIRST_TERMS, MOST_GROUPED
from symnet.quantities import HERTZ, SECOND
from symnet.shape.split import FAR_APART
from symnet.typeset.numbers import Written, complex_quantity, plain_number, quantity
from symnet.typeset.polynomials import collected
from symnet.typeset.tree import Tree, over

if TYPE_CHECKING:
    from symnet.exact.roots import Root
    from symnet.shape.deviation import Worst
    from symnet.shape.dominant import Change, Dominant, Dropped
    from symnet.shape.moves import Move
    from symnet.shape.split import SplitPole, SplitPoles

__all__ = ["dominant_blocks", "split_blocks"]

_DIGITS: Final = 4
_PERCENT_DIGITS: Final = 3
_MOST_ROWS: Final = 30


def dominant_blocks(found: Dominant) -> tuple[Block, ...]:
    """The shortened H, its largest errors in the band, what was dropped, and what has changed by it."""
    low, high = (amount(f, HERTZ, _DIGITS, angular=False) for f in found.band)
    allowed = quantity(found.within_db, "dB"), quantity(found.within_deg, "deg")
    formula = Formula((_shortened(found),), "H'")
    if not found.dropped:
        bounds = (" within ± ", allowed[0], " and ± ", allowed[1], " from ", low, " to ", high)
        return (
            formula,
            Paragraph(("No term can be dropped", *bounds, f": H' = H = {found.label}.")),
            *_held(found),
        )
    (n, d), (exact_n, exact_d) = found.terms, found.exact_terms
    left = f"H' has {n} over {d} of the {exact_n} over {exact_d} terms of H = {found.label}. From "
    blocks: list[Block] = [
        formula,
        Paragraph((left, low, " to ", high, f" its largest errors, H' against H, are ({found.proof}):")),
        Table(
            ("error", "value", "at f", "at w", "allowed"),
            (
                _error_row("20 log10 |H'/H|", found.error_db, "dB", allowed[0]),
                _error_row("phase of H' minus phase of H", found.error_deg, "deg", allowed[1]),
            ),
        ),
    ]
    blocks += [
        _cut(
            ("dropped", "from", "share of its coefficient", "largest share of N(jw) or D(jw) in the band"),
            [_dropped_row(term) for term in found.dropped],
        ),
        _cut(("coefficient", "of H", "of H'", "change"), [_change_row(c) for c in found.coefficients]),
    ]
    blocks += _held(found)
    named = [*_named(found.poles), *_named(found.zeros)]
    if named:
        places = ("", "of H", "of H'", "moved by")
        blocks.append(_cut(places, [_place_row(name, move) for name, move in named]))
        figures = ("", "f0 of H", "f0 of H'", "change of f0", "Q of H", "Q of H'", "change of Q")
        blocks.append(_cut(figures, [_figure_row(name, move) for name, move in named]))
    return tuple(blocks)


def _held(found: Dominant) -> list[Block]:
    if not found.held:
        return []
    terms = "1 term was" if found.held == 1 else f"{found.held} terms were"
    return [Paragraph(f"{terms} kept only because a pole would have gone into the right half plane without.")]


def _shortened(found: Dominant) -> Tree:
    if max(found.terms) > MOST_GROUPED:
        return over(collected(found.numerator, FIRST_TERMS), collected(found.denominator, FIRST_TERMS))
    return found.tree


def _cut(header: Sequence[str], rows: Sequence[tuple[Line, ...]]) -> Table:
    table = without_empty_columns(header, rows[:_MOST_ROWS])
    return Table(table.header, table.rows, len(rows) - len(table.rows))


def _error_row(what: str, worst: Worst, unit: str, bound: Written) -> tuple[Line, ...]:
    f = amount(worst.f, HERTZ, _DIGITS, angular=False)
    w = amount(2 * math.pi * worst.f, HERTZ, _DIGITS)
    return (what, quantity(worst.value, unit, 3), f, w, ("± ", bound))


def _percent(value: float) -> Written:
    return quantity(value, "%", _PERCENT_DIGITS)


def _dropped_row(term: Dropped) -> tuple[Line, ...]:
    return (term.tree, term.side, _percent(term.percent), _percent(100 * term.weight))


def _change_row(change: Change) -> tuple[Line, ...]:
    exact, now = (amount(value, change.dimension, _DIGITS) for value in (change.exact, change.shortened))
    return (f"s^{change.power} in the {change.side}", exact, now, _percent(change.percent))


def _named(moves: Sequence[Move]) -> Iterator[tuple[str, Move]]:
    """Each with a number; a pair that has stayed a pair, or has gone as one, stands once for both."""
    number = 0
    for move in moves:
        both = move.shortened is None or move.shortened.imag != 0
        if move.exact.imag < 0 and both:
            continue
        number += 1
        yield f"{move.kind} {'pair ' if move.exact.imag and both else ''}{number}", move


def _place_row(name: str, move: Move) -> tuple[Line, ...]:
    if move.shortened is None:
        return (name, _place(move.exact), "gone to infinity", "")
    return (name, _place(move.exact), _place(move.shortened), _percent(move.shift_percent))


def _figure_row(name: str, move: Move) -> tuple[Line, ...]:
    before, after = (amount(f, HERTZ, _DIGITS, angular=False) for f in (move.f0, move.shortened_f0))
    return (
        name,
        before,
        "" if move.shortened is None else after,
        "" if move.shortened is None else _percent(move.f0_percent),
        *("" if q is None else plain_number(q, _DIGITS) for q in (move.q, move.shortened_q)),
        "" if move.q_percent is None else _percent(move.q_percent),
    )


def _place(root: Root) -> Written:
    return complex_quantity(root.value, "rad/s", _DIGITS, pair=bool(root.imag))


# -- split poles ------------------------------------------------------------------------------------------------


def split_blocks(found: SplitPoles) -> tuple[Block, ...]:
    """H with its denominator in first-order factors, each pole by its formula beside the exact one, the criterion."""
    blocks: list[Block] = [
        Formula((found.tree,), "H'"),
        Paragraph(
            f"H' stands for H = {found.label}: each real pole as a ratio of neighbouring coefficients."
        ),
        _cut(
            (
                "pole, by formula",
                "value",
                "tau",
                "exact pole",
                "f0 of the exact pole",
                "error of the formula",
            ),
            [_pole_row(pole) for pole in found.poles],
        ),
    ]
    if found.at_origin:
        count = f"{found.at_origin} poles" if found.at_origin > 1 else "1 pole"
        blocks.append(Paragraph(f"{count} at the origin, exact."))
    blocks.append(Paragraph(_criterion(found)))
    return tuple(blocks)


def _pole_row(pole: SplitPole) -> tuple[Line, ...]:
    closed, value = pole.approximation.closed, pole.approximation.value
    symbols = closed is not None and hasattr(closed.num, "ring")
    return (
        closed.tree() if closed is not None and symbols else "",
        "" if value is None else amount(value, HERTZ, _DIGITS),
        "" if pole.tau.value is None else amount(pole.tau.value, SECOND, _DIGITS),
        _place(pole.exact),
        amount(pole.f0, HERTZ, _DIGITS, angular=False),
        _percent(pole.error_percent),
    )


def _criterion(found: SplitPoles) -> str:
    if not found.separations:
        return "There is one pole only: the formula is exact."
    listed = ", ".join(plain_number(value, _DIGITS).text for value in found.separations)
    said = (
        f"Ratio of each time constant to the next: {listed}. The form is for ratios of {FAR_APART} and more: "
    )
    if found.far_apart:
        return said + "it may be used here, with the errors above."
    return said + "the poles are NOT far apart, the errors above tell what comes of it."
