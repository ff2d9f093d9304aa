"""Polynomials in one name as one integer: coefficients as the signed digits of a number (Kronecker substitution).

With digits wide enough that no coefficient of the result reaches half the base, sums and products of polynomials
are sums and products of integers.
"""

from __future__ import annotations

from collections.abc import Sequence

__all__ = ["packed", "unpacked"]


def packed(coefficients: Sequence[int], bits: int) -> int:
    """The polynomial with these coefficients, ascending, at 2^bits.

    >>> packed([1, -2], 8)
    -511
    """
    return sum(c << (bits * k) for k, c in enumerate(coefficients))


def unpacked(value: int, bits: int) -> list[int]:
    """The signed digits of an integer in base 2^bits, each below half the base in magnitude.

    >>> unpacked(-511, 8)
    [1, -2]
    """
    if not value:
        return []
    count = abs(value).bit_length() // bits + 2
    half, base = 1 << (bits - 1), 1 << bits
    shifted = value + half * (((1 << bits * count) - 1) // (base - 1))
    size = (bits * count) // 8 + 16
    data = shifted.to_bytes(size, "little")
    out = []
    for k in range(count):
        start = bits * k
        chunk = int.from_bytes(data[start // 8 : (start + bits + 15) // 8], "little") >> (start % 8)
        out.append((chunk & (base - 1)) - half)
    while out and not out[-1]:
        out.pop()
    return out
