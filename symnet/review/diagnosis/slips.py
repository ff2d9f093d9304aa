"""Slips in one place of a line: what stands there, what is wanted there, and the simple relation between the two.

The relations are looked up, not tried: ratio and difference of the two values modulo a prime are searched for among
small numbers (by rational reconstruction), products of the names at hand, branch currents and voltages. Each finding
is a hypothesis with the line put right; whether that line holds is tested exactly elsewhere.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from functools import cached_property
from itertools import combinations
from math import isqrt
from typing import TYPE_CHECKING, Final

from symnet.circuit.parts import class_letter
from symnet.circuit.series import is_hidden
from symnet.exact.modular import PRIME
from symnet.expressions import Expression, Name, Number, Parallel, Product, Root, Sum, names_in, negative
from symnet.quantities import NUMBER, SECOND, Dimension
from symnet.review.diagnosis.explanation import Slip
from symnet.review.diagnosis.pieces import flows_at, monomial, scaled, shown, signed, times, voltage
from symnet.review.diagnosis.places import Path, Place, put, spliced
from symnet.review.diagnosis.point import UnreadableError

if TYPE_CHECKING:
    from symnet.review.diagnosis.point import Point

__all__ = ["Finder", "Hypothesis", "fraction_of"]

_LARGEST: Final = 1000  # numerator and denominator of a factor that is told
_MOST_NAMES: Final = 12  # from which terms and factors are put together
_MOST_FACTORS: Final = 4


@dataclass(frozen=True, slots=True)
class Hypothesis:
    """A slip with the sides put right; ``cost`` orders them, the likeliest first."""

    slip: Slip
    cost: float
    sides: tuple[Expression, ...]
    sentence: str
    path: Path = ()
    name: str = ""  # the part or node it is about
    evidence: tuple[str, ...] = ()


def fraction_of(value: int) -> Fraction | None:
    """The fraction of small numbers that a residue stands for, by the continued fraction of value/prime."""
    a, b, x, y = PRIME, value % PRIME, 0, 1
    bound = isqrt(PRIME // 2)
    while b > bound:
        quotient = a // b
        a, b, x, y = b, a - quotient * b, y, x - quotient * y
    if not y or abs(b) > _LARGEST or abs(y) > _LARGEST:
        return None
    return Fraction(b, y)


@dataclass(eq=False)
class Finder:
    """Recognises slips at the places of one line, at one point.

    ``known`` has the dimensions of names; ``anything`` lets a factor have a dimension, for a line in which the
    dimensions are wrong.
    """

    point: Point
    sides: tuple[Expression, ...]
    known: Mapping[str, Dimension | None]
    anything: bool = False
    near: Sequence[str] = ()  # nodes whose currents are looked at first
    own: Sequence[str] = ()  # parts that may stand here although they are tied to others
    _values: dict[str, int] = field(default_factory=dict)

    # -- what may be put in --------------------------------------------------------------------------------------------

    @cached_property
    def spoken(self) -> tuple[str, ...]:
        """The names in the line, in the order of writing."""
        return tuple(dict.fromkeys(name.name for side in self.sides for name in names_in(side)))

    @cached_property
    def parts(self) -> tuple[str, ...]:
        """Parts and symbols that a factor may be made of: those in the line first."""
        network = self.point.scope.network
        symbols = [name for name in network.symbols() if self._worth(name) is not None]
        here = [name for name in self.spoken if name in symbols or name in self.point.scope.definitions]
        own = self.point.scope.solution.naming.names
        others = [name for name in symbols if name not in here and name in own]
        return tuple([*here, *others][:_MOST_NAMES])

    @cached_property
    def replaceable(self) -> tuple[str, ...]:
        """Parts and symbols that may stand for another: those in the line, and those that are not tied."""
        free = self.point.scope.solution.naming.names
        names = self.point.scope.network.symbols()
        return tuple(n for n in names if n in self.spoken or n in free or n in self.own)

    def may_replace(self, here: str, other: str) -> bool:
        """Whether one name may stand where another should: a tied part is not looked for where a symbol stands."""
        if other in self.point.scope.network.nodes or other in self.spoken:
            return True
        if other in self.point.scope.solution.naming.names:
            return True
        return any(part.name == here for part in self.point.scope.network.parts)

    def _worth(self, name: str) -> int | None:
        if name not in self._values:
            try:
                self._values[name] = self.point.name(name)
            except UnreadableError:
                self._values[name] = 0
        return self._values[name] or None

    @cached_property
    def factors(self) -> dict[int, dict[str, int]]:
        """Products of powers of s and at most two names, by their value; without dimension unless any may be."""
        found: dict[int, dict[str, int]] = {}
        exponents = (1, -1, 2, -2)
        singles = [{}, *({name: e} for name in self.parts for e in exponents)]
        pairs = [{a: i, b: j} for a, b in combinations(self.parts, 2) for i in (1, -1) for j in (1, -1)]
        for powers in (*singles, *pairs):
            base = self._product(powers)
            for e in (0, 1, -1, 2, -2):
                whole = {"s": e, **powers} if e else powers
                if whole and (self.anything or self._dimension(whole) in {NUMBER, None}):
                    value = base * pow(self._s, e, PRIME) % PRIME
                    found.setdefault(value, whole)
        return found

    @cached_property
    def _s(self) -> int:
        return self.point.name("s")

    def _product(self, powers: Mapping[str, int]) -> int:
        total = 1
        for name, e in powers.items():
            total = total * pow(self._worth(name) or 1, e, PRIME) % PRIME
        return total

    def _dimension(self, powers: Mapping[str, int]) -> Dimension | None:
        total = NUMBER
        for name, e in powers.items():
            own = SECOND**-1 if name == "s" else self.known.get(name)
            if own is None:
                return None
            total = total * own**e
        return total

    @cached_property
    def terms(self) -> dict[int, tuple[Fraction, Expression, str]]:
        """What a sum may lack: currents, voltages, products of s and names; with a number, and what part it is of."""
        found: dict[int, tuple[Fraction, Expression, str]] = {}
        scope = self.point.scope
        network = scope.network
        flows = [flow for node in network.nodes if not is_hidden(node) for flow in flows_at(network, node)]
        for near in (True, False):
            for flow in flows:
                if (flow.node in self.near) == near:
                    self._put_term(found, flow.leaving, flow.name)
        for node in network.nodes:
            if not is_hidden(node):
                self._put_term(found, voltage(node), "")
        for count in range(min(_MOST_FACTORS, len(self.parts)) + 1):
            for names in combinations(self.parts, count):
                powers = dict.fromkeys(names, 1)
                base = self._product(powers)
                for e in range(5):
                    value = base * pow(self._s, e, PRIME) % PRIME
                    whole = {"s": e, **powers} if e else powers
                    for factor in (1, -1, 2, -2):
                        found.setdefault(value * factor % PRIME, (Fraction(factor), monomial(whole), ""))
        return found

    def _put_term(
        self, found: dict[int, tuple[Fraction, Expression, str]], term: Expression, name: str
    ) -> None:
        try:
            value = self.point(term)
        except UnreadableError:
            return
        if value:
            for factor in (1, -1):
                found.setdefault(value * factor % PRIME, (Fraction(factor), term, name))

    # -- slips ---------------------------------------------------------------------------------------------------------

    def slips(self, found: Iterable[Place]) -> Iterator[Hypothesis]:
        """Every slip that would explain the line, at all its places."""
        for place in found:
            if place.value == place.wanted:
                continue
            yield from self._ratio(place)
            yield from self._difference(place)
            if isinstance(place.expression, Name):
                yield from self._name(place)
            if isinstance(place.expression, Sum | Parallel):
                yield from self._parallel(place)

    def _with(self, place: Place, new: Expression) -> tuple[Expression, ...]:
        return put(self.sides, place.path, new)

    def _ratio(self, place: Place) -> Iterator[Hypothesis]:
        expression = place.expression
        if not place.value or not place.wanted:
            return
        ratio = place.wanted * pow(place.value, -1, PRIME) % PRIME
        text = shown(expression)
        small = 0.05 * len(place.path) + _left(place)
        if place.is_term or isinstance(expression, Number):
            factor = fraction_of(ratio)
            if factor is not None and not (
                factor < 0 and isinstance(expression, Number) and not place.is_term
            ):
                yield self._factor(place, factor, small)
            elif (powers := self.factors.get(ratio)) is not None:
                new = times(expression, powers)
                yield Hypothesis(
                    Slip.TERM_FACTOR,
                    2 + small,
                    self._with(place, new),
                    _factor_words(text, new, powers),
                    place.path,
                )
            elif (powers := self.factors.get(-ratio % PRIME)) is not None:
                new = negative(times(expression, powers))
                words = f"{text} should be {shown(new)}: a factor {shown(monomial(powers))} and a sign"
                yield Hypothesis(Slip.TERM_FACTOR, 2.5 + small, self._with(place, new), words, place.path)
        for new, words in self._roots(place):
            yield Hypothesis(Slip.ROOT, 1.7 + small, self._with(place, new), words, place.path)
        if place.wanted * place.value % PRIME == 1 and isinstance(expression, Product | Sum):
            yield self._upside_down(place, 1.5 + small)

    def _upside_down(self, place: Place, cost: float) -> Hypothesis:
        """A piece that is one over what it should be; a factor goes to the other side of the fraction bar."""
        expression, text = place.expression, shown(place.expression)
        if isinstance(place.parent, Product) and len(place.parent.factors) > 1:
            k = place.path[-1]
            power = place.parent.factors[k][0]
            moved = expression.factors if isinstance(expression, Product) else ((1, expression),)
            turned = tuple((-power * inner, factor) for inner, factor in moved)
            factors = (*place.parent.factors[:k], *turned, *place.parent.factors[k + 1 :])
            sides = put(self.sides, place.path[:-1], Product(factors))
            words = f"{text} stands {'above' if power > 0 else 'below'} the fraction bar and belongs {'below' if power > 0 else 'above'} it"
            return Hypothesis(Slip.RECIPROCAL, cost, sides, words, place.path[:-1])
        new = _upside_down(expression)
        words = f"{text} is upside down: it should be {shown(new)}"
        return Hypothesis(Slip.RECIPROCAL, cost, self._with(place, new), words, place.path)

    @staticmethod
    def _roots(place: Place) -> Iterator[tuple[Expression, str]]:
        """A square root that was forgotten, or one too many, of a whole side."""
        expression = place.expression
        if place.parent is None and place.wanted**2 % PRIME == place.value:
            yield Root(expression), f"a square root is missing: it should be {shown(Root(expression))}"
        if isinstance(expression, Root) and place.value**2 % PRIME == place.wanted:
            yield expression.base, f"{shown(expression)} should be {shown(expression.base)}, without the root"

    def _factor(self, place: Place, factor: Fraction, small: float) -> Hypothesis:
        expression, text = place.expression, shown(place.expression)
        whole = place.parent is None
        if factor == -1:
            sides = self._with(place, negative(expression))
            if whole:
                words = f"the sign of the whole side is wrong: it should be {shown(negative(expression))}"
            else:
                sign = _sign_of(place)
                words = f"the sign of {text} is wrong: it should be {signed(-sign, expression)}, the line has {signed(sign, expression)}"
            return Hypothesis(Slip.SIGN, 1 + small, sides, words, place.path)
        new = scaled(expression, factor)
        sides = self._with(place, new)
        if isinstance(expression, Number) and expression.dimension == NUMBER:
            words = f"the number {text} should be {shown(new)}"
        elif abs(factor) == Fraction(1, 2):
            words = f"{text} is twice what it should be, {shown(new)}"
        elif abs(factor) == 2:
            words = f"{text} is half of what it should be, {shown(new)}"
        else:
            words = f"{text} should be {shown(new)}: a factor {factor}"
        if factor < 0:
            words += ", and its sign is wrong"
        return Hypothesis(Slip.FACTOR, (1.4 if factor > 0 else 2.2) + small, sides, words, place.path)

    def _difference(self, place: Place) -> Iterator[Hypothesis]:
        expression = place.expression
        small = 0.05 * len(place.path) + _left(place)
        if place.is_term and place.parent is not None and not place.wanted:
            yield Hypothesis(
                Slip.EXTRA_TERM,
                1.9 + small,
                self._with(place, Number(Fraction(0))),
                f"the term {signed(_sign_of(place), expression)} does not belong there",
                place.path,
            )
            return
        if isinstance(expression, Number) or (place.is_term and place.parent is not None):
            return  # the sum around it is the place where a term is missing
        found = self.terms.get((place.wanted - place.value) % PRIME)
        if found is None:
            return
        factor, term, name = found
        if not self._can_take(place, term):
            return
        lacking = scaled(term, abs(factor))
        sign = 1 if factor > 0 else -1
        if isinstance(lacking, Sum) and len(lacking.terms) == 1:
            sign, lacking = -sign, lacking.terms[0][1]
        pieces = expression.terms if isinstance(expression, Sum) else ((1, expression),)
        sides = self._with(place, spliced((*pieces, (sign, lacking))))
        words = f"the term {signed(sign, lacking)} is missing"
        if place.parent is not None:
            words += f" in {shown(expression)}"
        slip = Slip.MISSING_BRANCH if name else Slip.MISSING_TERM
        yield Hypothesis(slip, 2 + small + 0.02 * len(words), sides, words, place.path, name)

    def _can_take(self, place: Place, term: Expression) -> bool:
        """Whether somebody may have forgotten the term there; more of what stands there is a factor."""
        expression = place.expression
        if isinstance(expression, Sum):
            return all(own != term for _, own in expression.terms)
        if place.parent is None or isinstance(term, Number):
            return expression != term
        nodes = self.point.scope.network.nodes
        names = [piece.name for piece in (expression, term) if isinstance(piece, Name)]
        return len(names) == 2 and names[0] != names[1] and all(name in nodes for name in names)

    def _name(self, place: Place) -> Iterator[Hypothesis]:
        assert isinstance(place.expression, Name)  # noqa: S101 - asked for by the caller
        here = place.expression.name
        for other in self._like(here):
            if other != here and self._worth(other) == place.wanted and self.may_replace(here, other):
                is_node = here in self.point.scope.network.nodes
                words = f"{here} stands where {'the voltage ' if is_node else ''}{other} should"
                slip = Slip.NODE if is_node else Slip.PART
                yield Hypothesis(slip, 1.2, self._with(place, Name(other)), words, place.path, other)

    def _like(self, name: str) -> Iterator[str]:
        network = self.point.scope.network
        if name in network.nodes:
            yield from (node for node in network.nodes if not node.isdigit())
        elif name in network.symbols():
            own = self.known.get(name)
            for other in self.replaceable:
                if class_letter(other) == class_letter(name) or (
                    own is not None and self.known.get(other) == own
                ):
                    yield other

    def _parallel(self, place: Place) -> Iterator[Hypothesis]:
        expression = place.expression
        try:
            if isinstance(expression, Parallel):
                new: Expression = Sum(tuple((1, branch) for branch in expression.branches))
                words = f"{shown(expression)} should be in series: {shown(new)}"
            elif (
                isinstance(expression, Sum)
                and len(expression.terms) > 1
                and all(sign > 0 for sign, _ in expression.terms)
            ):
                new = Parallel(tuple(term for _, term in expression.terms))
                words = f"{shown(expression)} should be in parallel: {shown(new)}"
            else:
                return
            if self.point(new) == place.wanted:
                yield Hypothesis(Slip.PARALLEL, 1.3, self._with(place, new), words, place.path)
        except UnreadableError:
            return


def _left(place: Place) -> float:
    """Slips are looked for on the right side of a line first."""
    return 0.15 if place.path[0] == 0 else 0.0


def _sign_of(place: Place) -> int:
    if isinstance(place.parent, Sum):
        return place.parent.terms[place.path[-1]][0]
    return 1


def _upside_down(expression: Expression) -> Expression:
    if isinstance(expression, Product):
        factors = sorted(
            ((-power, factor) for power, factor in expression.factors), reverse=True, key=lambda f: f[0]
        )
        if len(factors) == 1 and factors[0][0] > 0:
            return factors[0][1]
        kept = [f for f in factors if not (isinstance(f[1], Number) and f[1].value == 1)]
        if len(kept) == 1 and kept[0][0] > 0:
            return kept[0][1]
        if all(power < 0 for power, _ in kept):
            kept.insert(0, (1, Number(Fraction(1))))
        return Product(tuple(kept))
    return Product(((1, Number(Fraction(1))), (-1, expression)))


def _factor_words(text: str, new: Expression, powers: Mapping[str, int]) -> str:
    if len(powers) == 1:
        ((name, e),) = powers.items()
        if e == 1:
            return f"{text} should be {shown(new)}: a factor {name} is missing"
        if e == -1:
            return f"{text} should be {shown(new)}: a factor {name} too many"
        return f"{text} should be {shown(new)}: the exponent of {name} is wrong"
    return f"{text} should be {shown(new)}: the factor {shown(monomial(powers))} is missing"
