"""What follows from what: rows of the network, altered networks, jumps, completeness."""

from __future__ import annotations

import pytest

import symnet as sn
from symnet.errors import SymnetError
from symnet.expressions import Expression
from symnet.review.altered import Altered
from symnet.review.checked import value_of
from symnet.review.following import Follower
from symnet.review.reading import read_working
from symnet.review.rows import Rows, Span
from symnet.review.scope import Scope
from symnet.review.solution import Solution, generator_of
from symnet.review.working import Equation
from tests.reference import active_sections, passive_sections
from tests.reference.cases import Formula
from tests.reference.derivations import DERIVATIONS, Derivation

CASES = (*active_sections.CASES, *passive_sections.CASES)


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.id)
def test_every_equation_of_the_network_holds_in_its_solution(case: Formula) -> None:
    """The currents that leave a node are zero (Kirchhoff), and every law is met: exactly, and at the random point."""
    scope = Scope(Solution.of(sn.network(case.text)))
    rows = Rows(scope)
    for equation in rows.equations:
        assert scope.solution.remainders(equation.value.numerator) == {}, equation.name
        assert scope.solution.residue(equation.value.numerator) == 0
    assert len(Span(rows.network)) == len(scope.solution.unknowns) - len(scope.network.drives)


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.id)
def test_the_network_unaltered_gives_its_own_solution(case: Formula) -> None:
    """The minors of the equations as they are: every unknown is in the proportion that the solution gives."""
    scope = Scope(Solution.of(sn.network(case.text)))
    solution, rows = scope.solution, Rows(scope)
    altered = Altered(solution, [equation.value.numerator for equation in rows.equations])
    algebra, first = solution.algebra, solution.unknowns[0]
    for unknown in solution.unknowns:
        left = algebra.multiply(altered.numerator(unknown), solution.numerator(first))
        right = algebra.multiply(altered.numerator(first), solution.numerator(unknown))
        assert left == right, generator_of(unknown)


@pytest.mark.parametrize(
    "derivation",
    [d for d in DERIVATIONS if d.follows and d.id != "D19"],  # D19: a figure follows, no equation
    ids=lambda d: d.id,
)
def test_what_follows_is_true_in_the_altered_network_exactly(derivation: Derivation) -> None:
    """Ranks modulo a prime said that a line follows; the exact solution of the altered network says so too."""
    follower, values = prepared(derivation)
    for late, early in derivation.follows.items():
        wrong = next(w for w in follower.wrong if w.line.label == early)
        target = values[late]
        places = follower.altered([wrong], [target[1]])
        assert places is not None
        assert follower.solution([wrong], places).remainders(target[0].numerator) == {}


def prepared(derivation: Derivation):  # type: ignore[no-untyped-def] # noqa: ANN201
    definitions: dict[str, Expression] = {}
    scope = Scope(Solution.of(sn.network(derivation.network)), definitions)
    follower, values = Follower(Rows(scope)), {}
    for line in read_working(derivation.wrong):
        if not isinstance(line.statement, Equation):
            definitions[line.statement.name] = line.statement.value  # type: ignore[union-attr]
            continue
        left, right = (value_of(scope, side) for side in line.statement.sides)
        difference = left - right
        row = follower.row(difference)
        assert row is not None
        values[line.label] = difference, row
        if scope.solution.remainders(difference.numerator):
            follower.false(line, [difference])
    return follower, values


def test_the_h_of_an_altered_network() -> None:
    """A capacitor taken to ground: the H that follows is that of two loaded sections (D2 of the derivations)."""
    derivation = next(d for d in DERIVATIONS if d.id == "D2")
    follower, _ = prepared(derivation)
    (wrong,) = follower.wrong
    altered = follower.solution([wrong], wrong.places[:1])
    scope = follower.rows.scope
    top, bottom = altered.substituted(scope.transfer())
    claimed = scope.value(
        read_working("H = 1/(1 + s*(R1*C1 + R1*C2 + R2*C2) + s^2*R1*R2*C1*C2)").lines[0].statement.sides[1]  # type: ignore[union-attr]
    )
    algebra = scope.solution.algebra
    assert algebra.multiply(top, claimed.denominator) == algebra.multiply(bottom, claimed.numerator)


LADDER = "in -- R1 -- x -- R2 -- o -- C2 -- gnd; x -- C1 -- gnd; drive in; read o"
FINAL = "o/in = 1/(1 + s*(R1*C1 + R1*C2 + R2*C2) + s^2*R1*R2*C1*C2)"


