"""The order of decisions: every piece once, whatever the pieces touch."""

from __future__ import annotations

from random import Random

from symnet.exact.ordering import frontier_order
from symnet.exact.trees import Piece
from tests.exact.test_trees import random_pieces


def test_the_order_decides_every_piece_once() -> None:
    random = Random(8)
    pieces = [*random_pieces(random, 6, 15, 0.5), Piece(None, None, None, None)]
    assert sorted(frontier_order(6, pieces)) == list(range(16))
