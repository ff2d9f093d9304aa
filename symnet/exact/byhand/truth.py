"""Every line of a derivation held to the exact solution of the network, and the last line to H.

The solution is one more H for each voltage that a line names, by determinants, which share nothing with the
elimination that is told. A line is true if and only if it becomes 0 = 0 in exact arithmetic. One that does not would
be a defect of symnet, and nothing is shown.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING

from symnet.circuit.parts import GROUND
from symnet.errors import Fault, SymnetError
from symnet.exact.byhand.elimination import Elimination
from symnet.exact.byhand.narration import Step
from symnet.exact.derive import derive_from
from symnet.expressions import Expression, Name, evaluate

if TYPE_CHECKING:
    from sympy.polys.fields import FracElement

    from symnet.exact.transfer import Transfer

__all__ = ["UntrueStepError", "hold_to_the_solution"]


class UntrueStepError(SymnetError, AssertionError):
    """A line of a derivation is not true under the exact solution: a defect of symnet, never of the network."""


def hold_to_the_solution(steps: Iterable[Step], elimination: Elimination, transfer: Transfer) -> None:
    """Check every line, and that the last one says H; raises UntrueStepError."""
    solution = _Solution(elimination, transfer)
    last = None
    for step in steps:
        last = solution.value(step.right)
        if solution.value(step.left) != last:
            raise UntrueStepError(_defect(f"a line of the derivation is not true: {step}"))
    if last != elimination.frame.ratio(transfer.numerator, transfer.denominator):
        raise UntrueStepError(_defect("the last line of the derivation is not H"))


def _defect(message: str) -> Fault:
    return Fault(message, "this is a defect of symnet: please report the network")


class _Solution:
    """What every name of a line is worth when the drive is 1."""

    def __init__(self, elimination: Elimination, transfer: Transfer) -> None:
        self.e, self.transfer, self.frame = elimination, transfer, elimination.frame
        self.found: dict[str, FracElement] = {self.frame.source: self.frame.field.one}

    def value(self, expression: Expression) -> FracElement:
        field = self.frame.field
        found: FracElement = evaluate(
            expression, self._of, lambda n: field(n.value.numerator) / field(n.value.denominator)
        )
        return found

    def _of(self, name: Name) -> FracElement:
        word = name.name
        if word not in self.found:
            self.found[word] = self._fresh(word)
        return self.found[word]

    def _fresh(self, word: str) -> FracElement:
        frame = self.frame
        if word in self.e.meanings:
            return self.e.meanings[word]
        if word == GROUND:
            return frame.field.zero
        if frame.electric(word) is None:
            return frame.value(word)
        other = derive_from(frame.network, self.transfer.drive, Name(word))
        return frame.ratio(other.numerator, other.denominator)
