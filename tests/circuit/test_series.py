"""Series-parallel groups: their wires, the names of the nodes inside, and the way back."""

from __future__ import annotations

from collections import Counter
from fractions import Fraction

from hypothesis import given
from hypothesis import strategies as st

from symnet.circuit.network import read_network
from symnet.circuit.parts import Branch, Part, VoltageLaw
from symnet.circuit.reading import read_expression
from symnet.circuit.series import (
    Beside,
    Group,
    Leaf,
    Series,
    ends_at,
    groups,
    is_hidden,
    leaves,
    settled,
    spoken,
    wire,
)
from tests.circuit.strategies import group_trees, patient


def resistance(group: Group) -> Fraction:
    """Series resistances add, parallel conductances add; part number k is k + 1 ohm."""
    match group:
        case Leaf(name):
            return Fraction(int(name[1:]) + 1)
        case Series(items):
            return sum((resistance(item) for item in items), Fraction(0))
        case Beside(items):
            return 1 / sum((1 / resistance(item) for item in items), Fraction(0))


def measured(branches: list[Branch], start: str, end: str) -> Fraction:
    """The resistance between two nodes by node equations: 1 A in at start, out at end, eliminated exactly."""
    nodes = sorted({node for branch in branches for node in branch.nodes} - {end})
    rows = {node: dict.fromkeys(nodes, Fraction(0)) | {"": Fraction(node == start)} for node in nodes}
    for branch in branches:
        conductance = Fraction(1, int(branch.name[1:]) + 1)
        for here, there in (branch.nodes, branch.nodes[::-1]):
            if here != end:
                rows[here][here] += conductance
                if there != end:
                    rows[here][there] -= conductance
    for node in [n for n in nodes if n != start]:
        pivot = rows.pop(node)
        for row in rows.values():
            factor = row[node] / pivot[node]
            for column, entry in pivot.items():
                row[column] -= factor * entry
    return rows[start][""] / rows[start][start]


@patient
@given(group_trees())
def test_a_group_has_the_resistance_of_its_wires(group: Group) -> None:
    # Law: series resistances add, parallel conductances add (Kirchhoff).
    assert measured(wire(group, "a", "b"), "a", "b") == resistance(group)


@patient
@given(group_trees())
def test_parts_keep_their_order(group: Group) -> None:
    assert [branch.name for branch in wire(group, "a", "b")] == [leaf.name for leaf in leaves(group)]


@patient
@given(group_trees())
def test_each_joint_has_a_node_of_its_own(group: Group) -> None:
    # Law: a series of n items has n - 1 joints, and no two joints of a network share a node.
    def joints(inner: Group) -> int:
        if isinstance(inner, Leaf):
            return 0
        own = len(inner.items) - 1 if isinstance(inner, Series) else 0
        return own + sum(joints(item) for item in inner.items)

    hidden = {node for branch in wire(group, "a", "b") for node in branch.nodes if is_hidden(node)}
    assert len(hidden) == joints(group)


@patient
@given(group_trees())
def test_groups_come_back(group: Group) -> None:
    # Law: wires read back give groups with the same wires, and no nameless node is left outside.
    branches = wire(group, "a", "b")
    back = groups(branches, ends_at(branches))
    assert [branch for start, inner, end in back for branch in wire(inner, start, end)] == branches
    assert {node for start, _, end in back for node in (start, end)} == {"a", "b"}


@patient
@given(group_trees(), st.integers(0, 7))
def test_settled_networks_can_be_written(group: Group, gone: int) -> None:
    # Law: whatever part is taken away, the rest has the same connections, and its text reads back to it.
    branches: list[Part] = list(wire(group, "a", "b"))
    kept = [part for k, part in enumerate(branches) if k != gone % len(branches)]
    after = settled(kept)
    assert [part.name for part in after] == [part.name for part in kept]
    assert sorted(ends_at(after).values()) == sorted(ends_at(kept).values())
    pairs = Counter(
        (old, new)
        for was, now in zip(kept, after, strict=True)
        for old, new in zip(was.nodes, now.nodes, strict=True)
    )
    assert len({old for old, _ in pairs}) == len(pairs) == len({new for _, new in pairs})
    assert settled(after) == after
    for start, inner, end in groups([b for b in after if isinstance(b, Branch)], ends_at(after)):
        assert not is_hidden(start)
        assert not is_hidden(end)
        assert wire(inner, start, end)


def test_a_network_without_series_is_left_as_it_is() -> None:
    parts = read_network("a -- R1 -- b -- C1 -- gnd; hold b = 2*a").parts
    assert settled(parts) is parts


def test_settled_keeps_laws_at_their_nodes() -> None:
    inner = wire(Series((Leaf("R1"), Leaf("R2"))), "a", "gnd")
    law = VoltageLaw("law1", "R1+R2", "gnd", read_expression("2*a"))
    after = settled([*inner, law])
    assert [part.nodes for part in after] == [("a", "n1"), ("n1", "gnd"), ("n1", "gnd")]


def test_plain_names_avoid_those_in_use() -> None:
    kept = [Branch("R1", "n1", "R1+n2"), Branch("n2", "n3", "gnd")]
    assert [part.nodes for part in settled(kept)] == [("n1", "n4"), ("n3", "gnd")]


def test_spoken() -> None:
    assert spoken("3") == "node 3"
    assert spoken("R1+C1") == "the node between R1 and C1"
