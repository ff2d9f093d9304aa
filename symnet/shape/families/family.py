"""What a filter family has to tell, so that the matcher never needs to know which families there are.

A family is a set of shapes: for each order, and for each value of its continuous parameters, poles and perhaps
finite zeros. It gives them in the frequency scale of its own definition and names the references it defines
itself; everything else (w0, the -3 dB point, the delay) follows from the roots and is added here. A new family is
one file with a subclass of :class:`Family` and a constructor, and one line in the catalogue.
"""

# ruff: noqa: ARG002 - every family answers the same questions, needed or not
from __future__ import annotations

from abc import ABC, abstractmethod
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache, partial
from typing import Any, ClassVar, Final, TypeAlias

from sympy import Expr

from symnet.errors import Fault, LimitError, NotationError
from symnet.exact.roots import roots as exact_roots
from symnet.shape.families.arithmetic import context
from symnet.shape.families.prototype import Prototype, Reference, Setting, in_order, with_common_references

__all__ = [
    "LARGEST_ORDER",
    "Family",
    "Parameter",
    "Points",
    "Roots",
    "checked_order",
    "precise_roots",
    "with_conjugates",
]

#: Poles and finite zeros, in the family's own frequency scale.
Roots: TypeAlias = tuple[tuple[complex, ...], tuple[complex, ...]]

#: The same in an arithmetic of more digits: poles and finite zeros, each as its real and its imaginary part.
Points: TypeAlias = tuple[Sequence[tuple[Any, Any]], Sequence[tuple[Any, Any]]]

#: Beyond this order no table, no network and no double-precision coefficient is of any use.
LARGEST_ORDER: Final = 60


@dataclass(frozen=True, slots=True)
class Parameter:
    """A continuous parameter of a family, with the bounds between which the matcher looks for it.

    The matcher moves a coordinate from 0 to 1 between the bounds, evenly in the value or in its logarithm,
    whichever makes the shape move more evenly.
    """

    name: str
    unit: str
    lower: float
    upper: float
    logarithmic: bool = False

    def at(self, coordinate: float) -> float:
        """The value at a coordinate between 0 (lower bound) and 1 (upper bound)."""
        if self.logarithmic:
            return float(self.lower * (self.upper / self.lower) ** coordinate)
        return self.lower + (self.upper - self.lower) * coordinate


def checked_order(order: int) -> int:
    """The order if it is a whole number from 1 to :data:`LARGEST_ORDER`; otherwise an error that says so."""
    if not repr(order).isdecimal() or order < 1:  # neither True nor 3.0 is an order
        raise NotationError(f"the order of a filter is a whole number from 1 upwards, not {order!r}")
    if order > LARGEST_ORDER:
        raise LimitError(
            Fault(
                f"order {order} is beyond the largest order offered, {LARGEST_ORDER}",
                hint="a network of such an order is built from sections of lower order",
            )
        )
    return order


