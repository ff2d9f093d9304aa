"""The brief of any network is a brief, or one of symnet's own errors; never an error of a library below."""

from __future__ import annotations

import re
from contextlib import suppress

import pytest

import symnet as sn
from tests.networks import seeded

#: 83, 84, 145 and 154 once asked for the square root of a negative number: one pole in each half plane.
SEEDS = [*range(40), 83, 84, 145, 154]


@pytest.mark.parametrize("seed", SEEDS)
def test_with_values(seed: int) -> None:
    with suppress(sn.SymnetError):
        seen = sn.brief(sn.network(seeded(seed).text))
        assert all((seen.to_text(), seen.to_html(), seen.to_latex(), seen.to_markdown()))


@pytest.mark.parametrize("seed", SEEDS)
def test_in_symbols(seed: int) -> None:
    text = re.sub(r"^[RLC]\d+ = .*\n?", "", seeded(seed).text, flags=re.MULTILINE)
    with suppress(sn.SymnetError):
        seen = sn.brief(sn.network(text))
        assert all((seen.to_text(), seen.to_html(), seen.to_latex(), seen.to_markdown()))


def test_most_of_these_networks_have_a_brief() -> None:
    """So that the tests above judge briefs, and not refusals."""
    refused = 0
    for seed in SEEDS:
        try:
            sn.brief(sn.network(seeded(seed).text))
        except sn.SymnetError:
            refused += 1
    assert refused <= len(SEEDS) // 4
