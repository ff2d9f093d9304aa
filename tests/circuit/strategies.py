"""Networks and expressions as they may be typed or built, for property tests."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import HealthCheck, settings
from hypothesis import strategies as st

from symnet.circuit.network import Network
from symnet.circuit.parts import (
    Branch,
    CurrentDrive,
    CurrentLaw,
    Drive,
    OpAmp,
    Part,
    Value,
    VoltageDrive,
    VoltageLaw,
)
from symnet.circuit.series import Beside, Group, Leaf, Series, wire
from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Sum
from symnet.quantities import AMPERE, FARAD, HENRY, HERTZ, NUMBER, OHM, SECOND, SIEMENS, VOLT, Dimension

#: The first example of a run builds the grammar, on whatever machine: no time is measured.
patient = settings(deadline=None, suppress_health_check=[HealthCheck.too_slow])

LETTERS = {"R": OHM, "L": HENRY, "C": FARAD}
UNITS = (NUMBER, OHM, FARAD, HENRY, SIEMENS, VOLT, AMPERE, SECOND, HERTZ)

fractions = st.one_of(
    st.integers(1, 10**7).map(Fraction),
    st.builds(Fraction, st.integers(1, 10**6), st.sampled_from([10**k for k in range(20)])),
    st.builds(Fraction, st.integers(1, 10**4), st.integers(1, 999)),
)
numbers = st.builds(Number, fractions, st.sampled_from(UNITS))
names = st.sampled_from(["R1", "C1", "L", "K", "mu", "s", "i_R1", "v_a", "v_1", "out", "in"]).map(Name)


def _terms(inner: st.SearchStrategy[Expression]) -> st.SearchStrategy[Expression]:
    # Numbers alone are read as the one number they are worth, so a name stands first.
    rest = st.lists(st.tuples(st.sampled_from([1, -1]), inner), min_size=1, max_size=3)
    return st.builds(
        lambda sign, first, found: Sum(((sign, first), *found)), st.sampled_from([1, -1]), names, rest
    )


def _factors(inner: st.SearchStrategy[Expression]) -> st.SearchStrategy[Expression]:
    rest = st.lists(st.tuples(st.sampled_from([1, -1]), inner), min_size=1, max_size=3)
    return st.builds(lambda first, found: Product(((1, first), *found)), names, rest)


def _grown(inner: st.SearchStrategy[Expression]) -> st.SearchStrategy[Expression]:
    return st.one_of(
        _terms(inner),
        _factors(inner),
        st.builds(
            lambda first, found: Parallel((first, *found)), names, st.lists(inner, min_size=1, max_size=2)
        ),
        st.builds(Power, names, st.integers(-4, 4)),
        names.map(lambda name: Sum(((-1, name),))),
    )


#: Expressions in the form in which they are read.
expressions: st.SearchStrategy[Expression] = st.recursive(st.one_of(names, numbers), _grown, max_leaves=12)


@st.composite
def group_trees(draw: st.DrawFn, most: int = 8) -> Group:
    """A series-parallel group of parts R0, R1, ..., in the order of writing."""
    count = draw(st.integers(1, most))
    letters = draw(st.lists(st.sampled_from("RLC"), min_size=count, max_size=count))
    leaves: list[Group] = [Leaf(f"{letter}{k}") for k, letter in enumerate(letters)]
    return _grouped(draw, leaves, in_series=draw(st.booleans()))


def _grouped(draw: st.DrawFn, leaves: list[Group], *, in_series: bool) -> Group:
    if len(leaves) == 1:
        return leaves[0]
    cuts = sorted(draw(st.sets(st.integers(1, len(leaves) - 1), min_size=1, max_size=3)))
    pieces = [leaves[a:b] for a, b in zip([0, *cuts], [*cuts, len(leaves)], strict=True)]
    items = tuple(_grouped(draw, piece, in_series=not in_series) for piece in pieces)
    return Series(items) if in_series else Beside(items)


@st.composite
def networks(draw: st.DrawFn) -> Network:
    """Networks with series-parallel groups, laws, an op amp, drives, reads, values, free symbols."""
    nodes = draw(
        st.lists(st.sampled_from(["in", "out", "x", "y2", "7", "12"]), min_size=2, max_size=5, unique=True)
    )
    ends = st.sampled_from([*nodes, "gnd"])
    pairs = st.tuples(ends, ends).filter(lambda pair: pair[0] != pair[1])
    parts: list[Part] = []
    branches: list[str] = []
    for index in range(draw(st.integers(1, 4))):
        tree = draw(group_trees(5))
        start, end = draw(pairs)
        for branch in wire(tree, start, end):
            name = f"{branch.name}_{index}"
            ends_ = tuple(
                "+".join(f"{p}_{index}" for p in n.split("+")) if "+" in n else n for n in branch.nodes
            )
            parts.append(Branch(name, ends_[0], ends_[1]))
            branches.append(name)
        if draw(st.booleans()):
            parts.append(draw(_laws(index, pairs, branches)))
    if draw(st.booleans()):
        plus, minus, out = (draw(ends) for _ in range(3))
        parts.append(OpAmp("U1", plus, minus, out))
    drives = draw(st.lists(_drives(pairs), max_size=2))
    valued = draw(st.lists(st.sampled_from(branches), unique=True))
    values = tuple((name, draw(_values(LETTERS[name[0]]))) for name in valued)
    choices: list[tuple[tuple[str, Dimension | None], ...]] = [
        (),
        (("free1", None),),
        (("free1", VOLT / SECOND), ("free2", NUMBER)),
    ]
    free, with_value = draw(st.sampled_from(choices)), draw(st.booleans())
    if free and with_value:
        values = (*values, ("free1", Value(Number(Fraction(3), free[0][1] or OHM))))
    used = [node for node in nodes if any(node in piece.nodes for piece in (*parts, *drives))]
    reads: tuple[Expression, ...] = tuple(Name(f"v_{node}") for node in used[:1])
    return Network(tuple(parts), tuple(drives), reads, values, free)


def _laws(
    index: int, pairs: st.SearchStrategy[tuple[str, str]], branches: list[str]
) -> st.SearchStrategy[Part]:
    current = Name(f"i_{branches[0]}")
    label = st.sampled_from([f"law{index + 1}", f"amp{index}"])
    push = st.builds(
        lambda name, ends: CurrentLaw(
            name, ends[0], ends[1], Product(((1, Number(Fraction(2))), (1, current)))
        ),
        label,
        pairs,
    )
    across = Product(((1, Name("mu")), (1, Name(f"v_{branches[-1]}"))))
    hold = st.builds(lambda name, ends: VoltageLaw(name, ends[0], ends[1], across), label, pairs)
    return st.one_of(push, hold)


def _drives(pairs: st.SearchStrategy[tuple[str, str]]) -> st.SearchStrategy[Drive]:
    voltage = st.builds(lambda ends: VoltageDrive(*ends), pairs)
    return st.one_of(voltage, st.builds(lambda ends: CurrentDrive(*ends), pairs))


def _values(dimension: Dimension) -> st.SearchStrategy[Value]:
    tolerance = st.one_of(st.none(), st.sampled_from([Fraction(1, 100), Fraction(1, 2000), Fraction(1, 3)]))
    return st.builds(lambda value, t: Value(Number(value, dimension), t), fractions, tolerance)
