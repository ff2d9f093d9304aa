"""The oracle: networks solved a second way, sharing no code with the package that it judges.

A network is given as plain tuples::

    ("R", "R1", "in", "a", "2.2e3")              a branch R, L, C, Z or Y: name, start, end, value
    ("hold", "amp", "out", "gnd", "K*p")         v(plus) - v(minus) = law
    ("push", "gm1", "d", "gnd", "gm*(g - q)")    the current of the law from start to end
    ("opamp", "U1", "p", "m", "o")               plus, minus, out

Values and laws are arithmetic in text, ``^`` for powers; in a law a node's name is its voltage against gnd
and ``i_R1`` the current of R1 from start to end. The drive is ``("voltage", plus, minus)`` or ``("current",
start, end)``, what is read is again arithmetic.

The system is the sparse tableau (all node voltages and *all* branch currents, one row per part), not the
modified nodal analysis with conductances that the package uses, so that a slip in the one is not a slip in
the other. One elimination serves every arithmetic: fractions decide exactly, 50 digits of mpmath judge
what has no exact value, numpy's own solver is the third voice, and sympy's determinant gives the denominator.
Larger networks are solved modulo a prime, at a random point of all symbols, by an elimination of sparse rows.
"""

from __future__ import annotations

import ast
import re
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cache
from typing import Any, TypeAlias

import mpmath
import numpy as np
from sympy import ZZ
from sympy.polys.matrices import DomainMatrix
from sympy.polys.rings import ring

Part: TypeAlias = tuple[str, ...]
Drive: TypeAlias = tuple[str, str, str]
Arithmetic: TypeAlias = Callable[[Fraction], Any]

DIGITS = 50


class NoSolutionError(ArithmeticError):
    """The system has no single solution."""


@dataclass(frozen=True, slots=True)
class Drawing:
    """A network as plain tuples, what drives it and what is read."""

    parts: tuple[Part, ...]
    drive: Drive
    read: str
    couplings: tuple[tuple[str, str, str], ...] = ()
    """Coils that share flux: first, second, mutual inductance."""


def mp_number(value: Fraction) -> Any:
    """A fraction as a 50-digit number; the caller holds ``mpmath.workdps(DIGITS)``."""
    return mpmath.mpf(value.numerator) / value.denominator


def complex_number(value: Fraction) -> complex:
    """A fraction as a complex double."""
    return complex(float(value))


def arithmetic(text: str, names: Mapping[str, Any], number: Arithmetic = Fraction) -> Any:
    """The value of plain arithmetic in text (``+ - * / ^``, parentheses, ``(x || y)``, ``sqrt``), exact for fractions.

    >>> arithmetic("2*R^2/(1 + 0.5)", {"R": Fraction(3)})
    Fraction(12, 1)
    """
    source = _python(text)
    return _walk(ast.parse(source, mode="eval").body, source, names, number)


def _python(text: str) -> str:
    """The text as Python reads it; names get an underscore, since a node may well be called ``in``."""
    return re.sub(r"(?<![\w.])[A-Za-z]\w*", r"\g<0>_", text).replace("^", "**").replace("||", "|")


def _walk(node: ast.expr, source: str, names: Mapping[str, Any], number: Arithmetic) -> Any:
    match node:
        case ast.Constant():
            return number(Fraction(ast.get_source_segment(source, node) or ""))
        case ast.Name(id=name):
            return names[name[:-1]]
        case ast.UnaryOp(op=ast.USub(), operand=operand):
            return -_walk(operand, source, names, number)
        case ast.BinOp(left=left, op=ast.Pow(), right=right):
            return _walk(left, source, names, number) ** int(_walk(right, source, {}, Fraction))
        case ast.BinOp(left=left, op=operator, right=right):
            x = _walk(left, source, names, number)
            y = _walk(right, source, names, number)
            match operator:
                case ast.Add():
                    return x + y
                case ast.Sub():
                    return x - y
                case ast.Mult():
                    return x * y
                case ast.Div():
                    return x / y
                case ast.BitOr():
                    return x * y / (x + y)
        case ast.Call(func=ast.Name(id="sqrt_"), args=[argument]):
            return mpmath.sqrt(_walk(argument, source, names, number))
    raise ValueError(f"not plain arithmetic: {ast.dump(node)}")


def names_in(text: str) -> set[str]:
    """The names that a piece of plain arithmetic mentions."""
    walk = ast.walk(ast.parse(_python(text)))
    return {node.id[:-1] for node in walk if isinstance(node, ast.Name)}


