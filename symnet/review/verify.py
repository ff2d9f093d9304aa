"""A hand derivation held against its network: the one entry to the review."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from symnet.circuit.network import Network
from symnet.circuit.reading import raise_all
from symnet.errors import Fault, SymnetError
from symnet.review.approximating import judge_approximation
from symnet.review.checked import value_of
from symnet.review.claims import half_power_claim, judge_family, judge_half_power
from symnet.review.judge import Judge
from symnet.review.limiting import judge_limit
from symnet.review.reading import read_working
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
    1. x/in = 1/(1 + s*R1*C1)    false
    """
    if isinstance(working, str):
        working = read_working(working)
    raise_all(name_faults(network, working), working.text)
    return _Reviewer(network, working).review()


@dataclass
class _Reviewer:
    """Goes through the lines of a working, from one set of assumptions and definitions to the next."""

    network: Network
    working: Working
    definitions: dict[str, Expression] = field(default_factory=dict)
    faults: list[tuple[type[SymnetError], Fault]] = field(default_factory=list)

    def review(self) -> Review:
        judge = self._judge(self.network)
        judgements: list[Judgement] = []
        for line in self.working:
            try:
                match line.statement:
                    case Definition(name=name, value=value):
                        value_of(judge.scope, value)
                        self.definitions[name] = value
                        judgements.append(Judgement(line, Verdict.IDENTITY, note="a definition"))
                    case Assumption() as assumption:
                        judge = self._judge(given_network(judge.scope.network, assumption))
                        judgements.append(
                            Judgement(line, Verdict.IDENTITY, note="an assumption, taken as given")
                        )
                    case _:
                        judgements.append(self._judged(judge, line))
            except SymnetError as error:
                self.faults += [(type(error), fault.at(line.span)) for fault in error.faults]
        if self.faults:
            kind = self.faults[0][0]
            raise kind([fault for _, fault in self.faults], text=self.working.text)
        return Review(self.network, self.working, tuple(judgements))

    def _judged(self, judge: Judge, line: Line) -> Judgement:
        match line.statement:
            case Equation() as equation if half_power_claim(judge, equation):
                return judge_half_power(judge, line, equation)
            case Equation() as equation:
                return judge.equation(line, equation)
            case Limit() as limit:
                return judge_limit(judge, line, limit)
            case Approximation() as approximation:
                return judge_approximation(judge, line, approximation)
            case Family() as family:
                return judge_family(judge, line, family)
            case _:
                return Judgement(line, Verdict.IDENTITY)

    def _judge(self, network: Network) -> Judge:
        solution = Solution.of(network)
        numeric = None
        if solution.naming.numbers:
            numeric = Scope(Solution.of(network, frozenset()), self.definitions)
        return Judge(Scope(solution, self.definitions), self.working.text, numeric)
