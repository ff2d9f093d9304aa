r"""Names as they are written on paper: R1 with an index, omega_0 in Greek; plain text stays what was typed.

One function, :func:`split`, decides what is stem and what is index; LaTeX and HTML only dress its answer. The
rule looks at the name alone, so one name is written the same way everywhere. Two different names can look the
same on paper (``R1`` and ``R_1``); the plain text tells them apart. No name is trusted: whatever is not a letter
or a digit is escaped.
"""

from __future__ import annotations

import html
import re
from typing import Final

__all__ = ["escape_html", "escape_latex", "name_html", "name_latex", "name_text", "split"]

_SMALL = "alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi omicron pi rho sigma tau upsilon phi chi psi omega"
_GREEK: Final[dict[str, str]] = dict(zip(_SMALL.split(), "αβγδεζηθικλμνξοπρστυφχψω", strict=True)) | {
    "Gamma": "Γ",
    "Delta": "Δ",
    "Theta": "Θ",
    "Lambda": "Λ",
    "Xi": "Ξ",
    "Pi": "Π",
    "Sigma": "Σ",
    "Upsilon": "Υ",
    "Phi": "Φ",
    "Psi": "Ψ",
    "Omega": "Ω",
}

_LATEX_TEXT: Final[dict[str, str]] = {
    "\\": r"\textbackslash{}",
    "{": r"\{",
    "}": r"\}",
    "$": r"\$",
    "&": r"\&",
    "#": r"\#",
    "%": r"\%",
    "_": r"\_",
    "^": r"\textasciicircum{}",
    "~": r"\textasciitilde{}",
    "<": r"\textless{}",
    ">": r"\textgreater{}",
}

# Letters that stand for a quantity when more letters follow: RL, Cin, Vs; rC, fT, gM (small, then capital); gm.
_INDEXED = re.compile(r"([RLCZY])([A-Za-z]+)|([VIGQ])([a-z]+)|([frgwv])([A-Z][A-Za-z]*)|(g)(m)|(A)([a-z])")
_WITH_DIGITS = re.compile(r"([A-Za-z]+)([0-9][A-Za-z0-9]*)")


def split(name: str) -> tuple[str, str]:
    """The stem and the index of a name; the index is empty when there is none.

    >>> [split(name) for name in ("R1", "omega_0", "R_load", "RL", "Cin", "tau", "i_R1", "GBW")]
    [('R', '1'), ('omega', '0'), ('R', 'load'), ('R', 'L'), ('C', 'in'), ('tau', ''), ('i', 'R1'), ('GBW', '')]
    """
    stem, line, index = name.partition("_")
    if line and stem and index:
        return stem, index
    if name in _GREEK:
        return name, ""
    if found := _WITH_DIGITS.fullmatch(name):
        stem, index = found.groups()
        inner, letters = split(stem)
        return inner, letters + index
    if found := _INDEXED.fullmatch(name):
        stem, index = (group for group in found.groups() if group is not None)
        return stem, index
    return name, ""


def name_text(name: str) -> str:
    """The name as it was typed, on one line: what is not printable becomes a space."""
    return "".join(character if character.isprintable() else " " for character in name)


def name_latex(name: str) -> str:
    r"""The name for LaTeX mathematics.

    >>> print(name_latex("R1"), name_latex("omega_0"), name_latex("R_load"), name_latex("i_R1"))
    R_{1} \omega_{0} R_{\mathrm{load}} i_{R_{1}}
    >>> print(name_latex("A1.R1"), name_latex("gain"), name_latex("a$b"))
    A_{1}.R_{1} \mathrm{gain} \text{a\$b}
    """
    path, dot, last = name.rpartition(".")
    if dot and path and last:
        return f"{name_latex(path)}.{name_latex(last)}"
    stem, index = split(name)
    if not index:
        return _stem_latex(stem)
    inner = name_latex(index) if stem in ("i", "v") else _index_latex(index)
    return f"{_stem_latex(stem)}_{{{inner}}}"


def name_html(name: str) -> str:
    """The name for HTML, escaped.

    >>> print(name_html("R1"), name_html("omega_0"), name_html("i_R1"), name_html("<b>"))
    R<sub>1</sub> ω<sub>0</sub> i<sub>R1</sub> &lt;b&gt;
    """
    path, dot, last = name.rpartition(".")
    if dot and path and last:
        return f"{name_html(path)}.{name_html(last)}"
    stem, index = split(name)
    shown = _GREEK.get(stem) or escape_html(stem)
    return f"{shown}<sub>{escape_html(_commas(index))}</sub>" if index else shown


def escape_latex(text: str) -> str:
    r"""Plain text for LaTeX outside mathematics, on one line.

    >>> print(escape_latex("50 % of A_1"))
    50 \% of A\_1
    """
    return "".join(_LATEX_TEXT.get(character, character) for character in name_text(text))


def escape_html(text: str) -> str:
    """Plain text for HTML, on one line, quotes included.

    >>> escape_html("<i>")
    '&lt;i&gt;'
    """
    return html.escape(name_text(text), quote=True)


def _commas(index: str) -> str:
    return ",".join(filter(None, index.split("_"))) or index


def _plain(text: str) -> bool:
    return text.isascii() and text.isalnum()


def _stem_latex(stem: str) -> str:
    if stem in _GREEK:
        # TeX has no macro for omicron: it looks like an o.
        return "o" if stem == "omicron" else f"\\{stem}"
    return stem if len(stem) == 1 and _plain(stem) else _upright(stem)


def _index_latex(index: str) -> str:
    return (
        index
        if index.isascii() and (index.isdigit() or (len(index) == 1 and _plain(index)))
        else _upright(_commas(index))
    )


def _upright(text: str) -> str:
    return rf"\mathrm{{{text}}}" if _plain(text.replace(",", "a")) else rf"\text{{{escape_latex(text)}}}"
