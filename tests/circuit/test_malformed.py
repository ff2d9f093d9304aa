"""Every malformed text gets its sentence, verbatim; every entry of the table of diagnoses speaks for some text."""

from __future__ import annotations

import re
from collections.abc import Callable

import pytest

from symnet.circuit import messages
from symnet.circuit.clues import Clue
from symnet.circuit.messages import Said
from symnet.circuit.network import read_network
from symnet.errors import NotationError
from symnet.grammar_files import parser
from tests.circuit.malformed import MALFORMED


def faults_of(text: str) -> NotationError:
    with pytest.raises(NotationError) as caught:
        read_network(text)
    return caught.value


@pytest.mark.parametrize(
    ("text", "expected"), [case[1:] for case in MALFORMED], ids=[c[0] for c in MALFORMED]
)
def test_message(text: str, expected: str) -> None:
    assert str(faults_of(text)) == expected


def test_there_are_many_and_no_two_have_the_same_rule() -> None:
    rules = [rule for rule, _, _ in MALFORMED]
    assert len(rules) == len(set(rules)) > 200


def test_every_diagnosis_speaks(monkeypatch: pytest.MonkeyPatch) -> None:
    spoke: set[str] = set()

    def watched(recognise: Callable[[Clue], Said | None]) -> Callable[[Clue], Said | None]:
        def watch(clue: Clue) -> Said | None:
            said = recognise(clue)
            if said:
                spoke.add(recognise.__name__)
            return said

        return watch

    names = {recognise.__name__ for recognise in messages.DIAGNOSES}
    monkeypatch.setattr(messages, "DIAGNOSES", tuple(watched(recognise) for recognise in messages.DIAGNOSES))
    for _, text, _ in MALFORMED:
        faults_of(text)
    assert spoke == names


def test_no_message_is_the_last_resort_or_names_a_terminal() -> None:
    terminals = {
        terminal.name for terminal in parser("network", "statement", "value", "expression").terminals
    }
    for rule, _, message in MALFORMED:
        own_words = re.sub(r"GND|MALFORMED", "", message)
        assert "is not expected here" not in message, rule
        assert not terminals & set(re.findall(r"[A-Z_$]{3,}", own_words)), rule


def test_every_fault_has_its_place() -> None:
    for rule, text, _ in MALFORMED:
        for fault in faults_of(text).faults:
            assert fault.span is not None, rule
            assert 0 <= fault.span.start <= len(text), rule


def test_a_control_character_is_named_by_its_number() -> None:
    error = faults_of("R1 = \x07")
    assert str(error) == (
        "line 1, column 6: the character U+0007 has no meaning in the notation\n    R1 =  \n         ^"
    )


def test_all_faults_in_one_pass() -> None:
    text = """\
# a filter with six slips of the pen (invented)
in -- R1 -- a -- C1 -- gnd
a  -- R2 -- C2 -- gnd
b  -- L1 = 5 nF -- out
drvie in
read out)
R1 = 4,7 kohm
C1 = (22 nF
hold out = mu*(a - x)
"""
    assert (
        str(faults_of(text))
        == """\
7 faults
line 3, column 13: C2 stands where a node must stand
    a  -- R2 -- C2 -- gnd
                ^^
    did you leave out the node between R2 and C2, or mean R2 + C2?
line 4, column 12: L1 is in H, its value is in F
    b  -- L1 = 5 nF -- out
               ^^^^
    give L1 in H
line 5, column 1: drvie is not a word that begins a statement
    drvie in
    ^^^^^
    did you mean drive?
line 6, column 9: ) closes nothing
    read out)
            ^
    remove it, or add the ( it belongs to
line 7, column 7: a decimal point is written, not a comma
    R1 = 4,7 kohm
          ^
    write 4.7
line 8, column 6: this parenthesis is not closed
    C1 = (22 nF
         ^
    add the missing )
line 9, column 20: x stands where a voltage must stand and the network has no node x
    hold out = mu*(a - x)
                       ^
    nodes: in, a, b, out"""
    )


def test_one_slip_is_reported_once() -> None:
    # R2 and c stand in the broken line, so nothing is said about their value and voltage.
    error = faults_of("a -- R1 -- b; b -- R2 @ -- c; R2 = 5 kohm; hold b = mu*c; read i_R2")
    assert [fault.message for fault in error.faults] == ["@ has no meaning in the notation"]


def test_two_faults_of_one_line() -> None:
    error = faults_of("a -- R1 -- b; R1 = 5 nf + 3 parsec")
    assert [fault.message for fault in error.faults] == [
        "nf is not a unit",
        "parsec follows a number and is not a unit",
    ]


def test_the_fault_stands_where_it_was_typed() -> None:
    text = "# one\n\n  a -- R1 -- b ; \u00a0 R1 \u2212 5 # minus for =\r\ndrive a"
    error = faults_of(text)
    assert [text[f.span.start : f.span.end] for f in error.faults if f.span] == ["\u2212"]
