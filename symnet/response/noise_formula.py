"""The mean square of noise over all frequencies in symbols: kT/C for an RC section, closed forms up to order 4.

The same steps as for numbers: the numerators of all sources (:mod:`symnet.exact.superposition`), and the integrals on
the way back through the scheme of Routh (:mod:`symnet.response.noise_integrals`), once for each order with letters as
coefficients, into which those of D are put: so that nothing is divided in the ring of names but the results. Of the result every term of numerator and denominator is checked to have one
dimension, and their quotient that of V^2 (A^2). ``k_B`` is the Boltzmann constant, ``T`` the absolute temperature;
``en_U1`` and ``in_U1`` are the densities of an op amp.

The closed form holds where the network is stable. Positive parts make most conditions of Hurwitz true by themselves;
those that they leave open are given (A. Lienard, M. H. Chipart, J. Math. Pures Appl. 10, 1914). A network that is not
stable for any positive values is refused.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from math import prod
from typing import TYPE_CHECKING, Final

from symnet.errors import Fault, LimitError, UndefinedError
from symnet.exact.polynomials import by_powers_of_s, make_ring
from symnet.exact.ports.common import common_factor
from symnet.exact.ports.figures import Parameter, Worth
from symnet.quantities import AMPERE, NUMBER, SECOND, VOLT, Dimension
from symnet.response.axis import product, real_part, squared, trimmed
from symnet.response.noise_integrals import moments
from symnet.response.noise_spectrum import BOLTZMANN, divides_by_numerator, improper, unstable
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

    from symnet.exact.superposition import Superposition
    from symnet.response.noise_sources import Source, Sources

__all__ = ["NoiseFormula", "noise_formula"]

_HIGHEST_ORDER: Final = 4
#: Of the product of the inner coefficients of D, which is what stands below the fraction bar.
_MOST_TERMS: Final = 1200


@dataclass(frozen=True, eq=False, repr=False)
class NoiseFormula(Displayed):
    """Mean squares over all frequencies in symbols, in V^2 (A^2): in ``total`` and, source by source, ``contributors``.

    ``conditions`` are the polynomials that must be positive for the network to be stable, beside positive parts; without
    them the formulas hold for all positive values. ``order`` is the degree of D.
    """

    total: Parameter
    contributors: tuple[tuple[str, Parameter], ...]
    conditions: tuple[PolyElement, ...]
    order: int
    assumptions: tuple[str, ...]

    def __repr__(self) -> str:
        return f"<{self.total}>"


def noise_formula(
    found: Sources, sup: Superposition, label: str, dimension: Dimension, kelvin: Fraction
) -> NoiseFormula:
    """The closed forms of the mean squares at a read over all frequencies.

    LimitError above order 4 or when the formulas would be too long to be read, UndefinedError when the network is not
    stable for any positive values, or when a mean square is infinite.
    """
    kept, d, common = _ways(found, sup)
    rows = by_powers_of_s(d)
    order = len(rows) - 1
    if order > _HIGHEST_ORDER:
        raise LimitError(
            Fault(
                f"the mean square in symbols for order {order} is too long to be read",
                f"formulas go up to order {_HIGHEST_ORDER}; give every part a number and the value is exact",
            )
        )
    conditions = tuple(_conditions(rows))
    _must_be_short(rows)
    integrals, below = _over_one_denominator(rows)
    symbols = _Symbols(found, sup, kelvin)
    bottom = 2 * below.set_ring(symbols.ring)
    tops: list[tuple[str, PolyElement]] = []
    for source, top in kept:
        if len(top) > order:
            raise improper(source)
        if source.corner:
            raise UndefinedError(
                Fault(
                    f"1/f noise ({source.name}) has no mean square over all frequencies: it diverges at 0 Hz",
                    "leave the corner out of the formula, or give numbers and a band",
                )
            )
        mean = sum((c * integral for c, integral in zip(top, integrals, strict=False) if c), d.ring.zero)
        tops.append((source.name, symbols.density(source) * mean.set_ring(symbols.ring)))
    parameters = tuple(
        (name, symbols.parameter(f"mean square at {label} of {name}", top, bottom, dimension))
        for name, top in tops
    )
    above = sum((top for _, top in tops), symbols.ring.zero)
    remarks = [
        "all resistors at the absolute temperature T; k_B = 1.380649e-23 J/K exactly; sources independent",
        "drives are ideal and noiseless; all frequencies are counted",
        "parts are positive"
        + (", and the network is stable where the conditions hold" if conditions else ""),
        *found.remarks,
    ]
    if common.degree(0) > 0:
        remarks.append(f"modes that no source brings to the read are left out: roots of {common.as_expr()}")
    return NoiseFormula(
        symbols.parameter(f"mean square at {label}", above, bottom, dimension),
        parameters,
        conditions,
        order,
        tuple(remarks),
    )


def _ways(
    found: Sources, sup: Superposition
) -> tuple[list[tuple[Source, list[PolyElement]]], PolyElement, PolyElement]:
    """Each source with |N|^2 times what it is weighted by, in x; D, and what was common to it and every N."""
    tops, d = sup.symbolic()
    element = sup.naming.generators.element
    ways: list[tuple[Source, PolyElement, Sequence[PolyElement]]] = []
    for source, top in zip(found.sources, tops[len(tops) - len(found.sources) :], strict=True):
        if not top:
            continue
        if source.kind != "thermal":
            ways.append((source, top, (d.ring.one,)))
            continue
        p, q = map(element, sup.naming.terms(source.part))
        weight = trimmed(real_part(by_powers_of_s(p), by_powers_of_s(q)))
        if weight:
            ways.append((source, top.exquo(p if divides_by_numerator(sup, source) else q), weight))
    common = common_factor([d, *(top for _, top, _ in ways)])
    kept = [
        (source, trimmed(product(squared(by_powers_of_s(top.exquo(common))), weight)))
        for source, top, weight in ways
    ]
    return kept, d.exquo(common), common


def _must_be_short(rows: Sequence[PolyElement]) -> None:
    """Refuse what would be long work for a formula that nobody reads; known from the lengths of the coefficients."""
    inner = prod(map(len, rows[1:-1]))
    if inner > _MOST_TERMS:
        raise LimitError(
            Fault(
                f"the mean square in symbols would have some {inner} terms below the fraction bar",
                "give more parts a number, or tie equal parts (R2 = R1); with all numbers the value is exact",
            )
        )


@lru_cache(maxsize=8)
def _table(order: int) -> tuple[tuple[PolyElement, ...], PolyElement]:
    """The integrals J_0 ... J_(n-1) of D = d0 + d1 s + ... with letters for coefficients, over one denominator."""
    from sympy import ZZ
    from sympy.polys.rings import ring

    _, *letters = ring([f"d{k}" for k in range(order + 1)], ZZ)
    field = letters[0].ring.to_field()
    found = moments([field.new(letter) for letter in letters])
    common = letters[0].ring.one
    for moment in found:
        common = common.lcm(moment.denom)
    return tuple([moment.numer * common.exquo(moment.denom) for moment in found]), common


def _over_one_denominator(rows: Sequence[PolyElement]) -> tuple[list[PolyElement], PolyElement]:
    """The integrals of the table with these coefficients: products and sums only."""
    *tops, bottom = (*_table(len(rows) - 1)[0], _table(len(rows) - 1)[1])
    ring = rows[0].ring

    def put_in(polynomial: PolyElement) -> PolyElement:
        total = ring.zero
        for monomial, coefficient in polynomial.terms():
            term = ring(int(coefficient))
            for row, exponent in zip(rows, monomial, strict=True):
                term *= row**exponent
            total += term
        return total

    return [put_in(top) for top in tops], put_in(bottom)


def _conditions(rows: Sequence[PolyElement]) -> Iterator[PolyElement]:
    """What must be positive for all roots to be to the left, where positive names do not make it so."""
    if not rows[0]:
        raise unstable("a mode at s = 0 for all values")
    order = len(rows) - 1
    if any(not row for row in rows):
        raise unstable(
            "modes on the jw axis or to the right of it for all values, since a power of s is missing in D,"
        )
    asked = list(rows)
    if order == 3:
        asked.append(rows[1] * rows[2] - rows[0] * rows[3])
    elif order == 4:
        asked.append(rows[1] * rows[2] * rows[3] - rows[1] ** 2 * rows[4] - rows[0] * rows[3] ** 2)
    signs = {_sign(row) for row in rows}
    if {1, -1} <= signs:
        raise unstable("a mode to the right of the jw axis for all positive values: the signs of D differ,")
    turned = -1 if -1 in signs else 1
    for k, polynomial in enumerate(asked):
        positive = polynomial * turned ** (1 if k <= order else order - 1)
        if not positive or _sign(positive) == -1:
            raise unstable("modes on the jw axis or to the right of it for all positive values")
        if _sign(positive) is None:
            yield positive


def _sign(polynomial: PolyElement) -> int | None:
    signs = {c > 0 for c in polynomial.itercoeffs()}
    return None if len(signs) != 1 else 1 if True in signs else -1


class _Symbols:
    """The ring with k_B, T and the densities of op amps beside the names of the network."""

    def __init__(self, found: Sources, sup: Superposition, kelvin: Fraction) -> None:
        names = sup.naming.generators.names[1:]
        self._taken = {*names, *sup.network.nodes}
        self._naming = sup.naming
        self.boltzmann, self.temperature = self._fresh("k_B"), self._fresh("T")
        self.dimensions: dict[str, tuple[Fraction, ...]] = {
            name: _exponents(dimension)
            for name, dimension in sup.naming.dimensions.items()
            if dimension is not None
        }
        # joule per kelvin times kelvin; a kelvin has no place here and cancels in every term
        self.dimensions |= {
            self.boltzmann: _exponents(VOLT * AMPERE * SECOND),
            self.temperature: _exponents(NUMBER),
        }
        worth = {**sup.naming.numbers, self.boltzmann: BOLTZMANN, self.temperature: kelvin}
        self._density: dict[Source, str] = {}
        for source in found.sources:
            if source.kind != "thermal":
                self._density[source] = self._density_of(source, worth)
        self.ring: PolyRing = make_ring(
            [*names, self.boltzmann, self.temperature, *dict.fromkeys(self._density.values())]
        )
        self.worth = Worth(worth, sup.naming.irrational)

    def _density_of(self, source: Source, worth: dict[str, Fraction]) -> str:
        """``en_U1``, ``in_U1`` for both inputs where they are alike."""
        for other, name in self._density.items():
            if (other.kind, other.part, other.density) == (source.kind, source.part, source.density):
                return name
        name = self._fresh(f"{source.kind}_{source.part}")
        worth[name] = source.density
        unit = VOLT if source.kind == "en" else AMPERE
        v, a, seconds = _exponents(unit)
        self.dimensions[name] = (v, a, seconds + Fraction(1, 2))  # per root of Hz
        return name

    def _fresh(self, name: str) -> str:
        while name in self._taken:
            name += "_"
        self._taken.add(name)
        return name

    def density(self, source: Source) -> PolyElement:
        """What the integral over w is multiplied by, beside 1/2: 4kT, or the square of the density."""
        if source.kind == "thermal":
            return 4 * self._generator(self.boltzmann) * self._generator(self.temperature)
        return self._generator(self._density[source]) ** 2

    def _generator(self, name: str) -> PolyElement:
        return self.ring.gens[[str(symbol) for symbol in self.ring.symbols].index(name)]

    def parameter(
        self, label: str, above: PolyElement, below: PolyElement, dimension: Dimension
    ) -> Parameter:
        """The quotient in lowest terms, its dimension checked."""
        found = Parameter.of(label, above, below, dimension**2, self.worth)
        of_top, of_bottom = (self._dimension(part) for part in (found.numerator, found.denominator))
        if of_top is not None and of_bottom is not None:
            apart = tuple(a - b for a, b in zip(of_top, of_bottom, strict=True))
            assert apart == _exponents(dimension**2), apart  # noqa: S101 - a defect of symnet, never of the network
        return found

    def _dimension(self, polynomial: PolyElement) -> tuple[Fraction, ...] | None:
        """The dimension that all terms have; None for 0 and where a name has no known one."""
        names = [str(symbol) for symbol in self.ring.symbols]
        found = set()
        for monomial in polynomial.itermonoms():
            total = [Fraction(0)] * 3
            for name, exponent in zip(names, monomial, strict=True):
                if exponent:
                    if name not in self.dimensions:
                        return None
                    total = [t + exponent * e for t, e in zip(total, self.dimensions[name], strict=True)]
            found.add(tuple(total))
        assert len(found) <= 1, found  # noqa: S101 - a defect of symnet: terms of different dimension
        return found.pop() if found else None


def _exponents(dimension: Dimension) -> tuple[Fraction, ...]:
    return tuple(map(Fraction, (dimension.v, dimension.a, dimension.t)))
