"""What a joint choice of values has found: the values, how near they come, the proof, and the runners-up."""

from __future__ import annotations

from dataclasses import dataclass, field
from fractions import Fraction
from typing import TYPE_CHECKING

from symnet.quantities import NUMBER, Dimension, Quantity, engineering
from symnet.typeset.displayed import Displayed
from symnet.values.choosing_aim import Objective
from symnet.values.preferred import Entry, Preferred

if TYPE_CHECKING:
    from collections.abc import Mapping

    from symnet.circuit.network import Network

__all__ = ["Candidate", "Choice", "Chosen", "Outcome"]


@dataclass(frozen=True, slots=True)
class Outcome:
    """One figure of a candidate: f0 in Hz, Q, K or the largest error in dB; what was wanted, and what comes out.

    ``wanted`` is None where nothing was asked of it. ``where`` is the frequency in Hz of a largest error.
    """

    name: str
    wanted: float | None
    obtained: float
    dimension: Dimension = NUMBER
    unit: str = ""
    where: float | None = None

    @property
    def error(self) -> float | None:
        """obtained/wanted - 1."""
        return None if not self.wanted else self.obtained / self.wanted - 1


@dataclass(frozen=True, slots=True)
class Chosen:
    """The value of one part: its name and the entry of its list."""

    name: str
    entry: Entry
    dimension: Dimension

    def __str__(self) -> str:
        sign = ": " if self.entry.how else " = "
        return f"{self.name}{sign}{self.entry.text(self.dimension)}"


@dataclass(frozen=True, slots=True)
class Candidate:
    """One combination: ``error`` is the objective (a fraction, or dB in a band).

    ``alike`` are the other combinations in the ranges that give the same response: parts exchanged, or everything at
    another impedance level; ``alike_count`` is how many there are.
    """

    parts: tuple[Chosen, ...]
    error: float
    outcomes: tuple[Outcome, ...]
    alike: tuple[tuple[Chosen, ...], ...] = ()
    alike_count: int = 0

    @property
    def values(self) -> Mapping[str, Quantity]:
        """The value of every part that was chosen."""
        return {part.name: Quantity(part.entry.value, part.dimension) for part in self.parts}


@dataclass(frozen=True, slots=True, repr=False)
class Choice(Displayed):
    """Made by :func:`symnet.choose`.

    ``network`` has the chosen values; ``best`` and ``runners_up`` are the candidates in rising order of ``error``;
    ``rounded`` is each exact value of the network rounded by itself, where it had them. ``lists`` are the values that
    were allowed for each part, ``kept`` the parts that keep theirs. ``combinations`` is how many there are,
    ``evaluations`` how often H was computed, ``least`` a lower bound of the error of all of them, and ``complete``
    says that the bound is reached: no better combination, and no better runner-up, exists in the lists.
    """

    network: Network
    label: str
    objective: Objective
    goal: str
    best: Candidate
    runners_up: tuple[Candidate, ...]
    rounded: Candidate | None
    lists: tuple[tuple[str, Preferred], ...]
    kept: tuple[tuple[str, Quantity], ...]
    combinations: int
    evaluations: int
    least: float
    complete: bool
    how: str
    notes: tuple[str, ...] = field(default=())

    @property
    def values(self) -> Mapping[str, Quantity]:
        """The chosen value of every part."""
        return self.best.values

    @property
    def error(self) -> float:
        """The objective for the best candidate: a fraction, or dB in a band."""
        return self.best.error

    @property
    def optimal(self) -> bool:
        """Whether it is proved that no combination of these lists is better."""
        return self.complete or self.error <= self.least

    @property
    def gap(self) -> float:
        """By how much a better combination could at most be better; 0 with the proof that there is none."""
        return 0.0 if self.optimal else self.error - self.least

    def written(self, error: float) -> str:
        """An error in the unit of the objective."""
        if error < 1e-12:
            error = 0.0
        if self.objective == "dB":
            return f"{engineering(Fraction(error), digits=3)} dB"
        return f"{engineering(Fraction(100 * error), digits=3)} %"

    @property
    def proof(self) -> str:
        """What was searched, and what is proved, in one sentence."""
        count = f"{self.combinations:,}".replace(",", " ")
        work = f"{self.evaluations:,}".replace(",", " ")
        if self.how == "every combination":
            return f"optimal: all {count} combinations were computed"
        if self.complete:
            return f"optimal: branch and bound over {count} combinations, {work} evaluations of H, none left open"
        if self.optimal:
            return (
                f"optimal: branch and bound over {count} combinations, {work} evaluations of H;"
                " better runners-up may exist"
            )
        return (
            f"not proved optimal: of {count} combinations, after {work} evaluations of H, one could still reach"
            f" {self.written(self.least)}, {self.written(self.gap)} less (the gap to the bound); a larger work= goes on"
        )

    def __repr__(self) -> str:
        parts = ", ".join(str(part) for part in self.best.parts)
        return f"<Choice: {parts}; {self.goal}: {self.written(self.error)}; {self.proof.partition(':')[0]}>"
