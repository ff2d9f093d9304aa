"""Reading hand derivations: what each line says, and a fault at the place for every slip."""

from __future__ import annotations

from fractions import Fraction

import pytest

from symnet.circuit.reading import read_expression
from symnet.errors import LimitError, NotationError
from symnet.expressions import Name, Number, Power, Product, Root
from symnet.review.reading import MOST_LINES, read_working
from symnet.review.working import (
    Approximation,
    Assumption,
    Definition,
    Equation,
    Family,
    Infinite,
    Limit,
    Statement,
)


def only(text: str) -> Statement:
    (line,) = read_working(text)
    return line.statement


def test_an_equation_and_a_chain() -> None:
    assert only("a = b") == Equation((Name("a"), Name("b")))
    assert only("a = b = c") == Equation((Name("a"), Name("b"), Name("c")))


def test_a_node_equation_with_and_without_zero() -> None:
    found = only("node x: (x - in)/R1 + s*C1*x")
    assert isinstance(found, Equation)
    assert found.node == "x"
    assert found.sides[0] == read_expression("(x - in)/R1 + s*C1*x")
    assert found == only("node x: (x - in)/R1 + s*C1*x = 0")
    assert only("node 3: a = b") == Equation((Name("a"), Name("b")), node="3")


def test_sentences() -> None:
    assert only("let g = 2*R1") == Definition("g", read_expression("2*R1"))
    assert only("given R2 = R1, C2 = 2*C1") == Assumption(
        (("R2", Name("R1")), ("C2", read_expression("2*C1")))
    )
    assert only("a -> b as s -> 0") == Limit(Name("a"), Name("b"), "s", Number(Fraction(0)))
    assert only("a -> -inf as R3 -> inf") == Limit(Name("a"), Infinite(-1), "R3", Infinite())
    found = only("a ~= b for f = 10 Hz .. 1 kHz within 1 %")
    assert isinstance(found, Approximation)
    assert (found.name, float(found.within), found.decibels) == ("f", 0.01, False)
    assert only("H is butterworth 3") == Family(Name("H"), "butterworth", 3)
    assert only("Q of x/in = 2") == Equation((Name("Q"), Number(Fraction(2))), of=read_expression("x/in"))


@pytest.mark.parametrize(
    ("typed", "plain"),
    [
        ("ω0 = 1/τ", "omega0 = 1/tau"),
        ("w₀ = 2*π*f₀", "w0 = 2*pi*f0"),
        ("a = R1‖R2", "a = R1 || R2"),
        ("a = s²·x", "a = s^2*x"),
        ("a = b − c", "a = b - c"),
        ("R1 = 3 Ω", "R1 = 3 ohm"),
        ("a = √(R1)", "a = sqrt(R1)"),
        ("a ≈ b within 1 %", "a ~= b within 1 %"),
        ("a → b as s → ∞", "a -> b as s -> inf"),
    ],
)
def test_signs_of_a_text_processor_read_as_plain_ones(typed: str, plain: str) -> None:
    assert only(typed) == only(plain)


@pytest.mark.parametrize(
    ("text", "label"),
    [
        ("1. a = b", "1"),
        ("2) a = b", "2"),
        ("(3) a = b", "3"),
        ("4: a = b", "4"),
        ("line 5: a = b", "5"),
        ("2a. so a = b", "2a"),
        ("so a = b", "1"),
        ("hence, a = b", "1"),
        ("from 1 and 2: a = b", "1"),
        ("3. therefore a = b", "3"),
        ("thus: a = b", "1"),
    ],
)
def test_labels_and_words_before_a_line(text: str, label: str) -> None:
    (line,) = read_working(text)
    assert line.statement == Equation((Name("a"), Name("b")))
    assert (line.label, line.text) == (label, "a = b")


@pytest.mark.parametrize(
    "text", ["so = 2*a", "so - a = b", "then*a = b", "(1) - a = b", "1.5*a = b", "2*a = b"]
)
def test_what_is_no_label(text: str) -> None:
    (line,) = read_working(text)
    assert (line.label, line.text) == ("1", text)


