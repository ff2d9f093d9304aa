"""A derivation told by symnet: every line true of the network, the last one H, and lines that can be read.

The judge of truth is the sparse tableau of :mod:`tests.oracle`, solved in fractions at random values: it shares
nothing with the nodal equations, the elimination or the determinants. Each line is taken from the text in working
notation and read by the oracle's own arithmetic.
"""

from __future__ import annotations

import re
from dataclasses import replace
from fractions import Fraction
from functools import cache
from random import Random

import pytest

import symnet as sn
from symnet.circuit.network import Network
from symnet.circuit.spelling import write_expression
from symnet.errors import LimitError
from symnet.exact.byhand.elimination import eliminate
from symnet.exact.byhand.frame import Frame
from symnet.exact.byhand.narration import narrate
from symnet.exact.byhand.truth import UntrueStepError, hold_to_the_solution
from symnet.exact.readable.forms import readable_transfer
from symnet.expressions import Expression, Name, Number, Product
from symnet.present.explain import Explanation
from symnet.typeset.notation import tree_of
from symnet.typeset.writing import to_latex
from tests import oracle
from tests.networks import seeded
from tests.reference.drawings import drawings
from tests.workings import drawing_of, lines_of, untrue, values_of

DRAWN = {
    "rc ladder": "in -- R1 -- a -- R2 -- b -- R3 -- out; a -- C1 -- gnd; b -- C2 -- gnd; out -- C3 -- gnd",
    "lc ladder": "in -- Rs -- a -- L1 -- b -- L2 -- out; a -- C1 -- gnd; b -- C2 -- gnd; out -- C3 || RL -- gnd",
    "loaded divider": "in -- R1 -- out -- R2 || RL -- gnd",
    "divider before a section": "in -- R1 -- a -- R2 -- gnd; a -- R3 -- out -- C1 -- gnd",
    "inverting stage": "in -- R1 -- m -- R2 || C2 -- out; U1: opamp(plus=gnd, minus=m, out=out)",
    "unity gain": "in -- R1 -- a -- R2 -- p -- C1 -- gnd; a -- C2 -- out; U1: opamp(plus=p, minus=out, out=out)",
    "twin t": "in -- R1 -- a -- R2 -- out; a -- C3 -- gnd; in -- C1 -- b -- C2 -- out; b -- R3 -- gnd",
    "trap": "in -- R1 -- out; out -- R2 + (L2 || C2) -- gnd",
    "series inside": "in -- R1 + L1 -- out -- C1 + R2 -- gnd",
    "numbered nodes": "in -- R1 -- 1 -- R2 -- out; 1 -- C1 -- gnd; out -- C2 -- gnd",
    "follower": "in -- R1 -- a -- C1 -- gnd; hold b = a as buffer; b -- R2 -- out -- C2 -- gnd",
    "floating source": "in -- R1 -- a -- R2 -- gnd; hold b - a = mu*in as amp; b -- R3 -- out -- C1 -- gnd",
    "current law": "in -- R1 -- g -- C1 -- d; push from d to gnd = gm*g as pump; d -- R2 -- out -- C2 -- gnd",
    "current of a source": "in -- R1 -- a -- R2 -- gnd; hold b = r*i_R2 as amp; b -- R3 -- out -- C1 -- gnd",
    "current asked for": "in -- R1 -- a -- C1 -- gnd; hold b = 2*a as amp; b -- R3 -- out -- C2 -- gnd; hold x = r*i_amp as second; x -- R4 -- gnd",
    "impedance by a fraction": "in -- R1 -- a -- Z1 -- out -- C1 -- gnd; a -- Y1 -- gnd; Z1 = R/(1 + s*R*C); Y1 = s*C + 1/R",
}
OTHERS = {
    "coupled coils": "in -- Rs -- a -- L1 -- gnd; out -- L2 || RL -- gnd; couple L1 to L2 with M = M1; drive in; read out",
    "coupled by k": "in -- Rs -- a -- L1 -- gnd; out -- L2 || RL -- gnd; couple L1 to L2 with k = k1; drive in; read out",
    "tapped coil": "in -- L1 -- out -- L2 -- gnd; out -- RL -- gnd; couple L1 to L2 with M = M1; drive in; read out",
    "coil in a series": "in -- R1 + L1 -- gnd; out -- L2 || RL -- gnd; couple L1 to L2 with M = M1; drive in; read i_R1",
    "transformer": "in -- R1 -- a; T1: transformer(p1=a, p2=gnd, s1=out, s2=gnd, n=N); out -- RL -- gnd; drive in; read out",
    "op amp with a gain": "in -- R1 -- m -- R2 -- out; U1: opamp(plus=gnd, minus=m, out=out, gain=A); drive in; read out",
    "section drawn once": "define lp(in, out; R, C)\n  in -- R -- out -- C -- gnd\ndone\nA1: lp(in=in, out=a, R=R1, C=C1)\n"
    "A2: lp(in=a, out=out, R=R2, C=C2)\ndrive in\nread out",
    "bridge": "in -- R1 -- a -- R2 -- gnd; in -- R3 -- b -- R4 -- gnd; a -- R5 -- b; drive in; read a - b",
    "current into a tank": "a -- R1 -- gnd; a -- L1 -- out -- C1 || R2 -- gnd; drive current into a; read i_R2",
    "drive between two nodes": "a -- R1 -- gnd; b -- R2 -- gnd; b -- C1 -- gnd; drive a - b; read b",
    "nothing to eliminate": "in -- R1 -- gnd; drive in; read in",
    "balanced bridge": "in -- R1 -- a -- R2 -- gnd; in -- R3 -- b -- R4 -- gnd; a -- C5 -- b; R1, R2, R3, R4 = R; drive in; read a - b",
    "input current": "in -- R1 -- a -- C1 || R2 -- gnd; drive in; read i_R1",
}
NETWORKS = {
    **drawings(most_nodes=5),
    **{name: drawings(most_nodes=9)[name] for name in ("svf-lp", "tt-lp", "sk3-unity", "lattice-zin")},
    **{name: sn.network(f"{text}; drive in; read out") for name, text in DRAWN.items()},
    **{name: sn.network(text) for name, text in OTHERS.items()},
}