class Family(ABC):
    """One family of filter shapes, low-pass. Subclasses have no state, so an instance is as good as its class."""

    #: The name as it is printed in a verdict.
    name: ClassVar[str]
    #: Who defined it, and where.
    source: ClassVar[str]

    def parameters(self, order: int) -> tuple[Parameter, ...]:
        """The continuous parameters of the members of that order; none for a family of fixed shapes."""
        return ()

    def has_order(self, order: int) -> bool:
        """Whether the family has members of that order; some have even orders only, or are tabulated up to one."""
        return True

    def finite_zeros(self, order: int) -> int:
        """How many finite zeros a member of that order has; 0 for an all-pole family."""
        return 0

    @abstractmethod
    def roots(self, order: int, values: tuple[float, ...]) -> Roots:
        """Poles and finite zeros to full double precision, in the frequency scale of the definition."""

    def near(self, order: int, values: tuple[float, ...]) -> Roots:
        """The same to ten digits or more: for the steps of a fit, where the last digits take their time."""
        return self.roots(order, values)

    def points(self, m: Any, order: int, values: tuple[float, ...]) -> Points:
        """Poles and finite zeros to the full precision of ``m``, an mpmath context."""
        raise LimitError(Fault(f"{self.name}: poles are known to double precision only"))

    def precise(
        self, order: int, values: tuple[float, ...], digits: int
    ) -> tuple[tuple[Any, ...], tuple[Any, ...]]:
        """Poles and finite zeros as mpmath numbers of so many digits, in the frequency scale of the definition."""
        shown = context(digits)
        poles, zeros = self.points(context(digits + 15), order, values)
        return tuple(+shown.mpc(*p) for p in poles), tuple(+shown.mpc(*z) for z in zeros)

    def references(self, order: int, values: tuple[float, ...]) -> tuple[Reference, ...]:
        """The references that the definition gives, or that are known in closed form."""
        return ()

    def gain(self, order: int, values: tuple[float, ...]) -> float:
        """|H| at DC when the largest |H| of the pass band is 1."""
        return 1.0

    def equation(self, order: int, values: tuple[float, ...]) -> str:
        """The defining equation as text."""
        return ""

    def exact(self, order: int, values: tuple[float, ...]) -> tuple[Expr, ...] | None:
        """The denominator as exact numbers, ascending powers of s, where a person can read them."""
        return None

    def conditions(self, coefficients: Sequence[Any]) -> tuple[Any, ...] | None:
        """Polynomials in the coefficients of D (ascending) that all vanish exactly for a member of this family.

        They hold whatever the frequency scale, the gain and the parameters, and together with :meth:`positives`
        they suffice for a stable D whose coefficients are all positive. Only ``+ - *`` and integer factors are used, so that they can be asked of
        numbers and of ring elements alike. None if the family has no such polynomials.
        """
        return None

    def positives(self, coefficients: Sequence[Any]) -> tuple[Any, ...]:
        """Polynomials in the coefficients of D (ascending) that must be positive besides, for a free parameter to exist."""
        return ()

    def prototype(self, order: int, values: tuple[float, ...] = ()) -> Prototype:
        """The member of that order and those parameter values, in the frequency scale of the definition."""
        return build(self, order, values)


def build(family: Family, order: int, values: tuple[float, ...], *, exact: bool = True) -> Prototype:
    """Put together a member from what its family tells; what takes time, its exact denominator and the last digits of
    its poles where they do, on request.
    """
    poles, zeros = family.roots(order, values) if exact else family.near(order, values)
    parameters = family.parameters(order)
    return Prototype(
        family=family.name,
        order=order,
        poles=in_order(poles),
        zeros=in_order(zeros),
        gain=family.gain(order, values),
        references=with_common_references(poles, zeros, family.references(order, values)),
        settings=tuple(Setting(p.name, v, p.unit) for p, v in zip(parameters, values, strict=True)),
        equation=family.equation(order, values),
        exact=family.exact(order, values) if exact else None,
        refined=partial(family.precise, order, values),
    )


def with_conjugates(upper: Sequence[tuple[Any, Any]], real: Sequence[Any] = ()) -> list[tuple[Any, Any]]:
    """The roots of the upper half plane as (real, imaginary), their exact conjugates, and the real ones."""
    pairs = [point for x, y in upper for point in ((x, y), (x, -y))]
    return pairs + [(x, 0) for x in real]


def precise_roots(m: Any, ascending: Sequence[Fraction | int]) -> list[tuple[Any, Any]]:
    """The roots of a polynomial with exact coefficients, to the full precision of ``m``, an mpmath context."""

    def number(x: Fraction) -> Any:
        return m.mpf(x.numerator) / x.denominator

    return [
        (number(root.real), number(root.imag))
        for root in exact_roots(ascending, m.dps)
        for _ in range(root.multiplicity)
    ]


#: :func:`build`, remembered: for the round values that people ask for, not for the steps of a fit.
member = lru_cache(maxsize=512)(build)
