"""Every published formula is confirmed as a claim; with one term altered it is refused and the term is named."""

from __future__ import annotations

import re
from typing import Any

import pytest

import symnet as sn
from symnet.exact.readable.forms import readable
from symnet.typeset.writing import to_text
from tests.reference import active_sections, passive_sections
from tests.reference.cases import Formula

CASES = (*active_sections.CASES, *passive_sections.CASES)
IDS = [case.id for case in CASES]


@pytest.mark.parametrize("case", CASES, ids=IDS)
def test_a_published_formula_is_confirmed(case: Formula) -> None:
    review = sn.verify(sn.network(case.text), f"H = {case.formula}")
    assert review, str(review)


@pytest.mark.parametrize(
    "case",
    [case for case in CASES if {"w0", "Q"} <= set(case.facts)],
    ids=lambda case: case.id,
)
def test_published_figures_are_confirmed(case: Formula) -> None:
    for name in ("w0", "Q"):
        assert sn.verify(sn.network(case.text), f"{name} = {case.facts[name]}"), case.facts[name]


def written(polynomial: Any) -> str:
    """A ring element in the notation."""
    return re.sub(r"\*\*", "^", str(polynomial.as_expr()))


@pytest.mark.parametrize("case", CASES, ids=IDS)
def test_an_altered_formula_is_refused_and_the_term_named(case: Formula) -> None:
    """Each of a few terms of D is left out; the claim is otherwise the exact H, multiplied out."""
    H = sn.derive(sn.network(case.text))
    terms = list(H.denominator.terms())
    tested = 0
    for powers, coefficient in {*terms[:2], *terms[-2:]}:
        term = H.ring.from_dict({powers: coefficient})
        rest = H.denominator - term
        if not rest:
            continue
        claim = f"H = ({written(H.numerator)})/({written(rest)})"
        (judgement,) = sn.verify(H.network, claim)
        assert not judgement.holds
        # Where the shortened H has factors in common, powers of s cannot be compared one by one.
        if judgement.comparison is None or len(H.numerator.gcd(rest)) > 1:
            continue
        wrong = judgement.comparison.wrong
        without_s = H.ring.from_dict({(0, *powers[1:]): abs(coefficient)})
        shown = to_text(readable(without_s))
        named = {to_text(tree).lstrip("-") for c in wrong for tree in (*c.missing, *c.extra)}
        assert shown in named, (claim, str(judgement.comparison))
        tested += 1
    assert tested or len(terms) <= 2


def test_a_factor_of_two_on_one_term_is_named() -> None:
    net = sn.network("in -- R1 -- x -- R2 -- o; x -- C1 -- gnd; o -- C2 -- gnd; drive in; read o")
    (judgement,) = sn.verify(net, "o/in = 1/(1 + s*(R1*C1 + 2*R1*C2 + R2*C2) + s^2*R1*R2*C1*C2)")
    assert judgement.comparison is not None
    (wrong,) = judgement.comparison.wrong
    assert (wrong.side, wrong.power) == ("denominator", 1)
    assert ([to_text(t) for t in wrong.missing], [to_text(t) for t in wrong.extra]) == ([], ["R1*C2"])


def test_the_exact_h_is_written_in_the_form_of_the_claim() -> None:
    """The claim has the load under the bar, so that symnet's H is scaled to it."""
    net = sn.network("in -- Rs -- a -- L1 -- out; a -- C1 -- gnd; out -- RL -- gnd; drive in; read out")
    (judgement,) = sn.verify(net, "out/in = RL/(Rs + RL + s*L1 + s*C1*Rs*RL)")
    assert judgement.comparison is not None
    assert (
        str(judgement.comparison).splitlines()[-1] == "right: RL/(Rs + RL + s*(L1 + Rs*RL*C1) + s^2*Rs*L1*C1)"
    )
    (wrong,) = judgement.comparison.wrong
    assert str(wrong) == "denominator, s^2: 0 is claimed, Rs*L1*C1 is right; missing: Rs*L1*C1"
