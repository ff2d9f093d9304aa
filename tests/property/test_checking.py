"""No true line is faulted: the nodal equations of random networks, and their H, are confirmed as lines."""

from __future__ import annotations

import re
from typing import Any

import pytest

import symnet as sn
from symnet.circuit.spelling import write_expression
from symnet.errors import SymnetError
from symnet.expressions import names_in
from tests.networks import seeded


def network(seed: int) -> sn.Network | None:
    try:
        net = sn.network(seeded(seed).text)
        sn.derive_all(net)
    except SymnetError:  # no single solution; the oracle's tests look at those
        return None
    return net


def written(polynomial: Any) -> str:
    return re.sub(r"\*\*", "^", str(polynomial.as_expr()))


@pytest.mark.parametrize("seed", range(25))
def test_the_nodal_equations_are_true_lines(seed: int) -> None:
    """Kirchhoff's current law at every node and the law of every part, as symnet writes them."""
    net = network(seed)
    if net is None:
        return
    for line in sn.equations(net).lines:
        text = f"{write_expression(line.left)} = {write_expression(line.right)}"
        if line.label.startswith("law of drive"):
            continue  # what a drive is worth is given, not true
        if any("+" in name.name for side in (line.left, line.right) for name in names_in(side)):
            continue  # a node inside a series has no name that can be typed
        review = sn.verify(net, text)
        assert review, (line.label, text, str(review))


@pytest.mark.parametrize("seed", range(25))
def test_the_derived_h_is_a_true_line_and_twice_of_it_is_not(seed: int) -> None:
    net = network(seed)
    if net is None or len(net.drives) > 1 or len(net.reads) != 1:
        return
    H = sn.derive(net)
    if max(H.terms) > 200:
        return
    quotient = f"({written(H.numerator)})/({written(H.denominator)})"
    assert sn.verify(net, f"H = {quotient}")
    assert bool(sn.verify(net, f"H = 2*{quotient}")) == (not H.numerator)
