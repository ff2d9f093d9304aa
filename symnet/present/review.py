"""A review as blocks: one verdict a line, then what is to be noted, then the full story of what does not hold."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING, Final

from symnet.circuit.spelling import write_expression
from symnet.present.blocks import Block, Folded, Formula, Heading, Items, Line, Paragraph, Table
from symnet.review.verdicts import Verdict
from symnet.review.working import Equation
from symnet.typeset.notation import tree_of
from symnet.typeset.tree import Atom, Tree, power

if TYPE_CHECKING:
    from symnet.review.coefficients import Coefficient, Comparison
    from symnet.review.diagnosis.explanation import Diagnosis, Explanation
    from symnet.review.verdicts import Judgement, Review

__all__ = ["review_blocks"]

_LONGEST: Final = 120  # characters of a line that a cell of the table shows; longer ones are cut


def review_blocks(review: Review) -> tuple[Block, ...]:
    """The verdicts as a table, notes, and the story of every line that does not hold."""
    rows = tuple((judgement.line.label, _said(judgement), _verdict(judgement)) for judgement in review)
    blocks: list[Block] = [Paragraph(_summary(review)), Table(("line", "", "verdict"), rows)]
    notes = tuple(_notes(review))
    if notes:
        blocks.append(Items(notes))
    story = [block for judgement in review for block in _story(judgement)]
    if story:
        blocks.append(Folded("What is wrong, in full", tuple(story)))
    return tuple(blocks)


def _summary(review: Review) -> str:
    wrong = [judgement for judgement in review if not judgement.holds]
    if not len(review):
        return "There is no line to check."
    if not wrong:
        return f"Every line holds ({len(review)} of {len(review)})."
    own = [judgement.line.label for judgement in wrong if not judgement.follows]
    text = f"The first line that does not hold is line {wrong[0].line.label}."
    if len(own) > 1:
        text += f" Wrong by themselves: lines {', '.join(own)}."
    return text


def _said(judgement: Judgement) -> Line:
    """The line as it was typed, typeset where it is short enough for a cell."""
    line = judgement.line
    if isinstance(line.statement, Equation) and len(line.text) <= _LONGEST and line.statement.of is None:
        return tuple(_equation(line.statement))
    return line.text if len(line.text) <= _LONGEST else line.text[: _LONGEST - 3] + "..."


def _equation(equation: Equation) -> Iterator[str | Tree]:
    """An equation, typeset."""
    if equation.node is not None:
        yield f"node {equation.node}: "
    for k, side in enumerate(equation.sides):
        if k:
            yield " = "
        yield tree_of(side)
        if not k and equation.of is not None:
            yield from (" of ", tree_of(equation.of))


def _verdict(judgement: Judgement) -> Line:
    if judgement.verdict is not Verdict.CONDITION:
        return str(judgement)
    pieces: list[str | Tree] = ["true only if ", *_conditions(judgement)]
    if judgement.follows:
        pieces.append(f"; follows from line {judgement.follows[0].label}")
    elif judgement.diagnosis is not None:
        pieces.append(f": {judgement.diagnosis}")
    return tuple(pieces)


def _conditions(judgement: Judgement) -> Iterator[str | Tree]:
    """The ways in which the line would be true, typeset."""
    for k, way in enumerate(judgement.conditions):
        yield " or " * bool(k)
        for j, (name, tree) in enumerate(way.values):
            yield from (" and " * bool(j), Atom(name), " = ", tree)
        for j, (left, sign, right) in enumerate(way.relations):
            yield from (" and " * bool(j or way.values), left, f" {sign} ", right)


def _notes(review: Review) -> Iterator[Line]:
    for judgement in review:
        if judgement.jump:
            yield f"line {judgement.line.label} is true, but does not follow from the lines above it: a step is left out"
    if review.completeness is not None:
        yield str(review.completeness)
    for polarity in review.polarity:
        yield str(polarity)
    if any(judgement.verdict is Verdict.CONDITION for judgement in review):
        yield "conditions are for positive parts"
    if any(judgement.jump or judgement.follows for judgement in review) or review.completeness is not None:
        yield "what follows from what was decided by rank at a random point modulo a prime; the verdicts are exact"


def _story(judgement: Judgement) -> Iterator[Block]:
    """All there is to say of a line that does not hold."""
    if judgement.diagnosis is None and judgement.comparison is None:
        return
    yield Heading(f"Line {judgement.line.label}")
    if judgement.follows:
        yield Paragraph(f"It follows from line {judgement.follows[0].label}, which is wrong.")
    if judgement.diagnosis is not None:
        yield from _why(judgement, judgement.diagnosis)
    if judgement.comparison is not None:
        yield _coefficients(judgement.comparison)
        yield Paragraph("Right, in the form of the line:")
        left = judgement.line.statement.sides[0] if isinstance(judgement.line.statement, Equation) else None
        name = Atom(write_expression(left)) if left is not None else Atom("H")
        yield Formula((name, judgement.comparison.exact))


def _why(judgement: Judgement, diagnosis: Diagnosis) -> Iterator[Block]:
    """The explanations, the likeliest first, the branches of the node, and numbers that show the difference."""
    first, *others = diagnosis.explanations
    yield Paragraph(_sentence(first.sentence))
    if first.evidence:
        yield Items(tuple(map(_sentence, first.evidence)))
    if first.corrected is not None:
        yield Paragraph(("With that put right the line holds: ", *_equation(first.corrected)))
    if diagnosis.branches:
        rows = tuple(
            (
                row.name,
                row.right if row.right is not None else "",
                row.claimed if row.claimed is not None else "nothing",
                "agrees" if row.agrees else "differs",
            )
            for row in diagnosis.branches
        )
        yield Paragraph(f"Node {diagnosis.node}, the currents that leave it:")
        yield Table(("branch", "in the network", "in the line", ""), rows)
    facts = [_sentence(str(fact)) for fact in (diagnosis.example, diagnosis.reach) if fact]
    if judgement.conditions and judgement.verdict is Verdict.CONDITION:
        yield Paragraph(("As it stands it would hold only if ", *_conditions(judgement), "."))
    if facts:
        yield Items(tuple(facts))
    if others:
        yield Paragraph("It could also be:")
        yield Items(tuple(_other(explanation) for explanation in others))


def _other(explanation: Explanation) -> Line:
    if explanation.corrected is None:
        return explanation.sentence
    return (f"{explanation.sentence} (then ", *_equation(explanation.corrected), ")")


def _sentence(text: str) -> str:
    """A sentence with its full stop; a name at its head keeps its letters."""
    head, _, rest = text.partition(" ")
    begins = head.isalpha() and head.islower() and len(head) > 1
    stop = "" if text.endswith("?") else "."
    return f"{head.capitalize() if begins else head} {rest}{stop}"


def _coefficients(comparison: Comparison) -> Table:
    rows = tuple(
        (
            coefficient.side,
            power(Atom("s"), coefficient.power),
            coefficient.claimed,
            coefficient.exact,
            _remark(coefficient),
        )
        for coefficient in comparison.coefficients
    )
    return Table(("", "of", "claimed", "right", "remark"), rows)


def _remark(coefficient: Coefficient) -> Line:
    if coefficient.agrees:
        return "agrees"
    pieces: list[str | Tree] = []
    for word, terms in (("missing: ", coefficient.missing), ("too many: ", coefficient.extra)):
        for k, term in enumerate(terms):
            pieces += [("; " if pieces else "") + word if not k else ", ", term]
    return tuple(pieces)
