"""Lines that hold in a limit: a part that was left out, or sections taken as if they did not load each other.

Near an end of a name (zero or infinity) a side is the quotient of its lowest or highest powers of the name
(:mod:`symnet.review.limiting`). A line that does not name a part at all and holds as the part goes to an end has left
it out; one that names it holds only while the part is far larger or smaller than its neighbours.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property
from itertools import combinations, product
from typing import TYPE_CHECKING, Final

from symnet.circuit.parts import Branch
from symnet.expressions import Expression, names_in
from symnet.review.algebra import Value
from symnet.review.checked import value_of
from symnet.review.diagnosis.explanation import Explanation, Slip
from symnet.review.diagnosis.quotients import quotient_of
from symnet.review.limiting import Near
from symnet.typeset.tree import Atom, Quotient, power, times
from symnet.typeset.writing import to_text

if TYPE_CHECKING:
    from symnet.review.coefficients import Comparison
    from symnet.review.diagnosis.quotients import Quotient as Pair
    from symnet.review.scope import Scope

__all__ = ["LeftOut"]

_MOST_NAMES: Final = 12
_MOST_TOGETHER: Final = 3  # parts left out at once


@dataclass(eq=False)
class LeftOut:
    """One false line, left = right, and the ends of names at which it holds."""

    scope: Scope
    sides: tuple[Expression, Expression]
    of: Expression | None
    comparison: Comparison | None

    @cached_property
    def quotients(self) -> tuple[Pair, Pair] | None:
        """Both sides with the solution put in, as quotients; None where they are too long."""
        left, right = (quotient_of(self.scope, value_of(self.scope, side, self.of)) for side in self.sides)
        return (left, right) if left and right and left[0] and right[0] else None

    def _closed(self) -> list[Expression]:
        """The sides that hold parts and s only, no voltage or current."""
        return [side for side in self.sides if not self._unknowns(side)]

    def _unknowns(self, side: Expression) -> bool:
        value = value_of(self.scope, side, self.of)
        algebra = self.scope.solution.algebra
        sides = (value.numerator, value.denominator)
        held = any(":" in name for p in sides for m in p for name in algebra.exponents(m))
        figures = any(self.scope.is_figure(name) or name in {"H", "D"} for name in self._spoken(side))
        return held or figures

    def _spoken(self, side: Expression) -> set[str]:
        """The names in a side, those of its definitions included."""
        found: set[str] = set()
        waiting = [name.name for name in names_in(side)]
        while waiting:
            name = waiting.pop()
            if name not in found:
                found.add(name)
                if name in self.scope.definitions:
                    waiting += [inner.name for inner in names_in(self.scope.definitions[name])]
        return found

    @cached_property
    def names(self) -> tuple[str, ...]:
        """The parts and symbols that the sides depend on in the network."""
        if self.quotients is None:
            return ()
        algebra = self.scope.solution.algebra
        used = {
            name
            for pair in self.quotients
            for side in pair
            for monomial in side
            for name in algebra.exponents(monomial)
        }
        own = self.scope.solution.naming.generators.names[1:]
        return tuple(name for name in own if name in used)[:_MOST_NAMES]

    def explanations(self) -> Iterator[Explanation]:
        """What was left out, the fewest parts first; then the limits in which the line would hold."""
        spoken = [self._spoken(side) for side in self._closed() or self.sides]
        absent = [name for name in self.names if not all(name in said for said in spoken)]
        if len(spoken) > 1 and not self._closed():
            absent = [name for name in self.names if not any(name in said for said in spoken)]
        for count in range(1, min(_MOST_TOGETHER, len(absent)) + 1):
            ends = list(self._ends(absent, count, finite=True))
            if ends:
                ends.sort(key=lambda way: not any(self._node_of(name) for name, _ in way))
                yield self._left_out(ends)
                return
        present = [name for name in self.names if name not in absent]
        ends = list(self._ends(present, 1, finite=False))
        if ends and self._only_missing():
            yield self._loading(ends)

    def _ends(
        self, names: Sequence[str], count: int, *, finite: bool
    ) -> Iterator[tuple[tuple[str, bool], ...]]:
        """Names with the ends (True: infinity) at which the line holds."""
        for chosen in combinations(names, count):
            for ends in product((False, True), repeat=count):
                way = tuple(zip(chosen, ends, strict=True))
                if self._holds(way, finite=finite):
                    yield way

    def _holds(self, way: Sequence[tuple[str, bool]], *, finite: bool) -> bool:
        assert self.quotients is not None  # noqa: S101 - there are no names otherwise
        algebra = self.scope.solution.algebra
        sides = []
        for top, bottom in self.quotients:
            powers = []
            quotient = top, bottom
            for name, to_infinity in way:
                value = Value(algebra, quotient[0]) / Value(algebra, quotient[1])
                power, above, below = Near(name, to_infinity).leading(self.scope, value)
                powers.append(power)
                quotient = above, below
            sides.append((powers, quotient))
        (one, (a, b)), (two, (c, d)) = sides
        if one != two or not a or (finite and any(one)):
            return False
        return not algebra.add(algebra.multiply(a, d), algebra.multiply(c, b), -1)

    # -- words -----------------------------------------------------------------------------------------------------------

    def _node_of(self, name: str) -> str:
        """The node of the line that a part hangs on."""
        part = next((p for p in self.scope.network.parts if p.name == name and isinstance(p, Branch)), None)
        nodes = [n.name for n in names_in(self.sides[0])]
        drives = {node for drive in self.scope.network.drives for node in drive.nodes}
        return next((node for node in nodes if part and node in part.nodes and node not in drives), "")

    def _left_out(self, ends: Sequence[tuple[tuple[str, bool], ...]]) -> Explanation:
        first = ends[0]
        names = " and ".join(name for name, _ in first)
        ways = " or ".join(_written(way) for way in ends[:3])
        name, to_infinity = first[0]
        node = self._node_of(name)
        verb = "is" if len(first) == 1 else "are"
        if node and to_infinity and len(first) == 1:
            words = f"at node {node} the current through {name} is left out: the line holds only for {ways}"
            slip = Slip.LOADING
        else:
            words = f"{names} {verb} left out: the line holds only for {ways}"
            slip = Slip.LEFT_OUT
        return Explanation(slip, words)

    def _loading(self, ends: Sequence[tuple[tuple[str, bool], ...]]) -> Explanation:
        ways = " or ".join(_written(way) for way in ends[:6])
        missing = ", ".join(self._missing_terms())
        many = "s" if len(self._missing_terms()) > 1 else ""
        verb = "are" if many else "is"
        words = f"the sections load each other: the term{many} {missing} {verb} missing"
        return Explanation(Slip.LOADING, words, (f"they do not load each other only in the limit {ways}",))

    def _only_missing(self) -> bool:
        wrong = self.comparison.wrong if self.comparison is not None else ()
        return bool(wrong) and all(
            c.missing
            and not c.extra
            and c.side == "denominator"
            and not any(isinstance(tree, Quotient) for tree in c.missing)
            for c in wrong
        )

    def _missing_terms(self) -> list[str]:
        if self.comparison is None:
            return []
        return [
            to_text(times(power(Atom("s"), c.power), term))
            for c in self.comparison.wrong
            for term in c.missing
        ]


def _written(way: Sequence[tuple[str, bool]]) -> str:
    return " and ".join(f"{name} -> {'inf' if to_infinity else '0'}" for name, to_infinity in way)
