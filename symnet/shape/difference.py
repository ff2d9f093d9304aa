"""What changed between two versions of a network: the drawing part by part, H coefficient by coefficient.

The coefficients are compared in one normalisation of both (:mod:`symnet.shape.coefficients`). With numbers, the gains
at both ends, the -3.0103 dB frequencies and the poles are compared as well. Poles are paired nearest first, by the
ratio of their distance to their size.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Final

from symnet.circuit.changes import Changes, changes
from symnet.circuit.network import Network
from symnet.errors import LimitError, SingularError, UndefinedError, WiringError
from symnet.exact.derive import derive
from symnet.exact.transfer import Transfer
from symnet.quantities import NUMBER, Dimension
from symnet.shape.coefficients import CoefficientChange, GainChange, SideBySide
from symnet.shape.figures import HalfPower, f3db
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from symnet.exact.roots import Root

__all__ = ["Comparison", "FunctionChange", "PoleChange", "compare"]

_MOST_POLES: Final = 100


@dataclass(frozen=True, slots=True)
class PoleChange:
    """A pole in rad/s and what became of it; None where there is no such pole."""

    before: Root | None
    after: Root | None

    @property
    def relative(self) -> float | None:
        """The relative change of its distance from the origin, |after|/|before| - 1."""
        if self.before is None or self.after is None or not self.before.value:
            return None
        return abs(self.after.value) / abs(self.before.value) - 1


@dataclass(frozen=True, slots=True)
class FunctionChange:
    """H before and after. ``normalised`` says which coefficient is 1 in both.

    ``coefficients`` are those of N, then of D, by rising powers of s. ``same`` is whether both are the same
    function: of s where all values are known, else of the names; None where that is not decided. ``half_power``
    is (before, after), with None where there is no such figure or no number.
    """

    before: Transfer
    after: Transfer
    same: bool | None
    normalised: str
    coefficients: tuple[CoefficientChange, ...]
    gains: tuple[GainChange, ...]
    poles: tuple[PoleChange, ...]
    half_power: tuple[HalfPower | None, HalfPower | None]
    notes: tuple[str, ...]


@dataclass(frozen=True, slots=True, repr=False)
class Comparison(Displayed):
    """Two versions of a network side by side; true when anything differs. Made by :func:`compare`.

    ``changes`` are those of the drawing, ``function`` those of H, None where one of the two has no H; then ``note``
    says why.
    """

    before: Network
    after: Network
    changes: Changes
    function: FunctionChange | None
    note: str = ""

    @property
    def same_function(self) -> bool | None:
        """Whether H is the same; None where that is not known."""
        return None if self.function is None else self.function.same

    def __bool__(self) -> bool:
        return bool(self.changes) or self.same_function is False

    def __repr__(self) -> str:
        return f"<Comparison: {'; '.join(_in_short(self))}>"


def _in_short(comparison: Comparison) -> Iterator[str]:
    found = comparison.changes
    if not comparison:
        yield "nothing changed"
    for what, names in (
        ("added", [part.name for part in found.added]),
        ("removed", [part.name for part in found.removed]),
        ("moved", [each.name for each in found.moved]),
        ("law changed", [each.name for each in found.relaid]),
        ("value changed", [each.name for each in found.values]),
        ("node renamed", [old for old, _ in found.renamed]),
    ):
        if names:
            yield f"{what} {', '.join(names[:8])}{' ...' * (len(names) > 8)}"
    for what, (gone, new) in (
        ("couplings", found.couplings),
        ("drives", found.drives),
        ("reads", found.reads),
    ):
        if gone or new:
            yield f"{what} changed"
    same = {True: "H the same", False: "H changed", None: ""}[comparison.same_function]
    if same and comparison:
        yield same


def compare(
    before: Network | Transfer,
    after: Network | Transfer,
    read: str | None = None,
    drive: str | None = None,
) -> Comparison:
    """What changed between two versions of a network: in the drawing, and in H.

    Two networks are derived with ``read`` and ``drive`` as in :func:`symnet.derive`; two transfers are taken as
    they are. The result is true when anything differs, in the drawing or in H, so that ``if sn.compare(a, b):``
    asks for a difference; ``same_function`` tells whether H is the same. The order of writing is no difference.

    Raises NotationError for a read or drive that cannot be read in one of them. Where a network has no H (nothing
    drives it, it has several reads and none is asked for, it has no single solution) ``note`` says so, and the
    drawings are compared all the same.

    A load on two RC sections (R1, R2 = 1 kohm; C1, C2 = 100 nF): D = 1 + s a1 + s^2 a2, constant term 1 -> 1.2:

    >>> import symnet as sn
    >>> bare = sn.network("in -- R1 -- x -- R2 -- out; x -- C1 -- gnd; out -- C2 -- gnd;"
    ...     "R1, R2 = 1k; C1, C2 = 100n; drive in; read out")
    >>> found = compare(bare, bare.add("out -- RL = 10k -- gnd"))
    >>> found
    <Comparison: added RL; H changed>
    >>> found.function.normalised
    'the constant term of N is 1'
    >>> for c in found.function.coefficients:
    ...     print(c.side, c.power, c.before.value, c.after.value, c.unchanged, c.change)
    N 0 1.0 1.0 True <0>
    D 0 1.0 1.2 False <(R1 + R2)/RL>
    D 1 0.0003 0.00031 False <R1*R2*C1/RL>
    D 2 1e-08 1e-08 True <0>
    """
    first, first_note = _transfer(before, read, drive, "before")
    second, second_note = _transfer(after, read, drive, "after")
    found = changes(_drawn(before), _drawn(after))
    note = "; ".join(filter(None, (first_note, second_note)))
    function = None if first is None or second is None else _function(first, second)
    return Comparison(_drawn(before), _drawn(after), found, function, note)


def _drawn(given: Network | Transfer) -> Network:
    """The network; of a transfer, with the drive and the read that it is about."""
    if isinstance(given, Network):
        return given
    return replace(given.network, drives=(given.drive,), reads=(given.read,))


def _transfer(
    given: Network | Transfer, read: str | None, drive: str | None, which: str
) -> tuple[Transfer | None, str]:
    try:
        found = given if isinstance(given, Transfer) else derive(given, read, drive)
        if found.is_numeric:
            found.numeric()  # these values may leave no single solution
    except (WiringError, SingularError) as error:
        return None, f"no H {which}: {error.faults[0].message}"
    return found, ""


# -- H ------------------------------------------------------------------------------------------------------------


def _function(before: Transfer, after: Transfer) -> FunctionChange:
    notes: list[str] = []
    normalised = ""
    coefficients: tuple[CoefficientChange, ...] = ()
    if before.dimension != after.dimension:
        notes.append(
            f"H is {_with_in(before.dimension)} before and {_with_in(after.dimension)} after: "
            "its coefficients are not compared"
        )
        same: bool | None = False
        gains: tuple[GainChange, ...] = ()
    else:
        same = _same(before, after)
        try:
            sides = SideBySide.of(before, after)
        except (LimitError, UndefinedError) as error:
            notes.append(f"coefficients are not compared: {error.faults[0].message}")
            gains = ()
        else:
            normalised, coefficients = sides.best()
            gains = tuple(sides.gains())
            notes += sides.notes
    poles: tuple[PoleChange, ...] = ()
    if before.is_numeric and after.is_numeric:
        poles = _poles(before, after)
        if not poles and max(before.numeric().order, after.numeric().order):
            notes.append(f"more than {_MOST_POLES} poles are not paired")
    else:
        missing = [n for H in (before, after) for n in H.names if n not in H.values]
        shown = ", ".join(dict.fromkeys(missing[:8]))
        notes.append(f"poles and -3.0103 dB frequencies need values for {shown}{' ...' * (len(missing) > 8)}")
    return FunctionChange(
        before,
        after,
        same,
        normalised,
        coefficients,
        gains,
        poles,
        (_half_power(before), _half_power(after)),
        tuple(notes),
    )


def _with_in(dimension: Dimension) -> str:
    return "a number" if dimension == NUMBER else f"in {dimension}"


def _same(before: Transfer, after: Transfer) -> bool | None:
    if before.is_numeric and after.is_numeric:
        return before.numeric() == after.numeric()
    try:
        return before == after and all(before.values.get(n) == after.values.get(n) for n in before.names)
    except LimitError:
        return None


def _half_power(transfer: Transfer) -> HalfPower | None:
    if not transfer.is_numeric:
        return None
    try:
        return f3db(transfer)
    except (UndefinedError, LimitError):
        return None


# -- poles ---------------------------------------------------------------------------------------------------------


def _poles(before: Transfer, after: Transfer) -> tuple[PoleChange, ...]:
    """Every pole with the nearest one that is left, nearest pairs first; one row for a conjugate pair."""
    old, new = (
        [root for root in H.numeric().poles() for _ in range(root.multiplicity)] for H in (before, after)
    )
    if max(len(old), len(new)) > _MOST_POLES:
        return ()
    pairs = sorted(
        ((_distance(a, b), i, k) for i, a in enumerate(old) for k, b in enumerate(new)),
        key=lambda each: each[0],
    )
    partner: dict[int, int] = {}
    taken: set[int] = set()
    for _, i, k in pairs:
        if i not in partner and k not in taken:
            partner[i] = k
            taken.add(k)
    rows = [PoleChange(root, new[partner[i]] if i in partner else None) for i, root in enumerate(old)]
    rows += [PoleChange(None, root) for k, root in enumerate(new) if k not in taken]
    return tuple(row for row in rows if not all(r is None or r.imag < 0 for r in (row.before, row.after)))


def _distance(a: Root, b: Root) -> float:
    size = max(abs(a.value), abs(b.value))
    return abs(a.value - b.value) / size if size else 0.0
