"""Ring elements as they stand."""

from __future__ import annotations

from fractions import Fraction

from symnet.exact.polynomials import make_ring
from symnet.typeset.polynomials import collected, plain
from symnet.typeset.tree import evaluate
from symnet.typeset.writing import to_text

RING = make_ring(["R1", "R2", "C1", "C2"])
s, R1, R2, C1, C2 = RING.gens


def test_ascending_powers_then_the_order_of_the_ring() -> None:
    p = s**2 * R1 * R2 * C1 * C2 + s * R2 * C2 + s * R1 * C2 + s * R1 * C1 + 1
    assert to_text(plain(p)) == "1 + s*R1*C1 + s*R1*C2 + s*R2*C2 + s^2*R1*R2*C1*C2"
    assert to_text(collected(p, 9)) == "1 + s*(R1*C1 + R1*C2 + R2*C2) + s^2*R1*R2*C1*C2"


def test_signs_numbers_and_zero() -> None:
    assert to_text(plain(-3 * R1 + 2 * R2**2 - 1)) == "-3*R1 + 2*R2^2 - 1"
    assert to_text(plain(RING.zero)) == to_text(collected(RING.zero, 3)) == "0"
    assert to_text(collected(-s * R1 - s * R2, 3)) == "s*(-R1 - R2)"


def test_what_is_not_written_is_counted() -> None:
    p = (R1 + R2 + C1) ** 4
    assert to_text(plain(p, most=1)) == "R1^4 + ... 14 more terms"
    assert to_text(collected(s * p + 1, most=2)) == "1 + s*(R1^4 + 4*R1^3*R2 + ... 13 more terms)"


def test_values_agree() -> None:
    values = {
        "s": Fraction(2),
        "R1": Fraction(1, 3),
        "R2": Fraction(5),
        "C1": Fraction(7),
        "C2": Fraction(1, 2),
    }
    p = (s * R1 * C1 - 2) ** 3 * (R2 + s * C2)
    expected = (Fraction(14, 3) - 2) ** 3 * 6
    assert evaluate(plain(p), values.__getitem__) == expected
    assert evaluate(collected(p, 99), values.__getitem__) == expected
