"""Every rule of the notation, read into the network it stands for."""

from __future__ import annotations

from fractions import Fraction

import pytest

from symnet.circuit.network import Network, read_network
from symnet.circuit.parts import (
    Branch,
    CurrentDrive,
    CurrentLaw,
    OpAmp,
    Value,
    VoltageDrive,
    VoltageLaw,
)
from symnet.circuit.reading import read_expression, read_reading, read_value
from symnet.errors import DimensionError, LimitError, NotationError, SymnetError
from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Sum
from symnet.quantities import FARAD, HENRY, NUMBER, OHM, SECOND, SIEMENS, VOLT, Dimension

A, B, C, K, P, M, G, D, S = (Name(name) for name in ("a", "b", "c", "K", "p", "m", "g", "d", "s"))
TWO = Number(Fraction(2))


def value(text: str, name: str = "R1") -> Value:
    """The value of one name in a network that has it."""
    found = read_network(f"a -- {name} -- b; {text}").value(name)
    assert found is not None
    return found


def number(text: str, name: str = "R1") -> Fraction:
    expression = value(f"{name} = {text}", name).expression
    assert isinstance(expression, Number)
    return expression.value


class TestChains:
    def test_node_part_node(self) -> None:
        net = read_network("in -- R1 -- a -- L1 -- gnd")
        assert net.parts == (Branch("R1", "in", "a"), Branch("L1", "a", "gnd"))

    def test_series_and_parallel(self) -> None:
        # || binds tighter than +, so L2 || C2 needs no parentheses.
        for text in ("a -- R2 + (L2 || C2) -- out", "a -- R2 + L2 || C2 -- out"):
            assert read_network(text).parts == (
                Branch("R2", "a", "R2+L2"),
                Branch("L2", "R2+L2", "out"),
                Branch("C2", "R2+L2", "out"),
            )

    def test_series_inside_parallel(self) -> None:
        assert read_network("a -- (R1 + C1) || R2 -- b").parts == (
            Branch("R1", "a", "R1+C1"),
            Branch("C1", "R1+C1", "b"),
            Branch("R2", "a", "b"),
        )

    def test_a_chain_over_several_lines_in_parentheses(self) -> None:
        assert read_network("a -- (R1 +\n   C1) -- b") == read_network("a -- R1 + C1 -- b")

    def test_an_inline_quantity_and_an_inline_name(self) -> None:
        net = read_network("a -- C1 = 22 nF ±5% -- b -- R1 = R0 -- c -- R2 = 4k7 -- gnd; free R0")
        assert net.values == (
            ("C1", Value(Number(Fraction("22e-9"), FARAD), Fraction(5, 100))),
            ("R1", Value(Name("R0"))),
            ("R2", Value(Number(Fraction(4700), OHM))),
        )

    def test_a_negative_inline_quantity(self) -> None:
        assert read_network("a -- R1 = -2 ohm -- b").value("R1") == Value(Number(Fraction(-2), OHM))

    def test_nodes_may_be_numbers(self) -> None:
        assert read_network("1 -- R1 -- 2 -- C1 -- gnd").nodes == ("1", "2")

    def test_in_and_out_are_free_names(self) -> None:
        net = read_network("into1 -- R1 -- in; drive current into in; hold out = 2*in; out -- R2 -- gnd")
        assert net.nodes == ("into1", "in", "out")

    @pytest.mark.parametrize("word", ["driver", "reader", "ask", "tower", "infrom", "frees", "holder"])
    def test_a_name_may_begin_like_a_word_of_the_notation(self, word: str) -> None:
        assert read_network(f"{word} -- R1 -- b; drive {word}; read {word}").nodes == (word, "b")

    @pytest.mark.parametrize("letter", "RLCZY")
    def test_a_bare_class_letter_is_a_part(self, letter: str) -> None:
        assert read_network(f"a -- {letter} -- b").parts == (Branch(letter, "a", "b"),)