def nodes_of(drawing: Drawing) -> list[str]:
    """Every node but gnd, in the order in which it is met."""
    met = [node for part in drawing.parts for node in (part[2:5] if part[0] == "opamp" else part[2:4])]
    return [node for node in dict.fromkeys([*met, *drawing.drive[1:]]) if node != "gnd"]


def tableau(
    drawing: Drawing, names: Mapping[str, Any], number: Arithmetic
) -> tuple[list[list[Any]], list[Any], list[Any]]:
    """Matrix, right-hand side and read row: node voltages first, then one current per part, then the drive's.

    ``names`` gives s and every symbol. Rows: Kirchhoff's current law at each node, then one row per part.
    """
    nodes = nodes_of(drawing)
    unknowns = nodes + [f"i_{part[1]}" for part in drawing.parts] + ["i_drive"]
    place = {name: k for k, name in enumerate(unknowns)}
    zero, one = number(Fraction(0)), number(Fraction(1))
    matrix = [[zero] * len(unknowns) for _ in unknowns]
    rhs = [zero] * len(unknowns)

    def linear(text: str) -> list[Any]:
        mentioned = names_in(text)
        off = {name: zero for name in mentioned if name in place} | {"gnd": zero}
        base = arithmetic(text, {**names, **off}, number)
        if base != zero:
            raise ValueError(f"not linear in voltages and currents: {text}")
        row = [zero] * len(unknowns)
        for name in mentioned & place.keys():
            row[place[name]] = arithmetic(text, {**names, **off, name: one}, number)
        return row

    def flows(column: int, start: str, end: str) -> None:
        if start != "gnd":
            matrix[place[start]][column] = matrix[place[start]][column] + one
        if end != "gnd":
            matrix[place[end]][column] = matrix[place[end]][column] - one

    def across(row: int, plus: str, minus: str, times: Any) -> None:
        if plus != "gnd":
            matrix[row][place[plus]] = matrix[row][place[plus]] + times
        if minus != "gnd":
            matrix[row][place[minus]] = matrix[row][place[minus]] - times

    s = names["s"]
    for k, part in enumerate(drawing.parts, start=len(nodes)):
        kind = part[0]
        if kind == "opamp":
            _, _, plus, minus, out = part
            flows(k, out, "gnd")
            across(k, plus, minus, one)
            continue
        start, end, text = part[2:5]
        flows(k, start, end)
        if kind == "hold":
            across(k, start, end, one)
            matrix[k] = [entry - law for entry, law in zip(matrix[k], linear(text), strict=True)]
        elif kind == "push":
            matrix[k] = [-law for law in linear(text)]
            matrix[k][k] = matrix[k][k] + one
        else:
            value = arithmetic(text, names, number)
            if kind in "RLZ":
                across(k, start, end, one)
                matrix[k][k] = -(s * value if kind == "L" else value)
            else:
                across(k, start, end, s * value if kind == "C" else value)
                matrix[k][k] = -one
    for one_coil, other, text in drawing.couplings:
        mutual = s * arithmetic(text, names, number)
        for coil, beside in ((one_coil, other), (other, one_coil)):
            row = next(k for k, part in enumerate(drawing.parts, start=len(nodes)) if part[1] == coil)
            matrix[row][place[f"i_{beside}"]] = matrix[row][place[f"i_{beside}"]] - mutual
    last = len(unknowns) - 1
    kind, start, end = drawing.drive
    flows(last, start, end)
    if kind == "voltage":
        across(last, start, end, one)
    else:
        matrix[last][last] = one
    rhs[last] = one
    return matrix, rhs, linear(drawing.read)


def eliminate(matrix: Sequence[Sequence[Any]], rhs: Sequence[Any]) -> list[Any]:
    """Gauss elimination with row pivoting by magnitude, in whatever field the entries are."""
    rows = [[*row, b] for row, b in zip(matrix, rhs, strict=True)]
    size = len(rows)
    for k in range(size):
        best = max(range(k, size), key=lambda r: abs(rows[r][k]))
        if rows[best][k] == 0:
            raise NoSolutionError
        rows[k], rows[best] = rows[best], rows[k]
        pivot = rows[k]
        for row in rows[k + 1 :]:
            if row[k] != 0:
                factor = row[k] / pivot[k]
                for c in range(k, size + 1):
                    row[c] = row[c] - factor * pivot[c]
    solution: list[Any] = [0] * size
    for k in reversed(range(size)):
        known = sum((rows[k][c] * solution[c] for c in range(k + 1, size)), 0)
        solution[k] = (rows[k][size] - known) / rows[k][k]
    return solution


