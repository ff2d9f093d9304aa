"""One set of blocks in four dresses, verbatim; nothing a user typed reaches a dress unescaped."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from symnet.present import writers
from symnet.present.blocks import (
    Block,
    Folded,
    Formula,
    Heading,
    Items,
    Paragraph,
    Row,
    Steps,
    Table,
    Typed,
    without_empty_columns,
)
from symnet.typeset.numbers import quantity
from symnet.typeset.tree import ONE, Atom, Product, Quotient, plus

H = Formula((Quotient(ONE, plus(ONE, Product((Atom("s"), Atom("R1"))))),), "H")
TABLE = Table(
    ("part", "value"), (("R1", quantity(4700, "ohm")), ("C1", quantity(Fraction(22, 10**9), "F"))), 3
)


def test_text() -> None:
    blocks = (
        Heading("Network", 1),
        Paragraph(("gain ", Atom("K"))),
        H,
        TABLE,
        Items(("a", "b")),
        Typed("in -- R1"),
    )
    assert writers.text(blocks) == (
        "Network\n=======\n\n"
        "gain K\n\n"
        "              1\n"
        "    H(s) = --------\n"
        "           1 + s*R1\n\n"
        "  part  value\n"
        "  ----  --------\n"
        "  R1    4.7 kohm\n"
        "  C1    22 nF\n"
        "  ... 3 more rows\n\n"
        "- a\n- b\n\n"
        "    in -- R1"
    )


def test_markdown() -> None:
    blocks = (
        Heading("Network"),
        Paragraph(("gain ", Atom("K"))),
        H,
        TABLE,
        Items(("a*b",)),
        Typed("in -- R1"),
    )
    assert writers.markdown(blocks) == (
        "### Network\n\n"
        "gain $K$\n\n"
        "$$\nH(s) = \\frac{1}{1 + s R_{1}}\n$$\n\n"
        "| part | value |\n| --- | --- |\n| R1 | 4.7 kΩ |\n| C1 | 22 nF |\n| … 3 more rows |  |\n\n"
        "- a\\*b\n\n"
        "```text\nin -- R1\n```"
    )


def test_html() -> None:
    page = writers.html((Heading("Network"), Paragraph("a < b"), TABLE, Items(("a",)), Typed("in -- R1"), H))
    assert page.startswith("<div>\n<h4>Network</h4>\n<p>a &lt; b</p>\n<table")
    assert "4.7&nbsp;kΩ</td>" in page
    assert "… 3 more rows" in page
    assert "<li>a</li>" in page
    assert "<mi>H</mi><mo>(</mo><mi>s</mi><mo>)</mo><mo>=</mo><mrow><mfrac>" in page
    assert "<script" not in page


def test_latex() -> None:
    shown = writers.latex((Heading("50 %"), Paragraph("±1 %"), H, TABLE, Items(("a_1",)), Typed("in  -- R1")))
    assert shown == (
        "\\subsection*{50 \\%}\n\n"
        "$\\pm$1 \\%\n\n"
        "\\[\nH(s) = \\frac{1}{1 + s R_{1}}\n\\]\n\n"
        "\\begin{longtable}{lp{0.5\\linewidth}}\n"
        "part & value \\\\ \\hline\n"
        "R1 & $4.7\\,\\mathrm{k\\Omega}$ \\\\\n"
        "C1 & $22\\,\\mathrm{nF}$ \\\\\n"
        "\\ldots{} 3 more rows \\\\\n"
        "\\end{longtable}\n\n"
        "\\begin{itemize}\n\\item a\\_1\n\\end{itemize}\n\n"
        "\\begin{quote}\\ttfamily\nin~~-- R1\n\\end{quote}"
    )


def test_folded_is_open_on_paper_and_folded_on_screen() -> None:
    folded: tuple[Block, ...] = (Folded("steps", (Paragraph("one"),)),)
    assert writers.text(folded) == "steps:\n\none"
    assert writers.markdown(folded).startswith("<details>\n<summary>steps</summary>")
    assert writers.html(folded) == "<div>\n<details><summary>steps</summary>\n<p>one</p>\n</details>\n</div>"
    assert writers.latex(folded) == "\\paragraph{steps}\n\none"


def test_wide_tables_are_wrapped_and_numbers_are_not() -> None:
    long = "a sentence that is much longer than the room there is for it in a table of three columns, so it wraps"
    shown = writers.text((Table(("what", "value", "remark"), (("x" * 30, quantity(-3.0103, "dB"), long),)),))
    assert max(map(len, shown.splitlines())) <= 100
    assert "-3.01 dB" in shown
    assert "so it\n" not in shown.replace(" " * 42, "")


def test_without_header_a_table_is_a_list_of_pairs() -> None:
    pairs = Table((), (("Q", "2"), ("w0", "3")))
    assert writers.text((pairs,)) == "  Q   2\n  w0  3"
    assert "<thead>" not in writers.html((pairs,))
    assert writers.markdown((pairs,)) == "|  |  |\n| --- | --- |\n| Q | 2 |\n| w0 | 3 |"


def test_long_networks_are_counted() -> None:
    typed = Typed("\n".join(f"a{k} -- R{k} -- gnd" for k in range(250)))
    shown = writers.text((typed,))
    assert shown.endswith("# ... 150 more lines")
    assert len(shown.splitlines()) == 101


def test_empty_columns_are_left_out() -> None:
    table = without_empty_columns(("a", "b", "c"), (("1", "", "3"), ("4", "", "")))
    assert table == Table(("a", "c"), (("1", "3"), ("4", "")))


@pytest.mark.parametrize(
    "hostile", ["<script>alert(1)</script>", "| a | b |", "$x$", "`code`", "\x1b[31m", "a\nb"]
)
def test_hostile_words(hostile: str) -> None:
    blocks: tuple[Block, ...] = (
        Paragraph(hostile),
        Items((hostile,)),
        Table(("x",), ((hostile,),)),
        Typed(hostile),
    )
    assert "<script" not in writers.html(blocks)
    assert "\x1b" not in writers.text(blocks) + writers.markdown(blocks) + writers.html(
        blocks
    ) + writers.latex(blocks)
    for line in writers.markdown(blocks[:3]).splitlines():
        bare = line.replace("\\|", "").replace("\\$", "").replace("\\`", "").replace("\\<", "")
        assert bare.count("|") in {0, 2}
        assert not set(bare) & set("$`<")


@given(st.text(max_size=60))
def test_any_text_is_one_row_of_a_table(words: str) -> None:
    """Law: what a cell holds never makes a row or a column of its own."""
    table = Table(("a", "b"), ((words, words),))
    rows = writers.markdown((table,)).splitlines()
    assert len(rows) == 3
    assert rows[-1].replace("\\\\", "").replace("\\|", "").count("|") == 3


def test_typed_text_cannot_close_its_fence() -> None:
    shown = writers.markdown((Typed("# ``` end\nin -- R1"),))
    assert shown.splitlines()[0] == "````text"
    assert shown.splitlines()[-1] == "````"


STEPS = Steps(
    (
        Row(Quotient(Atom("a"), Atom("R1")), Product((Atom("s"), Atom("out"))), "node a", "in = out"),
        Row(Atom("a"), Atom("out"), "so"),
        Row(None, Product((Atom("R1"), Atom("out"))), reason="a<b put in"),
    )
)


def test_steps_have_their_equals_signs_below_each_other() -> None:
    assert writers.text((STEPS,)) == (
        "node a  a/R1 = s*out   (in = out)\nso      a    = out\n             = R1*out   (a<b put in)"
    )


def test_steps_in_latex_and_markdown() -> None:
    rows = (
        "\\text{node a}\\quad \\frac{a}{R_{1}} &= s \\, \\mathrm{out} && \\text{in = out} \\\\\n"
        "\\text{so}\\quad a &= \\mathrm{out} \\\\\n"
        " &= R_{1} \\, \\mathrm{out} && \\text{a\\textless{}b put in}"
    )
    assert writers.latex((STEPS,)) == f"\\begin{{align*}}\n{rows}\n\\end{{align*}}"
    assert writers.markdown((STEPS,)) == f"$$\n\\begin{{aligned}}\n{rows}\n\\end{{aligned}}\n$$"


def test_steps_in_html_are_escaped_and_in_columns() -> None:
    shown = writers.html((STEPS,))
    assert shown.count("<tr>") == 3
    assert "a&lt;b put in" in shown
    assert shown.count("<mo>=</mo>") == 3