class TestSentences:
    @pytest.mark.parametrize(
        ("text", "drive"),
        [
            ("drive a", VoltageDrive("a")),
            ("drive a - b", VoltageDrive("a", "b")),
            ("drive gnd - b", VoltageDrive("gnd", "b")),
            ("drive a as Vs", VoltageDrive("a", "gnd", "Vs")),
            ("drive 1 - 2", VoltageDrive("1", "2")),
            ("drive current into a", CurrentDrive("gnd", "a")),
            ("drive current from a to b", CurrentDrive("a", "b")),
            ("drive current from a to gnd as Is", CurrentDrive("a", "gnd", "Is")),
        ],
    )
    def test_drive(self, text: str, drive: VoltageDrive | CurrentDrive) -> None:
        assert read_network(text).drives == (drive,)

    @pytest.mark.parametrize(
        ("text", "expression"),
        [
            ("a", A),
            ("a - b", Sum(((1, A), (-1, B)))),
            ("i_R1", Name("i_R1")),
            ("v_R1", Name("v_R1")),
            ("v_a", Name("v_a")),
            ("3", Name("v_3")),
            ("3 - b", Sum(((1, Name("v_3")), (-1, B)))),
            ("a - 3", Sum(((1, A), (-1, Name("v_3"))))),
            ("a - gnd", A),
            (
                "2*a + R1*i_R1",
                Sum(((1, Product(((1, TWO), (1, A)))), (1, Product(((1, Name("R1")), (1, Name("i_R1"))))))),
            ),
        ],
    )
    def test_read(self, text: str, expression: Expression) -> None:
        assert read_network(f"a -- R1 -- b -- R2 -- 3; read {text}").reads == (expression,)
        assert read_reading(text) == expression

    def test_hold(self) -> None:
        net = read_network("p -- R1 -- m; hold out = mu*(p - m)")
        law = Product(((1, Name("mu")), (1, Sum(((1, P), (-1, M))))))
        assert net.parts[1] == VoltageLaw("law1", "out", "gnd", law)

    def test_hold_between_two_nodes(self) -> None:
        law = Product(((1, Name("r")), (1, Name("i_R3"))))
        assert read_network("a -- R3 -- b; hold a - b = r*i_R3 as trans").parts[1] == VoltageLaw(
            "trans", "a", "b", law
        )

    def test_push(self) -> None:
        law = Product(((1, Name("gm")), (1, Sum(((1, G), (-1, C))))))
        net = read_network("g -- R1 -- c -- R2 -- d; push from d to c = gm*(g - c)")
        assert net.parts[2] == CurrentLaw("law1", "d", "c", law)
        assert read_network("g -- R1 -- c; push into c = gm*(g - c)").parts[1] == CurrentLaw(
            "law1", "gnd", "c", law
        )

    def test_names_of_laws_avoid_others(self) -> None:
        net = read_network(
            "a -- R1 -- law1; free law2; hold a = law2*law1; hold law1 = 2*a as law3; hold b = a"
        )
        assert net.part_names == ("R1", "law4", "law3", "law5")

    def test_a_law_that_is_zero_is_a_wire_with_a_current(self) -> None:
        assert read_network("a -- R1 -- b; hold a - b = 0; read i_law1").parts[1] == VoltageLaw(
            "law1", "a", "b", Number(Fraction(0))
        )

    def test_s_in_a_law(self) -> None:
        assert read_network("a -- R1 -- b; hold b = wt/s*a").parts[1] == VoltageLaw(
            "law1", "b", "gnd", Product(((1, Name("wt")), (-1, S), (1, A)))
        )

    def test_currents_of_everything(self) -> None:
        text = "a -- R1 -- b; U1: opamp(plus=gnd, minus=a, out=b); drive a as Vs; hold c = a as amp; c -- R2 -- gnd"
        assert len(read_network(text + "; read i_R1 + i_U1 + i_Vs + i_amp").reads) == 1

    @pytest.mark.parametrize(
        ("text", "free"),
        [
            ("free K", (("K", None),)),
            ("free Z0, K", (("Z0", None), ("K", None))),
            ("free gm in S", (("gm", SIEMENS),)),
            ("free in in V", (("in", VOLT),)),
            ("free mu in V/V", (("mu", NUMBER),)),
            ("free a, b in ohm*s^2/V", (("a", OHM * SECOND**2 / VOLT), ("b", OHM * SECOND**2 / VOLT))),
            ("free w in 1/s", (("w", Dimension(t=-1)),)),
            ("free r in kohm/V", None),
        ],
    )
    def test_free(self, text: str, free: tuple[tuple[str, Dimension | None], ...] | None) -> None:
        if free is None:
            with pytest.raises(NotationError, match="kohm has a prefix"):
                read_network(text)
        else:
            assert read_network(text).free == free

    def test_notation(self) -> None:
        assert read_network("notation 1; a -- R1 -- b") == read_network("a -- R1 -- b")

    def test_nothing(self) -> None:
        assert read_network(" \n# nothing\n;;") == Network()


