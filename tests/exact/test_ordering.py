"""The order of decisions: every piece once, what is forced first, and diagrams no larger than in the text's order."""

from __future__ import annotations

from collections import Counter
from random import Random

import pytest

import symnet as sn
from symnet.exact.ordering import frontier_order
from symnet.exact.pieces import Pieces
from symnet.exact.trees import Piece, build
from tests.exact.test_trees import random_pieces
from tests.speed.engine import bridged_t, complete_graph, rc_ladder
from tests.speed.ordering import ladder_of_integrators, mesh, shuffled


@pytest.mark.parametrize("seed", range(60))
def test_every_piece_is_decided_once_and_the_determinant_is_the_same(seed: int) -> None:
    random = Random(seed)
    size = random.randint(1, 6)
    pieces = [*random_pieces(random, size, size + random.randint(0, 9), 0.5), Piece(None, None, None, None)]
    order = frontier_order(size, pieces)
    assert sorted(order) == list(range(len(pieces)))
    take = [random.randint(-50, 50) for _ in pieces]
    leave = [random.randint(1, 50) for _ in pieces]
    as_given = build(size, pieces, range(len(pieces)))
    assert build(size, pieces, order).evaluate(take, leave) == as_given.evaluate(take, leave)


def test_sources_and_op_amps_come_first() -> None:
    """Each piece of an ideal source or op amp is alone in a row or a column: one node decides it, nothing is open."""
    pieces = Pieces.of(sn.network(ladder_of_integrators(5)))
    decided = Counter(build(pieces.size, pieces.pieces).piece)
    ideal = [
        k
        for k, piece in enumerate(pieces.pieces)
        if (piece.row_plus, piece.row_minus) != (piece.column_plus, piece.column_minus)
    ]
    assert len(ideal) == 2 + 2 * 9
    assert all(decided[k] == 1 for k in ideal)


@pytest.mark.parametrize(
    ("text", "share"),
    [
        (rc_ladder(60), 1.0),
        (shuffled(rc_ladder(12)), 0.2),
        (bridged_t(8), 1.0),
        (shuffled(bridged_t(5)), 0.2),
        (mesh(4, 4), 1.0),
        (shuffled(mesh(3, 4)), 0.6),
        (ladder_of_integrators(5), 1.0),
        (complete_graph(7), 0.7),
    ],
)
def test_the_diagram_is_smaller_than_in_the_order_of_the_text(text: str, share: float) -> None:
    pieces = Pieces.of(sn.network(text))
    as_typed = build(pieces.size, pieces.pieces, range(len(pieces.pieces)))
    assert len(build(pieces.size, pieces.pieces)) <= share * len(as_typed)


def test_a_ladder_has_few_nodes_for_each_part_however_it_is_typed() -> None:
    for text in (rc_ladder(50), shuffled(rc_ladder(50))):
        pieces = Pieces.of(sn.network(text))
        assert len(build(pieces.size, pieces.pieces)) < 3 * len(pieces.pieces)
