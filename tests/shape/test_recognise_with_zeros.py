"""Members with finite zeros are recognised as what they are, as low-pass and as high-pass, with all their parameters."""

from __future__ import annotations

from collections.abc import Iterable
from fractions import Fraction

import pytest

from symnet.exact.ratio import Ratio
from symnet.shape.families import Prototype
from symnet.shape.families.elliptic import elliptic
from symnet.shape.families.inverse_chebyshev import inverse_chebyshev
from symnet.shape.recognise import recognise
from symnet.shape.verdict import Recognition

ORDERS = (3, 4, 5, 6, 8, 11)
MEMBERS: list[Prototype] = [
    *(inverse_chebyshev(n, a) for n in ORDERS for a in ("20 dB", "60 dB", "100 dB")),
    *(
        elliptic(n, r, a)
        for n in ORDERS
        for r, a in (("0.01 dB", "60 dB"), ("0.5 dB", "40 dB"), ("2 dB", "80 dB"))
    ),
    *(elliptic(n, "0.1 dB", edge=1.5, variant=v) for n in ORDERS for v in "bc" if n % 2 == 0),
]


def product(roots: Iterable[complex]) -> list[Fraction]:
    """The polynomial with these roots, ascending, from the exact values of the doubles."""
    total = [Fraction(1)]
    for r in roots:
        if r.imag < 0:
            continue
        x, y = Fraction(r.real), Fraction(r.imag)
        factor = [x * x + y * y, -2 * x, Fraction(1)] if y else [-x, Fraction(1)]
        total = [
            sum(
                (total[k - j] * factor[j] for j in range(len(factor)) if 0 <= k - j < len(total)),
                Fraction(0),
            )
            for k in range(len(total) + len(factor) - 1)
        ]
    return total


@pytest.mark.parametrize("band", ["low-pass", "high-pass"])
@pytest.mark.parametrize("made", MEMBERS, ids=str)
def test_members_are_recognised(made: Prototype, band: str) -> None:
    turned = made.scaled("w0", 2000.0)
    if band == "high-pass":
        turned = turned.high_pass()
    found = recognise(Ratio.of(product(turned.zeros), product(turned.poles)))
    assert isinstance(found, Recognition)
    assert found.match is not None, found.verdict
    match = found.match.prototype
    assert (match.family, match.order, match.band) == (made.family, made.order, band)
    assert found.match.response_error_db < 1e-6
    for setting, wanted in zip(match.settings, made.settings, strict=True):
        assert setting.value == pytest.approx(wanted.value, rel=1e-4)
    assert match.reference("stop_edge").w == pytest.approx(turned.reference("stop_edge").w, rel=1e-5)


@pytest.mark.parametrize("made", [m for m in MEMBERS if m.order == 5 or m.family.endswith("c")], ids=str)
def test_zeros_moved_by_a_fifth_are_another_matter(made: Prototype) -> None:
    """The pass band hardly sees a zero; the verdict does."""
    zeros = [z * (1.2 if k < 2 else 1) for k, z in enumerate(made.zeros)]
    found = recognise(Ratio.of(product(zeros), product(made.poles)))
    assert isinstance(found, Recognition)
    assert "exactly" not in found.verdict
    assert found.match is None or found.match.prototype.settings != made.settings