class TestDevices:
    def test_opamp(self) -> None:
        assert read_network("U1: opamp(plus=p, minus=m, out=o)").parts == (OpAmp("U1", "p", "m", "o"),)

    def test_any_order_and_numbers_and_gnd(self) -> None:
        assert read_network("U1: opamp(out=3, plus=gnd, minus=2)").parts == (OpAmp("U1", "gnd", "2", "3"),)


class TestValues:
    @pytest.mark.parametrize(
        ("text", "exact"),
        [
            ("600", "600"),
            ("600 ohm", "600"),
            ("600ohm", "600"),
            ("4.7 kohm", "4700"),
            ("4.7k", "4700"),
            ("4.7 K", "4700"),
            ("4.7 KOhm", "4700"),
            ("4.7kΩ", "4700"),
            ("2 m", "0.002"),
            ("1.5 Mohm", "1500000"),
            (".5 Gohm", "5e8"),
            ("5. ohm", "5"),
            ("1e3", "1000"),
            ("1.5e-3 kohm", "1.5"),
            ("4k7", "4700"),
            ("4K7", "4700"),
            ("2R2", "2.2"),
            ("47R", "47"),
            ("1M", "1e6"),
            ("2M2", "2.2e6"),
            ("-5 ohm", "-5"),
            ("2*3.3 kohm", "6600"),
            ("(1 + 2)*100 ohm - 3e2 ohm/3", "200"),
            ("300 ohm || 600 ohm", "200"),
            ("2 V/(4 mA)", "500"),
            ("2 V/A", "2"),
            ("1/(2 mS)", "500"),
            ("(2 ohm)^3/(4 ohm)^2", "0.5"),
            ("0 + 5 ohm", "5"),
        ],
    )
    def test_ohms(self, text: str, exact: str) -> None:
        assert number(text) == Fraction(exact)

    @pytest.mark.parametrize(
        ("name", "text", "exact"),
        [
            ("C1", "22 nF", "22e-9"),
            ("C1", "100n", "100e-9"),
            ("C1", "4u7", "4.7e-6"),
            ("C1", "0.1u", "1e-7"),
            ("C1", "3p3", "3.3e-12"),
            ("C1", "4F7", "4.7"),
            ("C1", "4700 fF", "4.7e-12"),
            ("C1", "1 us/(2 kohm)", "5e-10"),
            ("L1", "10 mH", "0.01"),
            ("L1", "4u7", "4.7e-6"),
            ("L1", "1 H", "1"),
            ("Y1", "2 mA/V", "0.002"),
            ("Y1", "3 S", "3"),
            ("Z1", "1 kohm", "1000"),
        ],
    )
    def test_other_parts(self, name: str, text: str, exact: str) -> None:
        assert number(text, name) == Fraction(exact)

    @pytest.mark.parametrize("sign", ["±", "+/-", "+-", "± ", "+/- "])
    def test_tolerance(self, sign: str) -> None:
        assert value(f"R1 = 5 kohm {sign}1%").tolerance == Fraction(1, 100)
        assert value(f"R1 = 5 kohm{sign}0.05 %").tolerance == Fraction(5, 10000)

    def test_no_tolerance(self) -> None:
        assert value("R1 = 5 kohm").tolerance is None

    def test_several_targets(self) -> None:
        net = read_network("a -- Rs -- b -- RL -- gnd; Rs, RL = 600 ohm ±1%")
        same = Value(Number(Fraction(600), OHM), Fraction(1, 100))
        assert net.values == (("Rs", same), ("RL", same))

    def test_ties(self) -> None:
        net = read_network("a -- C1 -- b -- C2 -- c -- Z1 -- gnd; C2 = 2*C1 ±1%; Z1 = R/(1 + s*R*C)")
        below = Sum(((1, Number(Fraction(1))), (1, Product(((1, S), (1, Name("R")), (1, Name("C")))))))
        assert net.values == (
            ("C2", Value(Product(((1, TWO), (1, Name("C1")))), Fraction(1, 100))),
            ("Z1", Value(Product(((1, Name("R")), (-1, below))))),
        )

    def test_symbols(self) -> None:
        net = read_network("a -- R1 -- b; hold b = K*a; K = 3; tau = 75 us; w0 = 2 krad/s; t1 = 2 s")
        assert [(name, given.expression) for name, given in net.values] == [
            ("K", Number(Fraction(3))),
            ("tau", Number(Fraction("75e-6"), SECOND)),
            ("w0", Number(Fraction(2000), Dimension(t=-1))),
            ("t1", Number(Fraction(2), SECOND)),
        ]

    def test_a_bare_number_takes_a_declared_dimension(self) -> None:
        # The declaration may stand behind the value.
        net = read_network("gm = 2; free gm in S; L = 3")
        assert dict(net.values) == {
            "gm": Value(Number(Fraction(2), SIEMENS)),
            "L": Value(Number(Fraction(3), HENRY)),
        }

    def test_values_are_exact(self) -> None:
        assert number("0.1 ohm") * 3 == Fraction(3, 10)
        assert number("1 ohm/3") == Fraction(1, 3)