def test_a_jump_is_noted_and_not_condemned() -> None:
    review = sn.verify(sn.network(LADDER), f"node x: (x - in)/R1 + s*C1*x + (x - o)/R2 = 0\n{FINAL}")
    assert review
    assert [judgement.jump for judgement in review] == [False, True]
    assert review.completeness is not None
    assert str(review.completeness) == (
        "not enough for line 2: 1 independent equation of 2; no equation for node o; left open: x, o"
    )


def test_steps_that_follow_are_no_jumps() -> None:
    steps = (
        "node x: (x - in)/R1 + s*C1*x + (x - o)/R2; node o: (o - x)/R2 + s*C2*o; x = o*(1 + s*R2*C2);" + FINAL
    )
    review = sn.verify(sn.network(LADDER), steps)
    assert not any(judgement.jump for judgement in review)
    assert str(review.completeness) == "enough for line 4: 2 independent equations"


def test_the_claim_is_the_last_quotient() -> None:
    steps = (
        "node x: (x - in)/R1 + s*C1*x + (x - o)/R2; node o: (o - x)/R2 + s*C2*o;"
        + FINAL
        + "; x = o*(1 + s*R2*C2)"
    )
    review = sn.verify(sn.network(LADDER), steps)
    assert str(review.completeness) == "enough for line 3: 2 independent equations"


def test_a_claim_by_itself_is_no_jump_and_has_no_completeness() -> None:
    review = sn.verify(sn.network(LADDER), FINAL)
    assert not review.judgements[0].jump
    assert review.completeness is None


def test_the_same_equation_twice_counts_once() -> None:
    twice = "node x: (x - in)/R1 + s*C1*x + (x - o)/R2; i_R1 = i_C1 + i_R2;" + FINAL
    review = sn.verify(sn.network(LADDER), twice)
    assert review.completeness is not None
    assert review.completeness.independent == 1


def test_what_was_said_before_an_assumption_counts_after_it() -> None:
    steps = "node x: (x - in)/R1 + s*C1*x + (x - o)/R2; node o: (o - x)/R2 + s*C2*o; given R2 = R1, C2 = C1"
    review = sn.verify(sn.network(LADDER), steps + "; o/in = 1/(1 + 3*s*R1*C1 + (s*R1*C1)^2)")
    assert review
    assert str(review.completeness) == "enough for line 4: 2 independent equations"


def test_two_wrong_lines_together() -> None:
    """Both capacitors left out: the last line follows from the two wrong node equations only together."""
    steps = "1. node x: (x - in)/R1 + (x - o)/R2 = 0; 2. node o: (o - x)/R2 + s*C2*o/2 = 0; 3. o/in = 2/(2 + s*(R1 + R2)*C2)"
    review = sn.verify(sn.network(LADDER), steps)
    assert [line.label for line in review.judgements[2].follows] == ["1", "2"]


def test_figures_follow_from_a_wrong_h() -> None:
    steps = "1. o/in = 1/((1 + s*R1*C1)*(1 + s*R2*C2)); 2. 1/(w0*Q) = R1*C1 + R2*C2; 3. w0 = 1/sqrt(R1*R2*C1*C2); 4. zeta = 7"
    review = sn.verify(sn.network(LADDER), steps)
    assert [[line.label for line in j.follows] for j in review] == [[], ["1"], [], []]
    assert [j.holds for j in review] == [False, False, True, False]


def test_a_line_wrong_by_itself_after_a_wrong_one() -> None:
    steps = "1. node x: (x - in)/R1 + s*C1*x = 0; 2. o = x*(1 + s*R2*C2)"
    review = sn.verify(sn.network(LADDER), steps)
    assert [j.holds for j in review] == [False, False]
    assert not review.judgements[1].follows


def test_several_drives_are_not_solved_altered() -> None:
    net = sn.network("a -- R1 -- x -- R2 -- b; x -- R3 -- gnd; drive a; drive b; read x")
    scope = Scope(Solution.of(net))
    with pytest.raises(SymnetError, match="one drive"):
        Altered(scope.solution, [])
    assert sn.verify(net, "node x: (x - a)/R1 + (x - b)/R2 + x/R3; x*(1/R1 + 1/R2 + 1/R3) = a/R1 + b/R2")
    assert not sn.verify(net, "x = (a/R1 + b/R2)*R3")
