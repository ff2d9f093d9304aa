"""What a derivation would cost is known, and said, before it is paid."""

from __future__ import annotations

from fractions import Fraction
from math import pi, sin
from typing import Any

import pytest
from sympy import fibonacci

import symnet as sn
from symnet.errors import LimitError
from symnet.exact import determinant, unfolding
from symnet.exact.determinant import MOST_TERMS, Determinant
from symnet.exact.trees import Diagram
from tests.speed.engine import bridged_t, complete_graph, rc_ladder

#: Spanning trees of the ladder of 30 sections, F(61): about 2.5 * 10^12 (Kirchhoff's matrix-tree theorem).
THIRTY = 2504730781961


@pytest.fixture
def never_written_out(monkeypatch: pytest.MonkeyPatch) -> None:
    """Expanding a determinant of more than one path is an error."""
    unfold = unfolding.unfold

    def refuse(diagram: Diagram, *rest: Any) -> Any:
        if diagram.count() > 1:
            pytest.fail("a determinant was written out")
        return unfold(diagram, *rest)

    monkeypatch.setattr(determinant, "unfold", refuse)


def derived(text: str, symbols: str | None = None) -> sn.Transfer:
    H: sn.Transfer = sn.derive(sn.network(text), symbols=symbols)
    return H


def with_values(sections: int) -> str:
    """The RC ladder with 1 to n kohm and 2 to n + 1 nF."""
    values = [f"R{k + 1} = {k + 1} kohm; C{k + 1} = {k + 2} nF" for k in range(sections)]
    return "\n".join([rc_ladder(sections), *values])


def elements(det: Determinant) -> tuple[list[Any], list[Any]]:
    """The weights, take and leave, as ring elements."""
    take, leave = ([det.generators.element(terms) for terms in side] for side in (det.take, det.leave))
    return take, leave


@pytest.mark.parametrize("text", [rc_ladder(3), rc_ladder(9), bridged_t(2), bridged_t(3), complete_graph(6)])
def test_the_number_of_terms_is_known_without_expanding(text: str) -> None:
    """Law: where every part has its own symbol, terms and paths are one to one."""
    H = derived(text)
    counted = H.terms
    written = [
        det.diagram.evaluate(*elements(det), H.ring.one)
        for det in (H.quotient.numerator, H.quotient.denominator)
    ]
    assert counted == tuple(map(len, written))


def test_the_number_of_terms_is_a_bound_where_parts_are_tied() -> None:
    H = derived(rc_ladder(5) + "\nR1, R2, R3, R4, R5 = R; C1, C2, C3, C4, C5 = C")
    assert len(H.denominator) == 6  # a polynomial in s*R*C of degree 5
    assert H.terms[1] >= 6


@pytest.mark.parametrize("sections", [20, 30, 100, 200])
@pytest.mark.usefixtures("never_written_out")
def test_a_ladder_is_counted_and_not_expanded(sections: int) -> None:
    """Law: the spanning trees of an n-section ladder number F(2n + 1)."""
    assert derived(rc_ladder(sections)).terms == (1, fibonacci(2 * sections + 1))


@pytest.mark.parametrize("what", ["numerator", "denominator", "hidden", "expr"])
@pytest.mark.usefixtures("never_written_out")
def test_what_would_be_too_long_is_refused_with_the_count(what: str) -> None:
    H = derived(rc_ladder(30))
    assert H.terms == (1, THIRTY)
    with pytest.raises(LimitError, match=r"up to 2\.51e12 terms; the limit is 500000") as refused:
        getattr(H, what)
    (fault,) = refused.value.faults
    assert "H.numeric()" in fault.hint
    assert 'symbols="R1 C1"' in fault.hint
    assert repr(H).startswith("<Transfer n30/n0: 1 over 2.51e12 terms, confirmed")
    assert str(H) == repr(H)


def test_a_refusal_is_the_same_again() -> None:
    H = derived(rc_ladder(30))
    said = []
    for _ in range(2):
        with pytest.raises(LimitError) as refused:
            H.denominator  # noqa: B018
        said.append(str(refused.value))
    assert said[0] == said[1]


def test_the_limit_lies_between_13_and_14_sections() -> None:
    """F(27) = 196 418 terms are written out; F(29) = 514 229 are refused, and all digits are said."""
    assert derived(rc_ladder(13)).quotient.lowest.terms[1] == 196418 <= MOST_TERMS
    with pytest.raises(LimitError, match="up to 514229 terms"):
        derived(rc_ladder(14)).denominator  # noqa: B018


def test_what_the_refusal_advises_works() -> None:
    """A few names kept as symbols, or values for all, in the network that was refused."""
    H = derived(with_values(30))
    with pytest.raises(LimitError, match="keep only a few names as symbols"):
        H.denominator  # noqa: B018
    few = derived(with_values(30), symbols="R1 C1")
    assert few.names == ("R1", "C1")
    assert few.numeric() == H.numeric()
    assert {monomial[1:] for monomial in few.denominator} <= {(a, b) for a in (0, 1) for b in (0, 1)}


@pytest.mark.usefixtures("never_written_out")
def test_a_ladder_of_a_million_million_terms_still_gives_numbers() -> None:
    """H at a rational s against the chain of the ladder, section by section from its end, in fractions."""
    ratio = derived(with_values(30)).numeric()
    assert len(ratio.den) == 31
    s = Fraction(12345, 7)
    voltage, current = Fraction(1), Fraction(0)
    for k in reversed(range(30)):
        current += s * Fraction(k + 2, 10**9) * voltage
        voltage += 1000 * (k + 1) * current
    assert ratio.at(s) == 1 / voltage


@pytest.mark.usefixtures("never_written_out")
def test_a_ladder_of_a_million_million_terms_is_recognised() -> None:
    """30 RC sections are of no family; 58 reactances with g_k = 2 sin((2k - 1) pi/2n) are Butterworth.

    The element values of the doubly terminated low-pass: Matthaei, Young, Jones 1964 (from memory).
    """
    assert "none of these" in str(sn.recognise(derived(with_values(30))))
    order = 58
    lines, values, node = ["in -- Rs -- n1"], ["Rs, RL = 1 ohm"], 1
    for k in range(1, order + 1):
        g = 2 * sin((2 * k - 1) * pi / (2 * order))
        if k % 2:
            lines.append(f"n{node} -- C{k} -- gnd")
            values.append(f"C{k} = {g!r} F")
        else:
            lines.append(f"n{node} -- L{k} -- n{node + 1}")
            values.append(f"L{k} = {g!r} H")
            node += 1
    H = derived("\n".join([*lines, f"n{node} -- RL -- gnd", "drive in", f"read n{node}", *values]))
    assert H.terms == (1, THIRTY)
    assert "Butterworth, order 58, low-pass" in str(sn.recognise(H))
