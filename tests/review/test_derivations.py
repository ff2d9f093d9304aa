"""The twenty wrong derivations: the first wrong line, what follows from it, and the corrected ones."""

from __future__ import annotations

import pytest

import symnet as sn
from tests.reference.derivations import DERIVATIONS, Derivation

IDS = [derivation.id for derivation in DERIVATIONS]


@pytest.mark.parametrize("derivation", DERIVATIONS, ids=IDS)
def test_the_first_wrong_line_is_found(derivation: Derivation) -> None:
    review = sn.verify(sn.network(derivation.network), derivation.wrong)
    assert not review
    assert review.first_wrong is not None
    assert review.first_wrong.line.label == derivation.first


@pytest.mark.parametrize("derivation", DERIVATIONS, ids=IDS)
def test_later_lines_follow_or_are_wrong_on_their_own(derivation: Derivation) -> None:
    review = sn.verify(sn.network(derivation.network), derivation.wrong)
    follows = {j.line.label: "".join(line.label for line in j.follows) for j in review if j.follows}
    own = tuple(j.line.label for j in review if not j.holds and not j.follows)
    assert follows == derivation.follows
    assert own == (derivation.first, *derivation.own)


@pytest.mark.parametrize("derivation", DERIVATIONS, ids=IDS)
def test_the_corrected_derivation_holds(derivation: Derivation) -> None:
    review = sn.verify(sn.network(derivation.network), derivation.right)
    assert review, str(review)


def test_the_twin_t_without_its_last_node_has_not_enough_equations() -> None:
    twin_t = next(derivation for derivation in DERIVATIONS if derivation.id == "D7")
    lines = [line for line in twin_t.right.splitlines() if "node o" not in line]
    review = sn.verify(sn.network(twin_t.network), "\n".join(lines))
    assert review  # every line is true
    assert review.completeness is not None
    assert not review.completeness.enough
    assert review.completeness.without == ("o",)
    assert (review.completeness.independent, review.completeness.needed) == (2, 3)
    assert review.judgements[-1].jump
    complete = sn.verify(sn.network(twin_t.network), twin_t.right)
    assert complete.completeness is not None
    assert complete.completeness.enough
    assert not any(judgement.jump for judgement in complete)
