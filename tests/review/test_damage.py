"""Two hundred mistakes made on purpose: the damaged line is the first one that is reported, and no other is wrong."""

from __future__ import annotations

import pytest

import symnet as sn
from tests.review.damage import KINDS, NETWORKS, damages, reviewed, told


@pytest.mark.parametrize("name", NETWORKS)
def test_the_damaged_line_is_the_first_one_reported(name: str) -> None:
    network, right = told(name)
    assert sn.verify(network, right.to_working())
    for damage in damages(name):
        review = reviewed(damage)
        assert review.first_wrong is not None, damage
        assert review.first_wrong.line.number == damage.line, damage


def test_there_are_enough_of_every_kind() -> None:
    found = [damage.kind for name in NETWORKS for damage in damages(name)]
    assert len(found) >= 200
    assert {kind: found.count(kind) >= 30 for kind in KINDS} == dict.fromkeys(KINDS, True)
