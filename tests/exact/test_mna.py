"""The nodal equations: labelled, as a person writes them, and the same H by another route."""

from __future__ import annotations

import pytest
import sympy

import symnet as sn
from symnet.circuit.spelling import write_expression
from symnet.errors import WiringError

ACTIVE = """
    in -- R1 -- x -- R2 -- out;  x -- C1 -- gnd;  x -- L3 -- m -- C2 -- out
    U1: opamp(plus=gnd, minus=m, out=out)
    out -- R4 -- b;  push from b to gnd = gm*x as amp1;  b -- R5 -- gnd
    hold c - b = r*i_R1 as amp2;  c -- Z1 -- gnd
    drive in;  read c
"""


def lines(text: str) -> dict[str, str]:
    system = sn.equations(sn.network(text))
    return {e.label: f"{write_expression(e.left)} = {write_expression(e.right)}" for e in system.lines}


def test_equations_are_those_that_a_person_writes() -> None:
    assert lines(ACTIVE) == {
        "KCL at in": "(in - x)/R1 + i_drive = 0",
        "KCL at x": "(x - in)/R1 + (x - out)/R2 + s*C1*x + i_L3 = 0",
        "KCL at out": "(out - x)/R2 + s*C2*(out - m) - i_U1 + (out - b)/R4 = 0",
        "KCL at m": "-i_L3 + s*C2*(m - out) = 0",
        "KCL at b": "(b - out)/R4 + gm*x + b/R5 - i_amp2 = 0",
        "KCL at c": "i_amp2 + i_Z1 = 0",
        "law of drive": "in = drive",
        "law of U1": "m = 0",
        "law of amp2": "c - b = r*i_R1",
        "law of L3": "x - m = s*L3*i_L3",
        "law of Z1": "c = Z1*i_Z1",
    }


@pytest.mark.parametrize(
    "text",
    [
        ACTIVE,
        "drive current from a to b; a -- R1 -- gnd; b -- C1 + L1 -- a; b -- Y1 -- gnd; read b",
        "1 -- R1 -- 2 -- L1 || C1 -- gnd; drive 1 as Vs; read v_2 - v_1",
    ],
)
def test_sympy_solves_the_displayed_system_to_the_same_h(text: str) -> None:
    net = sn.network(text)
    system = sn.equations(net)
    H = sn.derive(net)
    solution = system.matrix.LUsolve(next(iter(system.sources.values())))
    values = dict(zip(system.unknowns, solution, strict=True))
    read = (
        values["c"]
        if "read c" in text
        else values["b"]
        if "read b" in text
        else values["v_2"] - values["v_1"]
    )
    assert sympy.cancel(sympy.together(read - H.expr)) == 0


def test_rows_and_columns_are_labelled_alike() -> None:
    system = sn.equations(sn.network("1 -- R1 -- out -- L1 + C1 -- gnd; drive 1; read out"))
    assert system.unknowns == ("v_1", "out", "v_L1+C1", "i_drive", "i_L1")
    assert [line.label for line in system.lines] == [
        "KCL at 1",
        "KCL at out",
        "KCL at L1+C1",
        "law of drive",
        "law of L1",
    ]
    assert system.matrix.shape == (5, 5)


def test_faults_of_the_wiring_come_first() -> None:
    with pytest.raises(WiringError):
        sn.equations(sn.network("in -- R1 -- gnd; x -- R2 -- y; drive in; read in"))
