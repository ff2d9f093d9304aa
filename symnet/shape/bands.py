"""Which band H passes, from where its zeros are.

The powers of s at the origin and at infinity decide most of it; zeros on the jw axis make a band-stop, zeros that
mirror the poles an all-pass. In symbols the comparison is exact and for all values; with values it is exact too.
"""

from __future__ import annotations

from fractions import Fraction
from typing import Literal, TypeAlias

from symnet.shape.plain import Pair, sign

__all__ = ["Band", "band_of"]

Band: TypeAlias = Literal[
    "zero",
    "constant",
    "improper",
    "differentiator",
    "integrator",
    "low-pass",
    "high-pass",
    "band-pass",
    "band-stop",
    "all-pass",
    "shelving",
    "peaking",
]


def band_of(pair: Pair) -> Band:
    """The band by the pattern of zeros.

    With n poles, m of them at the origin, and q zeros, z of them at the origin:

    - differentiator: all zeros at the origin and more zeros than poles; improper: otherwise more zeros than poles;
    - integrator: poles at the origin;
    - low-pass: H(0) is neither 0 nor infinite, H(infinity) = 0; high-pass: the reverse;
    - band-pass: 0 at both ends;
    - neither at an end: all-pass where N(s) is a multiple of D(-s); with all zeros on the jw axis a band-stop if
      |H(0)| = |H(infinity)|, a low-pass if H(0) is the larger, a high-pass if it is the smaller; otherwise peaking
      (or dipping) where |H(0)| = |H(infinity)|, shelving where not. In symbols, where H(0) and H(infinity) cannot be
      compared, zeros on the jw axis count as band-stop.

    >>> band_of(Pair((Fraction(1), Fraction(0), Fraction(1)), (Fraction(1), Fraction(4), Fraction(1))))
    'band-stop'
    """
    q, n, z, m = pair.layout
    if not pair.num:
        return "zero"
    if q > n:
        return "differentiator" if q == z else "improper"
    if n == 0:
        return "constant"
    if m:
        return "integrator"
    if q < n:
        return "band-pass" if z else "low-pass"
    return "high-pass" if z else _level_at_both_ends(pair)


def _level_at_both_ends(pair: Pair) -> Band:
    num, den = pair.num, pair.den
    if _is_all_pass(pair):
        return "all-pass"
    at_zero, at_infinity = num[0] * den[-1], num[-1] * den[0]
    level = at_zero in {at_infinity, -at_infinity}
    if _zeros_on_axis(pair):
        if level or not isinstance(at_zero, Fraction):
            return "band-stop"
        return "low-pass" if abs(at_zero) > abs(at_infinity) else "high-pass"
    return "peaking" if level else "shelving"


def _is_all_pass(pair: Pair) -> bool:
    mirrored = [-c if k % 2 else c for k, c in enumerate(pair.den)]
    return all(b * mirrored[0] == c * pair.num[0] for b, c in zip(pair.num, mirrored, strict=True))


def _zeros_on_axis(pair: Pair) -> bool:
    """All zeros purely imaginary: for numbers exactly so, in symbols an even N of one sign."""
    if any(pair.num[1::2]):
        return False
    if isinstance(pair.num[0], Fraction):
        from symnet.exact.roots import roots

        return all(root.is_imaginary for root in roots(pair.num))
    signs = {sign(c) for c in pair.num[0::2]} - {0}
    return len(signs) == 1 and None not in signs
