"""Passive two-ports: H or Zin is the published formula, exactly; S11 and the chain matrix of the same networks."""

from __future__ import annotations

import pytest

import symnet as sn
from tests.reference.cases import Formula
from tests.reference.comparing import assert_same_function
from tests.reference.passive_sections import CASES

BY_ID = {case.id: case for case in CASES}


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.id)
def test_h_is_the_published_formula(case: Formula) -> None:
    assert_same_function(sn.derive(sn.network(case.text)), case.formula)


@pytest.mark.parametrize("name", ["s21-series", "s21-shunt"])
def test_reflection_at_a_matched_port(name: str) -> None:
    case = BY_ID[name]
    at_port = sn.derive(sn.network(case.text), read=case.facts["port"])
    # S11 = 2 V1/Vs - 1 with a source of 2 V1 open-circuit voltage behind Z0
    assert_same_function(at_port, f"({case.facts['S11']} + 1)/2")


@pytest.mark.parametrize("name", ["tee-abcd", "pi-abcd"])
@pytest.mark.parametrize(
    ("letter", "drive", "shorted"),
    [("A", "in", False), ("B", "in", True), ("C", "current into in", False), ("D", "current into in", True)],
)
def test_chain_matrix(name: str, letter: str, drive: str, shorted: bool) -> None:
    # V1 = A V2 + B I2, I1 = C V2 + D I2, I2 out of the port: each is 1/H with port 2 open or shorted
    case = BY_ID[name]
    text = case.text.replace("-- out", "-- gnd").replace("out --", "gnd --") if shorted else case.text
    text = "\n".join(line for line in text.splitlines() if "drive" not in line and "read" not in line)
    if shorted and name == "pi-abcd":
        text = text.replace("gnd -- R2 -- gnd", "")
    read = f"i_{case.facts['last']}" if shorted else "out"
    H = sn.derive(sn.network(f"{text}\ndrive {drive}\nread {read}"))
    assert_same_function(H, f"1/({case.facts[letter]})")


@pytest.mark.parametrize("name", ["tee-abcd", "pi-abcd"])
def test_chain_matrix_at_once(name: str) -> None:
    case = BY_ID[name]
    matrix = sn.two_port(sn.network(case.text), "in", "out").chain()
    for letter, entry in zip("ABCD", (each for row in matrix for each in row), strict=True):
        assert_same_function(entry, case.facts[letter])


@pytest.mark.parametrize("name", ["s21-series", "s21-shunt"])
def test_scattering_at_once(name: str) -> None:
    case = BY_ID[name]
    network = sn.network(case.text)
    ends = [part.name for part in network.branches() if part.name in {"Rs", "RL", "Rl", "Z0", "Zs", "Zl"}]
    port = sn.two_port(network.without(*ends), case.facts["port"], "out")
    assert_same_function(port.s("Z0")[0, 0], case.facts["S11"])
