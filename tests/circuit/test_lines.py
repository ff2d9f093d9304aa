"""Pasted texts read as their typed forms; logical lines keep the places of their characters."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from symnet.circuit.lines import MOST_CHARACTERS, logical_lines
from symnet.circuit.network import read_network
from symnet.errors import LimitError, NotationError
from tests.circuit.strategies import patient

# What editors, word processors, web pages and spreadsheets make of the typed form at the right.
PASTED = {
    "em dashes in a chain": ("in \u2014 R1 \u2014 out", "in -- R1 -- out"),
    "en dashes in a chain": ("in \u2013 R1 \u2013 out", "in -- R1 -- out"),
    "pairs of en dashes": ("in \u2013\u2013 R1 \u2013\u2013 out", "in -- R1 -- out"),
    "an en dash for the second pair only": ("in -- R1 \u2013 out", "in -- R1 -- out"),
    "a horizontal bar": ("in \u2015 R1 \u2015 out", "in -- R1 -- out"),
    "non-breaking hyphens": ("in \u2011\u2011 R1 \u2010\u2010 out", "in -- R1 -- out"),
    "minus signs for dashes": ("in \u2212\u2212 R1 -- out", "in -- R1 -- out"),
    "a minus sign": ("a -- R1 -- b; read a \u2212 b", "a -- R1 -- b; read a - b"),
    "an en dash for a minus": ("a -- R1 -- b; hold a = K*(b \u2013 a)", "a -- R1 -- b; hold a = K*(b - a)"),
    "an en dash in a sentence": ("a -- R1 -- b; drive a \u2013 b", "a -- R1 -- b; drive a - b"),
    "an en dash in a pair of nodes": (
        "a -- R1 -- b; hold a \u2013 b = r*i_R1",
        "a -- R1 -- b; hold a - b = r*i_R1",
    ),
    "an en dash behind a value": ("a \u2013 C1 = 22 nF \u2013 gnd", "a -- C1 = 22 nF -- gnd"),
    "an en dash in a tolerance": ("a -- R1 -- b; R1 = 5 ohm +/\u20131%", "a -- R1 -- b; R1 = 5 ohm +/-1%"),
    "no-break spaces": ("a\u00a0-- R1 --\u00a0b; R1 = 4.7\u00a0kohm", "a -- R1 -- b; R1 = 4.7 kohm"),
    "thin spaces": ("a -- R1 -- b; R1 = 4.7\u2009kohm\u202f±1\u2009%", "a -- R1 -- b; R1 = 4.7 kohm ±1 %"),
    "tabs": ("a\t--\tR1\t--\tb", "a -- R1 -- b"),
    "the micro sign": ("a -- C1 = 4.7 \u00b5F -- b", "a -- C1 = 4.7 uF -- b"),
    "the greek mu": ("a -- C1 = 4.7 \u03bcF -- b", "a -- C1 = 4.7 uF -- b"),
    "the ohm sign": ("a -- R1 = 4.7 k\u2126 -- b", "a -- R1 = 4.7 kohm -- b"),
    "the greek omega": ("a -- R1 = 4.7 k\u03a9 -- b", "a -- R1 = 4.7 kohm -- b"),
    "an omega without prefix": ("a -- R1 = 47\u03a9 -- b", "a -- R1 = 47 ohm -- b"),
    "double vertical lines": ("a -- R1 \u2016 C1 -- b", "a -- R1 || C1 -- b"),
    "the parallel sign": ("a -- R1 \u2225 C1 -- b", "a -- R1 || C1 -- b"),
    "a middle dot": ("a -- R1 -- b; hold a = K\u00b7b", "a -- R1 -- b; hold a = K*b"),
    "a multiplication sign": ("a -- R1 -- b; hold a = K\u00d7b", "a -- R1 -- b; hold a = K*b"),
    "a dot operator": ("a -- R1 -- b; hold a = K\u22c5b", "a -- R1 -- b; hold a = K*b"),
    "a division sign": ("a -- R1 -- b; hold a = b\u00f7K", "a -- R1 -- b; hold a = b/K"),
    "superscripts": ("a -- Z1 -- b; Z1 = s\u00b2*L*C*R + s\u00b3*x", "a -- Z1 -- b; Z1 = s^2*L*C*R + s^3*x"),
    "greek names": ("a -- R1 -- b; hold a = \u03bc*b; \u03bc = 3", "a -- R1 -- b; hold a = mu*b; mu = 3"),
    "a micro sign as name": ("a -- R1 -- b; hold a = \u00b5*b", "a -- R1 -- b; hold a = mu*b"),
    "omega with index": ("a -- Z1 -- b; Z1 = R*s/\u03c90", "a -- Z1 -- b; Z1 = R*s/omega0"),
    "a byte order mark": ("\ufeffa -- R1 -- b", "a -- R1 -- b"),
    "a zero-width space": ("a -- R1 --\u200b b", "a -- R1 -- b"),
    "lines of another system": ("a -- R1 -- b\r\ndrive a\r\n", "a -- R1 -- b\ndrive a\n"),
    "lines of an old system": ("a -- R1 -- b\rdrive a", "a -- R1 -- b\ndrive a"),
    "line separators": ("a -- R1 -- b\u2028drive a", "a -- R1 -- b\ndrive a"),
}


@pytest.mark.parametrize(("pasted", "typed"), PASTED.values(), ids=PASTED)
def test_pasted_text_reads_as_its_typed_form(pasted: str, typed: str) -> None:
    assert read_network(pasted) == read_network(typed)


def test_statements_end_at_newline_and_semicolon_but_not_inside_parentheses() -> None:
    lines, broken = logical_lines("a;b\n c = (1 +\n  2) ; d  # e; f\n\n;;g")
    assert [line.text for line in lines] == ["a", "b", "c = (1 +   2)", "d", "g"]
    assert not broken


def test_a_comment_may_hold_anything() -> None:
    assert read_network("a -- R1 -- b # (((( ' \" -- R2; @\ndrive a") == read_network("a -- R1 -- b; drive a")


def test_a_comment_inside_parentheses() -> None:
    net = read_network("U1: opamp(plus=p,   # the input\n  minus=o,  # (follower)\n  out=o)")
    assert net == read_network("U1: opamp(plus=p, minus=o, out=o)")


@pytest.mark.parametrize(
    "next_line",
    [
        "drive b",
        "b -- R2 -- gnd",
        "R1 = 5 kohm",
        "U1: opamp(plus=a, minus=b, out=b)",
        "b \u2014 R2 \u2014 gnd",
    ],
)
def test_an_open_parenthesis_does_not_swallow_the_rest(next_line: str) -> None:
    text = f"a -- R1 -- b\nZ1 = (R + 1\n{next_line}\nC1 = )5"
    with pytest.raises(NotationError) as caught:
        read_network(text)
    messages = [fault.message for fault in caught.value.faults]
    assert messages == ["this parenthesis is not closed", ") closes nothing"]
    assert caught.value.faults[0].span is not None
    assert text[caught.value.faults[0].span.start] == "("


def test_an_open_parenthesis_ends_at_a_semicolon() -> None:
    with pytest.raises(NotationError, match=r"column 6: this parenthesis is not closed"):
        read_network("Z1 = (R + 1; drive b")


def test_too_long_a_text() -> None:
    with pytest.raises(LimitError, match="the text has 1000001 characters; at most 1000000 are read"):
        logical_lines("a" * (MOST_CHARACTERS + 1))


@patient
@given(st.text(alphabet="ab1;#\n\r()\u2013\u2014\u2212 -=\u00a0\u00b5+/", max_size=60))
def test_characters_keep_their_places(text: str) -> None:
    # Law: a replaced character stands for the one typed at the same place; everything else is unchanged.
    lines, broken = logical_lines(text)
    for line in [*lines, *(line for line, _ in broken)]:
        for k, character in enumerate(line.text):
            typed = text[line.start + k]
            assert character == typed or not typed.isascii() or character == " "


@patient
@given(st.text(alphabet="ab=;\n(#", max_size=40))
def test_no_statement_is_lost(text: str) -> None:
    # Law: without comments, the letters of all lines together are the letters of the text.
    text = text.replace("#", "")
    lines, broken = logical_lines(text)
    pieces = sorted([*lines, *(line for line, _ in broken)], key=lambda line: line.start)
    assert "".join("".join(line.text.split()) for line in pieces) == "".join(text.replace(";", "").split())