class TestExpressions:
    @pytest.mark.parametrize(
        ("text", "tree"),
        [
            ("a - b + c", Sum(((1, A), (-1, B), (1, C)))),
            ("-a + b", Sum(((-1, A), (1, B)))),
            ("-a", Sum(((-1, A),))),
            ("+a", A),
            ("a - -b", Sum(((1, A), (1, B)))),
            ("a*b/c", Product(((1, A), (1, B), (-1, C)))),
            ("a/b/c", Product(((1, A), (-1, B), (-1, C)))),
            ("a/(b*c)", Product(((1, A), (-1, Product(((1, B), (1, C))))))),
            ("-a*b", Sum(((-1, Product(((1, A), (1, B)))),))),
            ("(-a)*b", Product(((1, Sum(((-1, A),))), (1, B)))),
            ("a*-b", Product(((1, A), (1, Sum(((-1, B),)))))),
            ("a || b*c", Product(((1, Parallel((A, B))), (1, C)))),
            ("a || b || c", Parallel((A, B, C))),
            ("-a || b", Sum(((-1, Parallel((A, B))),))),
            ("a^2", Power(A, 2)),
            ("a^-2", Power(A, -2)),
            ("a^(-2)", Power(A, -2)),
            ("a²", Power(A, 2)),
            ("-a^2", Sum(((-1, Power(A, 2)),))),
            ("a^2 || b", Parallel((Power(A, 2), B))),
            ("(a^2)^3", Power(Power(A, 2), 3)),
            ("a + (b + c)", Sum(((1, A), (1, Sum(((1, B), (1, C))))))),
            ("((((a))))", A),
            ("(1/3)*a", Product(((1, Number(Fraction(1, 3))), (1, A)))),
            ("1/3*a", Product(((1, Number(Fraction(1))), (-1, Number(Fraction(3))), (1, A)))),
            ("2 kohm*a", Product(((1, Number(Fraction(2000), OHM)), (1, A)))),
            ("(2 V)^2*a", Product(((1, Power(Number(Fraction(2), VOLT), 2)), (1, A)))),
            ("-3", Number(Fraction(-3))),
            ("a - 3", Sum(((1, A), (-1, Number(Fraction(3)))))),
            ("1000 ms*a", Product(((1, Number(Fraction(1), SECOND)), (1, A)))),
        ],
    )
    def test_tree(self, text: str, tree: Expression) -> None:
        assert read_expression(text) == tree

    def test_spans(self) -> None:
        text = "2*R1 + (R2 || R3)^2"
        tree = read_expression(text)
        assert isinstance(tree, Sum)
        shown = [text[term.span.start : term.span.end] for _, term in tree.terms if term.span]
        assert shown == ["2*R1", "R2 || R3)^2"]

    def test_a_sum_of_ten_thousand_terms_is_one_node(self) -> None:
        tree = read_expression(" + ".join(["a"] * 10_000))
        assert isinstance(tree, Sum)
        assert len(tree.terms) == 10_000

    @pytest.mark.parametrize(
        "name", ["E", "I", "N", "O", "Q", "S", "beta", "gamma", "zeta", "Chi", "lambda", "None", "class"]
    )
    def test_no_name_means_anything_but_itself(self, name: str) -> None:
        # needs.md, section c: names that sympy takes for its own objects, and words of Python.
        assert read_expression(f"2*{name}") == Product(((1, TWO), (1, Name(name))))


