"""H as source code that computes it: C99 and Python, one function of the frequency in Hz.

The code multiplies the second-order factors, so that no coefficient is lost, and carries the exact coefficients of N
and D in the names of the parts as comments, with the values that were put in.
"""

from __future__ import annotations

import keyword
import re
from typing import TYPE_CHECKING

from symnet.carry.factors import factors_of
from symnet.errors import Fault, LimitError, NotationError
from symnet.quantities import NUMBER

if TYPE_CHECKING:
    from collections.abc import Iterator

    from symnet.exact.ratio import Ratio
    from symnet.exact.transfer import Transfer

__all__ = ["c_source", "python_source"]

_C_WORDS = frozenset(
    [
        "auto",
        "break",
        "case",
        "char",
        "const",
        "continue",
        "default",
        "do",
        "double",
        "else",
        "enum",
        "extern",
        "float",
        "for",
        "goto",
        "if",
        "inline",
        "int",
        "long",
        "register",
        "restrict",
        "return",
        "short",
        "signed",
        "sizeof",
        "static",
        "struct",
        "switch",
        "typedef",
        "union",
        "unsigned",
        "void",
        "volatile",
        "while",
        "main",
        "complex",
        "I",
    ]
)


def c_source(h: Ratio, name: str, transfer: Transfer | None = None) -> str:
    """A C99 function ``double complex name(double f)``: H at f in Hz."""
    if not re.fullmatch(r"[A-Za-z]\w*", name, re.ASCII) or name in _C_WORDS:
        raise NotationError(
            Fault(f"{name!r} is no name for a C function", "letters, digits and _, as in H_probe")
        )
    gain, factors = factors_of(h)
    lines = ["#include <complex.h>", ""]
    lines += [f"/* {line} */" for line in _comments(transfer)]
    lines += [
        f"double complex {name}(double f)",
        "{",
        f"    static const double factors[{max(1, len(factors))}][6] = {{  /* b0 b1 b2 a0 a1 a2, ascending in s */",
    ]
    rows = [(*each.b, *each.a) for each in factors] or [(1.0, 0.0, 0.0, 1.0, 0.0, 0.0)]
    lines += ["        {" + ", ".join(_number(c) for c in row) + "}," for row in rows]
    lines += [
        "    };",
        "    const double complex s = 6.283185307179586 * f * I;",
        f"    double complex h = {_number(gain)};",
        f"    for (int k = 0; k < {len(rows)}; ++k) {{",
        "        const double *c = factors[k];",
        "        h *= (c[0] + s * (c[1] + s * c[2])) / (c[3] + s * (c[4] + s * c[5]));",
        "    }",
        "    return h;",
        "}",
        "",
    ]
    return "\n".join(lines)


def python_source(h: Ratio, name: str, transfer: Transfer | None = None) -> str:
    """A Python function ``name(f)``: H at f in Hz, a float or a numpy array; it needs nothing but Python."""
    if not name.isidentifier() or keyword.iskeyword(name):
        raise NotationError(
            Fault(f"{name!r} is no name for a Python function", "letters, digits and _, as in h_probe")
        )
    gain, factors = factors_of(h)
    rows = [(*each.b, *each.a) for each in factors] or [(1.0, 0.0, 0.0, 1.0, 0.0, 0.0)]
    lines = [f"# {line}" for line in _comments(transfer)]
    lines += [
        f"def {name}(f):",
        '    """H at the frequency f in Hz."""',
        "    s = 2j * 3.141592653589793 * f",
        f"    h = {_number(gain)}",
        "    for b0, b1, b2, a0, a1, a2 in (  # ascending in s",
    ]
    lines += ["        (" + ", ".join(_number(c) for c in row) + ")," for row in rows]
    lines += [
        "    ):",
        "        h = h * (b0 + s * (b1 + s * b2)) / (a0 + s * (a1 + s * a2))",
        "    return h",
        "",
    ]
    return "\n".join(lines)


def _number(value: float) -> str:
    return repr(float(value))


def _comments(transfer: Transfer | None) -> Iterator[str]:
    """What H is, in the names of the parts, with their values; nothing that could end a comment."""
    if transfer is None:
        return
    yield _plain(
        f"{transfer.label}, unit {'V/V' if transfer.dimension == NUMBER else transfer.dimension}, s in rad/s; derived exactly by symnet"
    )
    values = ", ".join(f"{name} = {float(value):.12g}" for name, value in transfer.values.items())
    yield _plain(f"values in ohm, henry, farad: {values}")
    try:
        for what, polynomial in (("N", transfer.numerator), ("D", transfer.denominator)):
            by_power: dict[int, list[str]] = {}
            names = [str(symbol) for symbol in polynomial.ring.symbols]
            for monomial, c in polynomial.terms():
                term = "*".join(
                    [str(abs(int(c)))]
                    + [n if e == 1 else f"{n}^{e}" for n, e in zip(names[1:], monomial[1:], strict=True) if e]
                )
                by_power.setdefault(monomial[0], []).append(("- " if c < 0 else "+ ") + term)
            for power in sorted(by_power):
                terms = by_power[power]
                shown = " ".join(terms[:40]) + (f" and {len(terms) - 40} more" if len(terms) > 40 else "")
                yield _plain(f"{what}, s^{power}: {shown}")
    except LimitError:
        yield "written out, N and D in the names of the parts would be too long"


def _plain(text: str) -> str:
    return "".join(c if c.isprintable() else " " for c in text).replace("*/", "* /")
