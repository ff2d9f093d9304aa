"""Coupled coils as they are typed: texts that come back, and sets of coils that nobody can wind."""

from __future__ import annotations

import pytest

import symnet as sn
from symnet.circuit.parts import Coupling
from symnet.errors import NotationError

COILS = "in -- R1 -- a -- L1 -- gnd; out -- L2 -- gnd; out -- R2 -- gnd; drive in; read out\n"


@pytest.mark.parametrize(
    "text",
    [
        COILS + "couple L1 to L2 with k",
        COILS + "couple L1 to L2 with k = 0.98 ±1%; L1, L2 = 1 mH",
        COILS + "couple L1 to L2 with M12 = -1 mH",
        """
        define t(a, b; k = 0.5)
          a -- L1 -- gnd; b -- L2 -- gnd
          couple L1 to L2 with k
        done
        T1: t(a=in, b=out, k=0.9); T2: t(a=in, b=out2, k); out -- R1 -- out2
        """,
    ],
)
def test_the_text_that_is_written_reads_to_the_same_network(text: str) -> None:
    network = sn.network(text)
    assert sn.network(network.to_text()) == network


def test_the_name_says_whether_k_or_m_is_meant() -> None:
    k, m = Coupling("T1.k", "T1.L1", "T1.L2"), Coupling("M12", "L1", "L2")
    assert (k.is_coefficient, k.mutual) == (True, "T1.M_k")
    assert (m.is_coefficient, m.mutual) == (False, "M12")


def test_a_coupling_can_be_taken_away_and_a_coupled_coil_cannot() -> None:
    network = sn.network(COILS + "couple L1 to L2 with k = 0.5")
    assert network.without("k").couplings == ()
    assert network.without("k").value("k") is None
    with pytest.raises(NotationError, match="the network has no coil L2"):
        network.without("L2")


# k12 = k23 = x and k13 = y: 1 + 2 x^2 y - 2 x^2 - y^2 >= 0, the determinant of the matrix of coefficients
@pytest.mark.parametrize(("y", "allowed"), [("0.62", True), ("0.61", False), ("1", True), ("-0.2", False)])
def test_three_coils_are_judged_together(y: str, allowed: bool) -> None:
    text = (
        "a -- L1 -- gnd; a -- L2 -- gnd; a -- L3 -- gnd; couple L1 to L2 with k12 = 0.9\n"
        f"couple L2 to L3 with k23 = 0.9; couple L1 to L3 with k13 = {y}"
    )
    if allowed:
        assert len(sn.network(text).couplings) == 3
    else:
        with pytest.raises(NotationError, match="no coils can have the couplings k12, k13, k23 together"):
            sn.network(text)
