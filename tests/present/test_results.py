"""H(s), its unit, its limits, its recognition and the equations in words."""

from __future__ import annotations

import pytest

import symnet as sn
from symnet.present import writers
from symnet.present.recognition import recognition_blocks
from symnet.present.results import (
    conditions_blocks,
    equations_blocks,
    limits_table,
    transfer_blocks,
    unit_of,
)
from symnet.shape.conditions import conditions
from symnet.shape.verdict import Recognition

DIVIDER = "in -- R1 -- out -- R2 || C1 -- gnd; drive in; read out"


@pytest.mark.parametrize(
    ("text", "unit"),
    [
        (DIVIDER, "V/V"),
        (DIVIDER.replace("read out", "read i_R1"), "A/V = S"),
        ("drive current into a; a -- R1 -- gnd; read a", "V/A = ohm"),
        ("drive current into a; a -- R1 || R2 -- gnd; read i_R1", "A/A"),
    ],
)
def test_unit(text: str, unit: str) -> None:
    assert unit_of(sn.derive(sn.network(text))) == unit


def test_transfer() -> None:
    text = writers.text(transfer_blocks(sn.derive(sn.network(DIVIDER))))
    assert "(R1||R2)*C1" in text
    assert "order 1; parts that store energy: C1" in text
    assert "hidden modes: none" in text


def test_limits_with_values_and_reasons() -> None:
    net = sn.network(DIVIDER + "; R1 = 3k; R2 = 1k; C1 = 1n")
    H = sn.derive(net)
    text = writers.text((limits_table(sn.limits(H), H.values, H.dimension),))
    assert "0.25 (-12.04 dB)" in text.replace("\n", " ")
    assert "-20 dB/decade" in text
    assert "C1 open" in text
    assert "NOT" not in text


def test_recognition_names_both_scales() -> None:
    third = "in -- R1 -- a -- L1 -- out; a -- C1 -- gnd; out -- C2 || R2 -- gnd; drive in; read out; "
    found = sn.recognise(sn.derive(sn.network(third + "R1, R2 = 1; C1, C2 = 1; L1 = 2")))
    assert isinstance(found, Recognition)
    text = writers.text(recognition_blocks(found))
    assert "Butterworth, order 3, low-pass, exactly" in text
    assert "of this H" in text
    assert "of the Butterworth" in text
    assert "normalised so that 1 rad/s is:" in text


def test_conditions() -> None:
    """Series R and L into C: D = 1 + s R C + s^2 L C, Butterworth if R^2 C = 2 L (textbook, from memory)."""
    H = sn.derive(sn.network("in -- R1 -- a -- L1 -- out -- C1 -- gnd; drive in; read out"))
    text = writers.text(conditions_blocks(conditions(H)))
    assert "Butterworth, order 2, low-pass" in text
    assert "if and only if" in text
    assert "assuming R1, L1, C1 > 0" in text


def test_equations_are_counted_when_there_are_many() -> None:
    net = sn.network(
        "; ".join(f"n{k} -- R{k} -- n{k + 1} -- Q{k} -- gnd".replace("Q", "C") for k in range(60))
        + "; drive n0; read n9"
    )
    text = writers.text(equations_blocks(sn.equations(net)))
    assert "KCL at n1" in text
    assert "more rows" in text
