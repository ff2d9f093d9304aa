"""What is said of the lines of a hand derivation: one judgement a line, and the review that holds them all."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from enum import Enum
from typing import Final

from symnet.circuit.network import Network
from symnet.review.coefficients import Comparison
from symnet.review.completeness import Completeness
from symnet.review.diagnosis.explanation import Diagnosis
from symnet.review.polarity import Polarity
from symnet.review.working import Line, Working
from symnet.shape.stated import Alternative
from symnet.typeset.displayed import Displayed

__all__ = ["Judgement", "Review", "Verdict", "worst"]


class Verdict(Enum):
    """The five verdicts on a line."""

    IDENTITY = "true identically"
    VALUES = "true for the given values"
    CONDITION = "true only if"
    NOTHING = "true but adds nothing"
    FALSE = "false"


@dataclass(frozen=True, slots=True)
class Judgement:
    """The verdict on one line.

    ``conditions`` are the ways in which a line that is not true in general can be true, for positive values (with
    the verdict FALSE: in which the given values do not make it true). ``rounded`` says that the line is true to
    the digits it gives, and no further. ``link`` is the place of the first equals sign that does not hold, from 0.
    ``same_as`` is an earlier line that says the same; ``follows`` are the wrong lines that a false line follows from. ``jump`` marks a true line that does not follow from the lines above it.
    ``note`` is what else there is to say, in a sentence. ``comparison`` holds the coefficients of a wrong H.
    ``diagnosis`` says why a line that follows from no other does not hold.
    """

    line: Line
    verdict: Verdict
    conditions: tuple[Alternative, ...] = ()
    rounded: bool = False
    link: int = 0
    same_as: Line | None = None
    follows: tuple[Line, ...] = ()
    jump: bool = False
    note: str = ""
    comparison: Comparison | None = None
    diagnosis: Diagnosis | None = None

    @property
    def holds(self) -> bool:
        """Whether the line is true of this network as it is given."""
        return self.verdict not in {Verdict.FALSE, Verdict.CONDITION}

    def __str__(self) -> str:
        """The verdict in words."""
        text = self.verdict.value
        ways = " or ".join(map(str, self.conditions))
        if self.verdict is Verdict.CONDITION:
            text = f"{text} {ways}"
        if self.rounded:
            text = (
                "true to the digits given"
                if self.verdict is not Verdict.VALUES
                else f"{text}, to the digits given"
            )
        if self.same_as is not None:
            text += f": it says what line {self.same_as.label} says"
        if self.follows:
            many = "s" if len(self.follows) > 1 else ""
            text += (
                f", but follows from the wrong line{many} {' and '.join(line.label for line in self.follows)}"
            )
        if self.diagnosis is not None:
            text += f": {self.diagnosis}"
        return f"{text}; {self.note}" if self.note else text


_ORDER: Final = {
    Verdict.NOTHING: 0,
    Verdict.IDENTITY: 1,
    Verdict.VALUES: 2,
    Verdict.CONDITION: 3,
    Verdict.FALSE: 4,
}


def worst(judgements: list[Judgement]) -> Judgement:
    """The judgement on a whole line from those on its parts: the first of the worst."""
    return max(judgements, key=lambda judgement: _ORDER[judgement.verdict])


@dataclass(frozen=True, slots=True, repr=False)
class Review(Displayed):
    """What :func:`symnet.verify` found: a judgement for every line; true when every line holds.

    ``completeness`` says whether the lines lead to the last equation; None where there is nothing above it.
    ``polarity`` holds the op amps whose feedback is net positive, or may be.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")
    >>> review = sn.verify(net, "node out: (out - in)/R1 + s*C1*out = 0; out/in = 1/(1 + s*R1*C1)")
    >>> bool(review), [judgement.verdict.value for judgement in review]
    (True, ['true identically', 'true identically'])
    """

    network: Network
    working: Working
    judgements: tuple[Judgement, ...]
    completeness: Completeness | None = None
    polarity: tuple[Polarity, ...] = ()

    def __bool__(self) -> bool:
        return all(judgement.holds for judgement in self.judgements)

    def __iter__(self) -> Iterator[Judgement]:
        return iter(self.judgements)

    def __len__(self) -> int:
        return len(self.judgements)

    @property
    def first_wrong(self) -> Judgement | None:
        """The first line that does not hold, or None."""
        return next((judgement for judgement in self.judgements if not judgement.holds), None)

    def __str__(self) -> str:
        return "\n".join(f"{j.line.label}. {j.line.text}    {j}" for j in self.judgements)

    def __repr__(self) -> str:
        wrong = self.first_wrong
        count = f"{len(self)} line{'s' if len(self) != 1 else ''}"
        return (
            f"<Review: {count}, {'all hold' if wrong is None else f'line {wrong.line.label} does not hold'}>"
        )
