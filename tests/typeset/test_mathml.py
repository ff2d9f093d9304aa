"""MathML: well formed whatever the names are, and of the same value as the tree when read back."""

from __future__ import annotations

from fractions import Fraction
from xml.etree import ElementTree as ET

import pytest
from hypothesis import given
from hypothesis import strategies as st

from symnet.typeset.mathml import to_mathml
from symnet.typeset.tree import (
    ONE,
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
    evaluate,
    number,
)

R1, R2, C = Atom("R1"), Atom("R2"), Atom("C")


def flat(tree: Tree) -> str:
    """The letters and signs of the MathML, without its marks."""
    return "".join(ET.fromstring(to_mathml(tree)).itertext())


@pytest.mark.parametrize(
    ("tree", "shown"),
    [
        (Product((Atom("s"), R1, C)), "sR1C"),
        (Sum(((1, R1), (-1, R2))), "R1−R2"),
        (Sum(((-1, R1),)), "−R1"),
        (Sum(()), "0"),
        (Product((Sum(((1, R1), (1, R2))), C)), "(R1+R2)C"),
        (Product((Parallel((R1, R2)), C)), "(R1∥R2)C"),
        (Power(Sum(((1, R1), (1, R2))), 2), "(R1+R2)2"),
        (Root(R1), "R1"),
        (Sum(((1, R1), (1, Omitted(3)))), "R1+⋯ 3 more terms"),
        (Atom("tau_0"), "τ0"),
        (Atom("i_R1"), "iR1"),
        (Atom("A1.R1"), "A1.R1"),
        (Constant(Fraction(-2)), "−2"),
    ],
)
def test_letters_and_signs(tree: Tree, shown: str) -> None:
    assert flat(tree) == shown


def test_fraction_has_a_bar_and_no_parentheses() -> None:
    fraction = ET.fromstring(to_mathml(Quotient(R1, Sum(((1, R1), (1, R2)))))).find(".//mfrac")
    assert fraction is not None
    assert ["".join(side.itertext()) for side in fraction] == ["R1", "R1+R2"]


def test_roots_have_their_degree() -> None:
    assert "<msqrt>" in to_mathml(Root(C))
    assert "<mn>3</mn></mroot>" in to_mathml(Root(C, 3))


@given(st.text())
def test_any_name_is_escaped(name: str) -> None:
    text = to_mathml(Atom(name))
    assert "<script" not in text
    ET.fromstring(text)


def read_back(element: ET.Element, values: dict[str, Fraction]) -> Fraction:
    """The value of the MathML subset that the writer uses, by a recursive descent over its children."""
    return _sum(list(element), values)


def _split(children: list[ET.Element], signs: set[str]) -> list[tuple[str, list[ET.Element]]]:
    pieces: list[tuple[str, list[ET.Element]]] = [("", [])]
    for child in children:
        if child.tag == "mo" and child.text in signs:
            pieces.append((child.text or "", []))
        else:
            pieces[-1][1].append(child)
    return [piece for piece in pieces if piece[0] or piece[1]]


def _sum(children: list[ET.Element], values: dict[str, Fraction]) -> Fraction:
    total = Fraction(0)
    for sign, piece in _split(children, {"+", "−"}):
        value = _product(piece, values)
        total += -value if sign == "−" else value
    return total


def _product(children: list[ET.Element], values: dict[str, Fraction]) -> Fraction:
    parallel = _split(children, {"∥"})
    if len(parallel) > 1:
        first, *others = (_product(piece, values) for _, piece in parallel)
        for other in others:
            first = first * other / (first + other)
        return first
    total = Fraction(1)
    for child in children:
        if child.tag != "mspace":
            total *= _single(child, values)
    return total


def _single(element: ET.Element, values: dict[str, Fraction]) -> Fraction:
    match element.tag:
        case "mn":
            return Fraction(element.text or "")
        case "msub" | "mi":
            return values["".join(element.itertext())]
        case "mfrac":
            return read_back(element[0], values) / read_back(element[1], values)
        case "msup":
            return read_back(element[0], values) ** int(element[1].text or "")
        case "mrow":
            inner = list(element)
            if inner[0].tag == "mo" and inner[0].text == "(":
                inner = inner[1:-1]
            return _sum(inner, values)
    raise AssertionError(element.tag)


VALUES = {"R1": Fraction(3), "R2": Fraction(7), "C": Fraction(2, 5)}
LEAVES: st.SearchStrategy[Tree] = st.sampled_from([R1, R2, C]) | st.integers(-3, 9).map(number)


def _deeper(inner: st.SearchStrategy[Tree]) -> st.SearchStrategy[Tree]:
    several = st.lists(inner, min_size=2, max_size=3)
    return (
        st.lists(st.tuples(st.sampled_from([1, -1]), inner), min_size=1, max_size=3).map(
            lambda t: Sum(tuple(t))
        )
        | several.map(lambda t: Product(tuple(t)))
        | several.map(lambda t: Parallel(tuple(t)))
        | st.tuples(inner, inner).map(lambda t: Quotient(*t))
        | st.tuples(inner, st.integers(2, 3)).map(lambda t: Power(*t))
    )


@given(st.recursive(LEAVES, _deeper, max_leaves=8))
def test_what_is_set_has_the_value_of_the_tree(tree: Tree) -> None:
    """Law: writing does not change the value, so that no parenthesis is missing anywhere."""
    try:
        expected = evaluate(tree, VALUES.__getitem__)
    except ZeroDivisionError:
        return
    root = ET.fromstring(to_mathml(tree))
    assert read_back(root, VALUES) == expected


def test_one_is_written() -> None:
    assert flat(Quotient(ONE, R1)) == "1R1"
