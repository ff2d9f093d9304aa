"""The normal form and the sections as blocks: the formula, then each figure with unit, formula and value."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING, Final

from symnet.present.blocks import Block, Formula, Items, Line, Paragraph, Table, without_empty_columns
from symnet.present.formulas import amount, with_power_of_s
from symnet.quantities import HERTZ
from symnet.shape.closed import Closed, Figure
from symnet.typeset.numbers import Written, complex_quantity
from symnet.typeset.tree import ONE, Atom, Tree, number, over, plus, power, times

if TYPE_CHECKING:
    from symnet.shape.forms import Form
    from symnet.shape.normal import NormalForm
    from symnet.shape.sections import Section, Sections

__all__ = ["form_blocks", "normal_blocks", "sections_blocks"]

_DIGITS: Final = 5
#: Closed forms with more terms than this stay behind their number.
_LONGEST_CLOSED: Final = 40


def normal_blocks(form: NormalForm) -> tuple[Block, ...]:
    """K, w0, f0, tau and the normalised coefficients, in symbols and in numbers."""
    named = {"K": form.gain, "": form.gain_at_infinity}
    rows: list[tuple[Line, ...]] = [("band, order n", f"{form.band}, {form.order}", "")]
    rows += [
        (f"{letter} = {gain.name}" if letter else gain.name, *_formula_and_number(gain.figure))
        for letter, gain in named.items()
        if gain is not None
    ]
    if form.leading is not None and not _leads_with_gain(form):
        rows.append((_lead_name(form), *_formula_and_number(form.leading)))
    if form.w0 is not None:
        rows.append(("w0", *_formula_and_number(form.w0)))
    if form.f0 is not None:
        rows.append(("f0 = w0/(2 pi)", "", amount(form.f0, HERTZ, _DIGITS, angular=False)))
    if form.tau is not None:
        rows.append(("tau = 1/w0", *_formula_and_number(form.tau)))
    rows += _coefficients("c", form.denominator)
    rows += _coefficients("n", form.numerator)
    rows.append(("stability", f"{form.stability.verdict}: {form.stability.reason}", ""))
    blocks: list[Block] = [*_shape(form), Table(("figure", "formula", "value"), tuple(rows))]
    if form.notes:
        blocks.append(Items(form.notes))
    return tuple(blocks)


def _leads_with_gain(form: NormalForm) -> bool:
    """Whether K is what stands in front of the fraction."""
    return form.gain is not None and form.gain.figure == form.leading


def _lead_name(form: NormalForm) -> str:
    power = form.zeros_at_origin - form.poles_at_origin
    return f"K_0, coefficient of s^{power}" if power else "K_0 = H(0)"


def _shape(form: NormalForm) -> tuple[Block, ...]:
    """H = K s^(z-m) (1 + n1 x + ...)/(1 + c1 x + ...), x = s*tau, with the names of what is there."""
    if form.gain is None:
        return (Paragraph("H = 0"),)
    x = Atom("x")

    def polynomial(letter: str, figures: Sequence[Figure]) -> Tree:
        terms = (
            times(_name(letter, k, f), power(x, k)) for k, f in enumerate(figures) if k and not _is_zero(f)
        )
        return plus(ONE, *terms)

    gain = Atom("K" if _leads_with_gain(form) else "K_0")
    s_power = form.zeros_at_origin - form.poles_at_origin
    lead = times(gain, power(Atom("s"), s_power)) if s_power > 0 else with_power_of_s(gain, s_power)
    tree = times(lead, over(polynomial("n", form.numerator), polynomial("c", form.denominator)))
    formula = Formula((tree,), "H")
    return (formula, Paragraph("x = s tau = s/w0")) if form.w0 is not None else (formula,)


def _name(letter: str, k: int, figure: Figure) -> Tree:
    unit = _unit(figure)
    return Atom(f"{letter}_{k}") if unit is None else number(unit)


def _unit(figure: Figure) -> int | None:
    """+1 or -1 when the figure is just that."""
    closed = figure.closed
    if closed is None or not closed.rational:
        return None
    return 1 if closed.num == closed.den else -1 if closed.num == -closed.den else None


def _is_zero(figure: Figure) -> bool:
    return figure.closed is not None and not figure.closed.num


def _coefficients(letter: str, figures: Sequence[Figure]) -> Iterator[tuple[Line, ...]]:
    for k, figure in enumerate(figures):
        if k and _unit(figure) is None and not _is_zero(figure):
            yield (Atom(f"{letter}_{k}"), *_formula_and_number(figure))


def _formula_and_number(figure: Figure) -> tuple[str | Tree, str | Written]:
    value = "" if figure.value is None else amount(figure.value, figure.dimension, _DIGITS)
    return (_closed(figure.closed), value)


def _closed(closed: Closed | None) -> str | Tree:
    """The formula in the parts; none when it is long or when it is the number itself."""
    if closed is None:
        return ""
    pieces = (closed.num, closed.den, closed.under_num, closed.under_den)
    if all(not hasattr(piece, "ring") for piece in pieces):
        return ""
    if sum(map(len, pieces)) > _LONGEST_CLOSED:
        return "long"
    return closed.tree()


# -- the other standard forms -----------------------------------------------------------------------------------


def form_blocks(form: Form) -> tuple[Block, ...]:
    """A standard form: the formula with its letters, then every coefficient with unit; factors where it has some."""
    s = Atom("s")

    def polynomial(letter: str, figures: Sequence[Figure]) -> Tree:
        terms = (
            times(ONE if _unit(f) == 1 else Atom(f"{letter}_{k}"), power(s, k))
            for k, f in enumerate(figures)
            if not _is_zero(f)
        )
        return plus(*terms)

    gain = [] if _unit(form.gain) == 1 else [Atom("K")]
    tree = over(polynomial("b", form.numerator), polynomial("a", form.denominator))
    lead = with_power_of_s(times(*gain), form.power) if form.power else times(*gain)
    rows: list[tuple[Line, ...]] = [("K", *_formula_and_number(form.gain))] if gain else []
    for letter, figures in (("b", form.numerator), ("a", form.denominator)):
        rows += [
            (Atom(f"{letter}_{k}"), *_formula_and_number(f))
            for k, f in enumerate(figures)
            if not _is_zero(f) and _unit(f) != 1
        ]
    blocks: list[Block] = [Formula((times(lead, tree),), "H")]
    if rows:
        blocks.append(Table(("figure", "formula", "value"), tuple(rows)))
    if form.sections is not None:
        blocks += sections_blocks(form.sections)
    return tuple(blocks)


# -- sections -----------------------------------------------------------------------------------------------------


def sections_blocks(found: Sections) -> tuple[Block, ...]:
    """Each section in numbers, and in the names of the parts where it has a formula there."""
    blocks: list[Block] = []
    if found.numbers is not None:
        blocks += _sections_table(found.numbers)
        if found.complete and any(section.kind != "origin" for section in (*found.poles, *found.zeros)):
            blocks += [Paragraph("In the names of the parts:"), *_sections_table(found)]
    else:
        blocks += _sections_table(found)
    whole = (found.numbers or found).whole
    if whole is not None and whole.q is not None and len((found.numbers or found).poles) > 1:
        blocks.append(Paragraph(("All of the denominator as one quadratic: Q = ", *_both(whole.q))))
    return tuple(blocks) or (Paragraph("No poles and no zeros: H is a constant."),)


def _sections_table(found: Sections) -> list[Block]:
    header = ("", "s", "f0 = w0/(2 pi)", "w0", "Q", "tau = 1/w0", "multiplicity")
    rows = [*_rows("pole", found.poles), *_rows("zero", found.zeros)]
    if all(cell == "" for row in rows for cell in row[1:]):
        return [Items(tuple(row[0] for row in rows))] if rows else []
    return [without_empty_columns(header, rows)]


def _rows(what: str, sections: Sequence[Section]) -> Iterator[tuple[Line, ...]]:
    for section in sections:
        times = str(section.multiplicity) if section.multiplicity > 1 else ""
        name = _section_name(what, section)
        if section.kind == "origin":
            yield (name, "", "", "", "", "", times)
            continue
        w0: Line = "" if section.w0 is None else _both(section.w0)
        f0: Line = "" if section.f0 is None else amount(section.f0, HERTZ, _DIGITS, angular=False)
        q: Line = "" if section.q is None else _both(section.q)
        tau: Line = "" if section.tau is None else _both(section.tau)
        place: Line = ""
        if section.roots and section.kind in {"pair", "first order"}:
            place = complex_quantity(section.roots[0].value, "rad/s", _DIGITS, pair=section.kind == "pair")
        yield (name, place, f0, w0, q, tau, times)


def _section_name(what: str, section: Section) -> str:
    where = {"right": ", RIGHT half plane", "axis": ", on the jw axis"}.get(section.side or "", "")
    match section.kind:
        case "origin":
            return f"{what} at the origin"
        case "first order":
            return f"real {what}{where}"
        case "pair":
            return f"{what} pair{where}"
        case "quadratic":
            return f"two {what}s, quadratic{where}"
        case "polynomial":
            return f"{section.degree} {what}s, no factor of lower order{where}"


def _both(figure: Figure) -> tuple[str | Tree | Written, ...]:
    """Formula = number, or whichever of the two there is."""
    formula, value = _formula_and_number(figure)
    return tuple(
        piece for piece in (formula, " = " if formula != "" and value != "" else "", value) if piece != ""
    )
