"""A second, independent route to H: the modified nodal equations, solved modulo a large prime.

At a random point every name and s are integers modulo 2^127 - 1; the equations of :mod:`symnet.exact.mna` are
solved there by elimination and the result is compared with H. A wrong H of degree d agrees there with probability
at most d/2^127 (J. T. Schwartz, J. ACM 27, 1980). Stamping, elimination and the reading of laws share no code
with the determinants.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from heapq import heapify, heappop, heappush
from math import log10
from random import Random
from typing import TYPE_CHECKING, Final

from symnet.errors import Fault, SingularError, SymnetError
from symnet.exact.mna import Arithmetic, Stamped, stamp, unknown_name
from symnet.exact.modular import PRIME, SMALL_PRIME, Residue, terms_at
from symnet.exact.polynomials import modulo
from symnet.progress import Progress

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping

    from symnet.circuit.network import Network
    from symnet.circuit.parts import Drive
    from symnet.exact.naming import Naming
    from symnet.exact.quotient import Quotient
    from symnet.expressions import Expression

__all__ = [
    "Confirmation",
    "UnconfirmedError",
    "confirm",
    "random_point",
    "read_at",
    "solve_at",
    "undetermined",
]

_MOST_TRIES: Final = 4
#: Terms up to which the polynomials as written out are compared, and not the diagrams they come from.
_MOST_TERMS_COMPARED: Final = 500


class UnconfirmedError(SymnetError, AssertionError):
    """Two independent routes to H disagree: a defect of symnet, never of the network."""


@dataclass(frozen=True, slots=True)
class Confirmation:
    """How an H was confirmed: the route, and the largest degree in question."""

    degree: int
    what: str

    @property
    def short(self) -> str:
        """A few words for a repr."""
        return "confirmed mod 2^127 - 1"

    @property
    def exponent(self) -> int:
        """A wrong H passes with a probability below 10 to the minus this."""
        return int(log10(PRIME) - log10(max(1, self.degree)))

    def __str__(self) -> str:
        return (
            f"{self.what} agree with the nodal equations, solved by elimination modulo 2^127 - 1, at a random "
            f"point (a wrong H passes with probability below 1e-{self.exponent})"
        )


def confirm(
    network: Network, naming: Naming, drive: Drive, read: Expression, quotient: Quotient
) -> Confirmation:
    """Compare a quotient with the solution of the nodal equations at a random point modulo a prime.

    Raises :class:`UnconfirmedError` when they differ, and SingularError when the equations have no single solution.
    """
    place = network.drives.index(drive)
    for trial in range(_MOST_TRIES):
        point, solved = random_point(naming, trial), solve_at(network, naming, place, trial)
        if solved is not None:
            break
    else:
        raise SingularError(undetermined(network, naming))
    system, solution = solved
    expected = sum(weight.value * solution(k) for k, weight in system.weights(read).items())
    written_out = quotient.is_built and max(quotient.terms) <= _MOST_TERMS_COMPARED
    if written_out:
        what = "N and D as written out"
        lowest = quotient.lowest
        n, d = (modulo(p, point, PRIME) for p in (lowest.numerator, lowest.denominator))
    else:
        what = "the determinants, not written out,"
        n, d = quotient.modulo(point, PRIME)
        if quotient.is_factored:
            _compare_written_out(quotient, [value % SMALL_PRIME for value in point])
            what = "N and D, compared as determinants and (modulo 2^31 - 1) as written out,"
    if (n - expected * d) % PRIME or not d:
        raise UnconfirmedError(_disagreement())
    return Confirmation(_degree(network, quotient, written_out=written_out), what)


def _compare_written_out(quotient: Quotient, point: list[int]) -> None:
    """Compare N/D as written out with the determinants at a point modulo the smaller prime, in whole arrays."""
    n, d = quotient.modulo(point, SMALL_PRIME)
    top, bottom = (side.modulo(point, SMALL_PRIME) for side in (quotient.lowest.top, quotient.lowest.bottom))
    if (n * bottom - top * d) % SMALL_PRIME:
        raise UnconfirmedError(_disagreement())


def _disagreement() -> Fault:
    return Fault(
        "two independent derivations of this H disagree; it must not be used",
        "this is a defect of symnet: please report the network",
    )


def _degree(network: Network, quotient: Quotient, *, written_out: bool) -> int:
    """A bound on the degree of what was compared, for the probability that a wrong H passes."""
    if written_out:
        polynomials = (quotient.lowest.numerator, quotient.lowest.denominator)
        return max((sum(m) for p in polynomials for m in p), default=0) + len(network.nodes)
    pairs = zip(quotient.numerator.take, quotient.numerator.leave, strict=True)
    return sum(
        max((sum(e for _, e in powers) for terms in pair for _, powers in terms), default=0) for pair in pairs
    )


def _at(network: Network, naming: Naming, point: list[int]) -> Stamped:
    values = dict(zip(naming.generators.names, map(Residue, point), strict=True))

    def name(word: str) -> Residue:
        if word in values:
            return values[word]
        numerator, denominator = (terms_at(side, point, PRIME) for side in naming.terms(word))
        value = values[word] = Residue(numerator) / Residue(denominator)
        return value

    def number(given: Fraction) -> Residue:
        return Residue.of(given.numerator, given.denominator)

    return stamp(network, Arithmetic(number, name))


def random_point(naming: Naming, trial: int) -> list[int]:
    """A random value of s and of every name; the same for every H of a network, so that solutions are shared."""
    random = Random("|".join(("symnet", str(trial), *naming.generators.names)))
    return [random.randrange(1, PRIME) for _ in naming.generators.names]


@lru_cache(maxsize=32)
def solve_at(
    network: Network, naming: Naming, drive: int, trial: int
) -> tuple[Stamped, Callable[[int], int]] | None:
    """The equations at that random point and what each unknown is for one drive of value 1; None where singular."""
    return _solved(network, naming, random_point(naming, trial), {network.drive_names[drive]: 1})


def read_at(
    network: Network, naming: Naming, read: Expression, point: list[int], drives: Mapping[str, int]
) -> int | None:
    """What is read, modulo the prime, when these drives have these values all at once; None where singular."""
    solved = _solved(network, naming, point, drives)
    if solved is None:
        return None
    system, solution = solved
    total: int = sum(weight.value * solution(k) for k, weight in system.weights(read).items())
    return total % PRIME


def _solved(
    network: Network, naming: Naming, point: list[int], drives: Mapping[str, int]
) -> tuple[Stamped, Callable[[int], int]] | None:
    try:
        system = _at(network, naming, point)
    except ZeroDivisionError:
        return None
    size = len(system.unknowns)
    rows = [{k: e.value for k, e in row.items() if e.value} for row in system.matrix]
    for name, strength in drives.items():
        for k, value in system.sources[name].items():
            rows[k][size] = (rows[k].get(size, 0) + strength * value.value) % PRIME
    pivots = _eliminate(rows, size)
    if len(pivots) < size:
        return None

    def unknown(k: int) -> int:
        row = rows[pivots[k]]
        return (Residue(row.get(size, 0)) / Residue(row[k])).value

    return system, unknown


def _eliminate(rows: list[dict[int, int]], size: int) -> dict[int, int]:
    """:func:`_reduced`, telling how far it is."""
    with Progress("solving the nodal equations", "unknowns eliminated", size) as at:
        return _reduced(rows, size, at)


def _reduced(rows: list[dict[int, int]], size: int, at: Progress) -> dict[int, int]:
    """Reduce sparse augmented rows in place, modulo the prime, until each pivot column has one entry.

    Returns the row of each pivot column. The row with the fewest entries is taken next, and in it the column
    with the fewest: long networks fill in little, and are solved in time that grows with their length. Rows are
    multiplied across, since a product costs far less than an inverse.
    """
    where: list[set[int]] = [set() for _ in range(size + 1)]
    for r, row in enumerate(rows):
        for column in row:
            where[column].add(r)
    waiting = [(len(row), r) for r, row in enumerate(rows)]
    heapify(waiting)
    pivots: dict[int, int] = {}
    done: set[int] = set()
    while waiting:
        length, r = heappop(waiting)
        if r in done or length != len(rows[r]):
            continue
        done.add(r)
        candidates = [column for column in rows[r] if column != size]
        if not candidates:
            continue
        column = min(candidates, key=lambda k: (len(where[k]), k))
        pivots[column] = r
        at(len(pivots))
        pivot = rows[r]
        head = pivot[column]
        for other in sorted(where[column] - {r}):
            factor = rows[other][column]
            row = rows[other] = {k: value * head % PRIME for k, value in rows[other].items()}
            for k, value in pivot.items():
                left = (row.get(k, 0) - factor * value) % PRIME
                if left:
                    row[k] = left
                    where[k].add(other)
                elif k in row:
                    del row[k]
                    where[k].discard(other)
            if other not in done:
                heappush(waiting, (len(row), other))
    return pivots


def undetermined(network: Network, naming: Naming, values: Mapping[str, Fraction] | None = None) -> Fault:
    """Which voltages and currents the equations leave open, from the null vector at a random point.

    With ``values``, at these values and a random s: open for these values only.
    """
    random = Random("null")
    point = [random.randrange(1, PRIME) for _ in naming.generators.names]
    for k, name in enumerate(naming.generators.names):
        if values is not None and name in values:
            value = values[name]
            point[k] = Residue.of(value.numerator, value.denominator).value
    try:
        system = _at(network, naming, point)
    except ZeroDivisionError:
        return Fault("the equations divide by zero for these values")
    size = len(system.unknowns)
    rows = [{k: e.value for k, e in row.items() if e.value} for row in system.matrix]
    bound = _eliminate(rows, size)
    free = next((k for k in range(size) if k not in bound), None)
    if free is None:
        return Fault("the equations have no single solution")
    open_ones = [k for k in range(size) if k == free or (k in bound and free in rows[bound[k]])]
    names = [unknown_name(system.unknowns[k]) for k in open_ones]
    return Fault(
        f"the equations leave open: {', '.join(names)}",
        "look for a part that is missing or shorted there, or for gains and values that cancel exactly",
        nodes=tuple(system.unknowns[k][1] for k in open_ones if system.unknowns[k][0] == "v"),
    )
