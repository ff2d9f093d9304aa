"""Tables, verbatim in all forms, and what they refuse."""

from __future__ import annotations

import pytest

from symnet.errors import LimitError
from symnet.typeset.numbers import quantity
from symnet.typeset.tables import Table
from symnet.typeset.tree import Atom, times

TABLE = Table.of(
    ["part", "value", "tau"],
    [
        ["R1", quantity(14700, "ohm"), times(Atom("R1"), Atom("C1"))],
        ["C1 | <x>", quantity(-22e-9, "F"), "50 %"],
    ],
    caption="Values & more",
    align="lrc",
)


def test_text() -> None:
    assert TABLE.to_text() == (
        "Values & more\n"
        "part          value   tau\n"
        "--------  ---------  -----\n"
        "R1        14.7 kohm  R1*C1\n"
        "C1 | <x>     -22 nF   50 %"
    )


def test_markdown() -> None:
    assert TABLE.to_markdown() == (
        "**Values & more**\n\n"
        "| part | value | tau |\n"
        "| :-- | --: | :-: |\n"
        "| R1 | 14.7 kohm | $R_{1} C_{1}$ |\n"
        r"| C1 \| \<x\> | -22 nF | 50 % |"
    )


def test_html() -> None:
    assert TABLE.to_html() == (
        '<table style="border-collapse:collapse;color:inherit;background:inherit">\n'
        '<caption style="text-align:left">Values &amp; more</caption>\n'
        '<thead style="border-bottom:1px solid currentColor"><tr>'
        '<th style="text-align:left">part</th><th style="text-align:right">value</th>'
        '<th style="text-align:center">tau</th></tr></thead>\n'
        "<tbody>\n"
        '<tr><td style="text-align:left">R1</td><td style="text-align:right">14.7 kΩ</td>'
        '<td style="text-align:center">R<sub>1</sub>·C<sub>1</sub></td></tr>\n'
        '<tr><td style="text-align:left">C1 | &lt;x&gt;</td><td style="text-align:right">−22 nF</td>'
        '<td style="text-align:center">50 %</td></tr>\n'
        "</tbody></table>"
    )


def test_latex() -> None:
    assert TABLE.to_latex() == (
        "\\begin{tabular}{lrc}\n"
        "part & value & tau \\\\ \\hline\n"
        "R1 & $14.7\\,\\mathrm{k\\Omega}$ & $R_{1} C_{1}$ \\\\\n"
        "C1 | \\textless{}x\\textgreater{} & $-22\\,\\mathrm{nF}$ & 50 \\% \\\\\n"
        "\\end{tabular}"
    )
    assert TABLE.to_latex("array").splitlines()[2] == (
        "\\text{R1} & 14.7\\,\\mathrm{k\\Omega} & R_{1} C_{1} \\\\"
    )


def test_a_long_table_ends_early_and_counts_the_rest() -> None:
    table = Table.of(["n"], [[str(n)] for n in range(600)], most=2)
    assert table.to_text() == "n\n-\n0\n1\n... 598 more rows"
    assert table.to_markdown().endswith("| 1 |\n\n... 598 more rows")
    assert '<tr><td colspan="1">... 598 more rows</td></tr>' in table.to_html()
    assert "\\multicolumn{1}{l}{... 598 more rows} \\\\" in table.to_latex()
    assert Table.of(["n"], [["1"], ["2"]], most=1).left_out == "... 1 more row"
    assert Table.of(["n"], [["1"], ["2"]], most=2).left_out == ""


def test_lines_stay_lines() -> None:
    table = Table.of(["a"], [["x\ny"]])
    assert table.to_text() == "a\n---\nx y"
    assert table.to_markdown().count("\n") == 2


def test_a_table_without_rows() -> None:
    assert Table.of(["a", "b"], []).to_text() == "a  b\n-  -"


def test_rows_must_fit_the_header() -> None:
    with pytest.raises(LimitError, match="row 2 of the table has 1 cells, its header 2"):
        Table.of(["a", "b"], [["1", "2"], ["3"]])
    with pytest.raises(LimitError, match="the alignment 'lx' does not fit"):
        Table.of(["a", "b"], [], align="lx")


def test_notebooks_get_text_html_and_markdown() -> None:
    assert set(TABLE._repr_mimebundle_()) == {"text/plain", "text/html", "text/markdown"}
