"""From a false line to its explanations: which hypotheses are made, in which order, and which of them hold.

Hypotheses come from the node (branch by branch), from the places of the line (what would be wanted there), from names
that may be exchanged, from limits, from dimensions and from conventions. Each has passed a test modulo a prime; those
that are told are tested exactly, with the line put right. The number of places, of names and of exact tests is
bounded, so that the time is.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from contextlib import suppress
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise
from typing import TYPE_CHECKING, Final

from symnet.errors import SymnetError
from symnet.expressions import Expression, Name, names_in
from symnet.quantities import AMPERE
from symnet.review.diagnosis.branches import AtNode
from symnet.review.diagnosis.conventions import Figures
from symnet.review.diagnosis.examples import counterexample, figures_of, reach
from symnet.review.diagnosis.exchanged import exchanges
from symnet.review.diagnosis.explanation import Counterexample, Diagnosis, Explanation, Slip
from symnet.review.diagnosis.leftout import LeftOut
from symnet.review.diagnosis.meanings import of_limit, of_part
from symnet.review.diagnosis.pieces import shown
from symnet.review.diagnosis.places import at, places
from symnet.review.diagnosis.point import Point, UnreadableError
from symnet.review.diagnosis.shapes import family_slip, normalisation
from symnet.review.diagnosis.slips import Finder, Hypothesis
from symnet.review.diagnosis.transfers import of_comparison
from symnet.review.diagnosis.units import Misfit, dimension_in, known_dimensions, misfits, unit_of
from symnet.review.verdicts import Verdict
from symnet.review.working import Equation, Family, Limit, Line

if TYPE_CHECKING:
    from symnet.quantities import Dimension
    from symnet.review.coefficients import Comparison
    from symnet.review.judge import Judge
    from symnet.review.rows import Rows
    from symnet.review.verdicts import Judgement

__all__ = ["diagnose"]

_MOST_TESTED: Final = 12
_MOST_TOLD: Final = 4
#: Slips that are likelier than a part that was left out.
_SIMPLE: Final = {
    Slip.DIMENSION,
    Slip.SIGN,
    Slip.FACTOR,
    Slip.SWAPPED,
    Slip.PART,
    Slip.RECIPROCAL,
    Slip.PARALLEL,
    Slip.MISSING_BRANCH,
    Slip.EXTRA_BRANCH,
}


def diagnose(judge: Judge, rows: Rows, judgement: Judgement) -> Diagnosis | None:
    """What is wrong with a line that does not hold; None where nothing was found."""
    try:
        return _diagnosed(judge, rows, judgement)
    except SymnetError:
        return None  # a figure that some hypothesis does not have, or too long: the verdict stands without it


def _diagnosed(judge: Judge, rows: Rows, judgement: Judgement) -> Diagnosis | None:
    line, statement = judgement.line, judgement.line.statement
    match statement:
        case Family(value=value, name=name, order=order):
            found = tuple(family_slip(judge, value, name, order))
            return Diagnosis(found) if found else None
        case Limit():
            told = of_limit(judge, statement)
            return Diagnosis((told,)) if told is not None else None
        case Equation():
            figures = Figures(judge, line, statement)
            conventions = tuple(figures.explanations())
            if conventions:
                return Diagnosis(conventions)
            plain = figures.plain()
            if plain is None:
                return None
            diagnosing = _Diagnosing(judge, rows, line, plain, judgement.link, judgement.comparison)
            return diagnosing.diagnosis()
        case _:
            return None


@dataclass(eq=False)
class _Diagnosing:
    judge: Judge
    rows: Rows
    line: Line
    statement: Equation
    link: int
    comparison: Comparison | None

    @cached_property
    def sides(self) -> tuple[Expression, Expression]:
        return tuple(pairwise(self.statement.sides))[self.link]

    @cached_property
    def known(self) -> Mapping[str, Dimension | None]:
        return known_dimensions(self.judge.scope)

    @cached_property
    def misfits(self) -> tuple[Misfit, ...]:
        return tuple(misfits(self.sides, self.known, node=self.statement.node is not None))

    @cached_property
    def numbers(self) -> str:
        """What both sides are, where they are numbers."""
        dimension = dimension_in(self.sides[0], self.known)
        return figures_of(self.judge, self.sides, self.statement.of, dimension)

    def diagnosis(self) -> Diagnosis | None:
        found: list[Hypothesis] = []
        at_node = self._at_node()
        if at_node is not None:
            found += _safely(at_node.hypotheses())
        if at_node is None or self.statement.node is None:
            others = _safely(self._anywhere())
            found += others if at_node is None else [replace(h, cost=h.cost + 1) for h in others]
        explanations = self._explained(found, at_node=at_node is not None)
        example = None
        if explanations and explanations[0].slip is not Slip.DIMENSION:
            example = counterexample(self.judge.scope, self.sides, self.statement.of)
        apart = reach(self.judge, self.sides, self.statement.of)
        if not explanations:
            explanations, example = self._in_numbers(apart)
        if not explanations:
            return None
        table = at_node.table() if at_node is not None else ()
        node = at_node.node if at_node is not None else ""
        return Diagnosis(tuple(explanations[:_MOST_TOLD]), node, table, example, apart)

    def _explained(self, found: Sequence[Hypothesis], *, at_node: bool) -> list[Explanation]:
        """Every explanation that stands, the likeliest first; several with one correction are told once."""
        tested = list(self._tested(found, at_node=at_node))
        explanations = list(self._dimensions(tested))
        lines = [explanation.corrected for explanation in explanations]
        explanations += [e for e in tested if e.corrected not in lines]
        if self.statement.node is None:
            explanations = self._with_limits(explanations)
        if not explanations:
            part = of_part(self.judge, self.statement)
            explanations = [part] if part is not None else []
        return explanations

    def _in_numbers(self, apart: str) -> tuple[list[Explanation], Counterexample | None]:
        """That the sides differ, where no slip was found: by their values, by a counterexample, or over frequency."""
        if self.numbers:
            return [Explanation(Slip.DIFFERENT, self.numbers)], None
        example = counterexample(self.judge.scope, self.sides, self.statement.of)
        words = str(example) if example is not None else apart
        return [Explanation(Slip.DIFFERENT, words)] if words else [], None

    def _with_limits(self, explanations: list[Explanation]) -> list[Explanation]:
        """The explanations with those that need the whole quotient: parts left out, loading, coefficients."""
        try:
            limits = list(
                LeftOut(self.judge.scope, self.sides, self.statement.of, self.comparison).explanations()
            )
        except SymnetError:
            limits = []
        simple = [e for e in explanations if e.slip in _SIMPLE]
        others = [e for e in explanations if e.slip not in _SIMPLE]
        shapes = [] if simple else list(normalisation(self.judge, self.sides))
        found = [*simple, *shapes, *limits, *others]
        if not found and self.comparison is not None and not self.numbers:
            explanation = of_comparison(self.comparison)
            found += [explanation] if explanation is not None else []
        return found

    def _at_node(self) -> AtNode | None:
        """The line as the equation of the node it names, or of the one that it is most like."""
        try:
            point = Point.under_laws(self.rows)
            names = [self.statement.node] if self.statement.node is not None else self._likely_nodes()
            found = [AtNode(self.rows, point, n, self.sides, self.known, bool(self.misfits)) for n in names]
            if self.statement.node is None:
                found = [node for node in found if len(node.matched[0]) > 1 and node.likeness >= 0.5]
            return max(found, key=lambda node: node.likeness, default=None)
        except UnreadableError:
            return None

    def _likely_nodes(self) -> list[str]:
        if not any(dimension_in(side, self.known) == AMPERE for side in self.sides):
            return []
        spoken = {name.name for side in self.sides for name in names_in(side)}
        return [node for node in self.rows.scope.network.nodes if node in spoken]

    def _anywhere(self) -> Iterator[Hypothesis]:
        point = Point.solved(self.judge.scope, self.statement.of)
        near = tuple(name.name for name in names_in(self.sides[0]))
        finder = Finder(point, self.sides, self.known, bool(self.misfits), near)
        yield from exchanges(finder)
        yield from finder.slips(places(self.sides, point))

    def _tested(self, found: Sequence[Hypothesis], *, at_node: bool) -> Iterator[Explanation]:
        """The hypotheses that hold exactly, the likeliest first, each slip once."""
        told: set[tuple[str, str]] = set()
        lines: list[tuple[Expression, ...]] = []
        tested = 0
        for hypothesis in sorted(found, key=lambda h: h.cost):
            key = (
                ("", hypothesis.name)
                if at_node and hypothesis.name
                else (hypothesis.slip.value, hypothesis.sentence)
            )
            if len(hypothesis.path) == 1 and not hypothesis.name:
                key = hypothesis.slip.value, "side"  # the left side turned is the right side turned
            if key in told or hypothesis.sides in lines:
                continue
            tested += 1
            if tested > _MOST_TESTED:
                return
            corrected = replace(self.statement, sides=hypothesis.sides)
            try:
                judgement = self.judge.alone(self.line, corrected)
            except SymnetError:
                continue
            if judgement.holds and judgement.verdict is not Verdict.NOTHING:
                told.add(key)
                lines.append(hypothesis.sides)
                yield Explanation(
                    hypothesis.slip, self._of_figure(hypothesis), hypothesis.evidence, corrected
                )

    def _of_figure(self, hypothesis: Hypothesis) -> str:
        """The sentence, with the figure that is claimed."""
        stated = self.line.statement
        first = stated.sides[0] if isinstance(stated, Equation) else None
        if not isinstance(first, Name) or not self.judge.scope.is_figure(first.name):
            return hypothesis.sentence
        text = f"{first.name}: {hypothesis.sentence}"
        if first.name == "Q" and hypothesis.slip is Slip.RECIPROCAL:
            text += " (a series and a parallel circuit have it the other way round)"
        return text

    def _dimensions(self, explanations: list[Explanation]) -> Iterator[Explanation]:
        for misfit in self.misfits[:1]:
            unit = unit_of(misfit.term, misfit.dimension, self.known)
            others = "the left side is" if len(misfit.path) == 1 else "the other terms are"
            words = f"{shown(misfit.term)} is {unit}, {others} {misfit.expected}"
            corrected = None
            for explanation in explanations:
                if explanation.corrected is not None:
                    try:
                        new = at(explanation.corrected.sides, misfit.path)
                    except IndexError:
                        continue
                    if new != misfit.term:
                        words += f": did you mean {shown(new)}?"
                        corrected = explanation.corrected
                        break
            yield Explanation(Slip.DIMENSION, words, (), corrected)


def _safely(found: Iterator[Hypothesis]) -> list[Hypothesis]:
    """What comes until the cheap test fails."""
    out: list[Hypothesis] = []
    with suppress(UnreadableError):
        out.extend(found)
    return out
