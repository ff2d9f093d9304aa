"""The numerators of all drives at once, against one H at a time."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest

import symnet as sn
from symnet.circuit.parts import GROUND, CurrentDrive
from symnet.errors import LimitError, SymnetError
from symnet.exact.confirm import UnconfirmedError
from symnet.exact.ratio import Ratio
from symnet.exact.superposition import superposition
from tests.networks import seeded


@pytest.mark.parametrize("seed", range(60))
def test_each_numerator_is_that_of_its_own_h(seed: int) -> None:
    """Law: superposition; N_k/D is the H of drive k alone, on random networks with everything that ships."""
    net = sn.network(seeded(seed).text)
    drives = [*net.drives, *(CurrentDrive(GROUND, node, f"into{k}") for k, node in enumerate(net.nodes[:4]))]
    many = replace(net, drives=tuple(drives))
    try:
        expected = sn.derive_all(many)[:: len(many.reads)]
        found = superposition(many, many.reads[0])
    except SymnetError:
        pytest.skip("no single solution")
    tops, below = found.symbolic()
    for H, top in zip(expected, tops, strict=True):
        assert not top * H.denominator - H.numerator * below
    if found.missing or found.naming.irrational:
        return
    tops_in_numbers, below_in_numbers = found.numbers()
    for H, numbers in zip(expected, tops_in_numbers, strict=True):
        assert Ratio.of(numbers, below_in_numbers) == H.numeric()


def test_a_coupling_with_an_irrational_mutual_inductance() -> None:
    net = sn.network("""
        in -- R1 = 50 -- a -- L1 = 1 mH -- gnd; out -- L2 = 2 mH -- gnd; out -- RL = 1k -- gnd
        couple L1 to L2 with k = 0.9; drive in; drive current into out as Is; read out
    """)
    tops, below = superposition(net, net.reads[0]).numbers()
    for H, top in zip(sn.derive_all(net), tops, strict=True):
        s = 2j * 3.14e4
        assert Ratio.of(top, below)(s) == pytest.approx(H.numeric()(s), rel=1e-12)


def test_a_hundred_drives_of_a_long_ladder_and_no_expansion() -> None:
    count = 60
    text = "; ".join(
        f"n{k} -- R{k} = {k + 1}k -- n{k + 1} -- C{k} = 1 nF -- gnd; drive current into n{k + 1}"
        for k in range(count)
    )
    found = superposition(net := sn.network(f"{text}; drive n0; read n{count}"), net.reads[0])
    tops, below = found.numbers()
    resistance = Fraction(0)
    for k in range(count):  # at DC a current meets the sum of the resistors on its way to the drive
        resistance += 1000 * (k + 1)
        assert tops[k][0] / below[0] == resistance
    with pytest.raises(LimitError, match="terms"):
        found.symbolic()


def test_a_wrong_numerator_is_found() -> None:
    net = sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")
    found = superposition(net, net.reads[0])
    wrong = (*found.bordered.take[:-1], ((2, ()),))
    broken = replace(found, bordered=replace(found.bordered, take=wrong))
    broken.confirm(
        net.reads[0]
    )  # the weight of the drive itself is not looked at: it is what is differentiated by
    wrong = (*found.bordered.take[:-2], ((2, ()),), found.bordered.take[-1])
    broken = replace(found, bordered=replace(found.bordered, take=wrong))
    with pytest.raises(UnconfirmedError, match="defect of symnet"):
        broken.confirm(net.reads[0])


def test_a_network_too_dense_for_a_diagram() -> None:
    """Everything joined to everything on 16 nodes: one determinant for each drive, from the matrix."""
    pairs = [(a, b) for a in range(16) for b in range(a)]
    text = "; ".join(f"n{a} -- R{a}_{b} = {a + b} ohm -- n{b}" for a, b in pairs)
    net = sn.network(
        f"{text}; n0 -- R0 = 1 -- gnd; drive current into n3; drive current into n5 as I5; read n7"
    )
    found = superposition(net, net.reads[0])
    assert not found.bordered.is_built
    tops, below = found.numbers()
    for H, top in zip(sn.derive_all(net), tops, strict=True):
        assert Ratio.of(top, below) == H.numeric()
    with pytest.raises(LimitError):
        found.symbolic()
