"""A seeded share of the counts in DEVELOPERS.md; the whole of it is printed by ``python -m tests.shape.confusion``."""

from __future__ import annotations

import pytest

from tests.shape.confusion import SHAKES, draws, random_verdicts


def test_random_polynomials_are_none_of_these() -> None:
    """500 stable polynomials of order 5 to 8: at least 99 % none of these, none exact."""
    found = [f for order in (5, 6, 7, 8) for f in random_verdicts(order, 125)]
    assert len(found) == 500
    assert sum(not f for f in found) >= 0.99 * 500
    assert not any("exactly" in f.verdict for f in found)


@pytest.mark.parametrize("shake", SHAKES)
def test_shaken_prototypes_keep_their_family(shake: float) -> None:
    """Where the nearest other family is more than twice the shake away; see DEVELOPERS.md for all 1 000."""
    apart = [d for d in draws(60, (shake,), seed=3) if d.is_apart]
    assert len(apart) > 15
    assert [str(d.prototype) for d in apart if d.first != d.prototype.family] == []
    assert not any("exactly" in d.found.verdict for d in apart)
