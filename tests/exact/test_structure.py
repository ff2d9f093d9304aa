"""Blocks of a determinant: against the whole diagram, against the border, and for networks whose blocks one can name."""

from __future__ import annotations

from random import Random

import pytest

import symnet as sn
from symnet.exact.hidden import Reason
from symnet.exact.matrices import Matrix
from symnet.exact.pieces import Pieces
from symnet.exact.structure import Structure, chained, structure_of, unchained
from symnet.exact.trees import Diagram, Piece, build
from tests.speed.engine import bridged_t, complete_graph, rc_ladder

from .test_trees import random_pieces


def as_diagram(form: Diagram | Matrix) -> Diagram:
    assert isinstance(form, Diagram)
    return form


def drawn(seed: int) -> tuple[Random, int, list[Piece], list[int], list[int]]:
    random = Random(seed)
    size = random.randint(1, 6)
    pieces = random_pieces(random, size, random.randint(size, size + 6), random.random())
    take = [random.randint(-50, 50) for _ in pieces]
    leave = [random.randint(1, 50) for _ in pieces]
    return random, size, pieces, take, leave


@pytest.mark.parametrize("seed", range(300))
def test_the_product_of_the_blocks_is_the_determinant(seed: int) -> None:
    """Law: det = the product of the blocks, term by term and with its sign; no common tree, no determinant."""
    _, size, pieces, take, leave = drawn(seed)
    plain = build(size, pieces)
    structure = structure_of(size, pieces)
    if structure is None:
        assert plain.is_zero
        return
    assert sorted(k for block in structure.blocks for k in block) == list(range(len(pieces)))
    assert as_diagram(structure.whole).evaluate(take, leave) == plain.evaluate(take, leave)
    assert structure.whole.count() == plain.count()
    assert chained(unchained(as_diagram(structure.whole))) == structure.whole


@pytest.mark.parametrize("seed", range(400))
def test_blocks_that_no_read_sees_or_that_see_no_drive_are_common_factors(seed: int) -> None:
    """Law: N/D of the bordered matrix is N/D of what lies between read and drive, for any weights."""
    random, size, pieces, take, leave = drawn(seed)
    structure = structure_of(size, pieces)
    if structure is None:
        return

    def end() -> int | None:
        at = random.randint(-1, size - 1)
        return None if at < 0 else at

    border = [Piece(size, None, end(), end()) for _ in range(random.randint(1, 3))]
    border.append(Piece(end(), end(), size, None))
    weights = [random.randint(-9, 9) for _ in border]
    ones = [1] * len(border)
    n = build(size + 1, [*pieces, *border]).evaluate(take + weights, leave + ones)
    d = as_diagram(structure.whole).evaluate(take, leave)
    seen = structure.seen((piece.column_plus, piece.column_minus) for piece in border[:-1])
    driven = structure.driven((border[-1].row_plus, border[-1].row_minus))
    between = sorted(seen & driven)
    kept = sorted(k for number in between for k in structure.blocks[number])
    minor = structure.minor(kept, border)
    inner = structure_of(minor.size, minor.pieces, minor.tree)
    top = 0
    if inner is not None:
        top = as_diagram(inner.whole).evaluate(
            [take[k] for k in kept] + weights, [leave[k] for k in kept] + ones
        )
    assert n * as_diagram(structure.determinant(between, minor.parity)).evaluate(take, leave) == top * d


def structure(text: str) -> tuple[Pieces, Structure]:
    pieces = Pieces.of(sn.network(text))
    found = structure_of(pieces.size, pieces.pieces)
    assert found is not None
    return pieces, found


def blocks(text: str) -> set[frozenset[str]]:
    """The parts of each block of more than one piece."""
    pieces, found = structure(text)
    return {frozenset(pieces.owners[k] for k in block) for block in found.blocks if len(block) > 1}


