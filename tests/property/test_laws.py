"""Laws of linear networks, each quoted, on random networks."""

from __future__ import annotations

from fractions import Fraction
from random import Random

import numpy as np
import pytest

import symnet as sn

SEEDS = range(25)
KINDS = "RLC"


def passive(seed: int, nodes: int = 5) -> sn.Network:
    """A connected network of R, L and C with values spread over decades; nodes n1 to n5 and gnd."""
    random = Random(seed)
    places = ["gnd", *(f"n{k}" for k in range(1, nodes + 1))]
    pieces = []
    count = dict.fromkeys(KINDS, 0)

    def part(start: str, end: str, kind: str) -> None:
        count[kind] += 1
        value = {"R": "kohm", "L": "mH", "C": "nF"}[kind]
        pieces.append(f"{start} -- {kind}{count[kind]} = {random.randint(1, 99)} {value} -- {end}")

    for k in range(1, nodes + 1):  # a tree first, with a resistor to gnd so that nothing floats
        part(places[random.randrange(k)], places[k], "R" if k == 1 else random.choice(KINDS))
    for _ in range(nodes):
        start, end = random.sample(places, 2)
        part(start, end, random.choice(KINDS))
    part("gnd", places[-1], "R")
    return sn.network("\n".join(pieces))


def from_n1(net: sn.Network, read: str) -> sn.Transfer:
    return sn.derive(net, read=read, drive="n1")


@pytest.mark.parametrize("seed", SEEDS)
def test_reciprocity(seed: int) -> None:
    """A network of R, L, C has v_b/i_a = v_a/i_b (Lorentz, Rayleigh)."""
    net = passive(seed)
    there = sn.derive(net, drive="current into n2", read="n5")
    back = sn.derive(net, drive="current into n5", read="n2")
    assert there == back


@pytest.mark.parametrize("seed", SEEDS)
def test_impedance_scaling(seed: int) -> None:
    """R, L times k and C divided by k leave a voltage ratio as it is."""
    net = passive(seed)
    k = Fraction(7, 3)
    scaled = {
        name: number / k if name[0] == "C" else number * k
        for name, number in sn.derive(net, drive="n1", read="n5").values.items()
    }
    assert from_n1(net.with_values(scaled), "n5").numeric() == from_n1(net, "n5").numeric()


@pytest.mark.parametrize("seed", SEEDS)
def test_frequency_scaling(seed: int) -> None:
    """L and C divided by k move every frequency by k: H'(s) = H(s/k)."""
    net = passive(seed)
    k = Fraction(5, 2)
    H = from_n1(net, "n5")
    scaled = {name: number / k for name, number in H.values.items() if name[0] in "LC"}
    faster = from_n1(net.with_values(scaled), "n5").numeric()
    assert faster == H.numeric().stretched(k)


@pytest.mark.parametrize("seed", SEEDS)
def test_superposition(seed: int) -> None:
    """Reading a difference is the difference of the reads; two drives add up."""
    net = passive(seed)
    a, b, difference = (from_n1(net, read).numeric() for read in ("n4", "n5", "n4 - n5"))
    s = 2j * np.pi * np.logspace(2, 6, 9)
    assert np.allclose(difference(s), a(s) - b(s), rtol=1e-9, atol=1e-12)


@pytest.mark.parametrize("seed", SEEDS)
def test_order_of_parts_and_names_of_nodes_do_not_matter(seed: int) -> None:
    """H is a property of the graph: shuffled lines and renamed nodes give the same H."""
    net = passive(seed)
    lines = net.to_text().splitlines()
    Random(seed).shuffle(lines)
    text = "\n".join(lines)
    for k in range(1, 6):
        text = text.replace(f"n{k}", f"node_{9 - k}")
    other = sn.derive(sn.network(text), drive="node_8", read="node_4")
    assert other == from_n1(net, "n5")


@pytest.mark.parametrize("seed", SEEDS)
def test_passivity(seed: int) -> None:
    """A driving-point impedance of R, L, C is positive real: Re Z(jw) >= 0, no pole in the right half plane."""
    Z = sn.derive(passive(seed), drive="current into n1", read="n1").numeric()
    assert all(pole.value.real <= 0 for pole in Z.poles())
    assert (
        np.real(Z(2j * np.pi * np.logspace(0, 8, 60)))
        >= -1e-9 * np.abs(Z(2j * np.pi * np.logspace(0, 8, 60)))
    ).all()


@pytest.mark.parametrize("seed", SEEDS)
def test_a_divider_is_a_ratio_of_impedances(seed: int) -> None:
    """Voltage ratio times driving-point impedance is the transfer impedance: v_b/v_a * v_a/i_a = v_b/i_a."""
    net = passive(seed)
    ratio = from_n1(net, "n5").numeric()
    z11, z21 = (sn.derive(net, drive="current into n1", read=read).numeric() for read in ("n1", "n5"))
    s = 2j * np.pi * np.logspace(2, 6, 9)
    assert np.allclose(ratio(s) * z11(s), z21(s), rtol=1e-9, atol=0)
