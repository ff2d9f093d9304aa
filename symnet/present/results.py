"""One function for each result of the engine: the value in, blocks out. Every number has its unit and convention."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.circuit.parts import CurrentDrive
from symnet.exact.determinant import count_in_words
from symnet.exact.polynomials import by_powers_of_s
from symnet.present.blocks import (
    Block,
    Formula,
    Heading,
    Items,
    Line,
    Paragraph,
    Table,
    without_empty_columns,
)
from symnet.present.formulas import amount, label_tree, with_power_of_s
from symnet.quantities import AMPERE, NUMBER, SECOND, VOLT, Dimension
from symnet.shape.stability import cancelled_by_values, stability_of_factor, stability_of_mode
from symnet.typeset.notation import tree_of
from symnet.typeset.numbers import Written, complex_quantity, plain_number, quantity
from symnet.typeset.polynomials import collected
from symnet.typeset.tree import Atom, Tree, over

if TYPE_CHECKING:
    from symnet.exact.hidden import HiddenMode
    from symnet.exact.limits import Limit, Limits
    from symnet.exact.mna import Equations
    from symnet.exact.roots import Root
    from symnet.exact.transfer import Transfer
    from symnet.shape.stability import Stability
    from symnet.shape.stated import Alternative, Condition, Conditions

__all__ = [
    "conditions_blocks",
    "equations_blocks",
    "hides",
    "limits_table",
    "shortened",
    "transfer_blocks",
    "transfer_formula",
    "unit_of",
]

#: H with more terms than this is not grouped: nobody reads it, and only the first terms of each power are set.
MOST_GROUPED: Final = 150
FIRST_TERMS: Final = 3
#: H with more terms than this is not written out for a showing.
MOST_TERMS: Final = 100_000
MOST_EQUATIONS: Final = 40


# -- H(s) -------------------------------------------------------------------------------------------------------


def unit_of(transfer: Transfer) -> str:
    """The unit of H as read over drive: V/V, A/A, V/A (ohm) or A/V (siemens)."""
    below = AMPERE if isinstance(transfer.drive, CurrentDrive) else VOLT
    above = transfer.dimension * below
    ratio = f"{above if above in {VOLT, AMPERE} else f'({above})'}/{below}"
    return ratio if transfer.dimension == NUMBER else f"{ratio} = {transfer.dimension}"


def transfer_formula(transfer: Transfer) -> Formula | None:
    """H(s) = out/in = ..., or None when it has too many terms to be written out."""
    from symnet.exact.readable.forms import readable_transfer

    if max(transfer.terms) > MOST_TERMS:
        return None
    n, d = transfer.numerator, transfer.denominator
    if shortened(transfer):
        tree = over(collected(n, FIRST_TERMS), collected(d, FIRST_TERMS))
    else:
        tree = readable_transfer(n, d)
    return Formula((label_tree(transfer.label), tree), "H")


def shortened(transfer: Transfer) -> bool:
    """Whether a showing holds only the first terms of each power of s; H is written out for the answer."""
    return max(len(transfer.numerator), len(transfer.denominator)) > MOST_GROUPED


def transfer_blocks(transfer: Transfer) -> tuple[Block, ...]:
    """H as a formula, its unit, its order, how it was confirmed, and what it hides."""
    formula = transfer_formula(transfer)
    if formula is None:
        above, below = transfer.terms
        text = (
            f"H(s) = {transfer.label}, written out, has up to {count_in_words(above)} "
            f"term{'s' * (above != 1)} over {count_in_words(below)}. To see "
            'it, keep fewer names as symbols, as in derive(net, symbols="R1 C1").'
        )
        return (Paragraph(text), Items((f"unit: {unit_of(transfer)}", f"confirmed: {transfer.confirmation}")))
    return (formula, Items(tuple(_about(transfer))))


def _about(transfer: Transfer) -> Iterator[Line]:
    yield f"unit: {unit_of(transfer)}; {_units_checked(transfer)}"
    storing = [part.name for part in transfer.network.branches() if part.kind in "LC"]
    if shortened(transfer):
        yield f"terms: {len(transfer.numerator)} over {len(transfer.denominator)}; the first of each power are shown"
    yield f"order {_order(transfer)}; parts that store energy: {', '.join(storing) or 'none'}"
    yield f"confirmed: {transfer.confirmation}"
    yield from _hidden(transfer)


def _units_checked(transfer: Transfer) -> str:
    """What the check of the units of every term has found."""
    from symnet.shape.dimensions import check_dimensions

    found = check_dimensions(transfer)
    if found:
        return "units that do not fit: " + "; ".join(map(str, found))
    unknown = [name for name in transfer.names if transfer.dimensions.get(name) is None]
    left_out = f" (terms with {', '.join(unknown)}, whose unit is not known, left out)" if unknown else ""
    return f"the units of all terms agree, power by power{left_out}"


def _order(transfer: Transfer) -> int:
    return max((monomial[0] for monomial in transfer.denominator), default=0)


def _hidden(transfer: Transfer) -> Iterator[Line]:
    """One line for each hidden mode: where it lies, in which parts, why H does not show it, whether it dies out."""
    from symnet.exact.roots import roots

    for mode in transfer.hidden:
        parts = f": {', '.join(mode.parts)}" if mode.parts else ""
        yield (
            "hidden mode",
            *_where(mode),
            *_numbers(mode, transfer),
            f"{parts}; {mode.reason.value}",
            _fate(mode, transfer),
        )
    common = cancelled_by_values(transfer)
    if len(common) > 1:
        fate = _said(stability_of_factor(common))
        said = "hidden mode with these values, and only with exactly these: a factor with s cancels that is there in symbols"
        yield (said, *_places(roots(common)), fate, *_tail(roots(common)))
    elif not transfer.hidden:
        yield "hidden modes: none, no factor with s has cancelled"


def hides(transfer: Transfer) -> bool:
    """Whether a mode of the network does not show in this H, in symbols or with its values."""
    return bool(transfer.hidden) or len(cancelled_by_values(transfer)) > 1


def _tail(found: Sequence[Root]) -> Iterator[str | Written]:
    """What a mismatch of the values does to the step response, for one real mode that dies out."""
    if len(found) == 1 and not found[0].imag and found[0].real < 0:
        yield "; a mismatch of the values leaves a tail of about its size in the step response, time constant "
        yield amount(-1 / found[0].real, SECOND, 5)


def _where(mode: HiddenMode) -> Iterator[str | Tree]:
    """At s = ... for one root, else the equation."""
    from symnet.exact.readable.forms import readable, readable_ratio

    if mode.factor is None:
        yield "s, of a factor with too many terms to be written out"
        return
    coefficients = by_powers_of_s(mode.factor)
    if len(coefficients) == 2:
        yield " at s = "
        yield readable_ratio(-coefficients[0], coefficients[1]) if coefficients[0] else "0"
    else:
        yield "s where 0 = "
        yield readable(mode.factor)


def _numbers(mode: HiddenMode, transfer: Transfer) -> Iterator[str | Written]:
    from symnet.exact.roots import roots

    try:
        coefficients = mode.coefficients(transfer.values)
    except KeyError:
        return
    if any(coefficients[1:]) and any(coefficients[:-1]):
        yield from _places(roots(coefficients))


def _fate(mode: HiddenMode, transfer: Transfer) -> str:
    return _said(stability_of_mode(mode, transfer))


def _said(stability: Stability) -> str:
    """What becomes of a hidden mode, and a warning when it does not die out."""
    match stability.verdict:
        case "stable":
            return f"; it dies out ({stability.reason})"
        case "marginal":
            return "; WARNING: on the jw axis, it neither dies out nor grows, and H does not show it"
        case "unstable":
            return "; IT GROWS WITH TIME: the network is unstable, whatever this H says"
        case "conditional":
            return "; it dies out for some values only: give the parts values"
        case _:
            return ""


def _places(found: Sequence[Root]) -> Iterator[str | Written]:
    """Where hidden modes lie."""
    shown = [root for root in found if root.imag >= 0]
    for k, root in enumerate(shown):
        yield ", " if k else " (s = "
        yield _root(root)
    if shown:
        yield ")"


def _root(root: Root) -> Written:
    return complex_quantity(root.value, "rad/s", 5, pair=root.imag > 0)


# -- limits -----------------------------------------------------------------------------------------------------


def limits_table(ends: Limits, values: Mapping[str, Fraction], dimension: Dimension) -> Table:
    """H at DC and at high frequency, from H and from the network; ``dimension`` is that of H."""
    header = ("where", "H tends to", "value", "slope of |H|", "because", "from the network alone")
    rows = [_limit_row(end, _limit_value(end, values, dimension)) for end in (ends.dc, ends.high)]
    return without_empty_columns(header, rows)


def _limit_row(limit: Limit, value: Line) -> tuple[Line, ...]:
    from symnet.exact.readable.forms import readable_ratio

    tree = with_power_of_s(readable_ratio(limit.numerator, limit.denominator), limit.power)
    approach: Line = tree
    if limit.is_zero:
        approach = ("0, as ", tree) if limit.numerator else "0"
    elif limit.is_infinite:
        approach = ("infinity, as ", tree)
    agreement = {True: "the same", False: "NOT the same", None: "not available"}[limit.from_network]
    slope = f"{limit.slope:+d} dB/decade" if limit.slope else "0 dB/decade"
    return (limit.where, approach, value, slope, limit.reason, agreement)


def _limit_value(limit: Limit, values: Mapping[str, Fraction], dimension: Dimension) -> Line:
    """The number, with dB where H is a ratio of like quantities."""
    from symnet.shape.closed import value_of

    if limit.power or not limit.numerator:
        return ""
    try:
        value = value_of(limit.numerator, values) / value_of(limit.denominator, values)
    except (KeyError, ZeroDivisionError):
        return ""
    number = amount(value, dimension)
    if dimension != NUMBER or not value:
        return number
    decibels = 20 * (math.log10(abs(value.numerator)) - math.log10(value.denominator))
    return (number, "\u00a0(", quantity(decibels, "dB"), ")")


# -- recognition --------------------------------------------------------------------------------------------------


def conditions_blocks(found: Conditions) -> tuple[Block, ...]:
    """One row for each family: when H is a member of it, and its frequencies then."""
    rows: list[tuple[Line, ...]] = [_condition_row(condition) for condition in found.conditions]
    header = ("shape", "H is this shape", "then")
    blocks: list[Block] = [without_empty_columns(header, rows)] if rows else []
    if found.quality is not None:
        bound = f"; {found.quality_bound}" if found.quality_bound else ""
        blocks.append(Paragraph(("Q = ", found.quality, bound)))
    if found.note:
        blocks.append(Paragraph(found.note))
    if found.assumption:
        blocks.append(Paragraph(f"assuming {found.assumption}"))
    return tuple(blocks)


def _condition_row(condition: Condition) -> tuple[Line, ...]:
    if condition.status in {"never", "open"}:
        return (condition.name, f"{condition.status}: {condition.reason}", "")
    when: list[str | Tree | Written] = []
    if condition.status != "always":
        for k, way in enumerate(condition.alternatives):
            when += [" or " if k else "if and only if ", *_way(way)]
    when += [f", {condition.with_symbols}"] if condition.symbols else []
    then: list[str | Tree | Written] = []
    for k, formula in enumerate(condition.formulas):
        factor = "" if formula.factor == 1 else f"{plain_number(formula.factor, 5)} · "
        worked = f" = {formula.worked}" if formula.worked else ""
        then += [", " if k else "", f"{formula.name} = {factor}", formula.tree, worked]
    return (condition.name, tuple(when) or "always", tuple(then) or "")


def _way(way: Alternative) -> Iterator[str | Tree | Written]:
    pieces: list[tuple[str | Tree | Written, ...]] = [
        (Atom(name), " = ", tree, way.worked_out(name)) for name, tree in way.values
    ]
    pieces += [(left, f" {sign.replace('>=', '≥')} ", right) for left, sign, right in way.relations]
    for k, piece in enumerate(pieces):
        if k:
            yield " and "
        yield from piece
    if way.needed:
        yield f" (where {', '.join(way.needed)} must be positive)"


# -- equations ----------------------------------------------------------------------------------------------------


def equations_blocks(system: Equations) -> tuple[Block, ...]:
    """The nodal equations, one a row, as they are written by hand."""
    shown = system.lines[:MOST_EQUATIONS]
    rows = tuple((line.label, (tree_of(line.left), " = ", tree_of(line.right))) for line in shown)
    return (
        Heading("Equations"),
        Table(("row", "equation"), rows, len(system.lines) - len(shown)),
        Paragraph(
            f"Unknowns: {', '.join(system.unknowns[:MOST_EQUATIONS])}. A node's name is its voltage against gnd. "
            "KCL rows: the currents that leave the node, in A. Laws: voltages, in V."
        ),
    )
