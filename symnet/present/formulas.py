"""Small pieces that the showings share: labels as fractions, numbers with units, dimensions as units."""

from __future__ import annotations

from symnet.quantities import HERTZ, NUMBER, Dimension
from symnet.typeset import tree as paper
from symnet.typeset.numbers import DIGITS, Real, Written, plain_number, quantity

__all__ = ["amount", "label_tree", "with_power_of_s"]


def label_tree(label: str) -> paper.Tree:
    """``out/in`` as a fraction; whatever is more than a name stays as it was typed."""
    above, slash, below = label.rpartition("/")
    return paper.Quotient(paper.Atom(above), paper.Atom(below)) if slash else paper.Atom(label)


def amount(
    value: Real, dimension: Dimension | None = NUMBER, digits: int = DIGITS, *, angular: bool = True
) -> Written:
    """A number with the unit of its dimension; 1/s is written rad/s unless ``angular`` is false, then Hz.

    >>> from symnet.quantities import OHM, SECOND
    >>> print(amount(600, OHM), amount(1e5, HERTZ), amount(1e5, HERTZ, angular=False), amount(2e-6, SECOND), amount(2))
    600 ohm 100 krad/s 100 kHz 2 us 2
    """
    if dimension is None or dimension == NUMBER:
        return plain_number(value, digits)
    if dimension == HERTZ:
        return quantity(value, "rad/s" if angular else "Hz", digits)
    return quantity(value, str(dimension), digits)


def with_power_of_s(tree: paper.Tree, s_power: int) -> paper.Tree:
    """The tree times s to a power, negative powers below a fraction bar."""
    if isinstance(tree, paper.Sum) and len(tree.terms) == 1 and tree.terms[0][0] < 0:
        return paper.minus(with_power_of_s(tree.terms[0][1], s_power))
    s = paper.power(paper.Atom("s"), abs(s_power))
    above, below = (
        (tree.numerator, tree.denominator) if isinstance(tree, paper.Quotient) else (tree, paper.ONE)
    )
    if s_power > 0:
        return paper.over(paper.times(s, above), below)
    return paper.over(above, paper.times(s, below)) if s_power else tree
