"""Common factors without a name in common with the rest: against the products they were made from."""

from __future__ import annotations

from fractions import Fraction
from random import Random
from typing import TYPE_CHECKING, Any

import pytest

import symnet as sn
from symnet.exact import lowest
from symnet.exact.apart import take_apart
from symnet.exact.expansion import Primitive
from symnet.exact.modular import SMALL_PRIME, weight_at
from symnet.exact.polynomials import begins_negative, make_ring
from tests import oracle
from tests.networks import seeded

from .test_unfolding import written_out

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

RING = make_ring(["a", "b", "c", "d", "e", "f"])
S = RING.gens[0]


def multilinear(random: Random, names: list[Any]) -> PolyElement:
    """A polynomial of these names, each to the first power, with s as often as the term has names of odd place."""
    total = RING.zero
    for chosen in range(1 << len(names)):
        if random.random() < 0.7:
            term = RING(random.choice([1, -1, 1, 2]))
            for place, name in enumerate(names):
                if chosen >> place & 1:
                    term *= name * S if place % 2 else name
            total += term
    return total or RING.one


def prepared(n: PolyElement, d: PolyElement) -> tuple[Primitive, Primitive, Any]:
    top, bottom = (Primitive.of(written_out(p, RING)) for p in (n, d))
    return top, bottom, lambda point: (weight_at(n, point, SMALL_PRIME), weight_at(d, point, SMALL_PRIME))


@pytest.mark.parametrize("seed", range(100))
def test_what_is_taken_apart_multiplies_back(seed: int) -> None:
    """Law: N = g n and D = g d, exactly, and g, n, d are those of the polynomial gcd but for factors of s alone."""
    random = Random(seed)
    _, a, b, c, d, e, f = RING.gens
    g = multilinear(random, [a, b, c])
    n, m = multilinear(random, [d, e, f]), multilinear(random, [d, e, f])
    top, bottom, at = prepared(g * n, g * m)
    found = take_apart(top, bottom, at)
    if len(g) == 1 or n == m:
        return  # a content, or H = 1, which hangs on no name
    assert found is not None
    common = found.common.to_element(RING)
    assert common * found.numerator.to_element(RING) == top.part.to_element(RING)
    assert common * found.denominator.to_element(RING) == bottom.part.to_element(RING)
    assert common.degree(0) <= g.degree(0) + 1


@pytest.mark.parametrize("seed", range(100))
def test_lowest_terms_are_those_of_sympys_cancel(seed: int) -> None:
    random = Random(seed)
    _, a, b, c, d, e, f = RING.gens
    g = multilinear(random, [a, b, c])
    n, m = g * multilinear(random, [d, e, f]) * d, g * multilinear(random, [d, e, f]) * (S + 1)
    top, bottom, at = prepared(n, m)
    found = lowest.reduce(top, bottom, RING, at)
    wanted_n, wanted_d = n.cancel(m)
    if begins_negative(wanted_d):
        wanted_n, wanted_d = -wanted_n, -wanted_d
    assert (found.numerator, found.denominator) == (wanted_n, wanted_d)


def test_nothing_is_taken_apart_where_a_name_stands_on_both_sides() -> None:
    _, a, b, c, *_ = RING.gens
    assert take_apart(*prepared((a + b) * (a + c), (a + b) * (a + 2 * c))) is None
    assert take_apart(*prepared(a + b, a + c)) is None


def test_several_powers_of_s_beside_one_monomial_are_left_to_the_gcd() -> None:
    _, a, b, c, *_ = RING.gens
    g = a * (1 + S + S**2) + b
    assert take_apart(*prepared(g * (c + 1), g * (c + S))) is None
    top, bottom, at = prepared(g * (c + 1), g * (c + S))
    found = lowest.reduce(top, bottom, RING, at)
    assert (found.numerator, found.denominator) == (c + 1, c + S)


def test_a_part_that_the_read_cannot_see_is_cut_out_at_any_length(monkeypatch: pytest.MonkeyPatch) -> None:
    """Two ladders of 6 sections at one source: 233^2 terms (F(13) = 233), and no gcd is allowed."""
    monkeypatch.setattr(lowest, "MOST_TERMS_FOR_GCD", 0)
    lines = []
    for side in "ab":
        before = "in"
        for k in range(1, 7):
            lines.append(f"{before} -- R{side}{k} -- {side}{k} -- C{side}{k} -- gnd")
            before = f"{side}{k}"
    H = sn.derive(sn.network("\n".join([*lines, "drive in", "read a6"])))
    assert H.terms[1] == 233**2
    alone = sn.derive(sn.network("\n".join([*lines[:6], "drive in", "read a6"])))
    other = sn.derive(sn.network("\n".join([*lines[6:], "drive in", "read b6"])))
    assert alone == H
    assert len(other.denominator) == 233
    assert [len(mode) for mode in H.hidden] == [233]


@pytest.mark.parametrize("seed", range(0, 300, 3))
def test_hidden_modes_of_networks_are_those_of_the_gcd(seed: int, monkeypatch: pytest.MonkeyPatch) -> None:
    """Law: lowest terms are unique; the same networks with and without cutting out, and with the oracle's N, D."""
    sketch = seeded(seed, rational=False, single=True)
    try:
        oracle.transfer_exact(sketch.drawing, {**sketch.values, "s": Fraction(104729, 7)})
    except oracle.NoSolutionError:
        return
    H = sn.derive(sn.network(sketch.text))
    cut = (H.numerator, H.denominator, sorted(map(str, H.hidden)))
    monkeypatch.setattr(lowest, "take_apart", lambda *_: None)
    again = lowest.reduce(
        H.quotient.numerator.primitive,
        H.quotient.denominator.primitive,
        H.ring,
        lambda point: H.quotient.modulo(point, SMALL_PRIME),
    )
    assert cut == (again.numerator, again.denominator, sorted(map(str, again.hidden)))
