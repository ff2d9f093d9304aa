"""Values that can be bought, chosen together: what comes nearest to the target, not what is nearest to each exact value.

Two rounded values move the response together, and the exact set that is rounded is only one of many: with other
capacitors other resistors are right, and some of those lie next to preferred values. So the combinations themselves are
compared by what they do (:mod:`symnet.values.choosing_aim`), all of them or by branch and bound
(:mod:`symnet.values.choosing_search`).
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import replace
from fractions import Fraction
from functools import partial
from pathlib import Path
from typing import TYPE_CHECKING, Final, TypeAlias

import numpy as np

from symnet.circuit.parts import CLASS_LETTERS, class_letter
from symnet.errors import Fault, LimitError, MissingValueError, NotationError, UnknownNameError, nearest
from symnet.exact.derive import derive
from symnet.exact.ratio import Ratio
from symnet.exact.transfer import Transfer
from symnet.expressions import Number
from symnet.quantities import NUMBER, Quantity
from symnet.shape.families.prototype import Prototype
from symnet.values.choosing_aim import Floats, Objective
from symnet.values.choosing_model import Model
from symnet.values.choosing_outcomes import outcomes_of
from symnet.values.choosing_result import Candidate, Choice, Chosen, Outcome
from symnet.values.choosing_search import Found, Space, search
from symnet.values.choosing_target import Wanted, aim_of, goal_of
from symnet.values.preferred import Preferred, preferred
from symnet.values.stock import load_stock

if TYPE_CHECKING:
    from symnet.circuit.network import Network

__all__ = ["choose"]

List: TypeAlias = "str | Preferred"
_Outcomes: TypeAlias = Callable[[Sequence[Fraction]], tuple[Outcome, ...]]

_USUAL: Final = {"R": ("E24", "1 kohm", "100 kohm"), "C": ("E6", "1 nF", "100 nF")}
_FAR: Final = 0.2  # an error beyond which the limits of the lists are doubted
_FAR_DB: Final = 2.0
_MOST_ALIKE: Final = 6


def choose(
    network: Network | Transfer,
    target: Prototype | Transfer | Ratio | None = None,
    *,
    f0: str | None = None,
    Q: float | None = None,
    K: float | str | None = None,
    R: List | None = None,
    C: List | None = None,
    L: List | None = None,
    keep: str | Iterable[str] = "",
    objective: Objective | None = None,
    band: tuple[str, str] | None = None,
    stock: str | Path | None = None,
    runners_up: int = 5,
    work: int = 20_000_000,
    **lists: List,
) -> Choice:
    """Values from series or from stock, chosen together so that H comes nearest to a target.

    Parameters
    ----------
    network
        What is to be built; ties in its text hold (``R2 = R1``). Its values, if it has some, are the exact ones.
    target
        A prototype at its frequency, or an H. Without one ``f0`` ("1 kHz") and ``Q`` say what a second-order H is to
        be, ``f0`` alone a first-order one; without these too it is the network with its exact values.
    K
        The gain that counts as well (1/1, ohm or siemens as H is); an H as target brings its own, which ``K="free"``
        leaves out. A prototype asks for none.
    R, C, L
        The list for resistors, capacitors, inductors: a series ("E24"), a series with limits ("E24, 1 kohm .. 1 Mohm"), or
        a list made by :func:`preferred`. Without limits: a decade to each side of the exact value, else 1 kohm to
        100 kohm and 1 nF to 100 nF. Without a word resistors are from E24, capacitors from E6, inductors stay.
    keep
        Names of parts that keep the value they have.
    objective
        "poles": the largest relative error |p - p*|/|p*| of poles and finite zeros (and of K). "f0/Q": the largest
        relative error of f0 and Q of the sections (and of finite zeros and K). "dB": the largest error of
        20 log10 |H| at 61 frequencies of ``band``, relative to K where K does not count. Without a word: dB with a
        band, f0/Q with f0, else poles.
    stock
        A CSV file (columns value, name, kind) whose lists stand for series that are not given.
    runners_up, work
        How many runners-up are listed, and about how many evaluations of H the search may take (a
        million take about half a second).
    lists
        The list of one part: ``C2="E3"``.

    Raises NotationError for a target that this H cannot have by its order, or lists that fit no part;
    MissingValueError where a part that is kept has no value; UnknownNameError for names that H does not hold.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- x -- R2 -- p; x -- C1 -- out; p -- C2 -- gnd; drive in; read out;"
    ...     "U1: opamp(plus=p, minus=out, out=out)")
    >>> sn.choose(net, f0="1 kHz", Q=2)
    <Choice: R1 = 9.1 kohm, R2 = 27 kohm, C1 = 47 nF, C2 = 2.2 nF; largest error of f0 and Q: 0.347 %; optimal>
    """
    H = network if isinstance(network, Transfer) else derive(network)
    if H.naming.irrational:
        raise LimitError(
            Fault("values are not chosen beside a coupling whose M is irrational", "give M itself")
        )
    given = {letter: each for letter, each in (("R", R), ("C", C), ("L", L)) if each is not None}
    chosen = _lists(H, given, lists, keep, load_stock(stock) if stock is not None else {})
    kept = _kept(H, chosen)
    model = Model.of(H, tuple(chosen))
    aim = aim_of(model, Wanted(target, f0, Q, K, objective, band))
    space = Space(
        tuple(np.array([float(value) for value in each.values]) for each in chosen.values()),
        lambda values: model.figures(aim, values),
        model.linear,
        aim,
    )
    found = search(space, max(1, runners_up + 1), work)
    if not len(found.errors) or not math.isfinite(found.errors[0]):
        raise NotationError(
            Fault(
                "no combination of these lists gives a finite response",
                "widen the lists, or check the target",
            )
        )
    outcomes: _Outcomes = partial(outcomes_of, aim, model)
    candidates = _candidates(chosen, found, space.lists, outcomes)
    best = candidates[0]
    return Choice(
        _with_chosen(H.network, best),
        H.label,
        aim.objective,
        goal_of(aim),
        best,
        tuple(candidates[1 : runners_up + 1]),
        _rounded(H, chosen, space, outcomes),
        tuple(chosen.items()),
        kept,
        space.combinations,
        found.evaluations,
        found.least,
        found.complete,
        found.how,
        tuple(_notes(model, aim.objective, best.error)),
    )


def _notes(model: Model, objective: Objective, error: float) -> Iterator[str]:
    if not all(model.linear):
        names = ", ".join(
            name for name, bounded in zip(model.names, model.linear, strict=True) if not bounded
        )
        yield f"No bound over a range of values of {names}: tied to others, or beside a coefficient that changes its sign."
    if error > (_FAR_DB if objective == "dB" else _FAR):
        yield "No combination of these lists comes near the target: do their limits leave out what is needed?"


# -- which parts, from which lists ----------------------------------------------------------------------------------


def _lists(
    H: Transfer,
    given: Mapping[str, List],
    named: Mapping[str, List],
    keep: str | Iterable[str],
    stock: Mapping[str, Preferred],
) -> dict[str, Preferred]:
    """The list of every part that is chosen, in the order of H."""
    staying = set(keep.replace(",", " ").split() if isinstance(keep, str) else keep)
    for name in (*staying, *named):
        if name not in H.names:
            close = nearest(name, H.names)
            hint = f"did you mean {close[0]}?" if close else f"H holds: {', '.join(H.names)}"
            raise UnknownNameError(Fault(f"H holds no name {name}", hint))
    usual = {letter: series for letter, (series, *_) in _USUAL.items()}
    classes: dict[str, List] = {**usual, **stock, **given}
    found = {}
    for name in H.names:
        letter = class_letter(name)
        spec = named.get(name) or (classes.get(letter) if letter in "RCL" else None)
        if name in staying or spec is None:
            continue
        found[name] = _list_of(H, name, spec)
    if not found:
        raise NotationError(Fault("no part is left to choose", f"H holds: {', '.join(H.names)}"))
    return found


def _list_of(H: Transfer, name: str, spec: List) -> Preferred:
    dimension = CLASS_LETTERS.get(class_letter(name)) or H.dimensions.get(name) or NUMBER
    if isinstance(spec, str):
        series, comma, limits = spec.partition(",")
        found = preferred(series)
        if comma:
            low, dots, high = limits.partition("..")
            if not dots:
                raise NotationError(
                    Fault(f"{limits.strip()!r} is no range", 'write "E24, 1 kohm .. 100 kohm"')
                )
            found = found.between(low.strip(), high.strip())
    else:
        found = spec
    if not found.entries:
        exact = H.values.get(name)
        if exact is not None and exact > 0:
            found = found.between(exact / 10, exact * 10)
        elif class_letter(name) in _USUAL:
            _, low, high = _USUAL[class_letter(name)]
            found = found.between(low, high)
        else:
            raise NotationError(
                Fault(
                    f"the list of {name} has no limits, and {name} no value to set them",
                    f'write for example {class_letter(name)}="{found.name}, 1 uH .. 1 mH"',
                    parts=(name,),
                )
            )
    if found.dimension not in {dimension, NUMBER}:
        raise NotationError(
            Fault(f"the list of {name} is in {found.dimension}, not in {dimension}", parts=(name,))
        )
    return replace(found, dimension=dimension)


def _kept(H: Transfer, chosen: Mapping[str, Preferred]) -> tuple[tuple[str, Quantity], ...]:
    staying = [name for name in H.names if name not in chosen]
    missing = tuple(name for name in staying if name not in H.values)
    if missing:
        raise MissingValueError(
            Fault(
                f"no value for {', '.join(missing)}, and no list to choose from",
                "give the network a value for it, or a list here",
                parts=missing,
            )
        )
    return tuple((name, Quantity(H.values[name], H.dimensions.get(name) or NUMBER)) for name in staying)


# -- what was found -------------------------------------------------------------------------------------------------


def _candidates(
    chosen: Mapping[str, Preferred], found: Found, lists: Sequence[Floats], outcomes: _Outcomes
) -> list[Candidate]:
    """One candidate for each error; of equal ones that which lies nearest to the middle of its lists."""
    groups: list[list[int]] = []
    places, errors = found.places, found.errors
    for k, error in enumerate(errors):
        if groups and error <= errors[groups[-1][0]] * (1 + 1e-9) + 1e-15:
            groups[-1].append(k)
        else:
            groups.append([k])
    centres = [math.sqrt(values[0] * values[-1]) for values in lists]
    candidates: list[Candidate] = []
    for group in groups:

        def off(k: int) -> tuple[float, tuple[int, ...]]:
            row = places[k]
            away = sum(
                abs(math.log(values[row[i]] / centre))
                for i, (values, centre) in enumerate(zip(lists, centres, strict=True))
            )
            return round(away, 9), tuple(row)

        order = sorted(group, key=off)
        sets = [
            tuple(
                Chosen(name, each.entries[places[k][i]], each.dimension)
                for i, (name, each) in enumerate(chosen.items())
            )
            for k in order[: _MOST_ALIKE + 1]
        ]
        values = [part.entry.value for part in sets[0]]
        error = float(errors[order[0]])
        candidates.append(Candidate(sets[0], error, outcomes(values), tuple(sets[1:]), len(order) - 1))
    return candidates


def _rounded(
    H: Transfer, chosen: Mapping[str, Preferred], space: Space, outcomes: _Outcomes
) -> Candidate | None:
    """Each exact value of the network rounded by itself; None where one of them has none."""
    if any(name not in H.values or H.values[name] <= 0 for name in chosen):
        return None
    parts = []
    for name, each in chosen.items():
        value = each.nearest(H.values[name]).value
        entry = next(entry for entry in each.entries if entry.value == value)
        parts.append(Chosen(name, entry, each.dimension))
    figures = space.figures([np.array([float(part.entry.value)]) for part in parts])
    error = float(space.aim.error(figures)[0])
    return Candidate(tuple(parts), error, outcomes([part.entry.value for part in parts]))


def _with_chosen(network: Network, best: Candidate) -> Network:
    """The network with the values; tolerances that were typed stay."""
    before = dict(network.values)
    changed = network.with_values({part.name: part.entry.value for part in best.parts})
    values = tuple(
        (name, replace(value, tolerance=before[name].tolerance))
        if name in before and isinstance(value.expression, Number)
        else (name, value)
        for name, value in changed.values
    )
    return replace(changed, values=values)
