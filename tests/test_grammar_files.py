"""The grammar files: where they stand, that they build without conflict, that every terminal has a name."""

from __future__ import annotations

import logging
import re
import subprocess
import sys

import pytest
from lark import Lark, logger

from symnet import grammar_files
from symnet.errors import SymnetError
from symnet.grammar_files import grammar_path, parser

STARTS = ("statement", "value", "expression")
GRAMMARS = {"network": STARTS, "working": ("line",)}


@pytest.mark.parametrize("name", GRAMMARS)
def test_no_conflict(name: str, caplog: pytest.LogCaptureFixture) -> None:
    # lark resolves shift/reduce conflicts silently in favour of shifting, unless its log is read.
    level = logger.level
    logger.setLevel(logging.DEBUG)
    try:
        with caplog.at_level(logging.DEBUG, logger=logger.name):
            logger.propagate = True
            Lark.open(str(grammar_path(name)), parser="lalr", start=list(GRAMMARS[name]), debug=True)
    finally:
        logger.setLevel(level)
    assert not [record for record in caplog.records if "conflict" in record.getMessage().lower()]


def test_a_conflict_would_be_seen(caplog: pytest.LogCaptureFixture) -> None:
    ambiguous = 'start: start PLUS start | NAME\nPLUS: "+"\nNAME: /[a-z]+/'
    level = logger.level
    logger.setLevel(logging.DEBUG)
    try:
        with caplog.at_level(logging.DEBUG, logger=logger.name):
            logger.propagate = True
            Lark(ambiguous, parser="lalr", debug=True)
    finally:
        logger.setLevel(level)
    assert [record for record in caplog.records if "conflict" in record.getMessage().lower()]


@pytest.mark.parametrize("name", GRAMMARS)
def test_every_terminal_is_named(name: str) -> None:
    names = {terminal.name for terminal in parser(name, *GRAMMARS[name]).terminals}
    assert not [name for name in names if name.startswith("__") or not re.fullmatch(r"_?[A-Z]+", name)]


def test_parsers_are_built_once() -> None:
    assert parser("network", *STARTS) is parser("network", *STARTS)


def test_a_missing_grammar() -> None:
    with pytest.raises(SymnetError, match=r"the grammar file nothing\.lark is missing"):
        grammar_path("nothing")


def test_a_grammar_inside_the_package_comes_first(
    monkeypatch: pytest.MonkeyPatch, tmp_path_factory: pytest.TempPathFactory
) -> None:
    package = tmp_path_factory.mktemp("site") / "symnet"
    (package / "grammar").mkdir(parents=True)
    (package / "grammar" / "network.lark").write_text("// installed")
    monkeypatch.setattr(grammar_files, "__file__", str(package / "grammar_files.py"))
    assert grammar_path("network") == package.resolve() / "grammar" / "network.lark"


def test_lark_is_imported_on_first_use_only() -> None:
    code = "import sys; from symnet.circuit.network import read_network; print('lark' in sys.modules); read_network('a -- R1 -- b'); print('lark' in sys.modules)"
    shown = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert shown.stdout.split() == ["False", "True"]
