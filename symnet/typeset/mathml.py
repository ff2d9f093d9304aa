"""The fourth writer: MathML, which a browser sets by itself, without a script and without a network.

It is what the HTML showings hold, so that a saved page reads the same on a machine that reaches nothing. Same
precedence and same order as the other writers; a fraction gets a bar, nothing is rearranged.
"""

from __future__ import annotations

from fractions import Fraction
from typing import Final

from symnet.typeset.names import escape_html, name_html, split
from symnet.typeset.tree import (
    Atom,
    Constant,
    Omitted,
    Parallel,
    Power,
    Product,
    Quotient,
    Root,
    Sum,
    Tree,
)
from symnet.typeset.writing import LONGEST_LATEX, shorten

__all__ = ["inner_mathml", "to_mathml"]

_SUM, _PRODUCT, _PARALLEL, _POWER, _ATOM = range(5)
_THIN: Final = '<mspace width="0.2em"/>'


def to_mathml(tree: Tree) -> str:
    """The tree as a ``<math>`` element in a line of text, shortened as its LaTeX would be.

    >>> print(to_mathml(Quotient(Atom("R2"), Constant(Fraction(3)))))
    <math displaystyle="true"><mrow><mfrac><mrow><msub><mi>R</mi><mn>2</mn></msub></mrow><mrow><mn>3</mn></mrow></mfrac></mrow></math>
    """
    return f'<math displaystyle="true">{inner_mathml(tree)}</math>'


def inner_mathml(tree: Tree) -> str:
    """What stands inside the ``<math>`` element."""
    return f"<mrow>{_piece(shorten(tree, LONGEST_LATEX))[0]}</mrow>"


def _name(name: str) -> str:
    path, dot, last = name.rpartition(".")
    if dot and path and last:
        return f"<mrow>{_name(path)}<mo>.</mo>{_name(last)}</mrow>"
    stem, index = split(name)
    letters = f"<mi>{name_html(stem) if not split(stem)[1] else escape_html(stem)}</mi>"
    if not index:
        return letters
    if stem in {"i", "v"}:
        return f"<msub>{letters}{_name(index)}</msub>"
    shown = escape_html(",".join(filter(None, index.split("_"))) or index)
    mark = "mn" if index.isdigit() else "mi"
    upright = "" if mark == "mn" or len(index) > 1 else ' mathvariant="normal"'
    return f"<msub>{letters}<{mark}{upright}>{shown}</{mark}></msub>"


def _inside(tree: Tree, least: int) -> str:
    body, binding = _piece(tree)
    return body if binding >= least else f"<mrow><mo>(</mo>{body}<mo>)</mo></mrow>"


def _fraction(above: str, below: str) -> str:
    return f"<mfrac><mrow>{above}</mrow><mrow>{below}</mrow></mfrac>"


def _piece(tree: Tree) -> tuple[str, int]:
    match tree:
        case Atom(name):
            return _name(name), _ATOM
        case Constant(value):
            return _constant(value)
        case Sum(terms):
            return _sum(terms), _SUM
        case Product(factors):
            return _THIN.join(
                _inside(factor, _POWER if not _has_bar(factor) else _PRODUCT) for factor in factors
            ), _PRODUCT
        case Quotient(numerator, denominator):
            if _has_bar(numerator):  # set beside it, where it stays readable
                return (
                    f"{_piece(numerator)[0]}{_THIN}{_fraction('<mn>1</mn>', _piece(denominator)[0])}",
                    _PRODUCT,
                )
            return _fraction(_piece(numerator)[0], _piece(denominator)[0]), _PRODUCT
        case Power(base, exponent):
            return f"<msup><mrow>{_inside(base, _ATOM)}</mrow><mn>{exponent}</mn></msup>", _POWER
        case Parallel(branches):
            return "<mo>∥</mo>".join(_inside(branch, _POWER) for branch in branches), _PARALLEL
        case Root(radicand, degree):
            inner = _piece(radicand)[0]
            if degree == 2:
                return f"<msqrt>{inner}</msqrt>", _ATOM
            return f"<mroot><mrow>{inner}</mrow><mn>{degree}</mn></mroot>", _ATOM
        case Omitted(count):
            return f"<mo>⋯</mo><mtext> {count} more {'term' if count == 1 else 'terms'}</mtext>", _ATOM


def _has_bar(tree: Tree) -> bool:
    return isinstance(tree, Quotient) or (
        isinstance(tree, Constant) and tree.value.denominator != 1 and tree.value > 0
    )


def _constant(value: Fraction) -> tuple[str, int]:
    sign = "<mo>−</mo>" if value < 0 else ""
    top = f"<mn>{abs(value.numerator)}</mn>"
    if value.denominator == 1:
        return sign + top, _SUM if sign else _ATOM
    return sign + _fraction(top, f"<mn>{value.denominator}</mn>"), _SUM if sign else _PRODUCT


def _sum(terms: tuple[tuple[int, Tree], ...]) -> str:
    written = ""
    for given_sign, given in terms:
        sign, term = given_sign, given
        if isinstance(term, Constant) and term.value < 0:
            sign, term = -sign, Constant(-term.value)
        body = _inside(term, _PRODUCT)
        if sign < 0:
            written += f"<mo>−</mo>{body}"
        else:
            written += f"<mo>+</mo>{body}" if written else body
    return written or "<mn>0</mn>"