def test_a_joint_of_the_network_parts_two_blocks() -> None:
    """Two meshes with one node in common share no tree: each is a block (the ideal source shorts ``in`` to gnd)."""
    text = "in -- R1 -- a -- R2 -- gnd; in -- R3 -- b -- R4 -- gnd; drive in; read a"
    assert blocks(text) == {frozenset({"R1", "R2"}), frozenset({"R3", "R4"})}


def test_what_follows_a_buffer_is_a_block_of_its_own() -> None:
    text = "in -- R1 -- a -- C1 -- gnd; hold b = K*a; b -- R2 -- c -- C2 -- gnd; drive in; read c"
    assert blocks(text) == {frozenset({"R1", "C1"}), frozenset({"R2", "C2"})}


def test_feedback_through_the_law_joins_the_blocks() -> None:
    text = (
        "in -- R1 -- a -- C1 -- gnd; hold b = K*a; b -- R2 -- c -- C2 -- gnd; c -- R3 -- a; drive in; read c"
    )
    assert len(blocks(text)) == 1


def test_an_op_amp_with_feedback_holds_its_stage_together() -> None:
    """Two inverting integrators in cascade: the virtual ground of each keeps the stages apart."""
    text = "\n".join(
        f"s{k} -- R{k} -- m{k} -- C{k} -- s{k + 1}; U{k}: opamp(plus=gnd, minus=m{k}, out=s{k + 1})"
        for k in range(2)
    )
    H = sn.derive(sn.network(text + "\ndrive s0; read s2"))
    assert not any(len(block) > 3 for block in structure(text + "\ndrive s0; read s2")[1].blocks)
    assert H.hidden == ()
    assert H.denominator.degree(0) == 2


@pytest.mark.parametrize("text", [rc_ladder(8), bridged_t(3), complete_graph(6)])
def test_one_block_is_as_short_as_before(text: str) -> None:
    pieces, found = structure(text)
    plain = build(pieces.size, pieces.pieces)
    assert found.whole.count() == plain.count()
    assert len(as_diagram(found.whole)) <= len(plain) + 5


def cascade(stages: int, read: str) -> str:
    """Second-order low-pass sections of two resistors and two capacitors, a buffer of gain K after each."""
    lines = []
    for k in range(stages):
        lines += [f"n{k} -- R{k}a -- a{k} -- R{k}b -- b{k} -- C{k}b -- gnd", f"a{k} -- C{k}a -- gnd"]
        lines.append(f"hold n{k + 1} = mu_{k}*b{k}")
    return "\n".join([*lines, "drive n0", f"read {read}"])


def test_a_cascade_of_twelve_buffered_sections_is_a_product() -> None:
    """Five terms a section: 5^12 = 244 140 625 written out, 60 as a product; names and lowest terms cost nothing."""
    H = sn.derive(sn.network(cascade(12, "n12")))
    assert H.terms == (1, 5**12)
    lowest = H.quotient.lowest
    assert sorted(map(len, lowest.bottom.factors)) == [5] * 12
    assert len(H.names) == 12 * 5
    assert H.hidden == ()
    assert "as written out" in str(H.confirmation)


def test_a_read_before_the_last_stage_hides_that_stage() -> None:
    H = sn.derive(sn.network(cascade(12, "n11")))
    assert H.terms == (1, 5**11)
    (mode,) = H.hidden
    assert mode.factor is not None
    assert len(mode.factor) == 5
    assert mode.parts == ("R11a", "R11b", "C11b", "C11a")
    assert mode.reason is Reason.UNSEEN


def test_a_drive_after_the_first_stage_does_not_reach_it() -> None:
    H = sn.derive(sn.network(cascade(2, "n2").replace("drive n0", "drive current into a1; n0 -- Rn -- gnd")))
    assert {mode.reason for mode in H.hidden} == {Reason.UNDRIVEN}
    assert {name for mode in H.hidden for name in mode.parts} == {"Rn", "R0a", "R0b", "C0a", "C0b"}
