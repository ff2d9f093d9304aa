"""The dimensions of the pieces of a line, and the terms that do not fit beside the others."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

from symnet.circuit.names import dimensions
from symnet.circuit.parts import GROUND, VoltageDrive
from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Root, Sum
from symnet.quantities import AMPERE, HERTZ, NUMBER, SECOND, VOLT, Dimension
from symnet.review.diagnosis.places import Path
from symnet.review.scope import Scope
from symnet.review.working import FIGURES

__all__ = ["Misfit", "dimension_in", "known_dimensions", "misfits", "unit_of"]

_FIGURES = {
    "w0": HERTZ,
    "f0": HERTZ,
    "Q": NUMBER,
    "zeta": NUMBER,
    "tau": SECOND,
    "f3dB": HERTZ,
    "w3dB": HERTZ,
}
_WORDS = {
    "pi": NUMBER,
    "j": NUMBER,
    "w": HERTZ,
    "omega": HERTZ,
    "jw": HERTZ,
    "jomega": HERTZ,
    "f": HERTZ,
    "D": NUMBER,
}


@dataclass(frozen=True, slots=True)
class Misfit:
    """A term whose dimension is not that of the others."""

    path: Path
    term: Expression
    dimension: Dimension
    expected: Dimension


class _Known(dict[str, "Dimension | None"]):
    """Looks a name up when it is asked for."""

    def __init__(self, scope: Scope) -> None:
        super().__init__()
        self.scope = scope
        self.own = dimensions(scope.network)

    def __missing__(self, name: str) -> Dimension | None:
        self[name] = None  # a definition in terms of itself has none
        self[name] = found = self._find(name)
        return found

    def get(self, name: str, default: Dimension | None = None) -> Dimension | None:  # type: ignore[override]
        return self[name] or default

    def _find(self, name: str) -> Dimension | None:
        scope = self.scope
        if name in scope.definitions:
            return _Units(self).of(scope.definitions[name], ())
        if name == "s":
            return HERTZ
        if name in scope.network.nodes or name == GROUND or name.startswith("v_"):
            return VOLT
        if name in self.own:
            return self.own[name]
        if name.startswith("i_"):
            return AMPERE
        if name in scope.network.drive_names:
            drive = scope.network.drives[scope.network.drive_names.index(name)]
            return VOLT if isinstance(drive, VoltageDrive) else AMPERE
        if name in FIGURES:
            return _FIGURES[FIGURES[name]]
        if name == "H" and scope.network.reads:
            read = _Units(self).of(scope.network.reads[0], ())
            driven = VOLT if isinstance(scope.network.drives[0], VoltageDrive) else AMPERE
            return read / driven if read is not None else None
        return _WORDS.get(name)


def known_dimensions(scope: Scope) -> Mapping[str, Dimension | None]:
    """The dimension of every name that a line may hold; None where nothing tells it."""
    return _Known(scope)


class _Units:
    """Dimensions of one line, with the terms that do not fit collected on the way."""

    def __init__(self, known: Mapping[str, Dimension | None]) -> None:
        self.known = known
        self.found: list[Misfit] = []

    def of(self, expression: Expression, path: Path, expected: Dimension | None = None) -> Dimension | None:
        """The dimension of an expression; None for zero and where a name has none."""
        match expression:
            case Number(value=value, dimension=dimension):
                return None if not value and dimension == NUMBER else dimension
            case Name(name=name):
                return self.known[name]
            case Product(factors=factors):
                total: Dimension | None = NUMBER
                for k, (power, factor) in enumerate(factors):
                    inner = self.of(factor, (*path, k))
                    total = None if inner is None or total is None else total * inner**power
                return total
            case Power(base=base, exponent=exponent):
                inner = self.of(base, (*path, 0))
                return None if inner is None else inner**exponent
            case Root(base=base):
                inner = self.of(base, (*path, 0))
                if inner is None:
                    return None
                half = Dimension(inner.v // 2, inner.a // 2, inner.t // 2)
                return half if half * half == inner else None
            case Sum(terms=terms):
                return self._common(tuple(term for _, term in terms), path, expected)
            case Parallel(branches=branches):
                return self._common(branches, path, expected)

    def _common(
        self, terms: Sequence[Expression], path: Path, expected: Dimension | None
    ) -> Dimension | None:
        own = [self.of(term, (*path, k)) for k, term in enumerate(terms)]
        count = Counter(dimension for dimension in own if dimension is not None)
        if not count:
            return None
        common = max(count, key=lambda d: (count[d], d == expected, d in {AMPERE, VOLT, NUMBER, SECOND}))
        for k, (term, dimension) in enumerate(zip(terms, own, strict=True)):
            if dimension is not None and dimension != common:
                self.found.append(Misfit((*path, k), term, dimension, common))
        return common


def misfits(
    sides: Sequence[Expression], known: Mapping[str, Dimension | None], *, node: bool
) -> Iterator[Misfit]:
    """The terms that do not fit, the innermost first; then the right side, when it does not fit the left."""
    units = _Units(known)
    expected = AMPERE if node else None
    whole = [units.of(side, (k,), expected) for k, side in enumerate(sides)]
    if node and any(d == AMPERE for d in whole) and len(set(whole) - {None}) > 1:
        for k, dimension in enumerate(whole):
            if dimension is not None and dimension != AMPERE:
                units.found.append(Misfit((k,), sides[k], dimension, AMPERE))
    elif whole[0] is not None and whole[1] is not None and whole[0] != whole[1]:
        units.found.append(Misfit((1,), sides[1], whole[1], whole[0]))
    yield from units.found


def dimension_in(expression: Expression, known: Mapping[str, Dimension | None]) -> Dimension | None:
    """The dimension of an expression, that of most terms of a sum; None where nothing tells it."""
    return _Units(known).of(expression, ())


def unit_of(expression: Expression, dimension: Dimension, known: Mapping[str, Dimension | None]) -> str:
    """The dimension in words: as the factors have it where that is short (V/F), else in the trade's units."""
    if isinstance(expression, Product) and len(expression.factors) == 2:
        (_, above), (power, below) = expression.factors
        a, b = (_Units(known).of(side, ()) for side in (above, below))
        if power < 0 and a is not None and b is not None and NUMBER not in {a, b} and len(str(dimension)) > 3:
            return f"{a}/{b}"
    return "a plain number" if dimension == NUMBER else str(dimension)
