"""Names on paper: stem and index, Greek, and nothing trusted."""

from __future__ import annotations

import html
import re

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.typeset.names import escape_html, escape_latex, name_html, name_latex, name_text, split


@pytest.mark.parametrize(
    ("name", "latex", "shown"),
    [
        ("s", "s", "s"),
        ("R1", "R_{1}", "R<sub>1</sub>"),
        ("R_1", "R_{1}", "R<sub>1</sub>"),
        ("C12", "C_{12}", "C<sub>12</sub>"),
        ("RL", "R_{L}", "R<sub>L</sub>"),
        ("Rs", "R_{s}", "R<sub>s</sub>"),
        ("R_load", r"R_{\mathrm{load}}", "R<sub>load</sub>"),
        ("R_load_max", r"R_{\mathrm{load,max}}", "R<sub>load,max</sub>"),
        ("Cin", r"C_{\mathrm{in}}", "C<sub>in</sub>"),
        ("Rf1", r"R_{\mathrm{f1}}", "R<sub>f1</sub>"),
        ("rC", "r_{C}", "r<sub>C</sub>"),
        ("gm", "g_{m}", "g<sub>m</sub>"),
        ("Vs", "V_{s}", "V<sub>s</sub>"),
        ("omega_0", r"\omega_{0}", "ω<sub>0</sub>"),
        ("omega0", r"\omega_{0}", "ω<sub>0</sub>"),
        ("tau", r"\tau", "τ"),
        ("Delta", r"\Delta", "Δ"),
        ("omicron", "o", "ο"),
        ("f3dB", r"f_{\mathrm{3dB}}", "f<sub>3dB</sub>"),
        ("i_R1", "i_{R_{1}}", "i<sub>R1</sub>"),
        ("v_a", "v_{a}", "v<sub>a</sub>"),
        ("K", "K", "K"),
        ("in", r"\mathrm{in}", "in"),
        ("out", r"\mathrm{out}", "out"),
        ("GBW", r"\mathrm{GBW}", "GBW"),
        ("A1.R1", "A_{1}.R_{1}", "A<sub>1</sub>.R<sub>1</sub>"),
    ],
)
def test_names_of_the_trade(name: str, latex: str, shown: str) -> None:
    assert name_latex(name) == latex
    assert name_html(name) == shown
    assert name_text(name) == name


@pytest.mark.parametrize("name", ["_", "a_", "_a", "R_", "1", "", ".", "a.", ".a"])
def test_odd_names_are_written_somehow(name: str) -> None:
    assert name_text(name) == name
    assert html.unescape(re.sub("</?sub>", "", name_html(name))) == name


def test_a_hostile_name_is_only_a_name() -> None:
    assert name_html("<script>alert(1)</script>") == "&lt;script&gt;alert(1)&lt;/script&gt;"
    assert name_html('R_"onclick') == "R<sub>&quot;onclick</sub>"
    assert name_latex("R$1") == r"\text{R\$1}"
    assert name_latex(r"x\input{y}") == r"\text{x\textbackslash{}input\{y\}}"
    assert name_text("R1\n\x1b[31m") == "R1  [31m"


@settings(deadline=None)
@given(st.text(max_size=12))
def test_no_name_opens_a_tag_or_a_macro(name: str) -> None:
    """Law: of a name only letters, digits and the marks this module sets reach the page unescaped."""
    bare = re.sub(r"</?sub>", "", name_html(name))
    assert "<" not in bare
    assert ">" not in bare
    latex = escape_latex(name)
    assert re.search(r"(?<!\\)[$&#%_]", latex) is None
    assert "\n" not in latex
    braces = re.sub(r"\\[{}]", "", name_latex(name))
    assert braces.count("{") == braces.count("}")


def test_text_escapes() -> None:
    assert escape_latex("50 % of R_1 & <C>") == r"50 \% of R\_1 \& \textless{}C\textgreater{}"
    assert escape_html("a < b & 'c'") == "a &lt; b &amp; &#x27;c&#x27;"


@settings(deadline=None)
@given(st.from_regex(r"[A-Za-z][A-Za-z0-9_]{0,8}", fullmatch=True))
def test_stem_and_index_are_the_name(name: str) -> None:
    """Law: splitting loses no letter; only one underscore may go."""
    stem, index = split(name)
    assert name in (stem + index, f"{stem}_{index}")
