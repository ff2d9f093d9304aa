"""The series are the standard's lists, figure by figure, and a nearest value is nearest by ratio."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

import symnet as sn
from symnet.errors import DimensionError, LimitError, NotationError, UnknownNameError
from symnet.quantities import FARAD, OHM
from symnet.values.preferred import SERIES, Entry, Preferred
from tests.reference.e_series import ABSENT_FROM_E192, E24_IRREGULAR, E192_IRREGULAR, LISTED, NEAREST


@pytest.mark.parametrize("name", LISTED)
def test_series_are_the_lists_of_the_standard(name: str) -> None:
    scale = 10 if LISTED[name][0] == 10 else 100
    assert sn.preferred(name).decade == tuple(Fraction(figure, scale) for figure in LISTED[name])
    assert len(LISTED[name]) == int(name[1:])


def test_there_are_no_other_series() -> None:
    assert set(SERIES) == set(LISTED)


@pytest.mark.parametrize(
    ("name", "digits", "irregular"), [("E24", 1, E24_IRREGULAR), ("E192", 2, E192_IRREGULAR)]
)
def test_the_geometric_rule_holds_but_for_the_members_that_are_known(
    name: str, digits: int, irregular: dict[int, int]
) -> None:
    n = int(name[1:])
    by_rule = [round(10 ** (k / n) * 10**digits) for k in range(n)]
    assert [irregular.get(figure, figure) for figure in by_rule] == list(LISTED[name])
    assert sum(a != b for a, b in zip(by_rule, LISTED[name], strict=True)) == len(irregular)


def test_e24_is_no_part_of_e192() -> None:
    missing = {figure * 10 for figure in LISTED["E24"]} - set(LISTED["E192"])
    assert missing == set(ABSENT_FROM_E192)


@pytest.mark.parametrize(("name", "value", "nearest"), NEAREST)
def test_nearest_by_ratio(name: str, value: str, nearest: str) -> None:
    assert sn.preferred(name).nearest(Fraction(value)).value == Fraction(nearest)


@given(st.sampled_from(sorted(SERIES)), st.fractions(Fraction(1, 10**12), Fraction(10**9)))
def test_no_member_of_any_decade_is_nearer(name: str, value: Fraction) -> None:
    """Nearest by ratio: max(v/x, x/v) is smallest over all v."""
    found = sn.preferred(name).nearest(value).value
    members = [figure * Fraction(10) ** k for figure in SERIES[name] for k in range(-13, 11)]
    assert found in members
    assert max(found / value, value / found) == min(max(v / value, value / v) for v in members)


@given(st.sampled_from(sorted(SERIES)), st.fractions(Fraction(1, 1000), 1000), st.fractions(1, 200))
def test_a_range_holds_exactly_the_members_within_it(name: str, low: Fraction, ratio: Fraction) -> None:
    members = sorted(figure * Fraction(10) ** k for figure in SERIES[name] for k in range(-5, 8))
    wanted = tuple(v for v in members if low <= v <= low * ratio)
    if wanted:
        assert sn.preferred(name, low, low * ratio).values == wanted
    else:
        with pytest.raises(NotationError):
            sn.preferred(name, low, low * ratio)


def test_text_has_units() -> None:
    assert [str(value) for value in sn.preferred("E3", "1 nF", "10 nF")] == [
        "1 nF",
        "2.2 nF",
        "4.7 nF",
        "10 nF",
    ]
    assert sn.preferred("e24", "1k", "2.4 kohm").dimension == OHM
    assert str(sn.preferred("E24").nearest("12.682 kohm")) == "13 kohm"


def test_pairs_are_exact_and_single_parts_come_first() -> None:
    pairs = sn.preferred("E6", "1 kohm", "10 kohm").with_pairs("series", "parallel")
    by_value = {entry.value: entry for entry in pairs.entries}
    assert by_value[Fraction(2200)] == Entry(Fraction(2200), (Fraction(2200),))
    for entry in pairs.entries:
        a, *b = entry.parts
        made = a if not b else a + b[0] if entry.how == "series" else 1 / (1 / a + 1 / b[0])
        assert made == entry.value
    single = sn.preferred("E6", "1 kohm", "10 kohm").values
    made_of_two = {a + b for a in single for b in single} | {a * b / (a + b) for a in single for b in single}
    assert set(pairs.values) == {v for v in made_of_two | set(single) if 1000 <= v <= 10_000}
    assert list(pairs.values) == sorted(set(pairs.values))


@pytest.mark.parametrize(
    ("call", "error", "message"),
    [
        (lambda: sn.preferred("E25"), UnknownNameError, "did you mean"),
        (lambda: sn.preferred("E24", "1 kohm"), NotationError, "two limits"),
        (lambda: sn.preferred("E24", "10 kohm", "1 kohm"), NotationError, "upwards"),
        (lambda: sn.preferred("E24", "0 ohm", "1 kohm"), NotationError, "positive"),
        (lambda: sn.preferred("E24", "1 nF", "1 kohm"), DimensionError, "ohm"),
        (lambda: sn.preferred("E3", "5 kohm", "9 kohm"), NotationError, "no value"),
        (lambda: sn.preferred("E24").nearest("-1 kohm"), NotationError, "not positive"),
        (lambda: sn.preferred("E24").with_pairs("series"), NotationError, "no end"),
        (lambda: sn.preferred("E192", "1 ohm", "10 Mohm").with_pairs("series"), LimitError, "more than"),
    ],
)
def test_refusals(call: object, error: type[Exception], message: str) -> None:
    assert callable(call)
    with pytest.raises(error, match=message):
        call()


def test_a_list_of_another_unit_is_refused() -> None:
    ohms: Preferred = sn.preferred("E3", "1 kohm", "10 kohm")
    with pytest.raises(DimensionError):
        ohms.between("1 nF", "10 nF")
    assert sn.preferred("E3", "1 nF", "10 nF").dimension == FARAD


def test_pairs_stand_in_series_or_in_parallel() -> None:
    with pytest.raises(NotationError, match="series or in parallel"):
        sn.preferred("E24", "1 ohm", "5 ohm").with_pairs()
