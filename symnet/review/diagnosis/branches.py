"""An equation of a node compared branch by branch with what is connected there.

The line and the sum of the currents that leave the node are taken at a point under the laws, where no two branch
currents are equal by chance of the network; the line may be that sum times a number or a part (k). Each term of the
line is looked up among the branches. What is left over on either side is the slip, or several.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import cached_property
from typing import TYPE_CHECKING, Final

from symnet.circuit.parts import GROUND, Branch, OpAmp, VoltageLaw
from symnet.exact.modular import PRIME
from symnet.expressions import Expression, Number, Sum, names_in
from symnet.review.diagnosis.exchanged import exchanges
from symnet.review.diagnosis.explanation import BranchRow, Slip
from symnet.review.diagnosis.pieces import Flow, flows_at, signed, turned
from symnet.review.diagnosis.places import Path, at, places, put, spliced
from symnet.review.diagnosis.point import Point, UnreadableError
from symnet.review.diagnosis.slips import Finder, Hypothesis
from symnet.typeset.notation import tree_of

if TYPE_CHECKING:
    from collections.abc import Mapping

    from symnet.quantities import Dimension
    from symnet.review.rows import Rows
    from symnet.typeset.tree import Tree

__all__ = ["AtNode"]

_MOST_SCALES: Final = 4


@dataclass(frozen=True, slots=True)
class _Branch(Flow):
    """A current that leaves the node, and its value at the point."""

    value: int


@dataclass(frozen=True, slots=True)
class _Term:
    """A term of left - right with its sign, its place and its value (sign included)."""

    sign: int
    expression: Expression
    path: Path
    value: int


@dataclass(eq=False)
class AtNode:
    """One line as the equation of one node; UnreadableError where it has no value at the point."""

    rows: Rows
    point: Point
    node: str
    sides: tuple[Expression, ...]
    known: Mapping[str, Dimension | None]
    anything: bool = False

    @cached_property
    def branches(self) -> tuple[_Branch, ...]:
        """What is connected at the node."""
        flows = flows_at(self.rows.scope.network, self.node)
        return tuple(
            _Branch(flow.node, flow.other, flow.name, flow.called, flow.leaving, self.point(flow.leaving))
            for flow in flows
        )

    @cached_property
    def truth(self) -> int:
        """The sum of the currents that leave."""
        return sum(branch.value for branch in self.branches) % PRIME

    @cached_property
    def terms(self) -> tuple[_Term, ...]:
        """The terms of left - right."""
        found: list[_Term] = []

        def collect(sign: int, expression: Expression, path: Path) -> None:
            if isinstance(expression, Sum):
                for k, (inner, term) in enumerate(expression.terms):
                    collect(sign * inner, term, (*path, k))
            elif not (isinstance(expression, Number) and not expression.value):
                value = self.point(expression)
                found.append(_Term(sign, expression, path, sign * value % PRIME))

        for k, side in enumerate(self.sides):
            collect(1 if k == 0 else -1, side, (k,))
        return tuple(found)

    @cached_property
    def scales(self) -> tuple[int, ...]:
        """What the sum of the currents may have been multiplied by, the one that most terms agree with first."""
        count: dict[int, int] = {}
        for term in self.terms:
            for branch in self.branches:
                if branch.value and term.value:
                    k = term.value * pow(branch.value, -1, PRIME) % PRIME
                    count[k] = count.get(k, 0) + 1
        often = [k for k, n in count.items() if n > 1 or k in {1, PRIME - 1}]
        best = sorted({1, PRIME - 1, *often}, key=lambda k: (-count.get(k, 0), k not in {1, PRIME - 1}))
        return tuple(best[:_MOST_SCALES])

    @cached_property
    def matched(self) -> tuple[dict[str, _Term], list[_Term], list[_Branch]]:
        """Terms that are branches (by name of the part), terms left over, branches left over."""
        k = self.scales[0]
        left, agreed = list(self.terms), {}
        open_ones = []
        for branch in self.branches:
            term = next((t for t in left if t.value == k * branch.value % PRIME), None)
            if term is None:
                open_ones.append(branch)
            else:
                agreed[branch.name] = term
                left.remove(term)
        silent = [branch for branch in open_ones if not branch.value]  # no current, by the laws of the parts
        return agreed, left, [branch for branch in open_ones if branch not in silent]

    @property
    def likeness(self) -> float:
        """Which share of terms and branches agree."""
        agreed, left, missing = self.matched
        return len(agreed) / max(1, len(agreed) + len(left) + len(missing))

    # -- slips -----------------------------------------------------------------------------------------------------------

    def hypotheses(self) -> Iterator[Hypothesis]:
        """Every slip with which the line is the equation of the node."""
        near = (self.node,)
        own = tuple(branch.name for branch in self.branches)
        finder = Finder(self.point, self.sides, self.known, self.anything, near, own)
        for rank, k in enumerate(self.scales):
            excess = k * self.truth % PRIME
            found = [*exchanges(finder, excess), *finder.slips(places(self.sides, self.point, excess))]
            for hypothesis in found:
                told = self._told(hypothesis, k)
                yield replace(told, cost=told.cost + 0.3 * rank + self._spared(hypothesis))
        several = self._several()
        if several is not None:
            yield several

    def _spared(self, hypothesis: Hypothesis) -> float:
        """The price of leaving a term as it is that belongs to no branch, and of changing one that does."""
        _, left, _ = self.matched
        if not left or not hypothesis.path:
            return 0.0
        return 0.0 if any(hypothesis.path[: len(t.path)] == t.path for t in left) else 1.5

    def _told(self, hypothesis: Hypothesis, k: int) -> Hypothesis:
        """A slip in the words of branches and nodes."""
        if hypothesis.name and hypothesis.slip in {Slip.MISSING_BRANCH, Slip.MISSING_TERM}:
            return self._missing(hypothesis)
        if not hypothesis.path or hypothesis.slip in {Slip.SWAPPED, Slip.DIMENSION}:
            return hypothesis
        term = next((t for t in self.terms if hypothesis.path[: len(t.path)] == t.path), None)
        whole = len(hypothesis.path) <= 1 or term is None
        if whole and hypothesis.slip is Slip.EXTRA_TERM:
            return hypothesis
        if term is None or len(hypothesis.path) < len(term.path):
            return hypothesis
        if hypothesis.slip is Slip.EXTRA_TERM and hypothesis.path == term.path:
            return self._extra(hypothesis, term)
        try:
            new = at(hypothesis.sides, term.path)
            value = term.sign * self.point(new) % PRIME
        except (UnreadableError, IndexError):
            return hypothesis
        branch = next((b for b in self.branches if b.value and value == k * b.value % PRIME), None)
        if branch is None:
            return hypothesis
        return self._of_branch(hypothesis, term, new, branch, k)

    def _of_branch(
        self, hypothesis: Hypothesis, term: _Term, new: Expression, branch: _Branch, k: int
    ) -> Hypothesis:
        name, slip = branch.name, hypothesis.slip
        called, other = branch.called, branch.other
        has, right = signed(term.sign, term.expression), signed(term.sign, new)
        if slip is Slip.SIGN and len(hypothesis.path) == len(term.path):
            words = f"the current through {called} has the wrong sign: it should be {signed(-term.sign, term.expression)}, the line has {has} (all terms taken to the left side)"
        elif slip is Slip.SIGN:
            words = (
                f"a sign is wrong in the current through {called}: it should be {right}, the line has {has}"
            )
        elif slip is Slip.FACTOR:
            words = f"at node {self.node} the current through {called} is {right}; the line has {has}: {hypothesis.sentence}"
        elif slip in {Slip.NODE, Slip.EXTRA_TERM} or (
            slip is Slip.MISSING_TERM and _voltages(self, new) != _voltages(self, term.expression)
        ):
            slip = Slip.NODE
            lacks = self.node not in _voltages(self, term.expression)
            where = _elsewhere(self, term.expression)
            new = branch.leaving if k in {1, PRIME - 1} else new
            if new is branch.leaving:
                outward = term.sign if k == 1 else -term.sign
                new = new if outward > 0 else turned(new)
                hypothesis = replace(hypothesis, sides=put(self.sides, term.path, new))
            right = signed(term.sign, new)
            words = (
                f"at node {self.node}, {called} goes to {other}: its current is {right}; the line has {has}, "
            )
            words += f"without the voltage of {self.node} itself" if lacks else f"as if it went to {where}"
        elif slip is Slip.PART:
            words = f"at node {self.node} the branch to {other} is {called}: its current is {right}, the line has {has}"
        else:
            words = f"at node {self.node} the current through {called} is {right}; the line has {has}"
        return replace(hypothesis, slip=slip, sentence=words, name=name)

    def _missing(self, hypothesis: Hypothesis) -> Hypothesis:
        name = hypothesis.name
        here = next((b for b in self.branches if b.name == name), None)
        names = ", ".join(b.called for b in self.branches)
        if here is None:
            return replace(hypothesis, slip=Slip.MISSING_TERM, cost=hypothesis.cost + 1)
        part = self.rows.scope.network[name] if name not in self.rows.scope.network.drive_names else None
        if isinstance(part, OpAmp | VoltageLaw):
            words = (
                f"{name} drives node {self.node} with whatever current it takes: "
                f"the sum of the currents there holds only with its current i_{name}"
            )
            return replace(hypothesis, slip=Slip.AMPLIFIER, sentence=words)
        words = f"at node {self.node} the network has the branches {names}; the line has no current through {name}"
        if len(self.branches) == 1:
            words = f"at node {self.node} the line has no current through {name}"
        return replace(hypothesis, slip=Slip.MISSING_BRANCH, sentence=words, cost=1.3)

    def _extra(self, hypothesis: Hypothesis, term: _Term) -> Hypothesis:
        text = signed(term.sign, term.expression)
        network = self.rows.scope.network
        owner = next(
            (n.name for n in names_in(term.expression) if n.name in {p.name for p in network.parts}), ""
        )
        if not owner or any(b.name == owner for b in self.branches):
            return hypothesis
        part = network[owner]
        ends = " and ".join(part.nodes) if isinstance(part, Branch) else ""
        words = f"{owner} is not connected to node {self.node}"
        words += f" (it goes from {' to '.join(part.nodes)})" if ends else ""
        return replace(
            hypothesis,
            slip=Slip.EXTRA_BRANCH,
            sentence=f"{words}; the line has {text}",
            name=owner,
            cost=hypothesis.cost - 0.4,
        )

    def _several(self) -> Hypothesis | None:
        """The line with every branch that does not agree put right at once."""
        agreed, left, missing = self.matched
        if not agreed or not (left or missing) or self.scales[0] not in {1, PRIME - 1}:
            return None
        outward = 1 if self.scales[0] == 1 else -1
        sides: list[list[tuple[int, Expression]]] = [[], []]
        for term in self.terms:
            if term not in left:
                sides[term.path[0]].append((term.sign if term.path[0] == 0 else -term.sign, term.expression))
        said, forgotten = [], 0
        for branch in missing:
            owner = next((t for t in left if branch.name in {n.name for n in names_in(t.expression)}), None)
            if owner is None:
                said.append(f"no current through {branch.called}")
                forgotten += 1
            else:
                said.append(
                    f"{signed(owner.sign, owner.expression)} for the current through {branch.called}, which is {signed(outward, branch.leaving)}"
                )
            sides[0].append((outward, branch.leaving))
        others = [
            t for t in left if not any(b.name in {n.name for n in names_in(t.expression)} for b in missing)
        ]
        said += [f"the term {signed(t.sign, t.expression)}, which belongs to no branch there" for t in others]
        names = ", ".join(b.called for b in self.branches)
        words = (
            f"at node {self.node} the network has the branches {names}; the line has {'; and '.join(said)}"
        )
        slip = Slip.MISSING_BRANCH if forgotten else Slip.EXTRA_BRANCH if others else Slip.SEVERAL
        if slip is Slip.SEVERAL and len(missing) == 1:
            slip = Slip.PART
        return Hypothesis(
            slip,
            3 + len(said),
            tuple(spliced(side) for side in sides),
            words,
            name=missing[0].name if missing else "",
        )

    # -- the table ---------------------------------------------------------------------------------------------------------

    def table(self) -> tuple[BranchRow, ...]:
        """Branch by branch: what leaves the node in the network, and in the line."""
        agreed, left, missing = self.matched
        outward = -1 if self.scales[0] == PRIME - 1 else 1
        rows = []
        rest = list(left)
        for branch in self.branches:
            term = agreed.get(branch.name)
            if term is None and branch in missing:
                term = next(
                    (t for t in rest if branch.name in {n.name for n in names_in(t.expression)}), None
                )
                if term is not None:
                    rest.remove(term)
            elif term is None:
                continue
            claimed = _signed_tree(term.sign * outward, term.expression) if term is not None else None
            rows.append(BranchRow(branch.name, tree_of(branch.leaving), claimed, branch.name in agreed))
        rows += [BranchRow("", None, _signed_tree(t.sign * outward, t.expression), False) for t in rest]
        return tuple(rows)


def _signed_tree(sign: int, expression: Expression) -> Tree:
    return tree_of(expression if sign > 0 else Sum(((-1, expression),)))


def _voltages(here: AtNode, expression: Expression) -> set[str]:
    return {name.name for name in names_in(expression)} & set(here.rows.scope.network.nodes)


def _elsewhere(here: AtNode, expression: Expression) -> str:
    others = [name for name in sorted(_voltages(here, expression)) if name != here.node]
    return " and ".join(others) if others else GROUND
