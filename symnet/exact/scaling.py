"""A scaled network and the identity that says so: H_scaled(s) = k_H * H(s/k_f), checked exactly and not assumed.

The scaled network is derived afresh. In symbols the claim is that H_scaled, as a function of the scaled names,
is k_H times H with s/k_f and x/k_x in the place of s and of every name x, where k_x follows from the unit of x
(:mod:`symnet.circuit.scaling`) and k_H from the unit of H. Such a substitution turns lowest terms into lowest
terms, so N and D are compared term by term: a few multiplications for each term, and no gcd. In numbers the two
exact ratios are compared.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from random import Random
from typing import TYPE_CHECKING, Final

from symnet.circuit.network import Network
from symnet.circuit.scaling import Factor, Factors, frequency_factor, impedance_factor, scaled
from symnet.errors import SingularError, WiringError
from symnet.exact.derive import derive_all
from symnet.exact.modular import PRIME, Residue
from symnet.exact.ratio import Ratio
from symnet.quantities import engineering
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.exact.transfer import Transfer

__all__ = ["Identity", "Scaling", "is_scaled_copy", "scale"]

#: Beyond this many terms H is not written out where its exact numbers say the same.
_MOST_TERMS_BESIDE_NUMBERS: Final = 5_000


@dataclass(frozen=True, slots=True)
class Identity:
    """``after(s) = factor * before(s/frequency)``, with how it was checked.

    ``factor`` is k_H: 1 for a voltage ratio, the impedance factor for an impedance. ``holds`` is the outcome;
    it is None, and ``how`` says why, where a symbol has no unit by which it could be scaled.
    """

    before: Transfer
    after: Transfer
    frequency: Fraction
    factor: Fraction
    holds: bool | None
    how: str

    def __str__(self) -> str:
        front = "" if self.factor == 1 else f"{engineering(self.factor)} * "
        inside = "s" if self.frequency == 1 else f"s/{engineering(self.frequency, digits=6)}"
        state = {True: "holds", False: "does NOT hold", None: "is open"}[self.holds]
        return f"H_scaled(s) = {front}H({inside}) for H = {self.before.label}; {state}: {self.how}"


@dataclass(frozen=True, slots=True, repr=False)
class Scaling(Displayed):
    """A network and its scaled copy, with one identity for each drive and read. Made by :func:`scale`.

    ``network`` is the scaled one; ``factors`` are the exact factors of frequency and impedance. ``note`` says why
    there is no identity where there is none.
    """

    before: Network
    network: Network
    factors: Factors
    identities: tuple[Identity, ...]
    note: str = ""

    @property
    def holds(self) -> bool:
        """Whether every identity was checked and holds; False where there was none to check."""
        return bool(self.identities) and all(identity.holds for identity in self.identities)

    def __repr__(self) -> str:
        f, z = (engineering(k, digits=6) for k in (self.factors.frequency, self.factors.impedance))
        checked = "identity holds" if self.holds else self.note or "identity not confirmed"
        return f"<Scaling: frequencies * {f}, impedances * {z}; {checked}>"


def scale(network: Network, frequency: Factor | None = None, impedance: Factor | None = None) -> Scaling:
    """A network scaled in frequency and impedance, and the proof that H is the same function of s/k_f.

    Every number in volt^v * ampere^a * second^t is multiplied by k_z^(-a) * k_f^(-t), exactly; so R by k_z, L by
    k_z/k_f, C by 1/(k_z*k_f), a gm by 1/k_z, a time by 1/k_f. Then, exactly,

        H_scaled(s) = k_H * H(s/k_f),    k_H = 1 for V/V and A/A, k_z for ohm, 1/k_z for siemens.

    Parameters
    ----------
    network
        Of any kind; parts without a value stay symbols, ties and tolerances are kept.
    frequency
        k_f: a number (exact), ``"62.8 Mrad/s"`` (1 rad/s goes there, exact), ``"10 MHz"`` (1 rad/s goes to
        2 pi * 10 MHz; 2 pi to 30 digits, and everything after that is exact), or a pair
        ``("1 kHz", "10 kHz")`` from one frequency to another (exact). Nothing: frequencies stay.
    impedance
        k_z: a number, ``"50 ohm"`` (1 ohm becomes 50 ohm), or a pair ``("600 ohm", "50 ohm")``.

    Raises
    ------
    NotationError
        A factor that is no positive number.
    DimensionError
        A factor in another unit.

    >>> import symnet as sn
    >>> prototype = sn.network("in -- Rs -- a -- L1 -- b -- L2 -- out -- RL -- gnd; b -- C1 -- gnd;"
    ...     "Rs, RL = 1; L1, L2 = 1; C1 = 2; drive in; read out")
    >>> result = scale(prototype, frequency="10 MHz", impedance=50)
    >>> values = sn.derive(result.network).values
    >>> [f"{float(values[name]):.5g}" for name in ("Rs", "L1", "C1", "L2")]
    ['50', '7.9577e-07', '6.3662e-10', '7.9577e-07']
    >>> print(result.identities[0])
    H_scaled(s) = H(s/6.28319e7) for H = out/in; holds: exactly, in numbers and in symbols
    """
    factors = Factors(frequency_factor(frequency), impedance_factor(impedance))
    after = scaled(network, factors)
    if not network.drives or not network.reads:
        return Scaling(network, after, factors, (), "no drive or no read, so no H to compare")
    try:
        pairs = zip(derive_all(network), derive_all(after), strict=True)
        identities = tuple(_identity(a, b, factors) for a, b in pairs)
    except (WiringError, SingularError) as error:
        return Scaling(network, after, factors, (), f"no H to compare: {error.faults[0].message}")
    return Scaling(network, after, factors, identities)


def is_scaled_copy(
    before: Transfer, after: Transfer, frequency: Factor | None = None, impedance: Factor | None = None
) -> bool:
    """Whether after(s) = k_H * before(s/k_f), exactly: in numbers where both have them, and in symbols.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 = 1k -- out -- C1 = 1u -- gnd; drive in; read out")
    >>> slow, fast = sn.derive(net), sn.derive(net.with_values(C1="100n"))
    >>> is_scaled_copy(slow, fast, frequency=10), is_scaled_copy(slow, fast, frequency=2)
    (True, False)
    """
    factors = Factors(frequency_factor(frequency), impedance_factor(impedance))
    return bool(_identity(before, after, factors).holds)


def _identity(before: Transfer, after: Transfer, factors: Factors) -> Identity:
    factor = factors.of(after.dimension)
    numeric = before.is_numeric and after.is_numeric
    checks = []
    if numeric:
        checks.append(
            ("in numbers", after.numeric() == _times(before.numeric().stretched(factors.frequency), factor))
        )
    written = before.quotient.is_writable and after.quotient.is_writable
    if not numeric or (written and max(before.terms) <= _MOST_TERMS_BESIDE_NUMBERS):
        open_units = [name for name in before.names if before.dimensions.get(name) is None]
        if open_units:
            said = (
                f"the unit of {', '.join(open_units)} is open: say, for example, free {open_units[0]} in ohm"
            )
            return Identity(before, after, factors.frequency, factor, None, said)
        scales = {
            name: factors.of(dimension)
            for name, dimension in before.dimensions.items()
            if dimension is not None
        }
        numbers_scaled = all(
            after.values.get(name) == value * scales[name]
            for name, value in before.values.items()
            if name in before.names
        )
        if written:
            checks.append(("in symbols", numbers_scaled and _same_terms(before, after, scales, factor)))
        else:
            found = numbers_scaled and _same_modulo(before, after, scales, factor)
            checks.append(("in symbols at a random point modulo 2^127 - 1", found))
    how = " and ".join(where for where, _ in checks)
    exactly = "" if "random" in how else "exactly, "
    return Identity(
        before, after, factors.frequency, factor, all(passed for _, passed in checks), exactly + how
    )


def _times(ratio: Ratio, factor: Fraction) -> Ratio:
    return Ratio.of([c * factor for c in ratio.num], ratio.den)


def _same_terms(before: Transfer, after: Transfer, scales: Mapping[str, Fraction], factor: Fraction) -> bool:
    """Whether N'/D' is factor times N/D with x/k_x for every x; all four in lowest terms."""
    above = _constant_between(before.numerator, after.numerator, scales)
    below = _constant_between(before.denominator, after.denominator, scales)
    if not before.numerator:
        return not after.numerator and below is not None
    return above is not None and below is not None and above == factor * below


def _constant_between(
    before: PolyElement, after: PolyElement, scales: Mapping[str, Fraction]
) -> Fraction | None:
    """The number that ``after`` is times ``before`` with x/k_x in the place of x; None if there is none."""
    names = [str(symbol) for symbol in before.ring.symbols]
    wanted = _by_name(after)
    if len(wanted) != len(before):
        return None
    found: Fraction | None = None
    for monomial, coefficient in before.items():
        powers = [(name, e) for name, e in zip(names, monomial, strict=True) if e]
        other = wanted.get(frozenset(powers))
        if other is None:
            return None
        value = Fraction(int(coefficient))
        for name, exponent in powers:
            value /= scales[name] ** exponent
        if found is None:
            found = other / value
        elif other != found * value:
            return None
    return found


def _by_name(polynomial: PolyElement) -> dict[frozenset[tuple[str, int]], Fraction]:
    names = [str(symbol) for symbol in polynomial.ring.symbols]
    return {
        frozenset((name, e) for name, e in zip(names, monomial, strict=True) if e): Fraction(int(c))
        for monomial, c in polynomial.items()
    }


def _same_modulo(before: Transfer, after: Transfer, scales: Mapping[str, Fraction], factor: Fraction) -> bool:
    """The same at a random point modulo a prime, for an H that is too long to be written out."""
    random = Random("scaling")
    residues = {name: Residue.of(k.numerator, k.denominator) for name, k in scales.items()}
    k_H = Residue.of(factor.numerator, factor.denominator)
    point = {str(symbol): Residue(random.randrange(1, PRIME)) for symbol in before.ring.symbols}
    old = [(value / residues.get(name, Residue(1))).value for name, value in point.items()]
    new = [point[str(symbol)].value for symbol in after.ring.symbols if str(symbol) in point]
    if len(new) != after.ring.ngens:
        return False
    n, d = (Residue(int(v)) for v in before.quotient.modulo(old, PRIME))
    m, e = (Residue(int(v)) for v in after.quotient.modulo(new, PRIME))
    return m * d == k_H * n * e
