"""What differs between two drawings, whatever the order of their lines."""

from __future__ import annotations

from fractions import Fraction
from random import Random

import pytest

import symnet as sn
from symnet.circuit.changes import Changes, changes
from symnet.circuit.parts import Branch
from symnet.expressions import Name
from tests.networks import seeded

NET = sn.network("""
    in -- R1 -- x -- R2 + L2 -- out
    x -- C1 -- gnd
    out -- C2 || RL -- gnd
    hold y = 2*out as buffer
    y -- R3 -- gnd
    R1, R2 = 1 kohm ±1%
    C1 = 10 nF
    drive in
    read out
""")


def test_added_and_removed() -> None:
    found = changes(NET, NET.without("C2").add("out -- C3 = 1n -- gnd"))
    assert found == Changes(added=(Branch("C3", "out", "gnd"),), removed=(Branch("C2", "out", "gnd"),))


def test_moved_and_turned_round() -> None:
    moved = changes(NET, NET.without("C1").add("out -- C1 = 10n -- gnd")).moved
    assert [(each.name, each.before.nodes, each.after.nodes) for each in moved] == [
        ("C1", ("x", "gnd"), ("out", "gnd"))
    ]
    assert not moved[0].is_turned
    (turned,) = changes(NET, NET.without("C1").add("gnd -- C1 = 10n -- x")).moved
    assert turned.is_turned


def test_a_part_in_series_moves_one_part_only() -> None:
    """The nameless nodes of a series get other names, which is no move."""
    found = changes(NET, NET.replace("R2", "R2 + R7"))
    assert [part.name for part in found.added] == ["R7"]
    assert [each.name for each in found.moved] == ["L2"]
    assert not found.renamed


def test_values_with_relative_change_and_tolerance() -> None:
    found = changes(NET, NET.with_values(R1="2 kohm ±1%", R2="1 kohm ±5%", C1=None, RL="2*R1"))
    assert [(each.name, each.relative) for each in found.values] == [
        ("R1", Fraction(1)),
        ("R2", Fraction(0)),
        ("C1", None),
        ("RL", None),
    ]
    assert found.values[2].after is None


def test_a_law_that_says_something_else() -> None:
    found = changes(NET, sn.network(NET.to_text().replace("2*out", "3*out")))
    assert [each.name for each in found.relaid] == ["buffer"]
    assert not found.moved


def test_drives_and_reads() -> None:
    found = changes(
        NET, sn.network(NET.to_text().replace("drive in", "drive x").replace("read out", "read y"))
    )
    assert found.reads == ((Name("out"),), (Name("y"),))
    assert [drive.nodes[0] for side in found.drives for drive in side] == ["in", "x"]


def test_a_renamed_node_moves_nothing() -> None:
    text = NET.to_text().replace("x ", "middle ").replace("out", "o")
    found = changes(NET, sn.network(text))
    assert found == Changes(renamed=(("x", "middle"), ("out", "o")))


def test_laws_without_a_name_are_known_by_what_they_say() -> None:
    lines = ["hold a = 2*b", "hold c = 3*b", "push into b = 1 S*a", "a -- R1 -- b -- R2 -- c"]
    one, two = sn.network("\n".join(lines)), sn.network("\n".join(reversed(lines)))
    assert one != two
    assert not changes(one, two)
    renamed = sn.network("\n".join(reversed(lines)).replace("b", "p"))
    assert changes(one, renamed) == Changes(renamed=(("b", "p"),))


@pytest.mark.parametrize("seed", range(15))
def test_shuffled_lines_are_no_change(seed: int) -> None:
    """The drawing is a set of parts; a random order of its lines draws the same."""
    net = sn.network(seeded(seed).text)
    lines = net.to_text().splitlines()
    Random(seed).shuffle(lines)
    assert not changes(net, sn.network("\n".join(lines)))


@pytest.mark.parametrize("seed", range(15))
def test_there_and_back(seed: int) -> None:
    """What is added one way is removed the other way, and relative changes undo each other."""
    net = sn.network(seeded(seed).text)
    more = net.add("a -- Rnew = 1k -- gnd")
    there, back = changes(net, more), changes(more, net)
    assert there.added == back.removed == (Branch("Rnew", "a", "gnd"),)
    assert changes(net, more.without("Rnew")) == Changes()
