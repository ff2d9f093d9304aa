"""The shell command: ``symnet FILE`` prints the brief of a network, ``symnet FILE --check WORKING`` a review.

It answers with 0 when all is well, 1 when the network or the file is at fault or a line of the working does not
hold, 2 when the command was. The
answer goes to standard output, what is wrong to standard error. A console that cannot show Ω or µ gets ohm
and u; a reader that has seen enough (``symnet FILE | head``) is no error.
"""

from __future__ import annotations

import argparse
import codecs
import os
import sys
from collections.abc import Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Final

from symnet import __version__
from symnet.errors import SymnetError

if TYPE_CHECKING:
    from symnet.circuit.network import Network

__all__ = ["main"]

_PLAIN: Final = {
    "Ω": "ohm", "\N{OHM SIGN}": "ohm", "µ": "u", "μ": "u", "ω": "w", "π": "pi", "τ": "tau", "ζ": "zeta", "σ": "sigma",
    "°": "deg", "±": "+/-", "−": "-", "–": "-", "—": "-", "─": "-", "×": "*", "·": "*", "⋅": "*", "√": "sqrt",
    "∞": "inf", "≤": "<=", "≥": ">=", "≠": "!=", "≈": "~", "→": "->", "‖": "||", "…": "...", "²": "^2",
    "³": "^3", "⁴": "^4", "⁵": "^5", "⁶": "^6", "⁷": "^7", "⁸": "^8", "⁹": "^9", "₀": "0", "\u00a0": " ",
    "\u202f": " ", "\u2009": " ", "│": "|", "┼": "+",
}  # fmt: skip


def _plainly(error: UnicodeError) -> tuple[str, int]:
    """What stands for a character that the console cannot show (an error handler for codecs)."""
    if not isinstance(error, UnicodeEncodeError):
        raise error
    return "".join(_PLAIN.get(c, "?") for c in error.object[error.start : error.end]), error.end


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(
        prog="symnet",
        description="Derive the exact transfer functions of an analog network and say what they are.",
        epilog="Exit code: 0 all well, 1 a fault in the network or its file, or a line of the working that does "
        "not hold, 2 a fault in the command.",
    )
    parser.add_argument("file", metavar="FILE", help="a network in symnet's notation; - reads standard input")
    parser.add_argument(
        "--check", metavar="WORKING", help="hold a hand derivation, one line a statement, against the network"
    )
    parser.add_argument("--md", action="store_true", help="write Markdown instead of plain text")
    parser.add_argument("--version", action="version", version=f"symnet {__version__}")
    return parser


def _text_of(file: str) -> str:
    return (sys.stdin.buffer.read() if file == "-" else Path(file).read_bytes()).decode("utf-8-sig")


def _network(file: str) -> Network:
    from symnet.circuit.build import load, network

    return network(_text_of(file)) if file == "-" else load(Path(file))


def _brief(file: str, markdown: bool) -> tuple[str, int]:
    from symnet.present.brief import brief

    seen = brief(_network(file))
    return (seen.to_markdown() if markdown else seen.to_text()), 0


def _review(net: Network, working: str, markdown: bool) -> tuple[str, int]:
    from symnet.present import writers
    from symnet.present.review import review_blocks
    from symnet.review.verify import verify

    review = verify(net, _text_of(working))
    blocks = review_blocks(review)
    return (writers.markdown(blocks) if markdown else writers.text(blocks)), 0 if review else 1


def main(arguments: Sequence[str] | None = None) -> int:
    """Run the command with these arguments (those of the shell by default) and return its exit code."""
    codecs.register_error("plainly", _plainly)
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="plainly")
    given = _parser().parse_args(arguments)
    file = given.file
    try:
        if given.check is None:
            answer, code = _brief(file, given.md)
        else:
            net = _network(file)
            file = given.check
            answer, code = _review(net, file, given.md)
    except SymnetError as error:
        print(f"symnet: {_called(file)}: {error}", file=sys.stderr)
        return 1
    except OSError as error:
        print(f"symnet: {_called(file)}: {error.strerror or error}", file=sys.stderr)
        return 1
    except UnicodeDecodeError as error:
        print(f"symnet: {_called(file)}: byte {error.start + 1} is not UTF-8 text", file=sys.stderr)
        return 1
    except KeyboardInterrupt:
        return 130
    try:
        print(answer)
        sys.stdout.flush()
    except BrokenPipeError:
        # What is still in the buffer has nowhere to go; without this the interpreter complains when it ends.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
    return code


def _called(file: str) -> str:
    return "standard input" if file == "-" else file
