"""One line for every kind of slip, the first explanation named, and the tools that find them held to their laws."""

from __future__ import annotations

from fractions import Fraction
from random import Random

import pytest

import symnet as sn
from symnet.exact.modular import PRIME
from symnet.expressions import Expression
from symnet.present import writers
from symnet.present.review import review_blocks
from symnet.review.diagnosis.examples import counterexample
from symnet.review.diagnosis.explanation import Diagnosis, Explanation, Slip, written
from symnet.review.diagnosis.places import places, put
from symnet.review.diagnosis.point import Point
from symnet.review.diagnosis.slips import fraction_of
from symnet.review.reading import read_working
from symnet.review.scope import Scope
from symnet.review.solution import Solution
from symnet.review.working import Equation
from tests import oracle
from tests.workings import drawing_of, solved

LADDER = "in -- R1 -- x -- R2 -- o -- C2 -- gnd; x -- C1 -- gnd; drive in; read o"
INVERTING = (
    "in -- R1 -- m -- R2 -- out -- RL -- gnd; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out"
)
SERIES = "in -- R1 -- x -- R2 + C2 -- gnd; x -- C1 -- gnd; drive in; read x"
LOADED = "in -- R1 -- x -- R2 || C2 -- gnd; drive in; read x"
VALUES = LOADED + "; R1 = 1 k; R2 = 1 k; C2 = 100 nF"
DEN = "1 + s*(R1*C1 + R1*C2 + R2*C2) + s^2*R1*R2*C1*C2"

