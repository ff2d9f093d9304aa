"""The shortest way to write a polynomial in part names: common factors out, brackets where they save symbols.

An expanded coefficient such as R1*C1 + R1*C2 + R2*C2 hides what a designer looks for. Factors come first
(:mod:`symnet.exact.readable.packed`). In what does not factor, find d and q with p = d*q + r where no term is made twice,
take the pair that saves most names, go on with d, q and r. Candidates are the names and the pairs of terms that
are alike but for a common part, each grown to the largest rectangle of terms it belongs to. This is the algebraic
factoring of multi-level logic (Brayton and McMullen 1982, Rajski and Vasudevamurthy 1992; from memory), where
every term is a product; here coefficients are carried along.

Exponents below zero are not packed: a name under the fraction bar is a name of its own (``inverse``).

Work is bounded: the search widens only for short sums (``_WIDTH``; wider gave the same forms for RC ladders of 3
to 5 sections), and a sum of more than LONGEST_GROUPED terms is left as it is, its first LONGEST_PLAIN terms
written and the others counted. Equal input gives equal output: ties fall to the order of the ring.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from math import gcd
from typing import Final, TypeAlias

from symnet.exact.readable.packed import LONGEST_GROUPED, Factors, Polynomial, Space
from symnet.typeset.length import BRACKETS, EXPONENT, NAME, NESTED, SIGN, length_of_number
from symnet.typeset.tree import Atom, Omitted, Sum, Tree, minus, number, over, power, times

__all__ = ["LONGEST_PLAIN", "Grouping", "Place", "kind_of", "kind_of_name"]

#: So many terms of a sum that is not grouped are written; the others are counted.
LONGEST_PLAIN: Final = 24
# How many candidates are followed for a sum of at most so many terms; one for longer sums.
_WIDTH: Final = ((4, 4), (8, 2))

#: where a factor stands in a product: its kind, name before bracket, order of the ring
Place: TypeAlias = tuple[int, int, int]


def kind_of_name(name: str) -> int:
    """Where a name stands in a product: s, then gains and other letters, then R, L, C (class letters of IEEE 315).

    >>> sorted(["C1", "R1", "A1.R2", "K", "L1", "s"], key=kind_of_name)
    ['s', 'K', 'R1', 'A1.R2', 'L1', 'C1']
    """
    if name == "s":
        return 0
    return {"R": 2, "Z": 2, "L": 3, "M": 3, "C": 4}.get(name.rpartition(".")[2][:1], 1)


def kind_of(exponents: Mapping[str, int]) -> int | None:
    """The kind of a product of names: that of R1*R2/R3 is R, of R1*C1*K mixed (None), of R2/R1 a plain number (1)."""
    total: dict[int, int] = {}
    for name, e in exponents.items():
        kind = kind_of_name(name)
        total[kind] = total.get(kind, 0) + e
    kinds = [(kind, e) for kind, e in total.items() if e]
    if not kinds:
        return 1
    (kind, e), *others = kinds
    return kind if not others and (e == 1 or kind == 1) else None


@dataclass(frozen=True)
class _Term:
    """coefficient * monomial * factors, each factor a sum of at least two terms."""

    coefficient: int
    monomial: int
    factors: tuple[tuple[_Term, ...], ...] = ()


_Form: TypeAlias = tuple[_Term, ...]


@dataclass
class Grouping(Space):
    """A space that writes its polynomials; it remembers the forms it has found."""

    _forms: dict[frozenset[tuple[int, int]], tuple[int, _Form]] = field(default_factory=dict, repr=False)
    _sums: dict[frozenset[tuple[int, int]], tuple[int, _Form]] = field(default_factory=dict, repr=False)

    def tree(self, p: Polynomial) -> Tree:
        """The shortest form found, as a tree."""
        if not p:
            return number(0)
        if len(p) > LONGEST_GROUPED:
            return self._plain(p)
        return self._build(self._form(p)[1])

    def _plain(self, p: Polynomial) -> Tree:
        order = sorted(p, reverse=True)
        shown = [self._signed(_Term(p[m], m)) for m in order[:LONGEST_PLAIN]]
        left = len(order) - LONGEST_PLAIN
        return Sum((*shown, (1, Omitted(left)))) if left > 0 else Sum(tuple(shown))

    def _form(self, p: Polynomial) -> tuple[int, _Form]:
        """The cost of the best form of p, and the form."""
        key = frozenset(p.items())
        known = self._forms.get(key)
        if known is not None:
            return known
        coefficient, monomial, found = self.factors(p)
        result: tuple[int, _Form]
        if not found:
            result = self._cost(coefficient, monomial), (_Term(coefficient, monomial),)
        elif len(found) == 1 and found[0][1] == 1 and abs(coefficient) == 1 and not monomial:
            cost, form = self._sum(found[0][0])
            result = cost, form if coefficient > 0 else _negative(form)
        else:
            result = self._factored_form(coefficient, monomial, found)
            if not self.is_multilinear(p):
                # With powers the factors can be longer than their product: x^3 - 1.
                coefficient, monomial, core = self.content(p)
                cost, form = self._sum(core)
                if abs(coefficient) > 1 or monomial:
                    cost += self._cost(coefficient, monomial) + _brackets_of(form)
                    form = (_Term(coefficient, monomial, (form,)),)
                elif coefficient < 0:
                    form = _negative(form)
                result = min(result, (cost, form), key=lambda found: found[0])
            # So can a number in front of a short sum: 3 + 3*K.
            result = min(result, self._flat(p), key=lambda found: found[0])
        self._forms[key] = result
        return result

    def _factored_form(self, coefficient: int, monomial: int, found: Factors) -> tuple[int, _Form]:
        cost = self._cost(coefficient, monomial) if abs(coefficient) > 1 or monomial else 0
        forms: list[_Form] = []
        for block, exponent in found:
            block_cost, block_form = self._sum(block)
            cost += block_cost + _brackets_of(block_form) + EXPONENT * (exponent > 1)
            forms.extend([block_form] * exponent)
        return cost, (_Term(coefficient, monomial, tuple(forms)),)

    def _cost(self, coefficient: int, monomial: int) -> int:
        cost = sum(NAME + EXPONENT * (e > 1) for e in self.unpack(monomial) if e) if monomial else 0
        return cost + (length_of_number(abs(coefficient)) if abs(coefficient) != 1 or not cost else 0)

    def _sum(self, p: Polynomial) -> tuple[int, _Form]:
        """The best form of a sum without common factors."""
        key = frozenset(p.items())
        known = self._sums.get(key)
        if known is None:
            known = self._sums[key] = self._bracketed(p)
        return known

    def _bracketed(self, p: Polynomial) -> tuple[int, _Form]:
        best = self._flat(p)
        plain = best[1]
        if len(p) < 3:
            return best
        width = next((w for most, w in _WIDTH if len(p) <= most), 1)
        for d, q in self._candidates(p)[:width]:
            made = self.multiply(d, q)
            r = {m: c for m, c in p.items() if m not in made}
            cost_d, form_d = self._form(d)
            cost_q, form_q = self._form(q)
            cost_r, form_r = self._form(r) if r else (-SIGN, ())
            joined = self._product(form_d, form_q)
            brackets = sum(_brackets_of(form) for form in (form_d, form_q) if len(form) > 1)
            cost = cost_d + cost_q + cost_r + brackets + SIGN
            # Among equals the sum without brackets comes first, then the one with the fewest names in it.
            form = (joined, *form_r)
            if cost < best[0] or (
                cost == best[0] and best[1] is not plain and self._count(form) < self._count(best[1])
            ):
                best = cost, form
        return best

    def _count(self, form: _Form) -> int:
        return sum(sum(self.unpack(term.monomial)) + sum(map(self._count, term.factors)) for term in form)

    def _flat(self, p: Polynomial) -> tuple[int, _Form]:
        cost = sum(self._cost(c, m) for m, c in p.items()) + SIGN * (len(p) - 1)
        return cost, tuple(_Term(p[m], m) for m in sorted(p, reverse=True))

    def _product(self, a: _Form, b: _Form) -> _Term:
        coefficient, monomial = 1, 0
        factors: list[_Form] = []
        for form in (a, b):
            if len(form) == 1:
                term = form[0]
                coefficient *= term.coefficient
                monomial += term.monomial
                factors.extend(term.factors)
            else:
                factors.append(form)
        return _Term(coefficient, monomial, tuple(factors))

    def _candidates(self, p: Polynomial) -> list[tuple[Polynomial, Polynomial]]:
        """Pairs d, q with d*q inside p, the most saving first; d the smaller one when there is a choice."""
        seeds: dict[frozenset[tuple[int, int]], Polynomial] = {}
        for k in self.used(p):
            x = self.unit(k)
            with_x = {m - x: c for m, c in p.items() if self.divides(x, m)}
            if len(with_x) > 1:
                _, _, q = self.content(with_x)
                seeds.setdefault(frozenset(q.items()), q)
        seen: set[frozenset[tuple[int, int]]] = set()
        order = sorted(p, reverse=True)
        for i, a in enumerate(order):
            for b in order[i + 1 :]:
                shared = self.lower(a, b)
                if not shared and i:
                    continue
                f = gcd(p[a], p[b])
                f = f if p[a] > 0 else -f
                pair = {a - shared: p[a] // f, b - shared: p[b] // f}
                key = frozenset(pair.items())
                if key in seen:
                    seeds.setdefault(key, pair)
                seen.add(key)
        rated: dict[frozenset[int], tuple[int, Polynomial, Polynomial]] = {}
        for seed in seeds.values():
            q, _ = self.divide(p, seed)
            if not q:
                continue
            d, _ = self.divide(p, q)
            if not d or len(d) * len(q) < 2:
                continue
            made = self.multiply(d, q)
            if len(made) != len(d) * len(q):
                continue
            saved = self._names(made) - self._names(d) - self._names(q)
            key_made = frozenset(made)
            if saved > 0 and (key_made not in rated or saved > rated[key_made][0]):
                rated[key_made] = saved, d, q
        ranked = sorted(rated.values(), key=lambda c: (-c[0], [-m for m in sorted(c[1], reverse=True)]))
        return [(d, q) for _, d, q in ranked]

    def _names(self, p: Polynomial) -> int:
        if self.is_multilinear(p):
            return sum(map(int.bit_count, p))
        return sum(sum(self.unpack(m)) for m in p)

    def _build(self, form: _Form) -> Tree:
        form = tuple(map(_settled, form))
        if len(form) == 1:
            sign, tree = self._signed(form[0])
            return tree if sign > 0 else minus(tree)
        signed = [self._signed(term) for term in sorted(form, key=self._leading)]
        if signed[0][0] < 0:
            # a sum begins with something positive where it can: b - a
            first = next((k for k, (sign, _) in enumerate(signed) if sign > 0), 0)
            signed.insert(0, signed.pop(first))
        return Sum(tuple(signed))

    def _leading(self, term: _Term) -> tuple[int, int]:
        """Order of terms: those of fewer names first, then by the leading monomial in the order of the ring."""
        lead = term.monomial + sum(max(self._monomials(form)) for form in term.factors)
        return sum(self.unpack(lead)), -lead

    def _monomials(self, form: _Form) -> Iterator[int]:
        for term in form:
            yield term.monomial + sum(max(self._monomials(inner)) for inner in term.factors)

    def _signed(self, term: _Term) -> tuple[int, Tree]:
        sums = [(self._build(form), self.place(max(self._monomials(form)))) for form in term.factors]
        tree = self.product(Fraction(abs(term.coefficient)), self.exponents(term.monomial), sums)
        return (1 if term.coefficient > 0 else -1), tree

    def product(
        self,
        coefficient: Fraction,
        exponents: Mapping[str, int],
        above: Iterable[tuple[Tree, Place]] = (),
        below: Iterable[tuple[Tree, Place]] = (),
    ) -> Tree:
        """A product in the order of reading: number, s, gains, R, L, C; brackets stand where their kind stands.

        ``above`` and ``below`` the fraction bar: trees, each with its place.
        """
        rank = {name: k for k, name in enumerate(self.names)}
        sides: list[Tree] = []
        for sign, trees in ((1, above), (-1, below)):
            placed = [
                ((kind_of_name(name), 0, rank[name]), power(Atom(name), sign * e))
                for name, e in exponents.items()
                if sign * e > 0
            ]
            placed += [(place, tree) for tree, place in trees]
            placed.sort(key=lambda item: item[0])
            number_ = coefficient.numerator if sign > 0 else coefficient.denominator
            sides.append(times(number(number_), *_gathered(tree for _, tree in placed)))
        return over(*sides)

    def place(self, lead: int, divisor: Mapping[str, int] | None = None) -> Place:
        """The place of a bracket in a product by its leading monomial, divided by names perhaps.

        After the names of its kind; a bracket of mixed kind stands at the end.
        """
        exponents = self.exponents(lead)
        for name, e in (divisor or {}).items():
            exponents[name] = exponents.get(name, 0) - e
        kind = kind_of(exponents)
        return 5 if kind is None else kind, 1, -lead


def _gathered(trees: Iterable[Tree]) -> list[Tree]:
    """Equal neighbours written as one power."""
    out: list[tuple[Tree, int]] = []
    for tree in trees:
        if out and out[-1][0] == tree:
            out[-1] = tree, out[-1][1] + 1
        else:
            out.append((tree, 1))
    return [power(tree, exponent) for tree, exponent in out]


def _brackets_of(form: _Form) -> int:
    return BRACKETS + NESTED * any(term.factors for term in form)


def _settled(term: _Term) -> _Term:
    """The term with its sign taken into a bracket that has a minus sign of its own: (1 - K)*R1, not -(K - 1)*R1."""
    if term.coefficient > 0:
        return term
    for k, form in enumerate(term.factors):
        negatives = sum(inner.coefficient < 0 for inner in form)
        if 2 * negatives >= len(form):
            factors = (*term.factors[:k], _negative(form), *term.factors[k + 1 :])
            return _Term(-term.coefficient, term.monomial, factors)
    return term


def _negative(form: _Form) -> _Form:
    return tuple(_Term(-term.coefficient, term.monomial, term.factors) for term in form)
