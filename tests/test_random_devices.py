"""Random networks with what ships with the notation: the H of the text is that of the parts the oracle is told of.

The law: a section in its place is the parts it stands for (transistors, transformers, converters, amplifiers with
gain, bandwidth and impedances, potentiometers, crystals, coupled coils).
"""

from __future__ import annotations

from fractions import Fraction

import pytest

import symnet as sn
from symnet.errors import SymnetError
from tests import oracle
from tests.networks import seeded

BLOCK = 50
BLOCKS = 8
#: s in rad/s, any rational that is no pole of any of them
AT = Fraction(104729, 7)


@pytest.mark.parametrize("first", range(0, BLOCK * BLOCKS, BLOCK))
def test_h_is_that_of_the_parts(first: int) -> None:
    solved = 0
    for seed in range(first, first + BLOCK):
        sketch = seeded(seed, devices=True, most_nodes=5)
        network = sn.network(sketch.text)
        assert sn.network(network.to_text()) == network, seed
        try:
            wanted = oracle.transfer_exact(sketch.drawing, {**sketch.values, "s": AT})
        except oracle.NoSolutionError:
            with pytest.raises(SymnetError):
                sn.derive(network).numeric()
            continue
        h = sn.derive(network).numeric()
        top, bottom = (sum(c * AT**k for k, c in enumerate(side)) for side in (h.num, h.den))
        assert Fraction(top) == wanted * bottom, seed
        solved += 1
    assert solved > 0.8 * BLOCK