class TestReadValue:
    @pytest.mark.parametrize(
        ("text", "name", "exact"),
        [
            ("4k7", "R1", "4700"),
            ("10k", "R1", "10000"),
            ("R47", "R1", "0.47"),
            ("M47", "R1", "470000"),
            ("K33", "R1", "330"),
            ("u47", "C1", "470e-9"),
            ("n10", "C1", "1e-10"),
            ("m47", "C1", "470e-6"),
            (" u47 ", "L1", "0.47e-6"),
            ("22 nF ±5%", "C1", "22e-9"),
            ("u47 ±5%", "C1", "470e-9"),
            ("u47+/-5%", "C1", "470e-9"),
            ("3", "mu", "3"),
        ],
    )
    def test_numbers(self, text: str, name: str, exact: str) -> None:
        found = read_value(text, name)
        assert isinstance(found.expression, Number)
        assert found.expression.value == Fraction(exact)
        assert found.tolerance == (Fraction(1, 20) if "%" in text else None)

    def test_codes_that_begin_with_a_letter_stand_nowhere_else(self) -> None:
        assert value("R1 = R47; free R47").expression == Name("R47")

    def test_ties(self) -> None:
        assert read_value("2*R1", "R2").expression == Product(((1, TWO), (1, Name("R1"))))

    def test_a_symbol_with_a_dimension(self) -> None:
        assert read_value("2", "gm", SIEMENS).expression == Number(Fraction(2), SIEMENS)

    @pytest.mark.parametrize(
        ("text", "name", "message"),
        [
            ("5 nF", "R1", "R1 is in ohm, its value is in F"),
            ("R47", "C1", "C1 is in F, its value is in ohm"),
            ("u47 ±5", "C1", "a tolerance is a percentage"),
            ("5 kohm 1%", "R1", "a tolerance is written with its sign"),
            ("", "R1", "the end of the line is not expected here"),
            ("a--b", "R1", "-- joins the nodes"),
            ("1; 2", "R1", "; has no meaning"),
            ("__import__('os')", "R1", "a name begins with a letter"),
        ],
    )
    def test_refused(self, text: str, name: str, message: str) -> None:
        with pytest.raises(NotationError) as caught:
            read_value(text, name)
        assert caught.value.faults[0].message.startswith(message)

    def test_no_text(self) -> None:
        with pytest.raises(NotationError, match="a text is needed, not bytes"):
            read_value(b"5", "R1")  # type: ignore[arg-type]
        with pytest.raises(NotationError, match="a text is needed, not NoneType"):
            read_network(None)  # type: ignore[arg-type]


class TestReadExpression:
    def test_codes_stand_alone(self) -> None:
        with pytest.raises(NotationError, match="4K7 is a value code and must stand alone"):
            read_expression("4K7")

    def test_seconds(self) -> None:
        assert read_expression("2 s") == Number(Fraction(2), SECOND)
        with pytest.raises(NotationError, match="s is the Laplace variable and no unit inside an expression"):
            read_expression("2 s*K")

    def test_the_place_of_a_fault(self) -> None:
        with pytest.raises(NotationError) as caught:
            read_expression("a + # b")
        assert (
            str(caught.value) == "line 1, column 8: something is missing after +\n    a + # b\n           ^"
        )


def test_errors_are_of_one_family() -> None:
    assert issubclass(NotationError, SymnetError)
    assert issubclass(LimitError, SymnetError)
    assert issubclass(DimensionError, SymnetError)
