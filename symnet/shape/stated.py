"""What can be said of H in symbols: conditions, the ways to fulfil them, and the formulas that then hold.

Values only; :mod:`symnet.shape.conditions` makes them. Every formula is a tree of :mod:`symnet.typeset`, so that
text, LaTeX and HTML come from the same thing.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final, TypeAlias

from symnet.typeset.displayed import Displayed
from symnet.typeset.tree import Tree
from symnet.typeset.writing import to_text

__all__ = ["Alternative", "Condition", "Conditions", "Formula", "Relation"]

#: Characters of a repr, which is one line; all of it is in the text.
_LONGEST_REPR: Final = 450

#: left, sign ("=", ">" or ">="), right
Relation: TypeAlias = tuple[Tree, str, Tree]


@dataclass(frozen=True, slots=True)
class Alternative:
    """One way to fulfil a condition: parts with the value they must have, and relations that are left.

    ``needed`` are values among them that must come out positive, where no relation says when they do. ``worked``
    are the values that hang on known numbers only, with their unit.
    """

    values: tuple[tuple[str, Tree], ...]
    relations: tuple[Relation, ...] = ()
    needed: tuple[str, ...] = ()
    worked: tuple[tuple[str, str], ...] = ()

    def worked_out(self, name: str) -> str:
        """What stands behind the formula of a name, such as " = 20 nF", or an empty text."""
        return next((f" = {text}" for known, text in self.worked if known == name), "")

    def __str__(self) -> str:
        found = [f"{name} = {to_text(tree)}{self.worked_out(name)}" for name, tree in self.values]
        found += [f"{to_text(a)} {sign} {to_text(b)}" for a, sign, b in self.relations]
        return " and ".join(found) + (
            f" (where {', '.join(self.needed)} must be positive)" if self.needed else ""
        )


@dataclass(frozen=True, slots=True)
class Formula:
    """A figure of the shape in the parts: name = factor * tree, in Hz for f and in seconds for T; ``worked`` its number."""

    name: str
    tree: Tree
    factor: float = 1.0
    worked: str = ""

    def __str__(self) -> str:
        factor = "" if self.factor == 1 else f"{self.factor:.5g}*"
        worked = f" = {self.worked}" if self.worked else ""
        return f"{self.name} = {factor}{to_text(self.tree)}{worked}"


@dataclass(frozen=True, slots=True)
class Condition:
    """When H is a member of one family: ``status`` is "always", "never", "if" (and only if) or "open".

    ``alternatives`` are the ways in which it can be; ``reason`` says why never, or why it is left open.
    ``formulas`` are the references of the shape in the parts; T is the group delay at DC. ``symbols`` are numbers
    that stand in the alternatives as b1, b2, ..., the normalised coefficients of a family that has no formula for them.
    """

    name: str
    status: str
    alternatives: tuple[Alternative, ...] = ()
    reason: str = ""
    formulas: tuple[Formula, ...] = ()
    symbols: tuple[tuple[str, float], ...] = ()

    @property
    def with_symbols(self) -> str:
        """What b1, b2, ... stand for, or an empty text."""
        if not self.symbols:
            return ""
        told = ", ".join(f"{name} = {value:.5g}" for name, value in self.symbols)
        return f"with D = 1 + {self.symbols[0][0]}*x + ..., x = s/w0 (low-pass): {told}"

    def __str__(self) -> str:
        if self.status in {"never", "open"}:
            return f"{self.name}: {self.status}, {self.reason}"
        ways = " or ".join(f"({a})" if len(self.alternatives) > 1 else str(a) for a in self.alternatives)
        when = "always" if self.status == "always" else f"if and only if {ways}"
        when += f", {self.with_symbols}" if self.symbols else ""
        then = ", ".join(map(str, self.formulas))
        return f"{self.name}: {when}" + (f", then {then}" if then else "")


@dataclass(frozen=True, slots=True, repr=False)
class Conditions(Displayed):
    """The verdict on H in symbols: one condition for each family, what they assume, and Q for order 2.

    True in a condition of Python when H is a member of some family whatever its parts are.
    """

    order: int
    band: str
    conditions: tuple[Condition, ...] = ()
    assumption: str = ""
    quality: Tree | None = None
    quality_bound: str = ""
    note: str = ""

    def __bool__(self) -> bool:
        return any(condition.status == "always" for condition in self.conditions)

    def __str__(self) -> str:
        return self.verdict

    def __repr__(self) -> str:
        text = self.verdict
        if len(text) > _LONGEST_REPR:
            text = text[: text.rfind("; ", 0, _LONGEST_REPR)] + "; ..."
        return f"<Conditions: {text}>"

    @property
    def verdict(self) -> str:
        """All conditions in one sentence, with the assumption."""
        found = [str(condition) for condition in self.conditions]
        found += [self.quality_bound.partition(", because")[0]] if self.quality_bound else []
        found += [self.note] if self.note else []
        return "; ".join(found) + (f" (assuming {self.assumption})" if self.assumption else "")

    def rows(self) -> tuple[tuple[str, str], ...]:
        """The conditions line by line."""
        rows = []
        if self.quality is not None:
            rows.append(
                ("Q", to_text(self.quality) + (f"; {self.quality_bound}" if self.quality_bound else ""))
            )
        for condition in self.conditions:
            name, _, text = str(condition).partition(": ")
            rows.append((name, text))
        rows += [("note", self.note)] if self.note else []
        rows += [("assumption", self.assumption)] if self.assumption else []
        return tuple(rows)
