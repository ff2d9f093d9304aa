"""Op amps with net positive feedback: ideal algebra cannot tell exchanged inputs, a finite gain can."""

from __future__ import annotations

import pytest

import symnet as sn
from symnet.review.polarity import polarities

INVERTING = "in -- R1 -- m -- R2 -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out"
UNITY = "in -- R1 -- x -- R2 -- p -- C2 -- gnd; x -- C1 -- out; U1: opamp(plus=p, minus=out, out=out); drive in; read out"
GAIN = (
    "in -- R1 -- x -- R2 -- p -- C2 -- gnd; x -- C1 -- out; out -- R4 -- m -- R3 -- gnd;"
    "U1: opamp(plus=p, minus=m, out=out); drive in; read out"
)
FEEDBACK = (
    "in -- R1 -- x -- R2 -- out; x -- C1 -- gnd; x -- R3 -- m -- C2 -- out;"
    "U1: opamp(plus=gnd, minus=m, out=out); drive in; read out"
)
INTEGRATOR = "in -- R1 -- m -- C1 -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out"
DIFFERENTIATOR = "in -- C1 -- m -- R1 -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out"
TWO = (
    "in -- R1 -- m -- R2 -- y; y -- R3 -- q -- R4 -- out; out -- R5 -- m; m -- C1 -- y;"
    "U1: opamp(plus=gnd, minus=m, out=y); U2: opamp(plus=gnd, minus=q, out=out); drive in; read y"
)
ALL = [INVERTING, UNITY, GAIN, FEEDBACK, INTEGRATOR, DIFFERENTIATOR]


def exchanged(text: str) -> str:
    """The same network with the inputs of its op amps exchanged."""
    return text.replace("plus=", "?=").replace("minus=", "plus=").replace("?=", "minus=")


@pytest.mark.parametrize("text", ALL)
def test_the_right_way_round_is_negative(text: str) -> None:
    assert [polarity.feedback for polarity in polarities(sn.network(text))] == ["negative"]


@pytest.mark.parametrize("text", ALL)
def test_exchanged_inputs_are_found_though_h_is_the_same(text: str) -> None:
    right, wrong = sn.network(text), sn.network(exchanged(text))
    assert sn.derive(right) == sn.derive(wrong)
    assert [polarity.feedback for polarity in polarities(wrong)] == ["positive"]


def test_the_pole_that_a_finite_gain_shows() -> None:
    """With A = wt/s the exchanged inverter is R2 wt/(s (R1 + R2) - R1 wt): a pole in the right half plane."""
    finite = "in -- R1 -- m -- R2 -- out; hold out = wt*m/s; drive in; read out"
    assert sn.verify(sn.network(finite), "out/in = R2*wt/(s*(R1 + R2) - R1*wt)")


def test_where_both_inputs_have_feedback_the_values_decide() -> None:
    both = (
        "in -- R1 -- p -- R2 -- out; m -- R3 -- gnd; m -- R4 -- out; U1: opamp(plus=p, minus=m, out=out);"
        "drive in; read out"
    )
    assert [p.feedback for p in polarities(sn.network(both))] == ["open"]
    weak = sn.network(both + "; R1, R2, R3 = 1k; R4 = 0.5k")
    assert [p.feedback for p in polarities(weak)] == ["negative"]
    strong = sn.network(both + "; R1, R2, R3 = 1k; R4 = 2k")
    assert [p.feedback for p in polarities(strong)] == ["positive"]


def test_each_op_amp_is_judged() -> None:
    found = {polarity.part: polarity.feedback for polarity in polarities(sn.network(TWO))}
    assert set(found) == {"U1", "U2"}


def test_a_review_warns_and_still_holds() -> None:
    review = sn.verify(sn.network(exchanged(INVERTING)), "out/in = -R2/R1")
    assert review
    (warning,) = review.polarity
    assert "U1 is net positive" in str(warning)
    assert "net positive" in review._repr_mimebundle_()["text/plain"]
    assert not sn.verify(sn.network(INVERTING), "out/in = -R2/R1").polarity


def test_the_brief_warns_too() -> None:
    assert "net positive" in sn.brief(sn.network(exchanged(INVERTING))).to_text()
    assert "net positive" not in sn.brief(sn.network(INVERTING)).to_text()
