"""Resistive pads: loss, match and element formulas of the published tables."""

from __future__ import annotations

import math

import pytest

import symnet as sn
from tests.reference.attenuators import CASES, Pad
from tests.reference.comparing import decibels, numeric


def name(case: Pad) -> str:
    return case.id


def formula(case: Pad) -> tuple[float, float]:
    """Series and shunt arm by the textbook formula for the kind of pad; K = 10^(dB/20)."""
    K, z = 10 ** (case.db / 20), case.z0
    return {
        "T": (z * (K - 1) / (K + 1), 2 * z * K / (K**2 - 1)),
        "pi": (z * (K**2 - 1) / (2 * K), z * (K + 1) / (K - 1)),
        "bridged-T": (z * (K - 1), z / (K - 1)),
        "L": (z * (1 - 1 / K), z / (K - 1)),
    }[case.kind]


@pytest.mark.parametrize("case", CASES, ids=name)
def test_printed_elements_are_those_of_the_formula(case: Pad) -> None:
    # rounded to the last digit that the table prints
    for printed, exact in zip((case.series, case.shunt), formula(case), strict=True):
        digits = len(f"{printed:g}".partition(".")[2])
        assert printed == pytest.approx(exact, abs=0.51 * 10**-digits)


@pytest.mark.parametrize("case", CASES, ids=name)
def test_loss_is_the_stated_one(case: Pad) -> None:
    # a matched source gives half its voltage without a pad: that is 0 dB; an L-pad is driven by a stiff source
    reference = 0 if case.kind == "L" else -20 * math.log10(2)
    # printed digits leave 0.005 dB, but for the 5.6 ohm of the 25 dB pad, where 5.64 ohm is meant
    tolerance = 0.07 if case.id == "tpad-25dB" else 0.005
    H = numeric(case)
    assert H.order == 0
    assert reference - decibels(H, 0) == pytest.approx(case.db, abs=tolerance)


@pytest.mark.parametrize("case", CASES, ids=name)
def test_input_is_matched(case: Pad) -> None:
    net = sn.network(case.text)
    if case.kind == "L":
        # the stiff source sees z0: its voltage over the current of the series arm
        H = sn.derive(net, read="i_R1").numeric()
        assert 1 / H(0j) == pytest.approx(case.z0, rel=2e-3)
    else:
        # half of the source voltage is left at the input terminal
        H = sn.derive(net, read="a").numeric()
        assert H(0j) == pytest.approx(0.5, rel=5e-3)
