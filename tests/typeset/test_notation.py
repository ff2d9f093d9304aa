"""What was typed, typeset: same order, same shape, same value."""

from __future__ import annotations

from fractions import Fraction

import pytest

from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Sum, evaluate
from symnet.quantities import OHM
from symnet.typeset import tree as shown
from symnet.typeset.notation import tree_of
from symnet.typeset.writing import to_latex, to_text

a, b, c, d = (Name(name) for name in "abcd")


@pytest.mark.parametrize(
    ("expression", "text"),
    [
        (Product(((1, a), (-1, b), (1, c))), "a/b * c"),
        (Product(((1, a), (1, b), (-1, c), (-1, d))), "a*b/(c*d)"),
        (Product(((-1, a), (1, b))), "1/a * b"),
        (Sum(((-1, a), (1, b))), "-a + b"),
        (Sum(((1, a), (-1, Sum(((1, b), (-1, c)))))), "a - (b - c)"),
        (Parallel((a, Sum(((1, b), (1, c))))), "a||(b + c)"),
        (Power(Product(((1, a), (1, b))), -2), "(a*b)^-2"),
        (Product(((1, Number(Fraction(3, 2))), (1, a))), "3/2 * a"),
    ],
)
def test_verbatim_and_same_value(expression: Expression, text: str) -> None:
    tree = tree_of(expression)
    assert to_text(tree) == text
    values = {"a": Fraction(2), "b": Fraction(3, 5), "c": Fraction(7), "d": Fraction(1, 11)}
    expected = evaluate(expression, lambda name: values[name.name], lambda number: number.value)
    assert shown.evaluate(tree, values.__getitem__) == expected


def test_a_number_with_its_unit() -> None:
    tree = tree_of(Sum(((1, Name("R1")), (1, Number(Fraction(10_000), OHM)))))
    assert to_text(tree) == "R1 + 10 kohm"
    assert to_latex(tree) == r"R_{1} + \text{10 kohm}"
