"""Why a line is false: twenty mistakes that people made, and two hundred made on purpose, named for what they are."""

from __future__ import annotations

from collections.abc import Callable

import pytest

import symnet as sn
from symnet.review.diagnosis.explanation import Diagnosis, Slip
from tests.reference.derivations import DERIVATIONS
from tests.review.damage import NETWORKS, Damage, damages, reviewed

#: Of each derivation, for the lines that are wrong by themselves: the slip, and what its first sentence must name.
NAMED: dict[tuple[str, str], tuple[Slip, tuple[str, ...]]] = {
    ("D1", "1"): (Slip.LOADING, ("node x", "current through R2", "R2 -> inf")),
    ("D2", "1"): (Slip.NODE, ("node x", "C1 goes to out", "s*C1*(x - out)", "gnd")),
    ("D3", "1"): (Slip.NODE, ("node x", "C1 goes to out", "s*C1*(x - out)", "as if it went to p")),
    ("D4", "1"): (Slip.MISSING_BRANCH, ("node x", "R1, R2, C1, R3", "no current through R3")),
    ("D5", "2"): (Slip.SIGN, ("sign", "-s*C2*R3*out")),
    ("D6", "1"): (Slip.LEFT_OUT, ("Rs is left out", "Rs -> 0")),
    ("D7", "1"): (Slip.FACTOR, ("node a", "C3", "2*s*C*a", "s*C*a")),
    ("D8", "2"): (Slip.CONVENTION, ("2*zeta, not zeta", "zeta = 1.5")),
    ("D8", "3"): (Slip.CONVENTION, ("f0", "-3 dB", "f3dB = 0.3742*f0")),
    ("D9", "4"): (Slip.NORMALISATION, ("denormalised", "7930 rad/s", "0.9109", "1.412")),
    ("D10", "2"): (Slip.NORMALISATION, ("frequency", "unit-delay", "-3.0103 dB")),
    ("D11", "3"): (Slip.CONVENTION, ("1 + R2/R1", "noise gain")),
    ("D12", "3"): (Slip.RECIPROCAL, ("R3/(R3 + R4) is upside down", "(R3 + R4)/R3")),
    ("D13", "1"): (Slip.DIMENSION, ("R1 is ohm", "the other terms are s", "did you mean R1*C2?")),
    ("D14", "1"): (Slip.SIGN, ("sign of 2*M", "-2*M")),
    ("D15", "1"): (Slip.LOADING, ("load each other", "s^2*R1*L1*C1", "missing")),
    ("D16", "1"): (Slip.LEFT_OUT, ("Resr is left out", "Resr -> 0")),
    ("D17", "3"): (Slip.CONVENTION, ("cascade of equal sections", "0.5412 and 1.307", "0.7071 and 0.7071")),
    ("D18", "1"): (Slip.RECIPROCAL, ("sqrt(L1/C1)/R1 is upside down",)),
    ("D19", "1"): (Slip.LEFT_OUT, ("wt is left out", "wt -> inf")),
    ("D20", "1"): (Slip.DIMENSION, ("(a - in)/C1 is V/F", "A", "did you mean s*C1*(a - in)?")),
}

#: What a kind of damage may be called. One part's name for that of another is an exchange where both are there.
CALLED: dict[str, set[Slip]] = {
    "branch dropped": {Slip.MISSING_BRANCH},
    "sign flipped": {Slip.SIGN},
    "wrong node": {Slip.NODE},
    "names swapped": {Slip.SWAPPED, Slip.PART},
    "factor of two": {Slip.FACTOR},
}


def diagnosis_of(network: sn.Network, working: str, label: str = "") -> Diagnosis:
    """The diagnosis of the line with that label, or of the first wrong one."""
    review = sn.verify(network, working)
    wrong = next(j for j in review if not j.holds and (not label or j.line.label == label))
    assert wrong.diagnosis is not None, str(review)
    return wrong.diagnosis


@pytest.mark.parametrize(("name", "label"), NAMED, ids=[" line ".join(key) for key in NAMED])
def test_the_first_explanation_names_what_is_wrong(name: str, label: str) -> None:
    derivation = next(d for d in DERIVATIONS if d.id == name)
    slip, words = NAMED[name, label]
    first = diagnosis_of(sn.network(derivation.network), derivation.wrong, label).first
    assert first.slip is slip, first
    for word in (*words, *(derivation.about if label == derivation.first else ())):
        assert word in first.sentence


def test_every_derivation_is_asked_about() -> None:
    assert {name for name, _ in NAMED} == {derivation.id for derivation in DERIVATIONS}


@pytest.mark.parametrize("derivation", DERIVATIONS, ids=[d.id for d in DERIVATIONS])
def test_a_line_that_holds_or_follows_has_no_diagnosis(derivation: object) -> None:
    assert isinstance(derivation, type(DERIVATIONS[0]))
    network = sn.network(derivation.network)
    assert not any(judgement.diagnosis for judgement in sn.verify(network, derivation.right))
    for judgement in sn.verify(network, derivation.wrong):
        assert judgement.diagnosis is None or not judgement.follows


def _is_named(damage: Damage) -> bool:
    wrong = reviewed(damage).first_wrong
    return (
        wrong is not None
        and wrong.diagnosis is not None
        and wrong.diagnosis.first.slip in CALLED[damage.kind]
    )


def test_the_kind_of_damage_is_named_in_95_of_100(record_property: Callable[[str, object], None]) -> None:
    found = [damage for name in NETWORKS for damage in damages(name)]
    missed = [damage for damage in found if not _is_named(damage)]
    share = 1 - len(missed) / len(found)
    record_property("named", f"{share:.1%} of {len(found)}")  # 100 % of 207
    assert share >= 0.95, "\n".join(map(str, missed))