#: The oracle draws neither couplings nor the names inside devices; the checker judges these.
UNKNOWN_TO_THE_TABLEAU = {
    "coupled coils",
    "coupled by k",
    "tapped coil",
    "coil in a series",
    "transformer",
    "op amp with a gain",
    "section drawn once",
    "xfmr-load",
    "double-tuned",
}

#: The checker takes one equation for two nodes at once, the voltage along a coupled coil, and a
#: series whose nameless node it has to eliminate under tied values, for steps of their own.
JUMPING = {
    "zobel",
    "floating source",
    "drive between two nodes",
    "coupled coils",
    "coupled by k",
    "tapped coil",
    "coil in a series",
    "double-tuned",
}


@cache
def told(name: str) -> tuple[Network, Explanation]:
    return NETWORKS[name], sn.explain(NETWORKS[name])


@pytest.mark.parametrize("name", NETWORKS)
def test_every_line_is_true_and_the_last_is_h(name: str) -> None:
    network, told_ = told(name)
    working = told_.to_working()
    if name in UNKNOWN_TO_THE_TABLEAU:
        assert sn.verify(network, working)
        return
    assert untrue(network, working) == []
    values = values_of(network, Random(name))
    H = oracle.transfer_exact(drawing_of(network), values)
    _, left, right = lines_of(working)[-1]
    assert oracle.arithmetic(right, values) == H
    assert left == told_.transfer.label
    H_shown = readable_transfer(told_.transfer.numerator, told_.transfer.denominator)
    assert to_latex(tree_of(told_.steps[-1].right)) == to_latex(
        H_shown
    )  # in the form in which H shows itself


@pytest.mark.parametrize("name", NETWORKS)
def test_the_checker_of_workings_accepts_every_line(name: str) -> None:
    network, told_ = told(name)
    working = told_.to_working()
    review = sn.verify(network, working)
    assert review
    assert len(tuple(review)) == len(lines_of(working))
    assert name in JUMPING or not any(judgement.jump for judgement in review)
    outline = replace(
        told_, steps=tuple(step for step in told_.steps if step.kind not in {"put in", "collect"})
    )
    assert sn.verify(network, outline.to_working())


@pytest.mark.parametrize("seed", range(25))
def test_random_networks(seed: int) -> None:
    """Law: what is told of any network is true of it; what would be too long is refused with its length."""
    sketch = seeded(seed, most_nodes=3, rational=False)
    try:
        network = sn.network(sketch.text)
        sn.derive(network)
    except sn.SymnetError:
        return
    try:
        working = sn.explain(network).to_working()
    except LimitError as error:
        refusal = str(error)
    else:
        assert untrue(network, working, sketch.drawing) == []
        return
    assert re.search(r"cannot be read|nobody can read", refusal)


#: The longest line, in characters, and the number of lines, as measured; a line of 100 can be read at a glance.
LENGTHS = {
    "rc ladder": (138, 14),
    "loaded divider": (60, 6),
    "divider before a section": (60, 11),
    "inverting stage": (40, 6),
    "unity gain": (60, 10),
    "twin t": (204, 14),
    "mfb-lp": (80, 10),
    "sk-lp-opamp-gain": (80, 15),
    "tt-lp": (70, 16),
    "svf-lp": (110, 19),
    "bridged-t-c": (100, 11),
}


@pytest.mark.parametrize("name", LENGTHS)
def test_lines_of_well_known_sections_stay_short(name: str) -> None:
    _, told_ = told(name)
    longest, lines = LENGTHS[name]
    assert max(len(str(step)) for step in told_.steps) <= longest
    assert len(told_.steps) <= lines