SLIPS = [
    # equations of nodes
    (INVERTING, "node out: (out - m)/R2 + out/RL = 0", Slip.AMPLIFIER, "only with its current i_U1"),
    (
        LADDER,
        "node x: (x - in)/R1 + (x - o)/R2 + s*C1*x + s*C2*o = 0",
        Slip.EXTRA_BRANCH,
        "C2 is not connected to node x",
    ),
    (LADDER, "node x: x*(1/R1 + 1/R2) - in/R1 - o/R2 = 0", Slip.MISSING_BRANCH, "no current through C1"),
    (LADDER, "node x: x*(1/R1 + s*C1) - in/R1 - o/R2 = 0", Slip.NODE, "without the voltage of x itself"),
    (LADDER, "node x: R2*(x - in) + R1*(x - o) - s*C1*R1*R2*x = 0", Slip.SIGN, "s*C1*R1*R2*x"),
    (
        LADDER,
        "(x - in)/R1 + (x - o)/R2 = 0",
        Slip.MISSING_BRANCH,
        "at node x the network has the branches R1, R2, C1",
    ),
    (LADDER, "node x: (in - x)/R1 = s*C1*(x - o)", Slip.MISSING_BRANCH, "no current through R2; and"),
    (LADDER, "node x: (in - x)/R1 = (x - o)/R2 + s*C2*x", Slip.PART, "the branch to gnd is C1"),
    (LADDER, "node x: (in - x)/R2 = (x - o)/R1 + s*C1*x", Slip.SWAPPED, "R1 and R2 are exchanged"),
    (LADDER, "node x: (in - x)/R1 = (x - o)/R2 + C1*x", Slip.DIMENSION, "did you mean s*C1*x?"),
    (LADDER, "node x: (in - x)/R1 = (x - o)/R2 + x/(s*C1)", Slip.DIMENSION, "x/(s*C1) is V/S"),
    (
        SERIES,
        "node x: (x - in)/R1 + s*C1*x + x/R2 = 0",
        Slip.PART,
        "through R2 + C2, which is x/(R2 + 1/(s*C2))",
    ),
    # transfers
    (
        LADDER,
        "o/in = 1/(1 + s*(R1*C1 + R2*C2) + s^2*R1*R2*C1*C2)",
        Slip.LOADING,
        "the term s*R1*C2 is missing",
    ),
    (LADDER, f"o/in = 1/({DEN.replace('s^2', 's')})", Slip.DIMENSION, "did you mean s^2*R1*R2*C1*C2?"),
    (
        LADDER,
        f"o/in = 1/({DEN.replace('R1*C2', '2*R1*C2')})",
        Slip.FACTOR,
        "2*R1*C2 is twice what it should be",
    ),
    (LADDER, f"o/in = 1/({DEN.replace('+ s^2', '- s^2')})", Slip.SIGN, "the sign of s^2*R1*R2*C1*C2"),
    (LADDER, f"o/in = -1/({DEN})", Slip.SIGN, "the sign of the whole side"),
    (LADDER, f"o/in = 3/({DEN})", Slip.FACTOR, "a factor 1/3"),
    (LADDER, f"o/in = {DEN}", Slip.RECIPROCAL, "is upside down"),
    (LADDER, f"o/in = 1/({DEN.replace('R2*C2)', 'R2*C1)')})", Slip.PART, "C1 stands where C2 should"),
    (
        LADDER,
        f"o/in = 1/({DEN.replace('R1*C1 +', 'R1*C1 + R2*C1 +')})",
        Slip.EXTRA_TERM,
        "R2*C1 does not belong there",
    ),
    (LADDER, "x = o", Slip.LEFT_OUT, "R2 -> 0 or C2 -> 0"),
    (LOADED, "x/in = R2/(R1 + R2 + s*R1*R2*C2) = 1/(1 + s*R1*C2)", Slip.LEFT_OUT, "R2 is left out"),
    (LOADED, "x/in = (R2 + 1/(s*C2))/(R1 + (R2 || (1/(s*C2))))", Slip.PARALLEL, "R2 || (1/(s*C2))"),
    (LOADED, "x/in = R2/(R1 + R2)/(1 + s*(R1 + R2)*C2)", Slip.PARALLEL, "should be in parallel: R1 || R2"),
    (LADDER, "i_R2 = s*C1*o", Slip.PART, "C1 stands where C2 should"),
    (LADDER, "v_R1 = 2*in - x + o", Slip.DIFFERENT, "R1 goes from in to x: v_R1 is in - x"),
    # figures
    (LADDER, "w0 = sqrt(R1*R2*C1*C2)", Slip.CONVENTION, "is tau, not w0"),
    (LADDER, "f0 = 1/sqrt(R1*R2*C1*C2)", Slip.CONVENTION, "a factor 2*pi between rad/s and Hz"),
    (LADDER, "w0 = 1/(R1*R2*C1*C2)", Slip.DIMENSION, "did you mean sqrt(1/(R1*R2*C1*C2))?"),
    (LADDER, "Q = sqrt(R1*R2*C1*C2)/(R1*C1 + R2*C2)", Slip.MISSING_TERM, "the term R1*C2 is missing"),
    (LADDER, "Q = (R1*C1 + R1*C2 + R2*C2)/(2*sqrt(R1*R2*C1*C2))", Slip.CONVENTION, "is zeta, not Q"),
    (LOADED, "tau = (R1 + R2)*C2", Slip.PARALLEL, "R1 || R2"),
    (LOADED, "f3dB = 1/(2*pi*(R1 + R2)*C2)", Slip.PARALLEL, "f3dB: R1 + R2 should be in parallel"),
    (LOADED, "f3dB = 1/((R1 || R2)*C2)", Slip.CONVENTION, "the -3 dB frequency in rad/s"),
    (VALUES, "f3dB = 20 kHz", Slip.CONVENTION, "20 kHz is the -3 dB frequency in rad/s"),
    (VALUES, "f3dB = 1.59 kHz", Slip.FACTOR, "0.5 times the -3 dB frequency"),
    (VALUES, "x/in = 0.5/(1 + s*100 us)", Slip.NORMALISATION, "the shape is right"),
    (VALUES, "R2*C2 = 1 ms", Slip.DIFFERENT, "100 us, the right side 1 ms: 10 times as much"),
    (VALUES, "R1/R2 = 3", Slip.DIFFERENT, "the left side is 1, the right side 3"),
    # limits
    (LADDER, "x -> o as s -> inf", Slip.DIFFERENT, "x goes as 1/(s*R1*C1)"),
    (LADDER, "o/in -> 2 as s -> 0", Slip.DIFFERENT, "o/in goes to 1"),
]


def diagnosis(network: str, line: str) -> Diagnosis:
    """Of a working of one line."""
    (judgement,) = sn.verify(sn.network(network), line)
    assert not judgement.holds
    assert judgement.diagnosis is not None
    return judgement.diagnosis


@pytest.mark.parametrize(("network", "line", "slip", "words"), SLIPS, ids=[line for _, line, _, _ in SLIPS])
def test_the_slip_is_named(network: str, line: str, slip: Slip, words: str) -> None:
    first = diagnosis(network, line).first
    assert words in first.sentence
    assert first.slip is slip


