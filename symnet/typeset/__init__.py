"""How an expression and a number become text, LaTeX and HTML; knows no value of the other rooms."""

from symnet.typeset.numbers import Written, complex_quantity, plain_number, quantity
from symnet.typeset.tree import Tree
from symnet.typeset.writing import to_html, to_latex, to_text

__all__ = [
    "Tree",
    "Written",
    "complex_quantity",
    "plain_number",
    "quantity",
    "to_html",
    "to_latex",
    "to_text",
]