def test_a_ladder_is_gone_through_from_its_output_without_a_fraction() -> None:
    _, told_ = told("rc ladder")
    results = [step for step in told_.steps if step.kind == "result"]
    assert [write_expression(step.left) for step in results] == ["b", "a", "in"]
    assert not any("/" in write_expression(step.right) for step in results)
    assert [step.label for step in told_.steps if step.kind == "node"] == ["node out", "node b", "node a"]


def test_the_first_lines_of_a_feedback_section_use_the_virtual_ground() -> None:
    _, told_ = told("mfb-lp")
    assert list(map(str, told_.steps[:3])) == ["m = 0", "a/R3 = -s*C1*out", "a = -s*R3*C1*out"]


def test_a_loaded_divider_is_one_source_behind_a_resistance() -> None:
    _, told_ = told("loaded divider")
    assert list(map(str, told_.steps[1:3])) == [
        "(in*R2/(R1 + R2) - out)/(R1 || R2) = out/RL",
        "in*R2/(R1 + R2) = out + (R1 || R2)*out/RL",
    ]


def test_star_nodes_of_a_twin_t_are_abbreviated() -> None:
    _, told_ = told("twin t")
    lets = {str(step) for step in told_.steps if step.kind == "let"}
    assert lets == {"D_a = R1 + R2 + s*R1*R2*C3", "D_b = 1 + s*R3*(C1 + C2)"}


def test_outline_and_full() -> None:
    network = NETWORKS["rc ladder"]
    full, outline = sn.explain(network, detail="full"), sn.explain(network, detail="outline")
    assert set(map(str, outline.steps)) < set(map(str, full.steps))
    assert {step.kind for step in outline.steps} == {"node", "result", "final"}
    assert outline.steps[-1].right == full.steps[-1].right


def long_ladder(sections: int) -> Network:
    nodes = ["in", *(f"n{k}" for k in range(1, sections)), "out"]
    series = [f"{nodes[k]} -- R{k + 1} -- {nodes[k + 1]} -- C{k + 1} -- gnd" for k in range(sections)]
    return sn.network("; ".join([*series, "drive in; read out"]))


def test_what_cannot_be_read_is_refused_with_its_count() -> None:
    with pytest.raises(LimitError, match=r"up to 90 terms .* 6 nodes: a full derivation") as refused:
        sn.explain(long_ladder(5), detail="full")
    assert 'detail="outline"' in str(refused.value)
    assert sn.explain(long_ladder(5)).detail == "outline"
    with pytest.raises(LimitError, match=r"out/in has up to .* terms and the network 41 nodes"):
        sn.explain(long_ladder(40))
    with pytest.raises(ValueError, match='"full" or "outline"'):
        sn.explain(long_ladder(1), detail="short")  # type: ignore[arg-type]


def test_a_derivation_with_a_wrong_line_is_not_shown() -> None:
    """The check at the end is no formality: one factor of two in any line is found."""
    H = sn.derive(NETWORKS["unity gain"])
    elimination = eliminate(Frame(H.network, H.drive, H.read, H.naming))
    steps = narrate(elimination, H)
    hold_to_the_solution(steps, elimination, H)
    for k, step in enumerate(steps):
        doubled = replace(step, right=twice(step.right))
        with pytest.raises(UntrueStepError, match="not true"):
            hold_to_the_solution((*steps[:k], doubled, *steps[k + 1 :]), elimination, H)
    with pytest.raises(UntrueStepError, match="not H"):
        hold_to_the_solution(steps[:-1], elimination, H)


def twice(expression: Expression) -> Expression:
    return Product(((1, Number(Fraction(2))), (1, expression)))


def test_reads_and_drives_are_chosen_as_in_derive() -> None:
    network = sn.network("in -- R1 -- a -- R2 -- out; a -- C1 -- gnd; out -- C2 -- gnd; drive in; read out")
    assert sn.explain(network, read="a").steps[-1].left == sn.explain(network, read="a").steps[-1].left
    assert str(sn.explain(network, read="a").steps[-1]).startswith("a/in = ")
    assert str(sn.explain(network, drive="current into in").steps[-1]).startswith("out/i_drive = ")
    assert sn.explain(network).steps[0].left != Name("a")


def test_showings() -> None:
    _, told_ = told("unity gain")
    shown = told_._repr_mimebundle_()
    assert repr(told_) == "<Explanation of out/in: 10 lines (full), each checked>"
    assert shown["text/plain"] == str(told_) == told_.to_text()
    assert "node a  (in - a)/R1  = (a - out)/R2 + s*C2*(a - out)" in shown["text/plain"]
    assert "0 = 0 under the exact solution" in shown["text/plain"]
    assert shown["text/html"] == told_.to_html()
    assert shown["text/html"].count("<mo>=</mo>") == len(told_.steps)
    assert shown["text/markdown"] == told_.to_markdown()
    assert r"\begin{aligned}" in shown["text/markdown"]
    assert r"\begin{align*}" in told_.to_latex() == shown["text/latex"]
