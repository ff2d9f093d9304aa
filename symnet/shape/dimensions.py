"""Do the terms of H agree in their units? Each term of the coefficient of s^k must have the dimension H asks for.

N and D of H = N/D are sums; all terms of D must have one dimension, all terms of N that dimension times the dimension
of H, with s counted as 1/second. A slip such as R1 + R2*C2 for (R1 + R2)*C2 is caught here at no cost, whatever the
values are. A derived H always passes; an H written by hand need not.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from symnet.quantities import HERTZ, NUMBER, Dimension

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer

__all__ = ["Finding", "check_dimensions", "coefficient_dimensions"]


@dataclass(frozen=True, slots=True)
class Finding:
    """One term that does not fit: ``term`` in the coefficient of s^``power`` of the numerator or denominator."""

    where: str
    power: int
    term: str
    dimension: Dimension
    expected: Dimension

    def __str__(self) -> str:
        return (
            f"{self.where}, coefficient of s^{self.power}: the term {self.term} has the dimension {self.dimension}, "
            f"the others ask for {self.expected}"
        )


def check_dimensions(H: Transfer) -> tuple[Finding, ...]:
    """Every term of N and D whose dimension does not fit; an empty tuple when all agree.

    The dimension of D is that of most of its terms. Terms that hold a name of unknown dimension are passed over.

    >>> import symnet as sn
    >>> check_dimensions(sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")))
    ()
    """
    return findings(H.numerator, H.denominator, H.dimension, H.dimensions)


def findings(
    numerator: Any, denominator: Any, dimension: Dimension, dimensions: Mapping[str, Dimension | None]
) -> tuple[Finding, ...]:
    """As :func:`check_dimensions`, for two ring elements (s first) that are to have the ratio ``dimension``."""
    base = _most_common(denominator, dimensions)
    if base is None:
        above = _most_common(numerator, dimensions)
        if above is None:
            return ()
        base = above / dimension
    return (
        *_misfits("numerator", numerator, base * dimension, dimensions),
        *_misfits("denominator", denominator, base, dimensions),
    )


def coefficient_dimensions(H: Transfer) -> tuple[tuple[Dimension | None, ...], tuple[Dimension | None, ...]]:
    """The dimensions of the coefficients of N and of D in ascending powers of s; None for a zero or an unknown one.

    Where terms of one coefficient disagree, it is the dimension of most of them (see :func:`check_dimensions`).
    """
    from symnet.exact.polynomials import by_powers_of_s

    numerator, denominator = (
        tuple(_most_common(c, H.dimensions) for c in by_powers_of_s(p)) for p in (H.numerator, H.denominator)
    )
    return numerator, denominator


def _dimension(
    names: list[str], monomial: tuple[int, ...], known: Mapping[str, Dimension | None]
) -> Dimension | None:
    total = NUMBER
    for name, exponent in zip(names, monomial, strict=True):
        if exponent:
            one = known.get(name, HERTZ if name == "s" else None)
            if one is None:
                return None
            total = total * one**exponent
    return total


def _most_common(polynomial: Any, known: Mapping[str, Dimension | None]) -> Dimension | None:
    names = [str(symbol) for symbol in polynomial.ring.symbols]
    count = Counter(d for m in polynomial if (d := _dimension(names, m, known)) is not None)
    return count.most_common(1)[0][0] if count else None


def _misfits(
    where: str, polynomial: Any, expected: Dimension, known: Mapping[str, Dimension | None]
) -> list[Finding]:
    names = [str(symbol) for symbol in polynomial.ring.symbols]
    found = []
    for monomial, c in polynomial.terms():
        dimension = _dimension(names, monomial, known)
        if dimension is not None and dimension != expected:
            power = monomial[0]
            without = polynomial.ring.from_dict({(0, *monomial[1:]): c})
            at_power = HERTZ**power
            found.append(Finding(where, power, str(without), dimension / at_power, expected / at_power))
    return found
