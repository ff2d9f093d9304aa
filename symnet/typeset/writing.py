r"""The three writers: plain text that can be typed back in, LaTeX mathematics, and simple HTML.

All three follow the precedence of the notation (``^``, ``||``, unary minus, ``* /``, ``+ -``) and put a
parenthesis wherever it is needed, and around ``x||y`` inside a product also where it is not, since few readers
know which of the two binds tighter. Order is kept as given. What is too long is shortened in the tree, between
terms, before anything is written: finished LaTeX is never cut.
"""

from __future__ import annotations

from fractions import Fraction
from typing import Final

from symnet.typeset.names import name_html, name_latex, name_text
from symnet.typeset.tree import (
    Atom,
    Constant,
    Omitted,
    Parallel,
    Power,
    Product,
    Quotient,
    Root,
    Sum,
    Tree,
)

__all__ = ["LONGEST_LATEX", "shorten", "to_html", "to_latex", "to_text"]

#: LaTeX of more characters is shortened: a page of it is not read, and notebooks get sluggish well above.
LONGEST_LATEX: Final = 4000

# How tightly the outermost operation of a piece of text binds.
_SUM, _PRODUCT, _PARALLEL, _POWER, _ATOM = range(5)

# Room that "... 123456 more terms" takes in LaTeX.
_MARK: Final = 32


class _Linear:
    """Text on one line. The HTML writer differs in its tokens only."""

    times = "*"
    minus = "-"
    parallel = "||"

    def write(self, tree: Tree) -> str:
        return self._piece(tree)[0]

    def name(self, name: str) -> str:
        return name_text(name)

    def raised(self, base: str, exponent: str) -> str:
        return f"{base}^{exponent}"

    def root(self, radicand: Tree, degree: int) -> tuple[str, int]:
        if degree == 2:
            return f"sqrt({self.write(radicand)})", _ATOM
        return f"{self.inside(radicand, _ATOM)}^(1/{degree})", _POWER

    def omitted(self, count: int) -> str:
        return f"... {count} more {'term' if count == 1 else 'terms'}"

    def brackets(self, text: str) -> str:
        return f"({text})"

    def inside(self, tree: Tree, least: int) -> str:
        """The tree, in parentheses unless its outermost operation binds at least as tightly as asked."""
        text, binding = self._piece(tree)
        return text if binding >= least else self.brackets(text)

    def _piece(self, tree: Tree) -> tuple[str, int]:
        match tree:
            case Atom(name):
                return self.name(name), _ATOM
            case Constant(value):
                return self.constant(value)
            case Sum(terms):
                return self.sum(terms), _SUM
            case Product(factors):
                return self.product(factors), _PRODUCT
            case Quotient(numerator, denominator):
                return self.quotient(numerator, denominator)
            case Power(base, exponent):
                return self.raised(self.inside(base, _ATOM), str(exponent).replace("-", self.minus)), _POWER
            case Parallel(branches):
                return self.parallel.join(self.inside(branch, _POWER) for branch in branches), _PARALLEL
            case Root(radicand, degree):
                return self.root(radicand, degree)
            case Omitted(count):
                return self.omitted(count), _ATOM

    def constant(self, value: Fraction) -> tuple[str, int]:
        sign = self.minus if value < 0 else ""
        if value.denominator == 1:
            return f"{sign}{abs(value.numerator)}", _SUM if sign else _ATOM
        return f"{sign}{abs(value.numerator)}/{value.denominator}", _SUM if sign else _PRODUCT

    def sum(self, terms: tuple[tuple[int, Tree], ...]) -> str:
        written = ""
        for sign, term in terms:
            if isinstance(term, Constant) and term.value < 0:
                sign, term = -sign, Constant(-term.value)
            if isinstance(term, Omitted) and written:
                written += f" + {self.omitted(term.count)}"
                continue
            body = self.inside(term, _PRODUCT)
            if not written:
                written = self.minus + body if sign < 0 else body
            else:
                written += f" {self.minus if sign < 0 else '+'} {body}"
        return written or "0"

    def product(self, factors: tuple[Tree, ...]) -> str:
        # A fraction needs no parentheses here: x * a/b is read as (x*a)/b, which has the same value.
        fractions = any(_is_fraction(factor) for factor in factors)
        joint = f" {self.times} " if fractions else self.times
        return joint.join(
            self.write(factor) if _is_fraction(factor) else self.inside(factor, _POWER) for factor in factors
        )

    def quotient(self, numerator: Tree, denominator: Tree) -> tuple[str, int]:
        above = self.write(numerator) if isinstance(numerator, Product) else self.inside(numerator, _POWER)
        return f"{above}/{self.inside(denominator, _POWER)}", _PRODUCT


class _Html(_Linear):
    times = "·"
    minus = "−"
    parallel = " ∥ "

    def name(self, name: str) -> str:
        return name_html(name)

    def raised(self, base: str, exponent: str) -> str:
        return f"{base}<sup>{exponent}</sup>"

    def root(self, radicand: Tree, degree: int) -> tuple[str, int]:
        index = "" if degree == 2 else f"<sup>{degree}</sup>"
        return f"{index}√({self.write(radicand)})", _ATOM

    def omitted(self, count: int) -> str:
        return super().omitted(count).replace("...", "…")


