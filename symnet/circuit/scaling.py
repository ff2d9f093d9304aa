"""Frequency and impedance scaling: every number of a network times a power of two factors, as its unit says.

The equations of a network are the same in every system of units. Scaling is a change of units that is then read
in the old ones: voltages stay, currents are divided by k_z, times are divided by k_f. So a number in
volt^v * ampere^a * second^t is multiplied by

    k_z^(-a) * k_f^(-t),

which makes R and L grow with k_z and C shrink with it, L and C shrink with k_f, leaves V/V and A/A alone, and
treats a transconductance, a time constant and a corner frequency by the same rule. A tie keeps its form, and the
numbers in it are scaled by their own units, since both sides of it have one unit: ``C2 = 2*C1`` stays as it is,
``R2 = R1 + 100 ohm`` becomes ``R2 = R1 + 5 kohm`` for k_z = 50. Tolerances are relative and stay. A name without
a value stays a symbol, which from then on means the scaled part.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from decimal import Decimal
from fractions import Fraction
from math import isfinite
from typing import Final, TypeAlias

from symnet.circuit.network import Network
from symnet.circuit.parts import CurrentLaw, Part, VoltageLaw
from symnet.errors import DimensionError, Fault, NotationError
from symnet.expressions import Expression, Number, Parallel, Power, Product, Sum
from symnet.quantities import HERTZ, NUMBER, OHM, Dimension, Quantity, in_words, read_quantity

__all__ = ["TWO_PI", "Factor", "Factors", "frequency_factor", "impedance_factor", "scaled"]

#: 2 pi to 30 digits (from memory; the tests compute it): what "10 MHz" is in rad/s.
TWO_PI: Final = Fraction("6.28318530717958647692528676656")

Plain: TypeAlias = str | int | Fraction | Decimal | float
#: A number, a quantity as text, or the two values (from, to) whose quotient is meant.
Factor: TypeAlias = Plain | tuple[Plain, Plain]


@dataclass(frozen=True, slots=True)
class Factors:
    """The two factors of a scaling: every frequency times ``frequency``, every impedance times ``impedance``.

    >>> from symnet.quantities import FARAD
    >>> Factors(frequency=Fraction(1000), impedance=Fraction(50)).of(FARAD)
    Fraction(1, 50000)
    """

    frequency: Fraction = Fraction(1)
    impedance: Fraction = Fraction(1)

    def of(self, dimension: Dimension) -> Fraction:
        """What a quantity of this dimension is multiplied by: impedance^(-a) * frequency^(-t)."""
        return self.impedance**-dimension.a * self.frequency**-dimension.t

    def apply(self, expression: Expression) -> Expression:
        """The expression with every number in it scaled by its unit; names stay."""
        match expression:
            case Number(value, dimension, span):
                return Number(value * self.of(dimension), dimension, span)
            case Sum(terms, span):
                return Sum(tuple((sign, self.apply(term)) for sign, term in terms), span)
            case Product(factors, span):
                return Product(tuple((power, self.apply(factor)) for power, factor in factors), span)
            case Power(base, exponent, span):
                return Power(self.apply(base), exponent, span)
            case Parallel(branches, span):
                return Parallel(tuple(self.apply(branch) for branch in branches), span)
            case _:
                return expression


def scaled(network: Network, factors: Factors) -> Network:
    """The network with every number in its values, laws and reads scaled, exactly.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 = 1 -- out -- C1 = 2 ±5% -- gnd; drive in; read out")
    >>> print(scaled(net, Factors(Fraction(10**6), Fraction(1000))).to_text())
    in -- R1 -- out -- C1 -- gnd
    drive in
    read out
    R1 = 1 kohm
    C1 = 2 nF ±5%
    """
    return replace(
        network,
        parts=tuple(_scaled_part(part, factors) for part in network.parts),
        reads=tuple(factors.apply(read) for read in network.reads),
        values=tuple(
            (name, replace(value, expression=factors.apply(value.expression)))
            for name, value in network.values
        ),
        text=None,
    )


def _scaled_part(part: Part, factors: Factors) -> Part:
    return (
        replace(part, value=factors.apply(part.value)) if isinstance(part, VoltageLaw | CurrentLaw) else part
    )


# -- the factors -------------------------------------------------------------------------------------------------


def frequency_factor(given: Factor | None) -> Fraction:
    """By what every frequency is multiplied.

    - a number: the factor itself, exact (a float as the decimal that Python prints for it);
    - text in rad/s: what lies at 1 rad/s goes there, exact;
    - text in Hz: what lies at 1 rad/s goes to this f, so the factor is 2 pi f with 2 pi to 30 digits;
    - a pair: from the first frequency to the second, exact where both have the same unit.

    Raises NotationError for what is no positive number, DimensionError for another unit.

    >>> frequency_factor(("1 kHz", "10 kHz")), frequency_factor("2 krad/s"), frequency_factor(10)
    (Fraction(10, 1), Fraction(2000, 1), Fraction(10, 1))
    >>> float(frequency_factor("10 MHz"))
    62831853.071795866
    """
    return _factor("frequency", given, HERTZ)


def impedance_factor(given: Factor | None) -> Fraction:
    """By what every impedance is multiplied: a number, ohms that 1 ohm becomes, or a pair (from, to).

    >>> impedance_factor("50 ohm"), impedance_factor(("600 ohm", "50 ohm"))
    (Fraction(50, 1), Fraction(1, 12))
    """
    return _factor("impedance", given, OHM)


def _factor(what: str, given: Factor | None, dimension: Dimension) -> Fraction:
    if given is None:
        return Fraction(1)
    if isinstance(given, str) or not isinstance(given, Sequence):
        return _positive(what, given, dimension).value
    if len(given) != 2:
        raise NotationError(
            Fault(f"the {what} is given as {len(given)} values", "give a factor, or a pair (from, to)")
        )
    start, end = (_positive(what, each, dimension) for each in given)
    if start.dimension != end.dimension:
        raise DimensionError(
            Fault(
                f"the two values of the {what} are {in_words(start.dimension)} and {in_words(end.dimension)}",
                "give both with their unit",
            )
        )
    return end.value / start.value  # between two values in Hz, 2 pi cancels


def _positive(what: str, given: Plain, dimension: Dimension) -> Quantity:
    quantity = _quantity(what, given)
    if quantity.dimension not in {NUMBER, dimension}:
        unit = "Hz or rad/s" if dimension == HERTZ else str(dimension)
        raise DimensionError(
            Fault(f"{given} is in {quantity.dimension}; the {what} is a factor, or a value in {unit}")
        )
    if quantity.value <= 0:
        raise NotationError(
            Fault(f"the {what} has to be positive, not {given}", "a factor below 1 scales down")
        )
    if _in_hertz(given):
        return replace(quantity, value=quantity.value * TWO_PI)
    return quantity


def _quantity(what: str, given: Plain) -> Quantity:
    if isinstance(given, str):
        return read_quantity(given)
    if isinstance(given, float | Decimal):
        if not isfinite(given):
            raise NotationError(Fault(f"the {what} is not a finite number: {given}"))
        return Quantity(Fraction(repr(given)) if isinstance(given, float) else Fraction(given))
    if isinstance(given, bool) or not isinstance(given, int | Fraction):
        raise NotationError(
            Fault(f"the {what} cannot be read from {type(given).__name__}", 'give a number or text: "10 MHz"')
        )
    return Quantity(Fraction(given))


def _in_hertz(given: Plain) -> bool:
    return isinstance(given, str) and given.strip().endswith("Hz")
