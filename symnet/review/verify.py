"""A hand derivation held against its network: the one entry to the review."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from symnet.circuit.network import Network
from symnet.circuit.reading import raise_all
from symnet.errors import Fault, SymnetError
from symnet.expressions import Name, Product
from symnet.review.approximating import judge_approximation
from symnet.review.checked import value_of
from symnet.review.coefficients import Comparison, compare_coefficients
from symnet.review.completeness import completeness
from symnet.review.families import judge_family
from symnet.review.following import Follower
from symnet.review.frequencies import gives_transfer, is_frequency_claim, judge_frequency
from symnet.review.judge import Judge, Said
from symnet.review.limiting import judge_limit
from symnet.review.polarity import polarities
from symnet.review.reading import read_working
from symnet.review.rows import Row, Rows
from symnet.review.scope import Scope, given_network, name_faults
from symnet.review.solution import Solution
from symnet.review.verdicts import Judgement, Review, Verdict
from symnet.review.working import (
    Approximation,
    Assumption,
    Definition,
    Equation,
    Family,
    Limit,
    Line,
    Working,
)

if TYPE_CHECKING:
    from symnet.expressions import Expression
    from symnet.review.algebra import Value

__all__ = ["verify"]


def verify(network: Network, working: str | Working) -> Review:
    """Every line of a hand derivation held against the network, exactly.

    ``working`` is a text in the notation of hand derivations, or what was read from one. The result is true when
    every line holds; it says of each line whether it is true identically, for the given values, only under a
    condition (which is solved for a part), true without adding anything, or false.

    Raises NotationError with all faults of the text, each at its place; SingularError for a line that divides by
    zero; LimitError for a line that is too long to be multiplied out; WiringError and SingularError as
    ``sn.derive`` does.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- x -- R2 -- out -- C2 -- gnd; x -- C1 -- gnd; drive in; read out")
    >>> print(sn.verify(net, "x/in = 1/(1 + s*R1*C1)"))
    1. x/in = 1/(1 + s*R1*C1)    false: at node x the current through R2 is left out: the line holds only for R2 -> inf or C2 -> 0
    """
    if isinstance(working, str):
        working = read_working(working)
    raise_all(name_faults(network, working), working.text)
    return _Reviewer(network, working).review()


@dataclass
class _Stage:
    """The lines between one assumption and the next: a network, its judge, and what follows from what."""

    judge: Judge
    follower: Follower
    said: list[tuple[Line, Row]] = field(default_factory=list)
    claimed: tuple[Line, Expression] | None = None  # the H of the last line that gave one, when it was wrong

    @classmethod
    def of(cls, network: Network, definitions: dict[str, Expression], text: str) -> _Stage:
        solution = Solution.of(network)
        numeric = None
        if solution.naming.numbers:
            numeric = Scope(Solution.of(network, frozenset()), definitions)
        judge = Judge(Scope(solution, definitions), text, numeric)
        rows = Rows(judge.scope)
        for equation in rows.equations:
            judge.scope.know(equation.value.numerator)
        return cls(judge, Follower(rows))

    def replay(self, earlier: Sequence[Judgement]) -> None:
        """Take in what was said before the assumption, as it reads under it."""
        for judgement in earlier:
            if isinstance(judgement.line.statement, Equation):
                try:
                    differences = self.judge.differences(judgement.line.statement)
                except SymnetError:
                    continue  # a figure that the network has no longer
                self.judge.said.append(Said(judgement.line, differences))
                self._take(judgement, differences)

    def _take(self, judgement: Judgement, differences: Sequence[Value]) -> Judgement:
        """A judgement with what follows from what, once the line is taken in."""
        rows = [row for difference in differences if (row := self.follower.row(difference)) is not None]
        if rows and judgement.verdict is not Verdict.VALUES:
            self.said.append((judgement.line, rows[0]))
        if not judgement.holds:
            return replace(judgement, follows=self.follower.false(judgement.line, differences))
        if judgement.verdict in {Verdict.IDENTITY, Verdict.NOTHING} and not judgement.rounded:
            return replace(judgement, jump=self.follower.true(differences))
        return judgement

    def up_to_the_claim(self) -> list[tuple[Line, Row]]:
        """What was said, up to the last line that gives a quotient; all of it where none does."""
        claims = [
            k
            for k, (line, _) in enumerate(self.said)
            if isinstance(line.statement, Equation) and _is_transfer(line.statement)
        ]
        return self.said[: claims[-1] + 1] if claims else self.said

    def judged(self, line: Line) -> Judgement:
        """The verdict on a line that is neither a definition nor an assumption, and why it is false if it is."""
        judgement = self._judged(line)
        if judgement.holds or judgement.follows:
            return judgement
        from symnet.review.diagnosis.diagnose import diagnose
        from symnet.review.diagnosis.explanation import Slip

        diagnosis = diagnose(self.judge, self.follower.rows, judgement)
        if diagnosis is not None and diagnosis.first.slip is Slip.DIMENSION:
            # A condition between unlike dimensions, such as C2 = 1, is none.
            judgement = replace(judgement, verdict=Verdict.FALSE, conditions=())
        return replace(judgement, diagnosis=diagnosis)

    def _judged(self, line: Line) -> Judgement:
        match line.statement:
            case Equation() as equation if is_frequency_claim(self.judge, equation):
                judgement = judge_frequency(self.judge, line, equation)
            case Equation() as equation:
                return self._equation(line, equation)
            case Limit() as limit:
                return judge_limit(self.judge, line, limit)
            case Approximation() as approximation:
                return judge_approximation(self.judge, line, approximation)
            case Family() as family:
                judgement = judge_family(self.judge, line, family)
            case _:
                return Judgement(line, Verdict.IDENTITY)
        return judgement if judgement.holds else self._of_claimed(line, judgement)

    def _equation(self, line: Line, equation: Equation) -> Judgement:
        judgement = self.judge.equation(line, equation)
        differences = self.judge.said[-1].differences
        judgement = self._take(judgement, differences)
        if (
            judgement.holds
            and equation.node is not None
            and not self.follower.is_of_node(equation.node, differences)
        ):
            judgement = replace(judgement, note=f"it is not the sum of the currents at node {equation.node}")
        if not judgement.holds and not judgement.follows:
            judgement = self._of_claimed(line, judgement)
        if not judgement.holds and _is_transfer(equation):
            judgement = replace(judgement, comparison=self._compared(equation))
        if gives_transfer(self.judge.scope, equation):
            root = judgement.follows[0] if judgement.follows else line
            self.claimed = None if judgement.holds else (root, equation.sides[-1])
        return judgement

    def _compared(self, equation: Equation) -> Comparison | None:
        try:
            return compare_coefficients(self.judge.scope, equation.sides[0], equation.sides[-1])
        except SymnetError:
            return None  # too long, or figures that its order does not have: the verdict stands without it

    def _of_claimed(self, line: Line, judgement: Judgement) -> Judgement:
        """A false claim about H that is true of the wrong H of a line above."""
        if self.claimed is None:
            return judgement
        root, transfer = self.claimed
        try:
            match line.statement:
                case Equation(of=None) as equation if is_frequency_claim(self.judge, equation):
                    found = judge_frequency(self.judge, line, replace(equation, of=transfer))
                case Equation(of=None) as equation:
                    found = self.judge.alone(line, replace(equation, of=transfer))
                case Family() as family:
                    found = judge_family(self.judge, line, replace(family, value=transfer))
                case _:
                    return judgement
        except SymnetError:
            return judgement
        return replace(judgement, follows=(root,)) if found.holds else judgement


def _is_transfer(equation: Equation) -> bool:
    """Whether a line says what H or the quotient of two voltages or currents is."""
    left = equation.sides[0]
    if equation.node is not None or equation.of is not None:
        return False
    return left == Name("H") or (isinstance(left, Product) and [p for p, _ in left.factors] == [1, -1])


@dataclass
class _Reviewer:
    """Goes through the lines of a working, from one set of assumptions and definitions to the next."""

    network: Network
    working: Working
    definitions: dict[str, Expression] = field(default_factory=dict)
    faults: list[tuple[type[SymnetError], Fault]] = field(default_factory=list)

    def review(self) -> Review:
        stage = _Stage.of(self.network, self.definitions, self.working.text)
        judgements: list[Judgement] = []
        for line in self.working:
            try:
                match line.statement:
                    case Definition(name=name, value=value):
                        value_of(stage.judge.scope, value)
                        self.definitions[name] = value
                        judgements.append(Judgement(line, Verdict.IDENTITY, note="a definition"))
                    case Assumption() as assumption:
                        network = given_network(stage.judge.scope.network, assumption)
                        stage = _Stage.of(network, self.definitions, self.working.text)
                        stage.replay(judgements)
                        judgements.append(
                            Judgement(line, Verdict.IDENTITY, note="an assumption, taken as given")
                        )
                    case _:
                        judgements.append(stage.judged(line))
            except SymnetError as error:
                self.faults += [(type(error), fault.at(line.span)) for fault in error.faults]
        if self.faults:
            kind = self.faults[0][0]
            raise kind([fault for _, fault in self.faults], text=self.working.text)
        return Review(
            self.network,
            self.working,
            tuple(judgements),
            completeness(stage.follower.rows, stage.up_to_the_claim()),
            tuple(p for p in polarities(self.network) if p.feedback != "negative"),
        )
