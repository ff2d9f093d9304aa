"""H(s) as a value: exact, in lowest terms, in the names of the parts.

A Transfer holds the two determinants as diagrams and writes them out when somebody looks at them; a figure
that needs numbers only is computed from the diagrams directly, in exact integers.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from itertools import count
from typing import TYPE_CHECKING, Any

from symnet.circuit.network import Network, ValueLike
from symnet.circuit.parts import Drive
from symnet.errors import Fault, MissingValueError, SingularError, UnknownNameError, nearest
from symnet.exact.confirm import Confirmation, undetermined
from symnet.exact.determinant import count_in_words
from symnet.exact.mutual import coefficients
from symnet.exact.quotient import Quotient
from symnet.exact.ratio import Ratio
from symnet.exact.readable.forms import readable_transfer
from symnet.quantities import Dimension
from symnet.typeset.displayed import Displayed
from symnet.typeset.writing import to_text

if TYPE_CHECKING:
    from sympy import Expr
    from sympy.polys.rings import PolyElement, PolyRing

    from symnet.exact.hidden import HiddenMode
    from symnet.exact.naming import Naming
    from symnet.expressions import Expression

__all__ = ["Transfer"]


@dataclass(frozen=True, eq=False, repr=False)
class Transfer(Displayed):
    """The exact transfer function H(s) = numerator/denominator from a drive to a read.

    Made by :func:`symnet.derive`. ``numerator`` and ``denominator`` are elements of ``ring`` (integers; the
    first generator is s in rad/s, then the names in order of appearance), in lowest terms; ``hidden`` are the
    modes of the network that this H does not show, each with the parts it lives in and the reason. ``values`` are the numbers
    (SI) of those names that have one. ``label`` says what over what, ``dimension`` in which unit.

    Two transfers are equal when they are the same function of the same names.

    >>> import symnet as sn
    >>> H = sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out"))
    >>> H.denominator
    s*R1*C1 + 1
    """

    network: Network
    drive: Drive
    read: Expression
    label: str
    dimension: Dimension
    naming: Naming
    quotient: Quotient
    confirmation: Confirmation
    """Which independent confirmation this H has had."""

    @property
    def ring(self) -> PolyRing:
        """The integer polynomial ring of numerator and denominator."""
        return self.naming.ring

    @cached_property
    def names(self) -> tuple[str, ...]:
        """The names that H hangs on, without s, in order of appearance.

        A name of the ring that has cancelled is not among them, unless H is too long to be written out.
        """
        names = self.naming.generators.names[1:]
        if not self.quotient.is_factored:
            return names
        lowest = self.quotient.lowest
        top, bottom = lowest.top.degrees(), lowest.bottom.degrees()
        return tuple(name for name, a, b in zip(names, top[1:], bottom[1:], strict=True) if a or b)

    @property
    def values(self) -> Mapping[str, Fraction]:
        """The numbers (SI units) of the names that have one."""
        return self.naming.numbers

    @property
    def dimensions(self) -> Mapping[str, Dimension | None]:
        """The dimension of s (1/second) and of every name."""
        return self.naming.dimensions

    @property
    def numerator(self) -> PolyElement:
        """N of H = N/D, written out, in lowest terms. LimitError when it would be too long."""
        return self.quotient.lowest.numerator

    @property
    def denominator(self) -> PolyElement:
        """D of H = N/D, written out, in lowest terms. LimitError when it would be too long."""
        return self.quotient.lowest.denominator

    @property
    def hidden(self) -> tuple[HiddenMode, ...]:
        """The cancelled factors that hold s: modes of the network that do not show in this H, and why."""
        return self.quotient.hidden

    @property
    def terms(self) -> tuple[int, int]:
        """An upper bound of the number of terms of N and D written out, known without expanding."""
        return self.quotient.terms

    @property
    def is_numeric(self) -> bool:
        """Whether every name in H has a number."""
        return all(name in self.values for name in self.names)

    @property
    def expr(self) -> Expr:
        """H as a sympy expression, one fraction of expanded polynomials; symbols are named as the parts."""
        return self.numerator.as_expr() / self.denominator.as_expr()

    def symbol(self, name: str) -> Expr:
        """The sympy symbol of a name, ``s`` included; UnknownNameError, with the nearest name, if there is none."""
        for symbol in self.ring.symbols:
            if str(symbol) == name:
                return symbol
        close = nearest(name, ("s", *self.names))
        hint = f"did you mean {close[0]}?" if close else "H holds: " + ", ".join(("s", *self.names))
        raise UnknownNameError(Fault(f"H holds no symbol called {name}", hint))

    def with_values(self, values: Mapping[str, ValueLike] | None = None, /, **named: ValueLike) -> Transfer:
        """The same H with other numbers for its names; nothing is derived anew.

        Values are given as to :meth:`Network.with_values`; None takes a number away. Raises UnknownNameError for
        a name that H does not hold, NotationError for a tie, which would make another H: derive the network with it.

        >>> import symnet as sn
        >>> H = sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out"))
        >>> H.with_values(R1="1k", C1="1u").numeric().den
        (Fraction(1, 1), Fraction(1, 1000))
        """
        given = {**(values or {}), **named}
        for name in given:
            self.symbol(name)
        network = self.network.with_values(given)
        return replace(self, network=network, naming=self.naming.with_numbers(network, given))

    @cached_property
    def _numeric(self) -> Ratio:
        missing = [name for name in self.names if name not in self.values]
        if missing:
            raise MissingValueError(
                Fault(
                    f"no value for {', '.join(missing)}",
                    f'give one: H.with_values({missing[0]}="...")',
                    parts=tuple(missing),
                )
            )
        if self.naming.irrational:
            polynomials = (self.numerator, self.denominator)
            return self._ratio(*coefficients(polynomials, self.values, self.naming.irrational))
        # a name that has cancelled may have any number, as long as it leaves N and D defined
        anything = (Fraction(prime) for prime in count(1_000_003, 2))
        top, bottom = self.quotient.numbers(
            [
                self.values[name] if name in self.values else next(anything)
                for name in self.naming.generators.names[1:]
            ]
        )
        return self._ratio(top, bottom)

    def _ratio(self, top: Sequence[int | Fraction], bottom: Sequence[int | Fraction]) -> Ratio:
        if not any(bottom):
            fault = undetermined(self.network, self.naming, self.values)
            raise SingularError(replace(fault, message=f"for these values {fault.message}"))
        return Ratio.of(top, bottom)

    def numeric(self) -> Ratio:
        """H with every name replaced by its number, exact.

        Raises MissingValueError when a name has none, SingularError when these values leave the equations
        without a single solution (a gain of exactly one around a loop, a negative resistor that cancels).
        """
        return self._numeric

    def __eq__(self, other: object) -> bool:
        if not isinstance(other, Transfer):
            return NotImplemented
        return self._canonical == other._canonical

    def __hash__(self) -> int:
        return hash(self._canonical)

    @cached_property
    def _canonical(self) -> tuple[frozenset[Any], frozenset[Any]]:
        return _named_terms(self.numerator), _named_terms(self.denominator)

    def __str__(self) -> str:
        """``out/in = ...`` in the readable form; the repr when H is too long to be written out."""
        if not self.quotient.is_writable:
            return repr(self)
        return f"{self.label} = {to_text(readable_transfer(self.numerator, self.denominator))}"

    def __repr__(self) -> str:
        n, d = self.terms
        shown = f"{count_in_words(n)} over {count_in_words(d)} terms" if max(n, d) > 1 else "a constant"
        return f"<Transfer {self.label}: {shown}, {self.confirmation.short}>"


def _named_terms(polynomial: PolyElement) -> frozenset[Any]:
    names = [str(symbol) for symbol in polynomial.ring.symbols]
    return frozenset(
        (frozenset((name, e) for name, e in zip(names, monomial, strict=True) if e), int(c))
        for monomial, c in polynomial.items()
    )
