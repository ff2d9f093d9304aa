"""The order in which a person would eliminate: one voltage after the other, in terms of as few as can be.

Two voltages are taken as given: that of the source and one more, the *base* (the output, mostly). An equation
in which a single voltage is not yet known gives that voltage; of several such equations the one with the shortest
result is taken, which goes back through a ladder from its output without a single fraction, through a feedback
section from the virtual ground, through a bridged T from its star node. An equation in which nothing is unknown
relates source and base, and ends the derivation. Where every equation has two unknown voltages or more, one of
them is carried along as if it were given (tearing), until an equation gives it.

A denominator that is a sum with s in it is abbreviated by a name of its own, so that lines stay short. Which base
makes the shortest derivation is found by trying each.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from itertools import product
from random import Random
from typing import TYPE_CHECKING, Final, TypeAlias

from symnet.errors import Fault, LimitError, SingularError
from symnet.exact.byhand.currents import Equation, node_equations
from symnet.exact.byhand.forms import Form, add, times
from symnet.exact.byhand.frame import Frame
from symnet.exact.modular import PRIME
from symnet.exact.polynomials import modulo

if TYPE_CHECKING:
    from sympy.polys.fields import FracElement
    from sympy.polys.rings import PolyElement

__all__ = ["Carried", "Elimination", "Move", "Solved", "Updated", "eliminate"]

# Networks of more voltages than this are done from the output only.
_MOST_TRIED: Final = 7
# What an abbreviation costs while the next equation is chosen: both are tried, since it pays only if much is left.
_PRICES: Final = (1000, 0)
# What an abbreviation, and a voltage that is carried along, cost the reader, in names written.
_LET_COSTS: Final = 20
_CARRYING_COSTS: Final = 20
# The output is the base that everybody expects; another must make the derivation shorter by this much.
_CLEARLY: Final = 0.9
# Nobody reads a derivation beyond this, in names written.
_MOST_COST: Final = 3000


@dataclass(frozen=True, slots=True)
class Solved:
    """``equation`` gave ``voltage`` as ``value``, in terms of the voltages taken as given.

    ``known`` is what each voltage was worth before; ``let`` an abbreviation that was made for it.
    """

    voltage: str
    value: Form
    equation: Equation
    known: dict[str, Form]
    let: tuple[str, PolyElement] | None = None


@dataclass(frozen=True, slots=True)
class Carried:
    """From here on the voltage is taken as given, since every equation left has two unknown ones or more."""

    voltage: str


@dataclass(frozen=True, slots=True)
class Updated:
    """A voltage that was carried is known now, and is put into the value of another."""

    voltage: str
    value: Form
    by: str


Move: TypeAlias = Solved | Carried | Updated


@dataclass
class Elimination:
    """The moves, what they cost, and at the end the read and the source in terms of one voltage."""

    frame: Frame
    base: str
    moves: list[Move] = field(default_factory=list)
    known: dict[str, Form] = field(default_factory=dict)
    lets: dict[str, PolyElement] = field(default_factory=dict)
    cost: int = 0
    read: Form = field(default_factory=dict)

    @property
    def meanings(self) -> dict[str, FracElement]:
        """Every abbreviation, and every impedance that kept its name, in the names that remain."""
        found = {name: self.frame.worth(name) for name in self.frame.kept}
        for name, meaning in self.lets.items():
            found[name] = self._with(found, meaning)
        return found

    @property
    def point(self) -> list[int]:
        """A random point modulo a prime at which abbreviations have the value of what they stand for."""
        ring = self.frame.ring
        random = Random("by hand")
        values = {str(symbol): random.randrange(1, PRIME) for symbol in ring.symbols}
        for name in self.frame.kept:
            worth = self.frame.worth(name)
            n, d = (modulo(side, list(values.values()), PRIME) for side in (worth.numer, worth.denom))
            values[name] = n * pow(d, -1, PRIME) % PRIME
        for name, meaning in self.lets.items():
            values[name] = modulo(meaning, list(values.values()), PRIME)
        return list(values.values())

    def expanded(self, value: FracElement) -> FracElement:
        """A fraction with every abbreviation written out."""
        meanings = self.meanings
        return self._with(meanings, value.numer) / self._with(meanings, value.denom) if meanings else value

    def _with(self, meanings: dict[str, FracElement], polynomial: PolyElement) -> FracElement:
        """A polynomial with these names replaced: collected by their powers, each of which is written out once."""
        ring = self.frame.ring
        names = list(map(str, ring.symbols))
        places = [names.index(name) for name in meanings]
        parts: dict[tuple[int, ...], dict[tuple[int, ...], int]] = {}
        for monomial, c in polynomial.items():
            rest = list(monomial)
            for place in places:
                rest[place] = 0
            parts.setdefault(tuple(monomial[place] for place in places), {})[tuple(rest)] = c
        total = self.frame.field.zero
        for exponents, terms in parts.items():
            product = self.frame.field(ring.from_dict(terms))
            for meaning, exponent in zip(meanings.values(), exponents, strict=True):
                product *= meaning**exponent
            total += product
        return total


def eliminate(frame: Frame, *, is_long: bool = False) -> Elimination:
    """The shortest derivation found; of a long one, that from the output only.

    Raises SingularError where the equations do not give the read.
    """
    voltages = list(frame.spare)
    reads = [name for name in frame.linear(frame.read) if name != frame.source]
    bases = [*reads, *(name for name in voltages if name != frame.source and name not in reads)]
    if is_long or len(voltages) > _MOST_TRIED:
        bases = bases[:1]
    best: Elimination | None = None
    refusal: LimitError | None = None
    for base, price in product(bases or [frame.source], _PRICES):
        try:
            found = _Worker(frame, base, price, _MOST_COST if best is None else best.cost).run()
        except LimitError as error:
            refusal = refusal or error
            continue
        if found is not None and (best is None or found.cost + 4 < best.cost * _CLEARLY):
            best = found
    if best is None and refusal is not None:
        raise refusal
    if best is None:
        raise SingularError(
            Fault("the equations of the nodes do not give what is read", "see derive(net) for what is open")
        )
    return best


class _Worker:
    """One elimination with a given base."""

    def __init__(self, frame: Frame, base: str, price: int, most: int) -> None:
        self.frame, self.price, self.most = frame, price, most
        self.one = frame.field.one
        self.result = Elimination(frame, base)
        self.given = list(dict.fromkeys([frame.source, base]))
        self.result.known = {name: {name: self.one} for name in self.given}
        self.left: list[tuple[Equation, Form]] = [(eq, eq.form()) for eq in node_equations(frame)]
        self.read = frame.linear(frame.read)

    def run(self) -> Elimination | None:
        while not self._is_done():
            if self.result.cost > self.most:
                raise LimitError("the derivation would have more lines than anybody reads")
            if not (self._relate() or self._solve() or self._carry()):
                return None
        self.result.read = self._put_in(self.read)
        if self.result.lets:
            self.result.cost += (_LET_COSTS - self.price) * len(self.result.lets)
            end = self.result.known.get(self.frame.source, {})
            self.result.cost += _cost({name: self.result.expanded(weight) for name, weight in end.items()})
        if self.read != {self.result.base: self.one}:
            self.result.cost += _cost(self.result.read)
        return self.result

    def _is_done(self) -> bool:
        known = self.result.known
        if self.read.keys() <= {self.frame.source}:
            return True
        if len(self.given) > 1 or any(name not in known for name in self.read):
            return False
        return all(name in self.given for form in (self._put_in(self.read),) for name in form)

    def _put_in(self, form: Form) -> Form:
        total: Form = {}
        for name, weight in form.items():
            known = self.result.known.get(name, {name: self.one})
            total = add(total, times(weight, known))
        return total

    def _without_hidden_zeros(self, form: Form) -> Form:
        """Without factors that are zero once abbreviations are written out."""
        if not self.result.lets and not self.frame.kept:
            return form
        point = self.result.point
        return {
            name: weight
            for name, weight in form.items()
            if modulo(weight.numer, point, PRIME) or self.result.expanded(weight)
        }

    def _unknown(self, form: Form) -> list[str]:
        return [name for name in form if name not in self.result.known]

    def _relate(self) -> bool:
        """An equation in which everything is known gives one of the voltages taken as given."""
        for k, (equation, form) in enumerate(self.left):
            if self._unknown(form):
                continue
            relation = self._without_hidden_zeros(self._put_in(form))
            del self.left[k]
            if not relation:
                return True
            name = self._chosen(relation)
            value = times(-1 / relation[name], {n: w for n, w in relation.items() if n != name})
            self._solved(name, value, equation)
            self.given.remove(name)
            self._update(name, value)
            return True
        return False

    def _chosen(self, relation: Form) -> str:
        """The voltage carried along last, then the source, then the base."""
        carried = [name for name in self.given if name not in {self.frame.source, self.result.base}]
        return next(
            name for name in [*reversed(carried), self.frame.source, self.result.base] if name in relation
        )

    def _update(self, name: str, value: Form) -> None:
        """What was expressed by a voltage that is known now."""
        known = self.result.known
        known[name] = value
        for other, form in list(known.items()):
            if other != name and name in form:
                rest = {n: w for n, w in form.items() if n != name}
                new = add(rest, times(form[name], value))
                if name not in {self.frame.source, self.result.base} and self._is_needed(other):
                    self.result.moves.append(Updated(other, new, name))
                    self.result.cost += _cost(new)
                known[other] = new

    def _is_needed(self, name: str) -> bool:
        return name in self.read or any(name in form for _, form in self.left)

    def _solve(self) -> bool:
        options = []
        for k, (_, form) in enumerate(self.left):
            unknown = self._unknown(form)
            if len(unknown) == 1:
                name = unknown[0]
                rest = self._without_hidden_zeros(self._put_in({n: w for n, w in form.items() if n != name}))
                value, let = self._abbreviated(name, (times(-1 / form[name], rest)))
                options.append((self._cost(value, let), k, name, value, let))
        if not options:
            return False
        _, k, name, value, let = min(options, key=lambda option: option[:2])
        equation, _ = self.left.pop(k)
        self._solved(name, value, equation, let)
        self.result.known[name] = value
        return True

    def _carry(self) -> bool:
        """Take a voltage as given: one of those in the equation with the fewest unknown ones."""
        waiting = [(len(self._unknown(form)), k, form) for k, (_, form) in enumerate(self.left)]
        waiting = [entry for entry in waiting if entry[0]]
        if not waiting:
            return False
        _, _, form = min(waiting, key=lambda entry: entry[:2])
        counts = {name: sum(name in other for _, other in self.left) for name in self._unknown(form)}
        name = max(counts, key=lambda n: counts[n])
        self.result.moves.append(Carried(name))
        self.result.cost += _CARRYING_COSTS
        self.given.append(name)
        self.result.known[name] = {name: self.one}
        return True

    def _abbreviated(self, name: str, value: Form) -> tuple[Form, tuple[str, PolyElement] | None]:
        """The value with its common denominator abbreviated, if that is a sum with s in it; a new abbreviation."""
        ring = self.frame.ring
        common = ring.one
        for weight in value.values():
            common = common.lcm(weight.denom)
        core = common.primitive()[1]
        core = core.exquo(_common_monomial(core))
        if len(core) < 2 or not any(monomial[0] for monomial in core):
            return value, None
        if all(c < 0 for c in core.values()):
            core = -core
        known = next((n for n, meaning in self.result.lets.items() if meaning == core), None)
        let = None
        if known is None:
            known = self.frame.spare[name]
            let = (known, core)
        short = ring.gens[list(map(str, ring.symbols)).index(known)]
        frac = self.frame.field
        factor = frac(core) / frac(short)
        return {n: weight * factor for n, weight in value.items()}, let

    def _cost(self, value: Form, let: tuple[str, PolyElement] | None) -> int:
        return _cost(value) + (self.price + len(let[1]) if let else 0)

    def _solved(
        self, name: str, value: Form, equation: Equation, let: tuple[str, PolyElement] | None = None
    ) -> None:
        if let is not None:
            self.result.lets[let[0]] = let[1]
        self.result.moves.append(Solved(name, value, equation, dict(self.result.known), let))
        self.result.cost += self._cost(value, let)


def _cost(value: Form) -> int:
    """How much there is to write."""
    total = 0
    for weight in value.values():
        total += sum(map(_weight, weight.numer)) + 4 * (len(weight.denom) - 1) * 10
        total += sum(map(_weight, weight.denom)) + (3 if weight.denom != 1 else 0)
    return total


def _weight(monomial: Sequence[int]) -> int:
    return 1 + sum(monomial)


def _common_monomial(polynomial: PolyElement) -> PolyElement:
    least = [min(exponents) for exponents in zip(*polynomial, strict=True)]
    return polynomial.ring.from_dict({tuple(least): polynomial.ring.domain.one})
