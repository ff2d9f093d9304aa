"""Expressions, quantities and dimensions as they are spelled in the notation, so that they read back as they were."""

from __future__ import annotations

from fractions import Fraction

from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Root, Sum
from symnet.quantities import HERTZ, NUMBER, WRITTEN_UNITS, Dimension, engineering

__all__ = ["write_dimension", "write_expression", "write_quantity"]

_SUM, _PRODUCT, _PARALLEL, _POWER, _ATOM = range(5)


def write_expression(expression: Expression) -> str:
    """An expression in the notation, with the parentheses it needs.

    >>> from symnet.circuit.reading import read_expression
    >>> write_expression(read_expression("-mu*(p-m)||2 kohm/(1+s^-2)"))
    '-mu*((p - m) || 2 kohm)/(1 + s^-2)'
    """
    return _written(expression)[0]


def _written(expression: Expression) -> tuple[str, int]:
    match expression:
        case Name(name=name):
            return name, _ATOM
        case Number():
            return _number(expression)
        case Sum(terms=((-1, term),)):
            # A minus binds looser than a product only where it stands first: -a*b is -(a*b).
            return f"-{_inside(term, _PRODUCT)}", _SUM
        case Sum(terms=terms):
            written = [(" + " if sign > 0 else " - ") + _inside(term, _PRODUCT) for sign, term in terms]
            first = written[0].removeprefix(" + ")
            return "".join([f"-{first[3:]}" if first.startswith(" - ") else first, *written[1:]]), _SUM
        case Product(factors=factors):
            written = [_factor(power, factor) for power, factor in factors]
            first = written[0].removeprefix("*")
            return "".join([f"1{first}" if first.startswith("/") else first, *written[1:]]), _PRODUCT
        case Parallel(branches=branches):
            return " || ".join(_inside(branch, _POWER) for branch in branches), _PARALLEL
        case Power(base=base, exponent=exponent):
            return f"{_inside(base, _ATOM)}^{exponent}", _POWER
        case Root(base=base):
            return f"sqrt({_written(base)[0]})", _ATOM


def _factor(power: int, factor: Expression) -> str:
    text = _inside(factor, _PARALLEL)
    if power > 0:
        return f"*{text}"
    # 1/2 kohm is 1/(2 kohm), but few readers would bet on it
    return f"/({text})" if isinstance(factor, Number) and " " in text else f"/{text}"


def _inside(expression: Expression, least: int) -> str:
    text, binding = _written(expression)
    if binding == _PARALLEL:  # || binds tighter than *, but few readers would guess it
        return f"({text})"
    return f"({text})" if binding < least or (least == _ATOM and " " in text and binding == _ATOM) else text


def _number(number: Number) -> tuple[str, int]:
    value, dimension = number.value, number.dimension
    text = write_quantity(value, dimension)
    if text.endswith(" s") and "/" not in text:
        text = f"{engineering(value * 1000, exact=True)} ms"  # a bare s would look like the Laplace variable
    simple = value >= 0 and not ("/" in text and not text.endswith("rad/s")) and "*" not in text
    return text, _ATOM if simple else _SUM


def write_quantity(value: Fraction, dimension: Dimension, own: Dimension | None = None) -> str:
    """An exact value with its unit; ``own`` is the dimension that the name at hand has anyway."""
    if dimension == NUMBER:
        return engineering(value, NUMBER, exact=True)
    if dimension == HERTZ:
        return engineering(value, HERTZ, exact=True, unit="rad/s")
    text = engineering(value, dimension, exact=True)
    # Declared with a dimension that has no unit of its own: the bare number takes it when it is read.
    if dimension in WRITTEN_UNITS or dimension == own:
        return text
    powers = (("1 V", dimension.v), ("1 A", dimension.a), ("1000 ms", dimension.t))
    return "*".join([text, *(f"({unit})^{power}" for unit, power in powers if power)])


def write_dimension(dimension: Dimension) -> str:
    """A dimension behind ``free x in``.

    >>> from symnet.quantities import OHM
    >>> write_dimension(OHM), write_dimension(NUMBER)
    ('ohm', 'V/V')
    """
    return "V/V" if dimension == NUMBER else str(dimension)
