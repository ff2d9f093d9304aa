"""Ring elements as expressions on a line: factors with the voltage they belong to, sums grouped by powers of s."""

from __future__ import annotations

from fractions import Fraction
from typing import TYPE_CHECKING

from symnet.exact.readable.forms import readable_transfer
from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Sum, negative
from symnet.quantities import NUMBER
from symnet.typeset import tree as shown
from symnet.typeset.length import length
from symnet.typeset.notation import tree_of

if TYPE_CHECKING:
    from collections.abc import Collection, Mapping

    from sympy.polys.fields import FracElement
    from sympy.polys.rings import PolyElement

__all__ = ["coefficient", "combination", "difference", "expression_of", "factors_of", "over", "with_voltage"]

_ONE = Number(Fraction(1))


def expression_of(tree: shown.Tree) -> Expression:
    """A display tree of exact value as an expression of the notation."""
    match tree:
        case shown.Atom(name):
            return Name(name)
        case shown.Constant(value):
            if value.denominator == 1:
                return Number(value, NUMBER)
            return Product(
                ((1, Number(Fraction(value.numerator))), (-1, Number(Fraction(value.denominator))))
            )
        case shown.Sum(terms):
            return Sum(tuple((sign, expression_of(term)) for sign, term in terms))
        case shown.Product(factors):
            joined: list[tuple[int, Expression]] = []
            for factor in factors:
                joined += factors_of(expression_of(factor))
            return Product(tuple(joined))
        case shown.Quotient(shown.Quotient() as numerator, denominator):
            # a fraction on top of a fraction is written beside it: R2/R1*1/(1 + s*R2*C2)
            above = factors_of(expression_of(numerator))
            return Product((*above, (1, _ONE), (-1, expression_of(denominator))))
        case shown.Quotient(numerator, denominator):
            return over(expression_of(numerator), expression_of(denominator))
        case shown.Power(base, exponent):
            return Power(expression_of(base), exponent)
        case shown.Parallel(branches):
            return Parallel(tuple(map(expression_of, branches)))
        case _:
            raise ValueError("only formulas without roots and without terms left out are expressions")


def factors_of(expression: Expression) -> list[tuple[int, Expression]]:
    """The factors of a product, each with its exponent +1 or -1; anything else is its own."""
    return list(expression.factors) if isinstance(expression, Product) else [(1, expression)]


def over(numerator: Expression, denominator: Expression) -> Expression:
    """A fraction; signs go in front."""
    if isinstance(numerator, Sum) and len(numerator.terms) == 1 and numerator.terms[0][0] < 0:
        return negative(over(numerator.terms[0][1], denominator))
    return Product((*factors_of(numerator), (-1, denominator)))


def difference(plus: Expression, minus: Expression) -> Expression:
    """``plus - minus`` where either may be 0."""
    if isinstance(minus, Number) and not minus.value:
        return plus
    return negative(minus) if isinstance(plus, Number) and not plus.value else Sum(((1, plus), (-1, minus)))


def coefficient(value: FracElement) -> Expression:
    """A fraction of ring elements by powers of s: a short one beginning with 1, else one fraction."""
    n, d = value.numer, value.denom
    if (d != d.ring.one and all(c < 0 for c in n.values()) and any(c > 0 for c in (-d).values())) or 2 * sum(
        c < 0 for c in d.values()
    ) > len(d):
        n, d = -n, -d
    return expression_of(_beginning_with_one(n, d) or readable_transfer(n, d, "one fraction"))


def _beginning_with_one(n: PolyElement, d: PolyElement) -> shown.Tree | None:
    """``1 + R2/R1`` rather than ``(R1 + R2)/R1``, where the result stays short."""
    if len(d) != 1 or not 1 < len(n) <= 3 or d == d.ring.one:
        return None
    ((monomial, value),) = d.items()
    if monomial[0] or n.get(monomial) != value:
        return None
    rest = n - d
    common = rest.gcd(d)
    rest, below = rest.exquo(common), d.exquo(common)
    if len(rest) > 1:
        terms = []
        for m, c in sorted(rest.items()):
            single = rest.ring.from_dict({m: c})
            shared = single.gcd(below)
            terms.append(readable_transfer(single.exquo(shared), below.exquo(shared), "one fraction"))
        return shown.plus(shown.ONE, *terms)
    return shown.plus(shown.ONE, readable_transfer(rest, below, "one fraction"))


def with_voltage(factor: Expression, voltage: Expression) -> Expression:
    """A factor times a voltage, in the order of writing: ``s*C1*out``, ``out*(1 + s*R1*C1)``, ``out/R1``."""
    if isinstance(factor, Sum) and len(factor.terms) == 1:
        sign, inner = factor.terms[0]
        product = with_voltage(inner, voltage)
        return negative(product) if sign < 0 else product
    if factor == _ONE:
        return voltage
    if isinstance(factor, Number) and factor.value < 0:
        return negative(with_voltage(Number(-factor.value), voltage))
    if isinstance(factor, Sum):
        return Product(((1, voltage), (1, factor)))
    factors = factors_of(factor)
    place = next(
        (k for k, (power, inner) in enumerate(factors) if power < 0 or isinstance(inner, Sum)), len(factors)
    )
    kept = [(p, f) for p, f in factors[:place] if f != _ONE]
    return Product((*kept, (1, voltage), *factors[place:]))


def combination(form: Mapping[str, FracElement], order: Mapping[str, int]) -> Expression:
    """A sum of voltages with their factors, over one denominator where that is shorter."""
    if not form:
        return Number(Fraction(0))
    names = sorted(form, key=lambda name: order.get(name, len(order)))
    apart = _sum([_signed(form[name], name) for name in names])
    if len(names) == 1:
        return apart
    field = form[names[0]].field
    common = field.ring.one
    for name in names:
        common = common.lcm(form[name].denom)
    numerators = {name: (form[name] * field(common)).numer for name in names}
    shared = _shared(numerators.values())
    above = _sum([_signed(field(numerators[name].exquo(shared)), name) for name in names])
    if shared != field.ring.one:
        above = Product((*factors_of(coefficient(field(shared))), (1, above)))
    joint = above if common == field.ring.one else over(above, coefficient(field(common)))
    return joint if _size(joint) < _size(apart) else apart


def _shared(polynomials: Collection[PolyElement]) -> PolyElement:
    """The product of names that all terms of all of them have in common."""
    monomials = [monomial for polynomial in polynomials for monomial in polynomial]
    ring = next(iter(polynomials)).ring
    return ring.from_dict({tuple(map(min, zip(*monomials, strict=True))): ring.domain.one})


def _size(expression: Expression) -> int:
    return length(tree_of(expression))


def _sum(terms: list[tuple[int, Expression]]) -> Expression:
    if len(terms) == 1:
        sign, term = terms[0]
        return term if sign > 0 else negative(term)
    first = next((k for k, (sign, _) in enumerate(terms) if sign > 0), 0)
    return Sum((terms[first], *terms[:first], *terms[first + 1 :]))


def _signed(value: FracElement, name: str) -> tuple[int, Expression]:
    written = with_voltage(coefficient(value), Name(name))
    if isinstance(written, Sum) and len(written.terms) == 1:
        return written.terms[0]
    return 1, written