def test_numbers_keep_their_digits() -> None:
    text = "a = (2*1.50 kHz)/3"
    found = only(text)
    assert isinstance(found, Equation)
    assert isinstance(found.sides[1], Product)
    (_, inner), (_, three) = found.sides[1].factors
    assert isinstance(inner, Product)
    spans = [factor.span for _, factor in inner.factors] + [three.span]
    assert [text[span.start : span.end] for span in spans if span] == ["2", "1.50 kHz", "3"]


def test_a_root() -> None:
    assert only("a = sqrt(R1)^2") == Equation((Name("a"), Power(Root(Name("R1")), 2)))


#: a slip, a piece of what is said, and the text under the caret
FAULTS = [
    ("x R1 = 2", "a sign is missing between x and R1", "R1"),
    ("a = 2 x", "x follows a number and is not a unit", "x"),
    ("a = 2R1*b", "2R1 is no product: a sign is missing", "2R1"),
    ("a = 4K7", "4K7 is no product: a sign is missing", "4K7"),
    ("let g", "this line does not say what its let is", ""),
    ("let = 3", "this line does not say what its let is", "="),
    ("node x", "this line does not say what its node is", ""),
    ("a -> b", "a limit says of what and for what", ""),
    ("a ~= b", "an approximation says how near it is", "~="),
    ("a ~= b for x = 1 Hz .. 2 Hz within 1 %", "a range is one of f in Hz or w in rad/s", "x"),
    ("a ~= b for f = 1 rad/s .. 2 Hz within 1 %", "f is in Hz", "1 rad/s"),
    ("a ~= b for f = 1 .. 2 Hz within 1 %", "the end of a range is a frequency", "1"),
    ("a ~= b within 1 kHz", "a bound is in % or in dB", "kHz"),
    ("a ~= b within 0 %", "a bound is greater than zero", "0"),
    ("x", "this line has no =", "x"),
    ("a = b)", ") closes nothing", ")"),
    ("a = (b", "this parenthesis is not closed", "("),
    ("a < b", "a line is an equation, a limit, an approximation or a claim", "<"),
    ("a == b", "== has no meaning in the notation", "=="),
    ("a = b =", "the value is missing", ""),
    ("sin(x) = 2", "there are no functions in the notation", "sin"),
    ("a = V(x)", "V( ) is not how a voltage is written", "V"),
    ("a = \u221aR1", "a root is written with parentheses", "\u221a"),
    ("w0 = 1 kHz", "w0 is in rad/s, this is in Hz", "1 kHz"),
    ("f0 = 6.28 rad/s", "f0 is in Hz, this is in rad/s", "6.28 rad/s"),
    ("f3dB = 1000", "f3dB is in Hz and this number has no unit", "1000"),
    ("K of x/in = 2", "K is no figure of a transfer function", "K"),
    ("H is butterworth 0", "the order of a family is a whole number", "0"),
    ("a = s^0.5", "an exponent is a whole number", "0.5"),
    ("a = 1/0", "division by zero", "0"),
    ("a -- b", "-- joins the nodes and parts of a chain", "--"),
    ("a = 3 s + b", "s is the Laplace variable and no unit", "s"),
]


@pytest.mark.parametrize(("text", "message", "under"), FAULTS)
def test_a_slip_gets_one_fault_at_its_place(text: str, message: str, under: str) -> None:
    with pytest.raises(NotationError) as raised:
        read_working("in = in\n" + text)
    (fault,) = raised.value.faults
    assert message in fault.message
    assert fault.span is not None
    shown = ("in = in\n" + text)[fault.span.start : fault.span.end]
    assert shown == under


def test_all_faults_come_in_one_pass() -> None:
    with pytest.raises(NotationError) as raised:
        read_working("\n".join(text for text, _, _ in FAULTS))
    assert len(raised.value.faults) == len(FAULTS)


def test_a_long_working_is_refused() -> None:
    with pytest.raises(LimitError, match="at most 1000"):
        read_working("a = b\n" * (MOST_LINES + 1))