def _read(drawing: Drawing, names: Mapping[str, Any], number: Arithmetic) -> Any:
    matrix, rhs, read = tableau(drawing, names, number)
    return sum((r * x for r, x in zip(read, eliminate(matrix, rhs), strict=True)), 0)


def transfer_exact(drawing: Drawing, names: Mapping[str, Fraction]) -> Fraction:
    """H at a rational s (one of the names), exactly; raises :class:`NoSolutionError`."""
    return Fraction(_read(drawing, names, Fraction))


def transfer_mp(drawing: Drawing, names: Mapping[str, Fraction], s: complex) -> Any:
    """H at a complex s to 50 digits, or as many as the system leaves of them; raises :class:`NoSolutionError`."""
    with mpmath.workdps(DIGITS):
        values = {name: mp_number(value) for name, value in names.items()}
        return +_read(drawing, {**values, "s": mpmath.mpc(s)}, mp_number)


def transfer_float(drawing: Drawing, names: Mapping[str, Fraction], s: complex) -> tuple[complex, float]:
    """H at a complex s by numpy's solver in complex doubles, and how far rounding may have moved it.

    Rows and columns are divided by their largest entries first. The bound is condition number times rounding
    unit times the size of what was solved: generous, and infinite where the system is singular in doubles.
    """
    values = {name: complex_number(value) for name, value in names.items()}
    rows, right, picked = tableau(drawing, {**values, "s": s}, complex_number)
    matrix, rhs, read = (np.array(part, dtype=complex) for part in (rows, right, picked))
    by_row = np.abs(matrix).max(axis=1)
    matrix, rhs = matrix / by_row[:, None], rhs / by_row
    by_column = np.abs(matrix).max(axis=0)
    matrix, read = matrix / by_column, read / by_column
    solution = np.linalg.solve(matrix, rhs)
    size = float(np.linalg.norm(read) * np.linalg.norm(solution))
    return complex(read @ solution), size * float(np.linalg.cond(matrix)) * len(rows) * 2.0**-52


@dataclass(frozen=True, slots=True)
class Modular:
    """A whole number modulo a prime, with the arithmetic that the tableau is stamped with."""

    value: int
    prime: int

    def __add__(self, other: Modular) -> Modular:
        return Modular((self.value + other.value) % self.prime, self.prime)

    def __sub__(self, other: Modular) -> Modular:
        return Modular((self.value - other.value) % self.prime, self.prime)

    def __neg__(self) -> Modular:
        return Modular(-self.value % self.prime, self.prime)

    def __mul__(self, other: Modular) -> Modular:
        return Modular(self.value * other.value % self.prime, self.prime)

    def __truediv__(self, other: Modular) -> Modular:
        return Modular(self.value * pow(other.value, -1, self.prime) % self.prime, self.prime)

    def __pow__(self, exponent: int) -> Modular:
        return Modular(pow(self.value, exponent, self.prime), self.prime)


def transfer_modulo(drawing: Drawing, point: Mapping[str, int], prime: int) -> int:
    """H modulo a prime at a point that gives s and every symbol; raises :class:`NoSolutionError`."""

    def number(value: Fraction) -> Modular:
        return Modular(value.numerator % prime, prime) / Modular(value.denominator % prime, prime)

    names = {name: Modular(value % prime, prime) for name, value in point.items()}
    matrix, rhs, read = tableau(drawing, names, number)
    solution = eliminate_modulo(
        [[entry.value for entry in row] for row in matrix], [entry.value for entry in rhs], prime
    )
    return int(sum(entry.value * x for entry, x in zip(read, solution, strict=True)) % prime)


def eliminate_modulo(matrix: Sequence[Sequence[int]], rhs: Sequence[int], prime: int) -> list[int]:
    """Gauss-Jordan elimination modulo a prime; rows are dictionaries, and the shortest one is the pivot."""
    size = len(matrix)
    rows = [
        {c: entry for c, entry in enumerate([*row, b]) if entry} for row, b in zip(matrix, rhs, strict=True)
    ]
    waiting = set(range(size))
    pivots: list[int] = []
    for column in range(size):
        holding = [r for r in waiting if column in rows[r]]
        if not holding:
            raise NoSolutionError
        best = min(holding, key=lambda r: len(rows[r]))
        waiting.discard(best)
        pivots.append(best)
        inverse = pow(rows[best][column], -1, prime)
        pivot = rows[best] = {c: entry * inverse % prime for c, entry in rows[best].items()}
        for r, row in enumerate(rows):
            if r != best and column in row:
                factor = row[column]
                for c, entry in pivot.items():
                    left = (row.get(c, 0) - factor * entry) % prime
                    if left:
                        row[c] = left
                    else:
                        row.pop(c, None)
    return [rows[r].get(size, 0) for r in pivots]