@pytest.mark.parametrize(("network", "line"), [case[:2] for case in SLIPS], ids=[case[1] for case in SLIPS])
def test_a_line_put_right_holds(network: str, line: str) -> None:
    net = sn.network(network)
    for explanation in diagnosis(network, line).explanations:
        if explanation.corrected is not None:
            assert sn.verify(net, written(explanation.corrected)), written(explanation.corrected)


# -- the tools ---------------------------------------------------------------------------------------------------------


def _sides(line: str) -> tuple[Expression, ...]:
    statement = read_working(line).lines[0].statement
    assert isinstance(statement, Equation)
    return statement.sides


@pytest.mark.parametrize(
    "line",
    [
        "x/in = (1 + s*R2*C2)^2/(1 + (R1||R2)*s*C1 - o/x)",
        "out = -x*R2/(R1*(1 - s*C1*R1)^-2) + in",
        "1/(R1 || R2 || (1/(s*C1))) = s*C1 + 2/R1",
    ],
)
def test_a_line_holds_at_the_point_with_the_wanted_value_in_a_place(line: str) -> None:
    """With a name for the wanted value put in any place, left = right at the point: the definition of wanted."""
    network = sn.network(LADDER + "; in -- R9 -- out -- R8 -- gnd")
    sides = _sides(line)
    point = Point.solved(Scope(Solution.of(network)))
    for place in places(sides, point):
        point._names["wanted"] = place.wanted
        left, right = put(sides, place.path, _sides("wanted = 0")[0])
        assert (point(left) - point(right)) % PRIME == 0, place


def test_a_small_fraction_is_found_from_its_residue() -> None:
    random = Random(5)
    for _ in range(200):
        wanted = Fraction(random.randint(-999, 999), random.randint(1, 999))
        residue = wanted.numerator * pow(wanted.denominator, -1, PRIME) % PRIME
        assert fraction_of(residue) == wanted
    assert fraction_of(random.randrange(PRIME)) is None


@pytest.mark.parametrize(
    "line", ["x = o", "x/in = 1/(1 + s*R1*C1)", "o*x = in^2", "(x - in)/R1 + s*C1*x = 0"]
)
def test_a_counterexample_is_one(line: str) -> None:
    """The values are put into the drawing again and solved by the oracle's tableau."""
    network = sn.network(LADDER)
    sides = _sides(line)
    found = counterexample(Scope(Solution.of(network)), sides, None)
    assert found is not None
    values = {**dict.fromkeys(("s", *network.symbols()), Fraction(1)), **dict(found.values)}
    names = {**values, **solved(drawing_of(network), values)}
    left, right = line.split(" = ")
    assert oracle.arithmetic(left, names) == found.left
    assert oracle.arithmetic(right, names) == found.right
    assert found.left != found.right


def test_where_it_hardly_matters() -> None:
    """|1/(1 + jx) - 1| = x/sqrt(1 + x^2) is 1 % at x = 0.0100005: a pole left out matters from f/100 on."""
    reach = diagnosis(
        "in -- R1 -- x -- C1 -- gnd; R1 = 1 k; C1 = 159.155 nF; drive in; read x", "x/in = 1"
    ).reach
    assert reach == "with the given values the two sides differ by less than 1 % below 10 Hz"


def test_the_branches_of_the_node_are_compared() -> None:
    found = diagnosis(LADDER, "node x: (x - in)/R1 + s*C1*x + s*C2*x = 0")
    assert found.node == "x"
    assert [str(row) for row in found.branches] == [
        "R1: (x - in)/R1; the line has (x - in)/R1",
        "R2: (x - o)/R2; the line has nothing",
        "C1: s*C1*x; the line has s*C1*x",
        "no branch: nothing; the line has s*C2*x",
    ]
    assert [row.agrees for row in found.branches] == [True, False, True, False]


def test_the_full_story_is_shown() -> None:
    review = sn.verify(sn.network(LADDER), "node x: (x - in)/R1 + (x - o)/R2 = 0")
    text = writers.text(review_blocks(review))
    assert "no current through C1" in " ".join(text.split())
    assert "With that put right the line holds: node x: (x - in)/R1 + (x - o)/R2 + s*C1*x = 0" in text
    assert "Node x, the currents that leave it:" in text
    assert "C1      s*C1*x          nothing      differs" in text


def test_an_explanation_reads_as_its_sentence() -> None:
    explanation = Explanation(Slip.SIGN, "the sign of a is wrong")
    assert str(explanation) == str(Diagnosis((explanation,))) == "the sign of a is wrong"