class _Latex(_Linear):
    parallel = r" \parallel "

    def name(self, name: str) -> str:
        return name_latex(name)

    def raised(self, base: str, exponent: str) -> str:
        return f"{base}^{{{exponent}}}"

    def root(self, radicand: Tree, degree: int) -> tuple[str, int]:
        index = "" if degree == 2 else f"[{degree}]"
        return rf"\sqrt{index}{{{self.write(radicand)}}}", _ATOM

    def omitted(self, count: int) -> str:
        return rf"\cdots\ \text{{{count} more {'term' if count == 1 else 'terms'}}}"

    def brackets(self, text: str) -> str:
        return rf"\left({text}\right)"

    def constant(self, value: Fraction) -> tuple[str, int]:
        if value.denominator == 1:
            return super().constant(value)
        sign = "-" if value < 0 else ""
        return rf"{sign}\frac{{{abs(value.numerator)}}}{{{value.denominator}}}", _SUM if sign else _PRODUCT

    def product(self, factors: tuple[Tree, ...]) -> str:
        written = ""
        before: Tree | None = None
        for factor in factors:
            body = self.write(factor) if _is_fraction(factor) else self.inside(factor, _POWER)
            if before is None:
                written = body
            elif _begins_with_digit(factor) or (_is_fraction(before) and _is_fraction(factor)):
                written += rf" \cdot {body}"
            elif _is_word(before) or _is_word(factor):
                written += rf" \, {body}"
            else:
                written += f" {body}"
            before = factor
        return written

    def quotient(self, numerator: Tree, denominator: Tree) -> tuple[str, int]:
        # A fraction on top of a fraction is set beside it, where it stays readable.
        if _is_fraction(numerator):
            return rf"{self.write(numerator)} \cdot \frac{{1}}{{{self.write(denominator)}}}", _PRODUCT
        return rf"\frac{{{self.write(numerator)}}}{{{self.write(denominator)}}}", _PRODUCT


def _is_fraction(tree: Tree) -> bool:
    return isinstance(tree, Quotient) or (
        isinstance(tree, Constant) and tree.value.denominator != 1 and tree.value >= 0
    )


def _begins_with_digit(tree: Tree) -> bool:
    match tree:
        case Constant(value):
            return value.denominator == 1
        case Power(base, _):
            return _begins_with_digit(base)
        case _:
            return False


def _is_word(tree: Tree) -> bool:
    if isinstance(tree, Power):
        return _is_word(tree.base)
    return isinstance(tree, Atom) and name_latex(tree.name).startswith((r"\mathrm", r"\text"))


_TEXT, _HTML, _LATEX = _Linear(), _Html(), _Latex()


def to_text(tree: Tree) -> str:
    """The tree as plain text, in the syntax of the notation, so that it can be read back.

    Roots (``sqrt(x)``) and the mark for terms left out are the two things that the notation cannot read.

    >>> s, r1, r2, c = Atom("s"), Atom("R1"), Atom("R2"), Atom("C")
    >>> to_text(Quotient(Constant(Fraction(1)), Sum(((1, Constant(Fraction(1))), (1, Product((s, Parallel((r1, r2)), c)))))))
    '1/(1 + s*(R1||R2)*C)'
    """
    return _TEXT.write(tree)


def to_html(tree: Tree) -> str:
    """The tree as one line of HTML: indices, raised exponents, names escaped.

    >>> to_html(Product((Power(Atom("s"), 2), Atom("R1"), Atom("C_load"))))
    's<sup>2</sup>·R<sub>1</sub>·C<sub>load</sub>'
    """
    return _HTML.write(tree)


def to_latex(tree: Tree, longest: int | None = LONGEST_LATEX) -> str:
    r"""The tree as LaTeX mathematics, without dollar signs, at most about ``longest`` characters (None: all of it).

    >>> print(to_latex(Quotient(Atom("R2"), Sum(((1, Atom("R1")), (1, Atom("R2")))))))
    \frac{R_{2}}{R_{1} + R_{2}}
    >>> print(to_latex(Sum(tuple((1, Atom(f"R{k}")) for k in range(1, 100))), longest=60))
    R_{1} + R_{2} + R_{3} + \cdots\ \text{96 more terms}
    """
    return _LATEX.write(tree if longest is None else shorten(tree, longest, _LATEX))


def shorten(tree: Tree, longest: int, writer: _Linear = _TEXT) -> Tree:
    """The tree with its longest sums ended early, so that it is written in about ``longest`` characters.

    Each sum keeps its first terms and says how many are left out; fractions and products share the room in
    proportion to what their pieces would take. At least one term of every sum stays.
    """
    length = len(writer.write(tree))
    if length <= longest:
        return tree
    match tree:
        case Sum(terms):
            kept: list[tuple[int, Tree]] = []
            room = longest - _MARK
            for sign, term in terms:
                need = len(writer.write(term)) + 3
                if need > room and kept:
                    break
                kept.append((sign, shorten(term, max(room, 1), writer)))
                room -= need
            left = sum(term.count if isinstance(term, Omitted) else 1 for _, term in terms[len(kept) :])
            return Sum((*kept, (1, Omitted(left)))) if left else Sum(tuple(kept))
        case Product(factors):
            return Product(
                tuple(shorten(factor, _share(factor, longest, length, writer), writer) for factor in factors)
            )
        case Quotient(numerator, denominator):
            return Quotient(
                shorten(numerator, _share(numerator, longest, length, writer), writer),
                shorten(denominator, _share(denominator, longest, length, writer), writer),
            )
        case Parallel(branches):
            return Parallel(
                tuple(shorten(branch, _share(branch, longest, length, writer), writer) for branch in branches)
            )
        case Power(base, exponent):
            return Power(shorten(base, longest, writer), exponent)
        case Root(radicand, degree):
            return Root(shorten(radicand, longest, writer), degree)
        case _:
            return tree


def _share(piece: Tree, longest: int, length: int, writer: _Linear) -> int:
    return max(1, len(writer.write(piece)) * longest // length)