def element_modulo(element: Any, point: Sequence[int], prime: int) -> int:
    """The value of a ring element at a point, modulo a prime below 2^31, by the definition of a polynomial."""
    if not element:
        return 0
    powers = np.array(list(element), dtype=np.int64)
    total = np.array([int(c) % prime for c in element.values()], dtype=np.int64)
    for k, base in enumerate(point):
        table = [1]
        while len(table) <= powers[:, k].max():
            table.append(table[-1] * base % prime)
        total = total * np.array(table, dtype=np.int64)[powers[:, k]] % prime
    return int(total.sum()) % prime


def polynomials(
    drawing: Drawing,
    symbols: Sequence[str],
    determinant: Callable[[list[list[Any]], Any], Any] | None = None,
) -> tuple[Any, Any]:
    """Numerator and denominator of H by the determinant of the tableau, expanded in sympy's ring ZZ[s, symbols].

    ``determinant`` is how it is found: :func:`expanded_determinant` or :func:`sympys_determinant`.

    Every row is multiplied by its own denominators first; the pair is not reduced to lowest terms. The
    numerator is the determinant of the matrix bordered by the right-hand side and the read row.
    """
    over = ring(["s", *symbols], ZZ)[0]
    field = over.to_field()
    names = dict(zip(["s", *symbols], field.gens, strict=True))
    matrix, rhs, read = tableau(drawing, names, lambda x: field(x.numerator) / field(x.denominator))
    bordered = [_cleared([*row, -b], over) for row, b in zip(matrix, rhs, strict=True)]
    bordered = _without_unit_pivots([*bordered, _cleared([*read, field(0)], over)])
    find = expanded_determinant if determinant is None else determinant
    return find(bordered, over), find([row[:-1] for row in bordered[:-1]], over)


def _without_unit_pivots(rows: list[list[Any]]) -> list[list[Any]]:
    """The bordered matrix with every pivot of +1 or -1 eliminated, cheapest first; the border stays last.

    No division happens, and both determinants change by the same sign. What is left is small enough for sympy.
    """
    while True:
        size = len(rows) - 1
        in_row = [sum(bool(entry) for entry in row) for row in rows]
        in_column = [sum(bool(row[c]) for row in rows) for c in range(size)]
        units = [(r, c) for r in range(size) for c in range(size) if rows[r][c] in (1, -1)]
        if not units:
            return rows
        r, c = min(units, key=lambda at: (in_row[at[0]] - 1) * (in_column[at[1]] - 1))
        pivot = rows[r]
        kept = [
            [entry - row[c] * pivot[c] * above for entry, above in zip(row, pivot, strict=True)]
            if row[c]
            else row
            for row in (*rows[:r], *rows[r + 1 :])
        ]
        rows = [[*row[:c], *row[c + 1 :]] for row in kept]


def _cleared(row: Sequence[Any], over: Any) -> list[Any]:
    scale = over.one
    for entry in row:
        scale = scale.lcm(entry.denom)
    return [(entry * scale).numer for entry in row]


def expanded_determinant(rows: list[list[Any]], over: Any) -> Any:
    """The determinant of ring elements, expanded along the rows, every minor remembered by its columns.

    Nothing cancels but what cancels in a minor. :func:`sympys_determinant`, which judges this one on a share of the
    networks, multiplies out powers of the matrix and takes fifty times as long.
    """
    size = len(rows)

    @cache
    def minor(row: int, columns: tuple[int, ...]) -> Any:
        if row == size:
            return over.one
        total = over.zero
        for place, column in enumerate(columns):
            if rows[row][column]:
                term = rows[row][column] * minor(row + 1, columns[:place] + columns[place + 1 :])
                total = total - term if place % 2 else total + term
        return total

    return minor(0, tuple(range(size)))


def sympys_determinant(rows: list[list[Any]], over: Any) -> Any:
    """The same by sympy: the last coefficient of its characteristic polynomial, up to a sign by size.

    (Berkowitz, no division; the elimination of ``DomainMatrix.det`` divides intermediate polynomials.)
    """
    size = len(rows)
    if not size:
        return over.one
    determinant = DomainMatrix(rows, (size, size), over.to_domain()).charpoly()[-1]
    return -determinant if size % 2 else determinant
