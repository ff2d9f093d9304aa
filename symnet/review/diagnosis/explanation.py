"""What a diagnosis says: the explanations of a false line, the likeliest first, each with its evidence.

Nothing is searched here. An explanation names one slip; the line with that slip put right, in the form in which it
was typed, is kept beside it wherever that line was found to hold.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import Enum
from fractions import Fraction

from symnet.circuit.spelling import write_expression
from symnet.review.working import Equation
from symnet.typeset.tree import Tree
from symnet.typeset.writing import to_text

__all__ = ["BranchRow", "Counterexample", "Diagnosis", "Explanation", "Slip", "written"]


class Slip(Enum):
    """The kinds of slip that are told apart."""

    DIMENSION = "dimension"
    SIGN = "sign"
    FACTOR = "constant factor"
    MISSING_BRANCH = "branch missing"
    EXTRA_BRANCH = "branch too many"
    NODE = "branch to another node"
    AMPLIFIER = "amplifier current forgotten"
    PART = "wrong part"
    SWAPPED = "parts exchanged"
    RECIPROCAL = "upside down"
    ROOT = "square root"
    PARALLEL = "series for parallel"
    TERM_FACTOR = "factor on a term"
    MISSING_TERM = "term missing"
    EXTRA_TERM = "term too many"
    LEFT_OUT = "part left out"
    LOADING = "loading ignored"
    CONVENTION = "convention"
    NORMALISATION = "normalisation"
    SEVERAL = "several slips"
    DIFFERENT = "something else"


@dataclass(frozen=True, slots=True)
class Explanation:
    """One slip in the engineer's words.

    ``evidence`` are further sentences that show it. ``corrected`` is the line with this slip put right; it was
    found to hold in the network, exactly.
    """

    slip: Slip
    sentence: str
    evidence: tuple[str, ...] = ()
    corrected: Equation | None = None

    def __str__(self) -> str:
        return self.sentence


@dataclass(frozen=True, slots=True)
class BranchRow:
    """One branch at a node: its current as the network has it, and as the line has it (None: not there).

    ``name`` is empty for a term of the line that belongs to no branch of the node; then ``right`` is None.
    """

    name: str
    right: Tree | None
    claimed: Tree | None
    agrees: bool

    def __str__(self) -> str:
        right, claimed = (
            to_text(side) if side is not None else "nothing" for side in (self.right, self.claimed)
        )
        return f"{self.name or 'no branch'}: {right}; the line has {claimed}"


@dataclass(frozen=True, slots=True)
class Counterexample:
    """Round values at which the two sides differ; s is real there, so that every number is exact."""

    values: tuple[tuple[str, Fraction], ...]
    left: Fraction
    right: Fraction

    def __str__(self) -> str:
        ones = [name for name, value in self.values if value == 1]
        given = [" = ".join([*ones, "1"])] if ones else []
        given += [f"{name} = {value}" for name, value in self.values if value != 1]
        return f"with {', '.join(given)} the left side is {self.left}, the right side {self.right}"


@dataclass(frozen=True, slots=True)
class Diagnosis:
    """What can be said of a false line.

    ``explanations`` stand in the order of their likelihood and are never empty. ``branches`` compare an equation of
    a node with what is connected there. ``example`` is the smallest counterexample with round values, and ``reach``
    says at which frequencies the two sides differ by less than 1 %.
    """

    explanations: tuple[Explanation, ...]
    node: str = ""
    branches: tuple[BranchRow, ...] = ()
    example: Counterexample | None = None
    reach: str = ""

    @property
    def first(self) -> Explanation:
        """The likeliest explanation."""
        return self.explanations[0]

    def __str__(self) -> str:
        return self.first.sentence


def written(equation: Equation) -> str:
    """An equation in the notation of hand derivations."""
    head = f"node {equation.node}: " if equation.node is not None else ""
    if equation.of is not None:
        head = f"{write_expression(equation.sides[0])} of {write_expression(equation.of)} = "
        return head + " = ".join(map(write_expression, equation.sides[1:]))
    return head + " = ".join(map(write_expression, equation.sides))
