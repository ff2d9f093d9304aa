"""Whatever the text, nothing but an error of symnet comes back, and limits are stated."""

from __future__ import annotations

import random
from contextlib import suppress

import pytest
from hypothesis import given
from hypothesis import strategies as st

from symnet.circuit.names import check
from symnet.circuit.network import read_network
from symnet.circuit.reading import read_expression, read_value
from symnet.circuit.writing import write_network
from symnet.errors import SymnetError
from symnet.expressions import Expression, children
from tests.circuit.strategies import patient

HOSTILE = {
    "binary": (
        bytes(random.Random(1).randrange(256) for _ in range(2000)).decode("latin1"),
        "by itself says nothing|no meaning",
    ),
    "a lone surrogate": ("a -- R\ud800 -- b", r"the character U\+D800 has no meaning"),
    "null characters": ("\0" * 1000, r"the character U\+0000 has no meaning"),
    "ten thousand parentheses": (
        "Z1 = " + "(" * 10_000 + "R" + ")" * 10_000,
        "more than 100 parentheses inside one another",
    ),
    "ten thousand open parentheses": ("Z1 = " + "(" * 10_000, "this parenthesis is not closed"),
    "ten thousand groups": (
        "a -- " + "(" * 10_000 + "R1" + ")" * 10_000 + " -- b",
        "more than 100 parentheses",
    ),
    "ten thousand signs": ("Z1 = " + "- " * 10_000, "is missing"),
    "ten thousand exponents": ("Z1 = R" + "^2" * 10_000, "two exponents in a row"),
    "a long number": ("R1 = " + "9" * 5000, "a number has at most 1000 digits"),
    "a long exponent": ("R1 = 1e" + "9" * 5000, "the power of ten of a number lies between -99 and 99"),
    "a long unit": ("R1 = 1 " + "m" * 5000, "follows a number and is not a unit"),
    "a long name": ("a -- R1 -- " + "b" * 5000, "a name has at most 64 letters"),
    "a long word": ("b" * 5000, r"b{40}\.\.\. by itself says nothing"),
    "powers of powers of numbers": (
        "K = " + "(" * 60 + "9" + "^9)" * 60,
        "an exponent lies between -64 and 64",
    ),
    "powers of powers of names": (
        "Z1 = " + "(" * 60 + "R" + "^2)" * 60,
        "an exponent lies between -64 and 64",
    ),
    "a product of long numbers": ("K = " + "*".join(["9" * 900] * 20), "more than 1000 digits"),
    "a sum of small fractions": (
        "K = " + "+".join(f"1/{k}" for k in range(1, 3000)),
        "more than 1000 digits",
    ),
    "many symbols": (
        "hold a = " + "+".join(f"k{n}*x{n}*a" for n in range(600)),
        "more than 500 symbols of unknown dimension",
    ),
    "many broken statements": ("x;" * 5000, "reading stopped after 100 faults"),
    "many faults of meaning": (
        "".join(f"RR{n} = 5;" for n in range(5000)),
        "reading stopped after 100 faults",
    ),
    "many faults in one statement": ("a" + " -- R1 -- a" * 5000, "^10 faults"),
    "many parts": (
        "\n".join(f"n{k} -- R{k} -- n{k + 1}" for k in range(5001)),
        "the network has 5001 parts; at most 5000",
    ),
    "a million characters": ("a" * 1_000_001, "the text has 1000001 characters"),
}


@pytest.mark.parametrize(("text", "message"), HOSTILE.values(), ids=HOSTILE)
def test_hostile(text: str, message: str) -> None:
    with pytest.raises(SymnetError, match=message) as caught:
        read_network(text)
    assert all(len(line) < 300 for line in str(caught.value).split("\n"))


def test_large_texts_read() -> None:
    many = "\n".join(f"n{k} -- R{k} -- n{k + 1} -- C{k} -- gnd" for k in range(1000))
    net = read_network(many)
    assert len(net.parts) == 2000
    assert read_network(write_network(net)) == net
    wide = read_network("a -- " + " || ".join(f"R{k}" for k in range(1000)) + " -- b")
    assert read_network(write_network(wide)) == wide
    long = read_network("a -- " + " + ".join(f"R{k}" for k in range(1000)) + " -- b")
    assert read_network(write_network(long)) == long


def test_a_hundred_parentheses_read() -> None:
    assert read_expression("(" * 100 + "R1" + ")" * 100) == read_expression("R1")
    deep = (
        "a -- "
        + "(" * 99
        + "R0"
        + "".join(f" {'+|'[k % 2] * (1 + k % 2)} R{k})" for k in range(1, 100))
        + " -- b"
    )
    net = read_network(deep)
    assert read_network(write_network(net)) == net


def test_a_sum_of_ten_thousand_terms() -> None:
    net = read_network("a -- R1 -- b; hold a = " + " + ".join(["K*b"] * 10_000))
    assert read_network(write_network(net)) == net


def test_levels_of_an_expression() -> None:
    # One parenthesis may hold a sum of products of powers: three levels.
    def nested(times: int) -> str:
        text = "R"
        for _ in range(times):
            text = f"R + K*({text})^1"
        return text

    assert levels(read_expression(nested(49))) == 148
    with pytest.raises(SymnetError, match="more than 150 operations inside one another"):
        read_expression(nested(50))


def levels(expression: Expression) -> int:
    """How many nodes lie inside one another."""
    return 1 + max((levels(child) for child in children(expression)), default=0)


PIECES = st.sampled_from(
    [
        *("--", "-", "+", "||", "(", ")", "=", "*", "/", "^", ";", "\n", "#", ",", ":", ".", "%", "±", " "),
        *(
            "a",
            "b",
            "in",
            "out",
            "gnd",
            "s",
            "R1",
            "C1",
            "Z1",
            "K",
            "i_R1",
            "v_a",
            "1",
            "2",
            "4k7",
            "1e99",
            "nF",
            "ohm",
        ),
        *(
            "drive",
            "read",
            "hold",
            "push",
            "free",
            "notation",
            "current",
            "into",
            "from",
            "to",
            "as",
            "define",
            "node",
        ),
        *(
            "U1: opamp(plus=a, minus=b, out=c)",
            "a -- R1 -- b",
            "Z1 = R/(1 + s*R*C)",
            "\u2013",
            "\u2014",
            "\u00b5",
            "²",
            "\x00",
        ),
    ]
)


@patient
@given(st.lists(PIECES, max_size=25))
def test_any_text_reads_or_is_refused(pieces: list[str]) -> None:
    # Law: a text is read, and then it survives a round trip, or it is refused by an error of symnet.
    text = " ".join(pieces)
    net, said = None, ""
    try:
        net = read_network(text)
    except SymnetError as error:
        said = str(error)
    if net is None:
        assert "line" in said
    else:
        assert check(net) == []
        assert read_network(write_network(net)) == net


@patient
@given(st.text(max_size=30))
def test_any_characters(text: str) -> None:
    for read in (read_network, read_expression, lambda text: read_value(text, "R1")):
        with suppress(SymnetError):
            read(text)


@patient
@given(st.lists(PIECES, max_size=12))
def test_expressions_are_no_deeper_than_stated(pieces: list[str]) -> None:
    try:
        tree = read_expression(" ".join(pieces))
    except SymnetError:
        return
    assert levels(tree) <= 150
