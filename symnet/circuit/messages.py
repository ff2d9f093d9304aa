"""What to say when a line cannot be parsed: a table from diagnosis to sentence.

The parser only knows that one token does not fit. Each entry of the table looks at the words around that place
and, if it recognises the slip, says what is wrong and what to write; the first entry that recognises it wins.
The suite holds an example for every entry and proves that it fires. No name of a grammar terminal ever leaves
this module.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING, Final, NamedTuple, TypeAlias

from symnet.circuit.clues import Clue, clue_at
from symnet.circuit.lines import SENTENCE_WORDS, Line
from symnet.errors import Fault, nearest
from symnet.quantities import read_unit

if TYPE_CHECKING:
    from lark.exceptions import UnexpectedInput

__all__ = ["DIAGNOSES", "RESERVED_LATER", "Diagnoses", "Said", "diagnose"]

#: Words kept for statements of later releases, with what to do until then.
RESERVED_LATER: Final = {
    "let": "give the symbol a value: g = 2*R1",
    "node": "node equations belong to a hand derivation",
}

_USAGE: Final = {
    "drive": "write: drive in, drive a - b as Vs, drive current into a, or drive current from a to b",
    "read": "write: read out, read a - b, or read i_R1",
    "hold": "write: hold out = mu*(p - m), or hold a - b = r*i_R1",
    "push": "write: push from d to c = gm*(g - c), or push into c = gm*g",
    "couple": "write: couple L1 to L2 with k = 0.98, or with M = 1 mH",
    "free": "write: free Z0, K or free gm in S",
    "notation": "write: notation 1",
    "device": "write: U1: opamp(plus=p, minus=m, out=o)",
    "define": "write: define divider(in, out; R1, R2 = 10 kohm)",
    "done": "done ends a section and stands alone",
}

_GIVEN_VALUE: Final = {"assignment", "hold", "push", "read", "value", "expression", "device", "line"}


def diagnose(
    error: UnexpectedInput, line: Line, start: str = "statement", diagnoses: Diagnoses | None = None
) -> Fault:
    """The fault that a person can act on, for the place where the parser stopped."""
    from lark.exceptions import UnexpectedToken

    at: int = getattr(error, "pos_in_stream", None) or 0
    if isinstance(error, UnexpectedToken):
        at = len(line.text) if error.token.type == "$END" else error.token.start_pos or 0
    clue = clue_at(line.text, at, start)
    said = next((said for recognise in diagnoses or DIAGNOSES if (said := recognise(clue))), None)
    if said is None:
        said = Said(f"{clue.found.text if clue.found else 'the end of the line'} is not expected here")
    at_word = clue.near(said.step)
    if at_word is not None:
        return Fault(said.message, said.hint, line.span(at_word.start, at_word.end))
    return Fault(said.message, said.hint, line.span(len(line.text), len(line.text) + 1))


# -- the table -------------------------------------------------------------------------------------------------------


class Said(NamedTuple):
    """What is said: the message, what to do, and at which word, counted from where the parser stopped."""

    message: str
    hint: str = ""
    step: int = 0


#: Entries of the table, in the order in which they are asked.
Diagnoses: TypeAlias = "tuple[Callable[[Clue], Said | None], ...]"

_CHAIN: Final = frozenset({"--", "\N{EM DASH}"})
_OPERATORS: Final = frozenset(
    {*"+-*/^=,(", "||", "--", "\N{EM DASH}", "\N{DOUBLE VERTICAL LINE}", "\N{PARALLEL TO}", "\N{MIDDLE DOT}"}
    | {"\N{MULTIPLICATION SIGN}", "\N{DOT OPERATOR}"}
)
_FUNCTIONS: Final = frozenset(
    {"sqrt", "exp", "log", "ln", "sin", "cos", "tan", "abs", "min", "max", "pow", "par"}
)
_SIGNS: Final[dict[str, tuple[str, str]]] = {
    "'": ("there are no quotation marks in the notation", "write the name or the value as it is"),
    '"': ("there are no quotation marks in the notation", "write the name or the value as it is"),
    "[": ("[ ] have no meaning in the notation", "group with ( )"),
    "]": ("[ ] have no meaning in the notation", "group with ( )"),
    "{": ("{ } have no meaning in the notation", "group with ( )"),
    "}": ("{ } have no meaning in the notation", "group with ( )"),
    "|": ("a single | has no meaning in the notation", "parallel is written ||"),
    "&": ("& has no meaning in the notation", "series is written +, parallel ||"),
    "**": ("** has no meaning in the notation", "a power is written ^: s^2"),
    "==": ("== has no meaning in the notation", "write one ="),
    "->": ("-> has no meaning in the notation", "a chain is written with --"),
    "\N{SQUARE ROOT}": (
        "there are no roots in the notation",
        "exponents are whole numbers; give the value itself",
    ),
    ".": ("a point stands inside a number only", "names are made of letters, digits and _"),
    "_": ("a name begins with a letter", "names are made of letters, digits and _"),
}


def _reserved(clue: Clue) -> Said | None:
    if clue.kind not in RESERVED_LATER:
        return None
    message = f"{clue.kind} is not in this release of the notation"
    return Said(message, RESERVED_LATER[clue.kind], -clue.index)


def _call(clue: Clue) -> Said | None:
    if clue.text() != "(" or not clue.is_kind(-1, "word") or clue.after_unit:
        return None
    name, argument = clue.text(-1), clue.text(1)
    if clue.text(-2) == ":" or clue.text(2) == "=":
        return Said(f"{name}(...) is a device, and a device has a name", _USAGE["device"], -1)
    if name in {"V", "v", "U", "u"} and argument:
        wanted = argument if clue.is_kind(1, "word") else f"v_{argument}"
        hint = f"a node's name is its voltage: write {wanted}"
        if clue.text(2) == "," and clue.text(3):
            hint = f"write {wanted} - {clue.text(3)}"
        return Said(f"{name}( ) is not how a voltage is written", hint, -1)
    if name in {"I", "i"} and argument:
        hint = f"write i_{argument} for the current through {argument}"
        return Said(f"{name}( ) is not how a current is written", hint, -1)
    if name.lower() in _FUNCTIONS:
        return Said("there are no functions in the notation", "values are exact: give the value itself", -1)
    return Said(f"a sign is missing between {name} and (", f"a product is written with *: {name}*(...)")


def _comma(clue: Clue) -> Said | None:
    if clue.text() != ",":
        return None
    if clue.is_kind(-1, "number") and clue.is_kind(1, "number"):
        return Said("a decimal point is written, not a comma", f"write {clue.text(-1)}.{clue.text(1)}")
    if clue.kind in {"drive", "read"}:
        return Said(f"one {clue.kind}, one statement", f"write {clue.kind} ...; {clue.kind} ...")
    return None


def _tolerance(clue: Clue) -> Said | None:
    if clue.text() == "%" and not clue.is_kind(-1, "number"):
        return Said("% stands behind the number of a tolerance only", "write ±1 %")
    if clue.text() == "%":
        return Said("a tolerance is written with its sign", f"write ±{clue.text(-1)} %")
    if clue.is_kind(0, "number") and clue.text(1) == "%" and clue.is_kind(-1, "word", "number"):
        return Said("a tolerance is written with its sign", f"write ±{clue.text()} %")
    if _plus_minus(clue, -1):
        return Said("a tolerance is a percentage", "write ±1 %")
    if clue.is_kind(-1, "number") and _plus_minus(clue, -2):
        return Said("a tolerance is a percentage", f"write ±{clue.text(-1)} %")
    if clue.text() in {"±", "+/-"}:
        hint = "give it where the part gets its value: R1 = 4.7 kohm ±1 %"
        return Said("a tolerance stands behind a value only", hint)
    return None


def _plus_minus(clue: Clue, step: int) -> bool:
    """Whether the words that end there are a plus-minus sign."""
    return clue.text(step) in {"±", "+/-"} or (clue.text(step) == "-" and clue.text(step - 1) == "+")


def _exponent(clue: Clue) -> Said | None:
    if clue.text(-1) == "^" or (clue.text(-1) in {"-", "("} and clue.text(-2) == "^"):
        return Said("an exponent is a whole number", "such as s^2 or s^-1")
    if clue.text() == "/" and clue.text(-2) == "(" and clue.text(-3) == "^":
        return Said("an exponent is a whole number", "there are no roots in the notation", -1)
    if clue.text() in {"^", "²", "³"} and (clue.text(-2) == "^" or clue.text(-1) in {"²", "³"}):
        return Said("two exponents in a row", "write (a^2)^3 or a^6")
    return None


def _sign(clue: Clue) -> Said | None:
    if clue.text() == "_" and clue.is_kind(-1, "number"):
        digits = clue.text(-1) + "".join(word.text for word in clue.words[clue.index :]).replace("_", "")
        return Said("a number is written without _", f"write {digits}")
    said = _SIGNS.get(clue.text())
    return Said(*said) if said else None


def _closing(clue: Clue) -> Said | None:
    if clue.text() != ")":
        return None
    depth = 0
    for word in clue.words[: clue.index]:
        depth += {"(": 1, ")": -1}.get(word.text, 0)
    return Said(") closes nothing", "remove it, or add the ( it belongs to") if depth <= 0 else None


def _dashes(clue: Clue) -> Said | None:
    if clue.text() in _CHAIN and clue.kind in _GIVEN_VALUE | {"drive"}:
        if clue.kind == "assignment" and (clue.is_kind(-1, "number") or clue.after_unit):
            first = clue.text(-clue.index)
            hint = f"write a -- {first} = ... -- b" if first[0] in "RLCZY" else "only parts have values"
            return Said("a chain begins and ends with a node", hint, -clue.index)
        return Said(
            "-- joins the nodes and parts of a chain and has no meaning here", "write a - b, or a - (-b)"
        )
    if clue.text() == "-" and clue.kind in {"chain", "other"} and clue.index:
        if clue.text(-1) in _CHAIN:
            return Said("a dash too many", "a chain is written with --")
        return Said("a single - has no meaning in a chain", "write --")
    return None


def _equals(clue: Clue) -> Said | None:
    if clue.text() != "=":
        return None
    if clue.kind == "drive":
        message = "a drive has no value: H is what is read divided by what drives"
        return Said(message, "leave out the = and what follows")
    if clue.kind == "read":
        return Said("a read has no value", _USAGE["read"])
    if _behind_equals(clue):
        names = [word.text for word in clue.words[: clue.index] if word.kind == "word"]
        hint = f"write {', '.join(names[:3])} = ..." if clue.kind == "assignment" else ""
        return Said("a second = in one statement", hint)
    if clue.kind == "chain":
        return Said("a value stands behind one part of a chain", "write a -- R1 = 4.7 kohm -- b")
    return None


def _missing(clue: Clue) -> Said | None:
    """An operand that is not there."""
    before, found = clue.text(-1), clue.text()
    nothing = not found or found in _OPERATORS or found == ")"
    if before in _CHAIN and nothing:
        what = "a node" if _links(clue) % 2 == 0 else "a part"
        return Said(
            f"{what} is missing between {before} and {found}"
            if found
            else f"{what} is missing after {before}"
        )
    if before == "(" and found == ")":
        return Said("there is nothing inside the parenthesis")
    if before == "=" and (not found or found in _CHAIN):
        hint = {
            "chain": "leave out the = when the part has none",
            "assignment": "a part without value is a symbol",
        }
        return Said("the value is missing", hint.get(clue.kind) or _USAGE.get(clue.kind, ""))
    if before in _OPERATORS and nothing:
        return Said(
            f"something is missing between {before} and {found}"
            if found
            else f"something is missing after {before}"
        )
    if clue.index == 0 and found in _CHAIN:
        return Said("a chain begins with a node", "write a -- R1 -- b")
    if clue.index == 0 and found in _OPERATORS:
        return Said(f"something is missing before {found}")
    return None


def _links(clue: Clue) -> int:
    return sum(word.text in _CHAIN for word in clue.words[: clue.index])


def _value_in_chain(clue: Clue) -> Said | None:
    if clue.kind != "chain" or not _behind_equals(clue):
        return None
    last = max(k for k, word in enumerate(clue.words[: clue.index]) if word.text == "=")
    if any(word.text in _CHAIN for word in clue.words[last : clue.index]):
        return None
    part, other = clue.words[last - 1].text, clue.text(1)
    another = other[:1] in {*"RLCZY"} and (clue.text(2) == "=" or other[:1] != part[:1])
    if clue.text() in {"||", "+"} and another:
        group = f"{part} {clue.text()} {other}"
        return Said(
            "a value stands behind one part of a chain", f"write {group}, and the values apart: {part} = ..."
        )
    message = "inside a chain a value is one quantity or one name"
    return Said(message, f"give an expression in a statement of its own: {part} = ...")


def _number_then_word(clue: Clue) -> Said | None:
    """3V3, 5k ohm, 1 000."""
    found, before = clue.found, clue.near(-1)
    if found is None or before is None:
        return None
    if found.kind == before.kind == "number" and len(found.text) == 3 and found.text.isdigit():
        return Said("a number is written without spaces", f"write {before.text}{found.text}")
    if found.kind != "word":
        return None
    if clue.after_unit and read_unit(before.text + found.text):
        return Said(f"{before.text} {found.text} is one unit", f"write {before.text}{found.text}")
    if before.kind == "number" and before.end == found.start and clue.kind not in _GIVEN_VALUE:
        message = f"{before.text}{found.text} is neither a number nor a name"
        return Said(message, "a name begins with a letter", -1)
    return None


def _side_by_side(clue: Clue) -> Said | None:
    """Two names or numbers with nothing between them."""
    found, before = clue.found, clue.near(-1)
    if found is None or before is None:
        return None
    if found.kind == "sign" and found.text != "(":
        return None
    if before.kind == "sign" and before.text not in {")", "%", "²", "³"}:
        return None
    if clue.kind == "chain":
        if found.kind == "number" and before.kind == "word":
            message = f"= is missing between {before.text} and {found.text}"
            return Said(message, f"write {before.text} = {clue.quantity()}")
        return Said(
            f"-- is missing between {before.text} and {found.text}", f"write {before.text} -- {found.text}"
        )
    if clue.after_unit and read_unit(found.text):
        return Said("two units behind one number", f"leave out {before.text} or {found.text}")
    if clue.kind in _GIVEN_VALUE and _behind_equals(clue):
        if before.text == ")":
            return Said(
                f"a sign is missing between ) and {found.text}",
                f"a product is written with *: (...)*{found.text}",
            )
        message = f"a sign is missing between {before.text} and {found.text}"
        return Said(message, f"a product is written with *: {before.text}*{found.text}")
    return None


def _behind_equals(clue: Clue) -> bool:
    if clue.kind in {"value", "expression", "device", "line"}:
        return True
    return clue.kind == "read" or any(word.text == "=" for word in clue.words[: clue.index])


def _value_without_equals(clue: Clue) -> Said | None:
    name = clue.text(-clue.index)
    if clue.kind == "other" and clue.index == 1 and clue.is_kind(0, "number"):
        return Said(f"= is missing between {name} and {clue.text()}", f"write {name} = {clue.quantity()}")
    if clue.kind == "device" and clue.text(-1) == ":" and clue.is_kind(0, "number"):
        return Said("a value is written with =, not with :", f"write {name} = {clue.quantity()}", -1)
    return None


def _unknown_sentence(clue: Clue) -> Said | None:
    if clue.kind != "other" or not clue.is_kind(-clue.index, "word") or clue.index > 1:
        return None
    first = clue.words[0].text
    close = nearest(first, SENTENCE_WORDS[:6])
    if close and clue.found is not None:
        return Said(
            f"{first} is not a word that begins a statement", f"did you mean {close[0]}?", -clue.index
        )
    if clue.found is None:
        hint = "write a chain (a -- R1 -- b), a value (R1 = 4.7 kohm) or a sentence (drive in)"
        return Said(f"{first} by itself says nothing", hint, -1)
    if len(clue.words) >= 3 and all(word.kind != "sign" for word in clue.words[:3]):
        a, b = clue.words[1].text, clue.words[2].text
        hint = f"a part stands between its nodes: {a} -- {first} -- {b}"
        return Said(f"{clue.text(0)} does not follow {first} in any statement", hint)
    return None


def _strange(clue: Clue) -> Said | None:
    found = clue.found
    if (
        found is None
        or found.kind != "sign"
        or found.text in _OPERATORS
        or found.text in {")", ":", "%", "²", "³"}
    ):
        return None
    shown = found.text if found.text.isprintable() else f"the character U+{ord(found.text[0]):04X}"
    return Said(f"{shown} has no meaning in the notation")


def _usage(clue: Clue) -> Said | None:
    if clue.kind not in _USAGE:
        return None
    what = f"this {clue.kind} statement"
    if clue.found is None:
        missing = (
            "is not complete"
            if clue.kind not in {"hold", "push"} or _behind_equals(clue)
            else "does not say what it follows"
        )
        return Said(f"{what} {missing}", _USAGE[clue.kind])
    return Said(f"{clue.text()} is not expected in {what}", _USAGE[clue.kind])


#: In order: the first that recognises the slip speaks.
DIAGNOSES: Final[Diagnoses] = (
    _reserved,
    _call,
    _comma,
    _exponent,
    _sign,
    _closing,
    _dashes,
    _tolerance,
    _equals,
    _missing,
    _value_in_chain,
    _number_then_word,
    _side_by_side,
    _value_without_equals,
    _unknown_sentence,
    _strange,
    _usage,
)
