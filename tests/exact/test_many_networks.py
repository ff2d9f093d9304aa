"""2 000 random networks of all part kinds: the diagrams, the expanded form and a numeric solve agree.

The laws: N/D by Cramer's rule is the solution of the equations, whichever way those are written down; the
determinant of a matrix whose every term carries its own parameter is a sum of as many different monomials as
the two graphs have common trees, each with the coefficient +1 or -1 (Mayeda and Seshu 1965).

Networks of up to 6 nodes meet sympy's expanded determinant of the oracle's tableau. Larger ones, up to 15
drawn nodes, meet the oracle's own elimination at random points modulo two primes below 2^31 that the package
does not use: two different H of degree d agree at such a point with a probability of d/2^31 (Schwartz 1980).
"""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction
from math import prod
from random import Random
from typing import Any

import pytest

import symnet as sn
from symnet.errors import SingularError, WiringError
from symnet.exact.transfer import Transfer
from tests import oracle
from tests.networks import Sketch, seeded

SMALL = 1000
ALL = 2000
BLOCK = 50

#: Two primes below 2^31; the package uses 2^31 - 1 and 2^127 - 1.
PRIMES = (2147483629, 2147483587)

#: What a part may be worth in the degenerate networks: a short, an open branch, equal values, 24 decades.
EXTREMES = {
    "R": ("0", "1", "1", "1e-12", "1e12"),
    "L": ("0", "1e-3", "1e-3", "1e-15", "1e9"),
    "C": ("0", "1e-9", "1e-9", "1e-18", "1e6"),
}

FREQUENCIES = (Fraction(104729, 7), Fraction(1299709, 11))


def is_single(seed: int) -> bool:
    """Every third network has a parameter of its own in every term of its equations."""
    return seed % 3 == 0


def sketch_of(seed: int) -> Sketch:
    """The network of a seed: small below SMALL, of 7 to 15 drawn nodes from there on."""
    how: dict[str, Any] = {"rational": not is_single(seed), "single": is_single(seed)}
    if seed >= SMALL:
        how |= {"least_nodes": 7, "most_nodes": 15, "links": (3, 6)}
    return seeded(10_000 + seed, **how)


def in_block(first: int) -> Iterator[tuple[int, Sketch, Transfer]]:
    """The networks of a block that have a solution, with their H; that the others have none is checked here."""
    for seed in range(first, first + BLOCK):
        sketch = sketch_of(seed)
        if solvable(sketch):
            yield seed, sketch, sn.derive(sn.network(sketch.text))
        else:
            with pytest.raises((SingularError, WiringError)):
                sn.derive(sn.network(sketch.text)).numeric()


def solvable(sketch: Sketch) -> bool:
    """Whether the tableau is regular for the sketch's values or, at a random point, for any values."""
    return any(solution(sketch, {**sketch.values, "s": s}) is not None for s in FREQUENCIES)


def solution(sketch: Sketch, names: dict[str, Fraction]) -> Fraction | None:
    """The oracle's H, exactly; None where the tableau is singular."""
    try:
        return oracle.transfer_exact(sketch.drawing, names)
    except oracle.NoSolutionError:
        return None


def moved(polynomial: Any, over: Any) -> Any:
    """A polynomial of another ring in this one, name by name."""
    where = {str(symbol): k for k, symbol in enumerate(over.symbols)}
    places = [where[str(symbol)] for symbol in polynomial.ring.symbols]
    terms = {}
    for powers, coefficient in polynomial.items():
        monomial = [0] * len(where)
        for place, power in zip(places, powers, strict=True):
            monomial[place] = power
        terms[tuple(monomial)] = over.domain(int(coefficient))
    return over.from_dict(terms)


def degenerate(sketch: Sketch, seed: int) -> dict[str, Fraction]:
    """Shorts, open branches, equal values and ratios of 24 decades in place of the sketch's values."""
    random = Random(f"degenerate {seed}")
    return {
        name: Fraction(random.choice(EXTREMES[name[0]])) if name[0] in EXTREMES else value
        for name, value in sketch.values.items()
    }


