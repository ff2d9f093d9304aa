"""Determinants without a diagram: the same numbers as from one, and networks that are too dense to have one."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from random import Random
from typing import Any

import pytest

import symnet as sn
from symnet.circuit.network import Network
from symnet.errors import LimitError
from symnet.exact import structure, trees
from symnet.exact.matrices import Matrix
from symnet.exact.modular import PRIME
from symnet.exact.trees import Diagram, Piece, build
from symnet.expressions import Name
from tests import oracle
from tests.networks import seeded
from tests.speed.engine import complete_graph

from .test_trees import random_pieces


def value(coefficients: list[int], s: int) -> int:
    return sum(c * s**k for k, c in enumerate(coefficients))


@pytest.mark.parametrize("seed", range(200))
def test_it_is_what_the_diagram_is(seed: int) -> None:
    """Law: the sum over common trees is the determinant of the sum of the pieces, times all leaves."""
    random = Random(seed)
    size = random.randint(1, 6)
    pieces = random_pieces(random, size, random.randint(size, size + 6), random.random())
    diagram = build(size, pieces)
    if diagram.is_zero:
        return
    numbers = random.sample(range(2 * len(pieces)), len(pieces))  # the pieces among other weights
    take, leave = (
        [[random.randint(-5, 5) for _ in range(random.randint(1, 3))] for _ in range(2 * len(pieces))]
        for _ in range(2)
    )
    for k in numbers[::3]:
        leave[k] = [0]  # a short
    matrix = Matrix(size, tuple(pieces), tuple(numbers), -1)
    found = matrix.coefficients(take, leave)
    assert not found or found[-1]
    for s in (-3, -1, 0, 1, 2, 5, 11):
        takes, leaves = ([value(side[k], s) for k in range(len(side))] for side in (take, leave))
        wanted = -diagram.evaluate([takes[k] for k in numbers], [leaves[k] for k in numbers])
        assert value(found, s) == wanted
        assert matrix.evaluate_modulo(takes, leaves, PRIME) == wanted % PRIME
    assert matrix.count() >= diagram.count()


def test_trees_are_counted_by_kirchhoff() -> None:
    """Cayley: the complete graph on n nodes has n^(n - 2) spanning trees."""
    edges = tuple(Piece(a, b, a, b) for a in range(11) for b in [*range(a + 1, 11), None])
    assert Matrix(11, edges, tuple(range(len(edges)))).count() == 12**10


@pytest.mark.parametrize("seed", range(40))
def test_networks_without_diagrams_have_the_same_numbers(seed: int, monkeypatch: pytest.MonkeyPatch) -> None:
    """Every block is refused a diagram; numbers against the oracle's tableau, in fractions."""
    sketch = seeded(500 + seed, rational=True, single=False)
    s = Fraction(104729, 7)
    try:
        wanted = oracle.transfer_exact(sketch.drawing, {**sketch.values, "s": s})
    except oracle.NoSolutionError:
        return

    def refuse(*_: Any) -> Diagram:
        raise trees.too_wide()

    monkeypatch.setattr(structure, "build", refuse)
    H = sn.derive(sn.network(sketch.text))
    assert H.numeric().at(s) == wanted


def dense(nodes: int) -> Network:
    """The complete graph, every fourth part a capacitor, every ninth of the others an inductor, all with values."""
    lines, values = [], []
    for k, line in enumerate(complete_graph(nodes).splitlines()):
        if not line.startswith(("drive", "read")):
            kind, unit = ("C", "nF") if k % 4 == 0 else ("L", "mH") if k % 9 == 1 else ("R", "ohm")
            name = line.split(" -- ")[1]
            lines.append(line.replace(f" {name} ", f" {kind}{name[1:]} "))
            values.append(f"{kind}{name[1:]} = {10 + 7 * k} {unit}")
        else:
            lines.append(line)
    return sn.network("\n".join([*lines, *values]))


def test_a_network_that_no_diagram_holds_is_refused_and_gives_numbers() -> None:
    """The complete graph on 14 nodes, the source in place of one edge: 2 n^(n - 3) of its n^(n - 2) trees hold an edge."""
    net = dense(14)
    H = sn.derive(net)
    assert not H.quotient.is_built
    assert "confirmed" in repr(H)
    trees_of_denominator = 2 * 14**11
    assert H.terms[1] == trees_of_denominator
    assert trees_of_denominator > 10**12
    for what in ("numerator", "denominator", "hidden", "expr"):
        with pytest.raises(LimitError, match=r"up to \d\.\d\de1\d terms; the limit is 500000"):
            getattr(H, what)
    with pytest.raises(LimitError, match="more than 200000 nodes") as refused:
        H.quotient.denominator.diagram  # noqa: B018
    assert "H.numeric()" in refused.value.faults[0].hint
    assert str(H) == repr(H)
    ratio = H.numeric()
    assert ratio.order > 10
    for s in (Fraction(104729, 7), Fraction(-3, 11)):
        assert ratio.at(s) == by_nodes(net, H.values, s)


def test_it_is_recognised_by_its_numbers() -> None:
    """One capacitor at the output of resistors between all nodes: one time constant, a low-pass."""
    text = (
        complete_graph(14)
        + "\nn13 -- C1 -- gnd; C1 = 10 nF; "
        + "; ".join(
            f"R{a}_{b} = {100 + 10 * a + b} ohm"
            for a in range(14)
            for b in range(a + 1, 14)
            if (a, b) != (0, 1)
        )
    )
    H = sn.derive(sn.network(text))
    assert not H.quotient.is_built
    assert H.numeric().order == 1
    assert "low-pass" in str(sn.recognise(H))


def test_few_symbols_do_not_help_without_a_diagram() -> None:
    """Terms may then be few, and are not to be had all the same: refused with the reason, not with a count."""
    H = sn.derive(dense(14), symbols="R1_4")
    with pytest.raises(LimitError, match="joined"):
        H.denominator  # noqa: B018
    assert H.numeric() == sn.derive(dense(14)).numeric()


def by_nodes(net: Network, numbers: Mapping[str, Fraction], s: Fraction) -> Fraction:
    """The voltage read, for 1 V at the drive, from the nodal equations in fractions."""
    (driven, _), (reading,) = net.drives[0].nodes, net.reads
    nodes = [node for node in net.nodes if node != driven]
    place = {node: k for k, node in enumerate(nodes)}
    rows = [[Fraction(0)] * (len(nodes) + 1) for _ in nodes]
    for part in net.branches():
        number = numbers[part.name]
        y = {"R": 1 / number, "C": s * number, "L": 1 / (s * number)}[part.kind]
        for here, there in (part.nodes, part.nodes[::-1]):
            if here in place:
                rows[place[here]][place[here]] += y
                if there in place:
                    rows[place[here]][place[there]] -= y
                elif there == driven:
                    rows[place[here]][-1] += y
    for k in range(len(nodes)):
        pivot = next(r for r in range(k, len(nodes)) if rows[r][k])
        rows[k], rows[pivot] = rows[pivot], rows[k]
        rows[k] = [entry / rows[k][k] for entry in rows[k]]
        for r in range(len(nodes)):
            if r != k:
                rows[r] = [entry - rows[r][k] * top for entry, top in zip(rows[r], rows[k], strict=True)]
    assert isinstance(reading, Name)
    return rows[place[reading.name]][-1]
