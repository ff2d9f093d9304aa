"""The exact solution of a network: every voltage and current as a polynomial over one common denominator.

The unknowns are the node voltages and the currents that no voltage gives: those of drives, voltage laws, op amps
and coupled coils. With the drives as inputs X, each is N/D with N linear in the X and the same D, the determinant
of the network (:mod:`symnet.exact.derive`). An equation between unknowns is homogeneous in the X degree by degree,
so that it holds exactly when each part of equal degree vanishes with the unknowns replaced by their N: no division,
and D itself is needed only where parts of different degree must be told apart.

The N come from one determinant, bordered by a row in which every unknown has a symbol of its own; in long networks
each is written out when it is first needed.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from functools import cached_property
from random import Random
from typing import TYPE_CHECKING, Final, TypeAlias

from symnet.circuit.network import Network
from symnet.circuit.parts import OpAmp, VoltageDrive, VoltageLaw
from symnet.circuit.wiring import check_drives, check_wiring
from symnet.errors import Fault, SingularError, WiringError
from symnet.exact.confirm import UnconfirmedError, random_point, solve_at, undetermined
from symnet.exact.derive import quotient_of
from symnet.exact.modular import PRIME
from symnet.exact.naming import Naming
from symnet.expressions import Expression, Name, Number, Product, Sum
from symnet.review.algebra import Algebra, Value

if TYPE_CHECKING:
    from symnet.circuit.parts import Drive
    from symnet.exact.determinant import Determinant
    from symnet.exact.readable.packed import Polynomial

__all__ = ["ROUNDED", "Solution", "Substitution", "Unknown", "generator_of"]

#: ("v", node), ("i", drive, law or op amp), or ("x", current drive): a voltage or current that is solved for.
Unknown: TypeAlias = "tuple[str, str]"

#: How many rounded numbers of one line get a generator for what the rounding took.
ROUNDED: Final = 16

_MOST_TOGETHER: Final = 40  # unknowns whose N are written out together,
_MOST_TERMS_TOGETHER: Final = 20_000  # and the terms that they may have
_WEIGHT: Final = "weight of "  # no name of a network has a space


def generator_of(unknown: Unknown) -> str:
    """The name of an unknown among the generators of an algebra; no name of a network has a colon."""
    return f"{unknown[0]}:{unknown[1]}"


class Substitution:
    """Every unknown as N/D with one common D, in an algebra, and what becomes of polynomials when they are put in.

    ``unknowns`` and ``algebra`` are those of the network.
    """

    algebra: Algebra
    unknowns: tuple[Unknown, ...]

    def numerator(self, unknown: Unknown) -> Polynomial:
        """N of an unknown."""
        raise NotImplementedError

    @property
    def denominator(self) -> Polynomial:
        """D."""
        raise NotImplementedError

    def remainders(self, polynomial: Polynomial) -> dict[int, Polynomial]:
        """What is left of a polynomial in the unknowns when they are replaced by their N, by degree; {} if zero.

        An equation ``polynomial = 0`` holds in the network exactly when nothing is left.
        """
        algebra = self.algebra
        out: dict[int, Polynomial] = {}
        for exponents, coefficient in self.by_unknowns(polynomial).items():
            product = coefficient
            for unknown, exponent in zip(self.unknowns, exponents, strict=True):
                for _ in range(exponent):
                    product = algebra.multiply(product, self.numerator(unknown))
            degree = sum(exponents)
            out[degree] = algebra.add(out.get(degree, {}), product)
        return {degree: rest for degree, rest in out.items() if rest}

    def by_unknowns(self, polynomial: Polynomial) -> dict[tuple[int, ...], Polynomial]:
        """The coefficients of a polynomial in the unknowns, by their exponents in the order of ``unknowns``."""
        return self.algebra.split(polynomial, map(generator_of, self.unknowns))

    def substituted(self, value: Value) -> tuple[Polynomial, Polynomial]:
        """A value with the unknowns replaced by the solution: numerator and denominator, D's multiplied in.

        For values in which the drives cancel, such as ``out/in``; ZeroDivisionError where the denominator vanishes.
        """
        sides = [self.remainders(side) for side in (value.numerator, value.denominator)]
        if not sides[1]:
            raise ZeroDivisionError
        most = max((degree for side in sides for degree in side), default=0)
        top, bottom = (self._levelled(side, most) for side in sides)
        return top, bottom

    def _levelled(self, parts: dict[int, Polynomial], most: int) -> Polynomial:
        total: Polynomial = {}
        for degree, part in parts.items():
            for _ in range(most - degree):
                part = self.algebra.multiply(part, self.denominator)
            total = self.algebra.add(total, part)
        return total


@dataclass(eq=False)
class Solution(Substitution):
    """The solution of one network in an algebra of its own; made by :meth:`of`.

    Generators: s and the names of the network in the order of its ring, pi, the drives where there are several,
    the unknowns, and those for rounded numbers.
    """

    network: Network
    naming: Naming
    unknowns: tuple[Unknown, ...]
    algebra: Algebra
    symbols: frozenset[str] | None
    _numerators: dict[Unknown, Polynomial] = field(default_factory=dict, repr=False)
    _points: dict[int, Mapping[str, int]] = field(default_factory=dict, repr=False)
    _together: dict[str, dict[Unknown, Polynomial] | None] = field(default_factory=dict, repr=False)
    _below: Determinant | None = field(default=None, repr=False)

    @classmethod
    def of(cls, network: Network, symbols: frozenset[str] | None = None) -> Solution:
        """The solution of a network; with ``symbols`` only these names stay symbols, as in ``sn.derive``.

        Raises WiringError and SingularError as ``sn.derive`` does.
        """
        if not network.drives:
            raise WiringError(
                Fault("nothing drives the network", "write for example: drive in   (or drive current into a)")
            )
        check_drives(network)
        check_wiring(network)
        naming = Naming.of(network, symbols)
        unknowns: list[Unknown] = [("v", node) for node in network.nodes]
        named = tuple(zip(network.drive_names, network.drives, strict=True))
        unknowns += [("i" if isinstance(drive, VoltageDrive) else "x", name) for name, drive in named]
        unknowns += [("i", part.name) for part in network.parts if isinstance(part, VoltageLaw | OpAmp)]
        coils = dict.fromkeys(coil for c in network.couplings for coil in (c.first, c.second))
        unknowns += [("i", coil) for coil in coils]
        inputs = [f"drive:{name}" for name, _ in named] if len(named) > 1 else []
        unused = [name for name in network.symbols() if not naming.knows(name)]
        names = [*naming.generators.names, "pi", *unused, *inputs, *map(generator_of, unknowns)]
        names += [f"rounded:{k}" for k in range(ROUNDED)]
        return cls(network, naming, tuple(unknowns), Algebra(names), symbols)

    # -- the solution --------------------------------------------------------------------------------------------------

    def numerator(self, unknown: Unknown) -> Polynomial:
        """N of an unknown, which is N/D for drives of value X (of value 1 where there is one drive)."""
        known = self._numerators.get(unknown)
        if known is None:
            known = {}
            for name, drive in zip(self.network.drive_names, self.network.drives, strict=True):
                part = self._of_drive(unknown, name, drive)
                if part and len(self.network.drives) > 1:
                    part = self.algebra.multiply(part, {self.algebra.unit(f"drive:{name}"): 1})
                known = self.algebra.add(known, part)
            self._confirm(unknown, known)
            self._numerators[unknown] = known
        return known

    def _of_drive(self, unknown: Unknown, name: str, drive: Drive) -> Polynomial:
        if unknown[0] == "x":
            return self.denominator if unknown[1] == name else {}
        if name not in self._together:
            self._together[name] = self._all_of(drive)
        together = self._together[name]
        if together is not None:
            return together[unknown]
        return self._written(quotient_of(self.network, drive, _read(unknown), self.symbols)[1].numerator)

    @cached_property
    def _weighted(self) -> tuple[Network, Expression]:
        """The network read as the sum of all unknowns, each times a symbol of its own."""
        terms = tuple(
            (1, Product(((1, Name(_WEIGHT + generator_of(unknown))), (1, _read(unknown)))))
            for unknown in self.unknowns
            if unknown[0] != "x"
        )
        read = Sum(terms)
        return replace(self.network, reads=(*self.network.reads, read), text=None), read

    def _all_of(self, drive: Drive) -> dict[Unknown, Polynomial] | None:
        """The N of all unknowns for one drive, from one determinant; None where that would be too long.

        N of the weighted sum is the sum of the N, each times its weight.
        """
        if len(self.unknowns) > _MOST_TOGETHER:
            return None
        network, read = self._weighted
        pieces, quotient = quotient_of(network, drive, read, self.symbols)
        if quotient.numerator.terms > _MOST_TERMS_TOGETHER:
            return None
        self._below = quotient.denominator
        out: dict[Unknown, Polynomial] = {unknown: {} for unknown in self.unknowns}
        generators = pieces.naming.generators.names
        own = len(self.naming.generators.names)
        weights = [generators.index(_WEIGHT + generator_of(u)) if u[0] != "x" else 0 for u in self.unknowns]
        pack = self.algebra.space.pack
        for coefficient, exponents in quotient.numerator.written():
            unknown = next(u for u, k in zip(self.unknowns, weights, strict=True) if k and exponents[k])
            out[unknown][pack(exponents[:own])] = coefficient
        return out

    @property
    def denominator(self) -> Polynomial:
        """D, the determinant of the network, not in lowest terms with any N."""
        return self._denominator

    @property
    def terms(self) -> int:
        """An upper bound of the number of terms of D, known without writing it out."""
        return self._determinant.terms

    @cached_property
    def _denominator(self) -> Polynomial:
        return self._written(self._determinant)

    @cached_property
    def _determinant(self) -> Determinant:
        if self._below is not None:
            return self._below
        drive, read = self.network.drives[0], _read(self.unknowns[0])
        return quotient_of(self.network, drive, read, self.symbols)[1].denominator

    def _written(self, determinant: Determinant) -> Polynomial:
        own = len(self.naming.generators.names)
        return self.algebra.polynomial((e[:own], c) for c, e in determinant.written())

    def worth(self, name: str) -> Value:
        """What a part or symbol of the network stands for: itself, a tie, or its number."""
        if self.naming.knows(name):
            above, below = (
                Value(self.algebra, self.algebra.polynomial_of(side)) for side in self.naming.terms(name)
            )
            return above / below
        value = self.network.value(name)  # of a symbol that no part hangs on
        if isinstance(number := value.expression if value else None, Number) and self.symbols is not None:
            return self.algebra.number(number.value)
        return self.algebra.generator(name)

    def _confirm(self, unknown: Unknown, numerator: Polynomial) -> None:
        """Hold an N against the nodal equations, solved by elimination at the random point."""
        found = self.residue(numerator) - self.point()[generator_of(unknown)] * self.residue(self.denominator)
        if found % PRIME:
            raise UnconfirmedError(
                Fault(
                    f"two independent solutions for {unknown[1]} disagree; they must not be used",
                    "this is a defect of symnet: please report the network",
                )
            )

    # -- modulo a prime ----------------------------------------------------------------------------------------------------

    def point(self, trial: int = 0) -> Mapping[str, int]:
        """Every generator at a random point modulo 2^127 - 1, the unknowns from the nodal equations solved there.

        The elimination shares no code with the determinants. SingularError when there is no single solution.
        """
        known = self._points.get(trial)
        if known is None:
            known = self._points[trial] = self._solved(trial)
        return known

    def _solved(self, trial: int) -> Mapping[str, int]:
        random = Random(f"review {trial}")
        values = {name: random.randrange(1, PRIME) for name in self.algebra.names}
        values.update(zip(self.naming.generators.names, random_point(self.naming, trial), strict=True))
        values.update(dict.fromkeys(map(generator_of, self.unknowns), 0))
        for k, name in enumerate(self.network.drive_names):
            found = solve_at(self.network, self.naming, k, trial)
            if found is None:
                raise SingularError(undetermined(self.network, self.naming))
            system, solution = found
            x = values.get(f"drive:{name}", 1)
            for place, unknown in enumerate(system.unknowns):
                generator = generator_of(unknown)
                if generator in values:
                    values[generator] = (values[generator] + x * solution(place)) % PRIME
            if f"x:{name}" in values:
                values[f"x:{name}"] = x
        return values

    def is_nonzero(self, polynomial: Polynomial) -> bool:
        """Whether a polynomial is proven to be other than zero in the network, by its value at the random point."""
        return not self.algebra.has_roots(polynomial) and bool(self.residue(polynomial))

    def residue(self, polynomial: Polynomial, trial: int = 0) -> int:
        """The value of a polynomial without roots at the random point."""
        return self.algebra.modulo(polynomial, self.point(trial), PRIME)


def _read(unknown: Unknown) -> Expression:
    """What reads an unknown."""
    kind, name = unknown
    return Name(name) if kind == "v" else Name(f"i_{name}")
