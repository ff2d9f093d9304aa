"""The grammar files and the parsers made from them, each built once, when it is first needed.

The files stand at the top of the source tree, where a reader looks for them, and inside the package once it is
installed. LALR with a contextual lexer was chosen because it is linear, deterministic and refuses an ambiguous
grammar while it is being written; a parser is built in some 40 ms and reads a line in about 0.1 ms.
"""

from __future__ import annotations

from functools import cache
from pathlib import Path
from typing import TYPE_CHECKING

from symnet.errors import SymnetError

if TYPE_CHECKING:
    from lark import Lark

__all__ = ["grammar_path", "parser"]


def grammar_path(name: str) -> Path:
    """Where ``name.lark`` stands: beside this module when installed, at the top of the tree otherwise."""
    here = Path(__file__).resolve().parent
    for folder in (here / "grammar", here.parent / "grammar"):
        path = folder / f"{name}.lark"
        if path.is_file():
            return path
    raise SymnetError(f"the grammar file {name}.lark is missing from this installation of symnet")


@cache
def parser(name: str, *starts: str) -> Lark:
    """The parser of one grammar file for these start rules."""
    from lark import Lark

    return Lark.open(
        str(grammar_path(name)),
        parser="lalr",
        start=list(starts),
        maybe_placeholders=True,
        propagate_positions=False,
    )
