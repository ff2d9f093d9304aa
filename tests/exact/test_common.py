"""Common factors of long polynomials: against sympy's gcd, its division and its factors."""

from __future__ import annotations

from random import Random
from typing import TYPE_CHECKING, Any

import pytest

from symnet.errors import LimitError
from symnet.exact import common
from symnet.exact.common import common_factor, divided, irreducible_factors
from symnet.exact.expansion import Expansion, Primitive
from symnet.exact.polynomials import begins_negative, make_ring

from .test_unfolding import written_out

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

RING = make_ring(["a", "b", "c", "d", "e", "f"])
S, A, B, C, D, E, F = RING.gens


def random_polynomial(random: Random, names: list[Any], highest: int, share: float = 0.5) -> PolyElement:
    """A polynomial of these generators with exponents up to ``highest``, s also in between."""
    total = RING.zero
    for _ in range(random.randint(2, 9)):
        term = RING(random.choice([1, -1, 1, 2, -3]))
        for name in names:
            if random.random() < share:
                term *= name ** random.randint(1, highest) * S ** random.randint(0, 1)
        total += term
    return total or RING.one


def primitive(polynomial: PolyElement) -> Expansion:
    return Primitive.of(written_out(polynomial, RING)).part


def element(expansion: Expansion) -> PolyElement:
    return expansion.to_element(RING)


def with_plus(polynomial: PolyElement) -> PolyElement:
    return -polynomial if begins_negative(polynomial) else polynomial


@pytest.mark.parametrize("seed", range(200))
def test_the_gcd_is_sympys(seed: int) -> None:
    """Law: g divides both and every common divisor divides g; names apart, shared, and shared to higher powers."""
    random = Random(seed)
    mine, theirs = ([A, B, C], [D, E, F]) if seed % 2 else ([A, B, C, D], [C, D, E, F])
    highest = 1 + seed % 3 // 2
    g = random_polynomial(random, mine, highest)
    n, d = (primitive(g * random_polynomial(random, theirs, highest)) for _ in range(2))
    wanted = with_plus(element(n).gcd(element(d)))
    found = common_factor(n, d)
    if found is None:
        assert wanted == 1
        return
    assert element(found.factor) == wanted
    assert element(found.numerator) * wanted == element(n)
    assert element(found.denominator) * wanted == element(d)


@pytest.mark.parametrize("seed", range(100))
def test_division_is_exact_or_refused(seed: int) -> None:
    random = Random(seed)
    a, b = (random_polynomial(random, [A, B, C], 2) for _ in range(2))
    quotient = divided(written_out(a * b, RING), written_out(b, RING))
    assert quotient is not None
    assert element(quotient) == a
    assert (divided(written_out(a * b + F, RING), written_out(b, RING)) is None) == bool((a * b + F) % b)


@pytest.mark.parametrize("seed", range(100))
def test_the_factors_are_sympys(seed: int) -> None:
    """Law: factors over the integers are unique but for signs and order."""
    random = Random(seed)
    product = RING.one
    for names in ([A, B], [C, D], [B, C, E]):
        product *= random_polynomial(random, names, 1)
    given = primitive(product)
    wanted = [with_plus(f) for f, times in element(given).factor_list()[1] for _ in range(times)]
    assert sorted(map(str, map(element, irreducible_factors(given)))) == sorted(map(str, wanted))


def test_where_no_name_stands_alone_short_polynomials_are_factored_and_long_ones_left() -> None:
    square = (1 + S * A) ** 2
    assert [*map(element, irreducible_factors(primitive(square)))] == [1 + S * A] * 2
    long = (square * (A + B + C + D + E + F) ** 2 * (1 + B + C * D) ** 2) ** 2
    (left,) = irreducible_factors(primitive(long))
    assert element(left) == long


def test_a_long_factor_in_shared_names_is_refused_in_words(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(common, "MOST_TERMS_FOR_GCD", 2)
    g, n, d = (1 + S * A + S**2 * A * B), (A**2 + B**2 + S), (A**2 + B**2 + 2)
    with pytest.raises(LimitError, match="lowest terms of H are not established") as refused:
        common_factor(primitive(g * n), primitive(g * d))
    assert "give some parts numbers" in refused.value.faults[0].hint
    assert common_factor(primitive(n), primitive(d)) is None


def test_two_ladders_at_one_source() -> None:
    """233 terms of one ladder times 233 of the other, in names that are not shared; F(13) = 233."""
    import symnet as sn

    def ladder(side: str) -> PolyElement:
        lines, before = [], "in"
        for k in range(1, 7):
            lines.append(f"{before} -- R{side}{k} -- {side}{k} -- C{side}{k} -- gnd")
            before = f"{side}{k}"
        lines += [f"in -- R{x}{k} -- gnd" for x in "ab" for k in range(1, 7) if x != side]
        lines += [f"in -- C{x}{k} -- gnd" for x in "ab" for k in range(1, 7) if x != side]
        return sn.derive(sn.network("\n".join([*lines, "drive in", f"read {side}6"]))).denominator

    over = make_ring([f"{kind}{side}{k}" for side in "ab" for k in range(1, 7) for kind in "RC"])
    a, b = (
        over.from_dict(
            {
                tuple(
                    dict(zip(map(str, p.ring.symbols), m, strict=True)).get(str(x), 0) for x in over.symbols
                ): c
                for m, c in p.items()
            }
        )
        for p in map(ladder, "ab")
    )
    assert len(a) == len(b) == 233
    s = over.gens[0]
    both = written_out(a * b, over)
    found = common_factor(both, written_out(a * (1 + s * over.gens[-1]), over))
    assert found is not None
    assert found.factor.to_element(over) == a
