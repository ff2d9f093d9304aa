"""Arithmetic modulo a prime, against plain integers."""

from __future__ import annotations

from random import Random

import pytest

from symnet.exact.modular import PRIME, SMALL_PRIME, Residue, gcd_modulo, interpolate
from symnet.exact.polynomials import make_ring


def times(a: list[int], b: list[int]) -> list[int]:
    out = [0] * (len(a) + len(b) - 1)
    for i, x in enumerate(a):
        for k, y in enumerate(b):
            out[i + k] = (out[i + k] + x * y) % SMALL_PRIME
    return out


@pytest.mark.parametrize("count", [1, 2, 3, 7, 20])
def test_interpolation_finds_the_polynomial_of_the_values(count: int) -> None:
    random = Random(count)
    wanted = [random.randrange(SMALL_PRIME) for _ in range(count)]
    values = [sum(c * x**k for k, c in enumerate(wanted)) for x in range(count)]
    assert interpolate(values, SMALL_PRIME) == wanted


def test_the_gcd_of_products_is_the_common_factor() -> None:
    random = Random(5)
    common, a, b = ([random.randrange(SMALL_PRIME) for _ in range(n)] for n in (3, 4, 5))
    found = gcd_modulo(times(common, a), times(common, b), SMALL_PRIME)
    inverse = pow(common[-1], -1, SMALL_PRIME)
    assert found == [c * inverse % SMALL_PRIME for c in common]
    assert gcd_modulo(a, b, SMALL_PRIME) == [1]
    assert gcd_modulo([], [], SMALL_PRIME) == []


def test_residues_obey_the_laws_of_a_field() -> None:
    a, b = Residue.of(3, 7), Residue.of(-5, 11)
    assert a * Residue(7) == Residue(3)
    assert (a + b) - b == a
    assert a / b * b == a
    assert a**-2 * a**2 == Residue(1)
    assert -a + a == Residue(0)
    assert not Residue(0)
    with pytest.raises(ZeroDivisionError):
        a / Residue(0)
    with pytest.raises(ZeroDivisionError):
        Residue(0) ** -1
    assert Residue.of(PRIME + 4) == Residue(4)


def test_powers_of_s_come_apart_and_together() -> None:
    from symnet.exact.polynomials import by_powers_of_s

    ring = make_ring(["R1", "C1"])
    s, r, c = ring.gens
    polynomial = 3 + s**2 * (r + c) - s * r
    parts = by_powers_of_s(polynomial)
    assert parts == (3, -r, r + c)
    assert sum((part * s**k for k, part in enumerate(parts)), ring.zero) == polynomial
    assert by_powers_of_s(ring.zero) == ()