def assert_is_the_solution(sketch: Sketch, H: Transfer, values: dict[str, Fraction]) -> None:
    """H with numbers against the solution of the tableau in fractions; refused exactly where there is none."""
    found = [solution(sketch, {**values, "s": s}) for s in FREQUENCIES]
    with_values = H.with_values(values)
    if found == [None, None]:
        with pytest.raises(SingularError):
            with_values.numeric()
        return
    ratio = with_values.numeric()
    for s, wanted in zip(FREQUENCIES, found, strict=True):
        if wanted is not None:
            assert ratio.at(s) == wanted, f"{sketch.text}\n{values}"


def assert_agrees_modulo(sketch: Sketch, H: Transfer, seed: int) -> None:
    """Diagrams, expanded form and the oracle's elimination at a random point modulo each prime."""
    for prime in PRIMES:
        random = Random(f"{prime} {seed}")
        values = {name: random.randrange(1, prime) for name in ("s", *sketch.values)}
        point = [values[str(symbol)] for symbol in H.ring.symbols]
        wanted = oracle.transfer_modulo(sketch.drawing, values, prime)
        n, d = H.quotient.modulo(point, prime)
        assert d, "a random point is no natural frequency"
        assert n == wanted * d % prime, f"the diagrams of\n{sketch.text}"
        top = oracle.element_modulo(H.numerator, point, prime)
        bottom = oracle.element_modulo(H.denominator, point, prime)
        assert bottom
        assert top == wanted * bottom % prime, f"the expanded form of\n{sketch.text}"


def assert_paths_are_monomials(sketch: Sketch, H: Transfer) -> None:
    """As many terms as paths in each determinant, every coefficient +1 or -1: nothing has cancelled."""
    for determinant in (H.quotient.numerator, H.quotient.denominator):
        take, leave = (
            map(H.naming.generators.element, side) for side in (determinant.take, determinant.leave)
        )
        written = determinant.diagram.evaluate(list(take), list(leave), H.ring.one)
        assert len(written) == determinant.diagram.count(), sketch.text
        assert {abs(int(c)) for c in written.values()} <= {1}, sketch.text


@pytest.mark.parametrize("first", range(0, SMALL, BLOCK))
def test_small_networks_are_sympys_determinant(first: int) -> None:
    for seed, sketch, H in in_block(first):
        N, D = oracle.polynomials(sketch.drawing, tuple(sketch.values))
        if seed % 20 == 0:
            symbols = tuple(sketch.values)
            assert oracle.polynomials(sketch.drawing, symbols, oracle.sympys_determinant) == (N, D)
        assert moved(H.numerator, D.ring) * D == moved(H.denominator, D.ring) * N, sketch.text
        if is_single(seed):
            assert_paths_are_monomials(sketch, H)
            aside = prod(block.determinant.terms for block in H.quotient.aside)
            assert tuple(aside * terms for terms in H.terms) == (len(N), len(D)), sketch.text
            assert {abs(int(c)) for c in (*N.values(), *D.values())} <= {1}
        assert_agrees_modulo(sketch, H, seed)
        assert_is_the_solution(sketch, H, sketch.values)
        assert_is_the_solution(sketch, H, degenerate(sketch, seed))


@pytest.mark.parametrize("first", range(SMALL, ALL, BLOCK))
def test_larger_networks_agree_modulo_two_primes(first: int) -> None:
    for seed, sketch, H in in_block(first):
        assert_agrees_modulo(sketch, H, seed)
        if is_single(seed) and max(H.terms) < 5000:
            assert_paths_are_monomials(sketch, H)
        if seed % 2:
            assert_is_the_solution(sketch, H, degenerate(sketch, seed))


def test_what_is_drawn_is_worth_testing() -> None:
    """All part kinds are met, and most networks have an H that is not zero."""
    sketches = [sketch_of(seed) for seed in range(0, ALL, 20)]
    kinds = {part[0] for sketch in sketches for part in sketch.drawing.parts}
    assert kinds == {"R", "L", "C", "Z", "Y", "hold", "push", "opamp"}
    assert {sketch.drawing.drive[0] for sketch in sketches} == {"voltage", "current"}
    solutions = [solution(sketch, {**sketch.values, "s": FREQUENCIES[0]}) for sketch in sketches]
    assert sum(bool(found) for found in solutions) > len(sketches) / 2
