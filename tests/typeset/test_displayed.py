"""Values delegate, formatters own: what IPython gets from a result, and what it asks to be left out."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import symnet as sn
from symnet.typeset.displayed import Displayed

TOP = Path(__file__).resolve().parents[2]
KINDS = {"text/plain", "text/html", "text/latex", "text/markdown"}


class Nameless(Displayed):
    """A value for which no formatter has been registered."""

    def __repr__(self) -> str:
        return "<Nameless>"


def test_without_a_formatter_the_repr_is_shown() -> None:
    assert Nameless()._repr_mimebundle_() == {"text/plain": "<Nameless>"}


def test_include_and_exclude_are_honoured() -> None:
    H = sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out"))
    assert set(H._repr_mimebundle_()) == KINDS
    assert set(H._repr_mimebundle_(include={"text/latex"})) == {"text/latex"}
    assert set(H._repr_mimebundle_(exclude={"text/latex"})) == KINDS - {"text/latex"}


def test_formatters_are_found_when_only_symnet_was_imported() -> None:
    code = (
        "import symnet as sn, sys\n"
        "H = sn.derive(sn.network('in -- R1 -- out -- C1 -- gnd; drive in; read out'))\n"
        "assert 'symnet.present.show' not in sys.modules\n"
        "print(H._repr_mimebundle_()['text/latex'])"
    )
    run = subprocess.run([sys.executable, "-c", code], cwd=TOP, capture_output=True, text=True, check=True)
    assert (
        run.stdout
        == r"$\displaystyle H(s) = \frac{\mathrm{out}}{\mathrm{in}} = \frac{1}{1 + s R_{1} C_{1}}$" + "\n"
    )
