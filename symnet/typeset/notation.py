"""From the tree of the notation to the tree of the display, so that what was typed can be typeset.

Order and shape stay as typed; only ``a*b/c`` becomes one fraction when nothing is multiplied after the division.
"""

from __future__ import annotations

from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Root, Sum
from symnet.quantities import NUMBER, engineering
from symnet.typeset import tree as shown

__all__ = ["tree_of"]


def tree_of(expression: Expression) -> shown.Tree:
    r"""The display tree of an expression; a number with a unit stands in it as a name, ``10 kohm``.

    >>> from symnet.typeset.writing import to_latex
    >>> print(to_latex(tree_of(Product(((1, Name("s")), (1, Name("L1")), (-1, Name("R1")))))))
    \frac{s L_{1}}{R_{1}}
    """

    def convert(node: Expression) -> shown.Tree:
        match node:
            case Number(value=value, dimension=dimension):
                if dimension == NUMBER:
                    return shown.Constant(value)
                return shown.Atom(engineering(value, dimension, exact=True))
            case Name(name=name):
                return shown.Atom(name)
            case Sum(terms=terms):
                return shown.Sum(tuple((sign, convert(term)) for sign, term in terms))
            case Power(base=base, exponent=exponent):
                return shown.Power(convert(base), exponent)
            case Root(base=base):
                return shown.Root(convert(base))
            case Parallel(branches=branches):
                return shown.Parallel(tuple(convert(branch) for branch in branches))
            case Product(factors=factors):
                return _product([(power, convert(factor)) for power, factor in factors])

    return convert(expression)


def _product(factors: list[tuple[int, shown.Tree]]) -> shown.Tree:
    """Factors before and after a run of divisions: (a*b)/(c*d), times what follows."""
    groups: list[tuple[list[shown.Tree], list[shown.Tree]]] = [([], [])]
    for power, factor in factors:
        above, below = groups[-1]
        if power < 0:
            below.append(factor)
        elif below:
            groups.append(([factor], []))
        else:
            above.append(factor)
    trees = [
        shown.Quotient(_joined(above), _joined(below)) if below else _joined(above) for above, below in groups
    ]
    return _joined(trees)


def _joined(trees: list[shown.Tree]) -> shown.Tree:
    if not trees:
        return shown.ONE
    return trees[0] if len(trees) == 1 else shown.Product(tuple(trees))
