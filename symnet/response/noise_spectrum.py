"""From sources to what each of them makes at the read: spectral densities as exact functions of w^2.

With N_k/D from source k to the read, the density there is that of the source times |N_k|^2/|D|^2, rational in x = w^2.
A branch Z = p/q makes 4kT Re Z = 4kT Re(p q*)/|q|^2, and its numerator is divisible by q (for a current source beside
it, of the density 4kT Re Y, by p): so all sources keep the one denominator |D|^2, which is what makes their integrals
cheap. The same steps hold for numbers and for elements of the ring of names.

A mode of the network that no source brings to the read is a factor of all N_k and of D; it is taken out of them, and
looked at apart: it makes no noise here, but a network with a growing mode has no noise to speak of.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING

from symnet.circuit.parts import Branch
from symnet.errors import Fault, UndefinedError
from symnet.exact import dense
from symnet.exact.determinant import coefficients_at
from symnet.exact.roots import Root, roots
from symnet.quantities import TWO_PI
from symnet.response.axis import product, real_part, squared, trimmed
from symnet.typeset.numbers import complex_quantity, quantity

if TYPE_CHECKING:
    from symnet.exact.superposition import Superposition
    from symnet.response.noise_sources import Source, Sources

__all__ = ["BOLTZMANN", "Spectrum", "divides_by_numerator", "improper", "spectrum", "unstable"]

#: The Boltzmann constant in J/K: exact by definition of the kelvin (SI, 26th CGPM 2018, in force since 20 May 2019).
BOLTZMANN = Fraction("1.380649e-23")


@dataclass(frozen=True, slots=True)
class Spectrum:
    """What the sources make at the read: ``numerators``, in x, over |D|^2; in V^2/Hz (A^2/Hz), white part alone.

    ``d`` are the coefficients of D, ascending in s. ``own`` are the densities of the sources themselves, in V^2/Hz or
    A^2/Hz, of those that are white.
    """

    sources: tuple[Source, ...]
    numerators: tuple[list[Fraction], ...]
    own: tuple[Fraction | None, ...]
    d: list[Fraction]
    remarks: tuple[str, ...]

    @property
    def order(self) -> int:
        """The degree of D."""
        return len(self.d) - 1


def spectrum(found: Sources, sup: Superposition, kelvin: Fraction) -> Spectrum:
    """The densities at the read of the sources that have one, for numbers.

    Raises UndefinedError when the network is not stable.
    """
    tops, d = sup.numbers()
    reached = dict(zip(found.sources, tops[len(tops) - len(found.sources) :], strict=True))
    four_kt = 4 * BOLTZMANN * kelvin
    kept: list[tuple[Source, list[Fraction], Sequence[Fraction], Fraction | None]] = []
    negative = []
    for source, top in reached.items():
        top = trimmed(top)
        if source.kind != "thermal":
            if top:
                kept.append((source, top, [source.density**2], source.density**2))
            continue
        p, q, divisor = _immittance(sup, source)
        weight = trimmed(real_part(p, q)) if divisor else []
        if not weight:
            continue
        if not _never_negative(weight):
            negative.append(source.part)
            continue
        top = _over(top, divisor)
        if top:
            own = four_kt * p[0] / q[0] if len(p) == len(q) == 1 else None
            kept.append((source, top, [four_kt * c for c in weight], own))
    d, aside = _without_common(d, [top for _, top, _, _ in kept])
    remarks = list(_judged(d, aside))
    if negative:
        remarks.append(
            f"negative resistance has no thermal noise of its own, not counted: {', '.join(negative)}"
        )
    scale = [_over(top, aside) for _, top, _, _ in kept]
    return Spectrum(
        tuple(source for source, *_ in kept),
        tuple(
            trimmed(product(squared(top), weight)) for top, (_, _, weight, _) in zip(scale, kept, strict=True)
        ),
        tuple(own for *_, own in kept),
        d,
        tuple(remarks),
    )


def _immittance(sup: Superposition, source: Source) -> tuple[list[Fraction], list[Fraction], list[Fraction]]:
    """Numerator and denominator of Z (of Y, for a Y), and by which of them the way to the read is divisible."""
    values = [sup.naming.numbers[name] for name in sup.naming.generators.names[1:]]
    p, q = (trimmed(coefficients_at(terms, values)) for terms in sup.naming.terms(source.part))
    return p, q, p if divides_by_numerator(sup, source) else q


def divides_by_numerator(sup: Superposition, source: Source) -> bool:
    """Whether the way from a thermal source to the read is divisible by the numerator of its branch."""
    part = sup.network[source.part]
    assert isinstance(part, Branch)  # noqa: S101 - thermal sources belong to branches
    return (part.kind == "Y") == source.is_series


def improper(source: Source) -> UndefinedError:
    """The refusal of an integral that does not end."""
    hint = 'state a band, as in noise(net, band="up to 1 MHz"), or add what limits the band'
    return UndefinedError(
        Fault(
            f"the white noise of {source.name} reaches the read at infinite frequency: over all frequencies its power is "
            "infinite",
            hint,
            parts=(source.part,),
        )
    )


def unstable(pole: str, *, seen: bool = True) -> UndefinedError:
    """The refusal of a network whose noise grows, or never settles."""
    where = "" if seen else ", which the read does not show"
    return UndefinedError(
        Fault(
            f"the network has {pole}{where}: it does not settle, so that there is no noise to state",
            "noise is a figure of a stable network; look at the feedback, or at what is left floating",
        )
    )


def _over(top: Sequence[Fraction], divisor: Sequence[Fraction]) -> list[Fraction]:
    """A quotient without a rest."""
    if len(divisor) == 1:
        return [c / divisor[0] for c in top]
    content, tidy = dense.primitive(top)
    other, below = dense.primitive(divisor)
    found = dense.divide_exactly(tidy, below)
    assert found is not None  # noqa: S101 - see the module head
    return [c * content / other for c in found]


def _without_common(
    d: Sequence[Fraction], tops: Iterable[Sequence[Fraction]]
) -> tuple[list[Fraction], list[Fraction]]:
    """D without what it has in common with all the tops, and that."""
    bottom = dense.primitive(d)[1]
    common = bottom
    for top in tops:
        if len(common) == 1:
            break
        common = dense.gcd(common, dense.primitive(top)[1])[0]
    factor = [Fraction(c) for c in common]
    return _over(list(d), factor), factor


def _judged(d: Sequence[Fraction], aside: Sequence[Fraction]) -> Iterable[str]:
    """Remarks on modes that no source brings to the read; UndefinedError when anything grows."""
    for root in roots(d):
        if root.real >= 0:
            raise unstable(_pole(root))
    for root in roots(aside) if len(aside) > 1 else ():
        if root.real > 0:
            raise unstable(_pole(root), seen=False)
        if root.real == 0 and root.imag >= 0:
            yield f"no source brings {_pole(root)} to the read: it makes no noise here, and never settles"


def _pole(root: Root) -> str:
    if root.value == 0:
        return "a mode at s = 0"
    f = quantity(abs(root.value) / float(TWO_PI), "Hz")
    if root.real == 0:
        return f"a pair of modes on the jw axis, at {f}"
    where = complex_quantity(root.value, "rad/s", pair=not root.is_real)
    return f"a mode in the right half plane, at s = {where}"


def _never_negative(weight: Sequence[Fraction]) -> bool:
    """Whether a polynomial in x is nowhere negative for x >= 0."""
    if weight[-1] < 0:
        return False
    at_origin = next(c for c in weight if c)
    if at_origin < 0:
        return False
    return all(root.multiplicity % 2 == 0 for root in roots(weight) if root.is_real and root.real > 0)
