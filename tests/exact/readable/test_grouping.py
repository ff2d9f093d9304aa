"""Grouping: the forms a designer writes, never longer than the expanded sum, factors that multiply back."""

from __future__ import annotations

from functools import reduce
from operator import mul
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.exact.polynomials import make_ring
from symnet.exact.readable.forms import as_ratio
from symnet.exact.readable.grouping import LONGEST_PLAIN, Grouping, kind_of, kind_of_name
from symnet.exact.readable.packed import LONGEST_GROUPED, Polynomial
from symnet.typeset.length import length
from symnet.typeset.polynomials import plain
from symnet.typeset.tree import Omitted, Sum
from symnet.typeset.writing import to_text

RING = make_ring(["R1", "R2", "R3", "R4", "L1", "L2", "C1", "C2", "C3", "C4", "K", "A1.R1"])
s, R1, R2, R3, R4, L1, L2, C1, C2, C3, C4, K, inner = RING.gens
NAMES = [str(symbol) for symbol in RING.symbols]


def packed(p: Any) -> tuple[Grouping, Polynomial]:
    space = Grouping(NAMES, max((e for m in p for e in m), default=1))
    return space, {space.pack(m): int(c) for m, c in p.items()}


def grouped(p: Any) -> str:
    space, q = packed(p)
    return to_text(space.tree(q))


@pytest.mark.parametrize(
    ("polynomial", "text"),
    [
        (R1 * C1 + R1 * C2 + R2 * C2, "R1*C1 + (R1 + R2)*C2"),
        (R1 * C1 + R2 * C1, "(R1 + R2)*C1"),
        ((R1 + R2) * (C1 + C2) * R3, "R3*(R1 + R2)*(C1 + C2)"),
        ((R1 + R2) * (C1 + C2) + R3 * C4, "(R1 + R2)*(C1 + C2) + R3*C4"),
        ((R1 + R2 + R3) * (C1 + C2 + C3) + R4 * C4, "(R1 + R2 + R3)*(C1 + C2 + C3) + R4*C4"),
        ((1 - K) * R1 * C1 + (R1 + R2) * C2, "(R1 + R2)*C2 + (1 - K)*R1*C1"),
        (R1 * R2 + R1 * R3 + R2 * R3, "R1*R2 + R3*(R1 + R2)"),
        (L1 + L2 + C1 * R1 * R2, "L1 + L2 + R1*R2*C1"),
        ((R1 + R2) ** 2, "(R1 + R2)^2"),
        ((R1 + R2) ** 2 * C1 + R3 * C2, "R3*C2 + (R1 + R2)^2*C1"),
        (R1**3 - 1, "R1^3 - 1"),
        (4 * R1 * C1, "4*R1*C1"),
        (2 * R1 + 4 * R2, "2*R1 + 4*R2"),
        (3 + 3 * K, "3 + 3*K"),
        (R2 - R1, "R2 - R1"),
        (-R1 - R2, "-R1 - R2"),
        (R1 * (R2 - R1) * C1 + R2 * C2, "R2*C2 + R1*(R2 - R1)*C1"),
        (s**2 * C1 * L1 * R1, "s^2*R1*L1*C1"),
        (inner * R1 + inner * C1 * K * R1, "R1*A1.R1*(1 + K*C1)"),
        (RING.one, "1"),
        (RING.zero, "0"),
        (-RING.one, "-1"),
    ],
)
def test_forms_verbatim(polynomial: Any, text: str) -> None:
    assert grouped(polynomial) == text


def test_the_four_section_ladder() -> None:
    """First-order coefficient: every capacitor times the resistance between it and the source."""
    p = R1 * C1 + (R1 + R2) * C2 + (R1 + R2 + R3) * C3 + (R1 + R2 + R3 + R4) * C4
    assert grouped(p) == "R1*C1 + (R1 + R2)*(C2 + C3 + C4) + R3*C3 + (R3 + R4)*C4"


def polynomials(names: list[Any], most: int = 6, power: int = 1) -> st.SearchStrategy[Any]:
    powers = st.tuples(st.sampled_from(names), st.integers(1, power)).map(lambda pair: pair[0] ** pair[1])
    monomial = st.lists(powers, max_size=3, unique=True).map(lambda chosen: reduce(mul, chosen, RING.one))
    terms = st.lists(st.tuples(st.sampled_from([1, 1, 1, -1, 2, -3]), monomial), max_size=most)
    return terms.map(lambda pairs: sum((c * m for c, m in pairs), RING.zero))


SOME = polynomials([R1, R2, R3, C1, C2, K], power=2)
LEFT, RIGHT = polynomials([R1, R2, R3]), polynomials([C1, C2, K])


@settings(deadline=None)
@given(SOME, SOME, SOME)
def test_the_form_has_the_value_of_the_polynomial(a: Any, b: Any, c: Any) -> None:
    """Law: the tree, multiplied out in the ring, is the polynomial it was made from."""
    p = a * b + c
    space, q = packed(p)
    above, below = as_ratio(space.tree(q), RING)
    assert above == p * below


@settings(deadline=None)
@given(LEFT, RIGHT, SOME)
def test_the_form_is_never_longer_than_the_expanded_sum(a: Any, b: Any, c: Any) -> None:
    """Law: brackets are there to save symbols."""
    p = a * b + c
    space, q = packed(p)
    assert length(space.tree(q)) <= length(plain(p))


def test_a_very_long_sum_is_written_in_part_and_counted() -> None:
    p = (R1 + R2 + R3 + C1 + C2) ** 4 + K
    assert len(p) == 71 > LONGEST_GROUPED
    space, q = packed(p)
    tree = space.tree(q)
    assert isinstance(tree, Sum)
    assert len(tree.terms) == LONGEST_PLAIN + 1
    assert tree.terms[-1] == (1, Omitted(71 - LONGEST_PLAIN))


@settings(deadline=None)
@given(SOME)
def test_the_same_polynomial_gives_the_same_form(p: Any) -> None:
    """Law: the form does not depend on the order in which the terms are stored."""
    turned = RING.from_dict(dict(reversed(list(p.items()))))
    assert grouped(p) == grouped(turned)


def test_kinds() -> None:
    assert [kind_of_name(name) for name in ("s", "K", "wt", "R1", "Z1", "L1", "M", "C1", "U1.C2")] == [
        0, 1, 1, 2, 2, 3, 3, 4, 4,
    ]  # fmt: skip
    assert kind_of({"R1": 1, "R2": 1, "R3": -1}) == 2
    assert kind_of({"R1": 1, "R2": -1}) == kind_of({}) == kind_of({"K": 2}) == 1
    assert kind_of({"R1": 1, "C1": 1}) is kind_of({"R1": 2}) is None
