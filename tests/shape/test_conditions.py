"""Conditions in symbols: the printed sentences, and that numbers agree with them in both directions."""

from __future__ import annotations

import math
import random
from collections.abc import Mapping
from fractions import Fraction
from typing import Any

import pytest

from symnet.circuit.build import network
from symnet.errors import NotationError, UndefinedError
from symnet.exact.derive import derive
from symnet.exact.polynomials import make_ring
from symnet.exact.ratio import Ratio
from symnet.shape.conditions import Condition, Conditions, conditions, conditions_of
from symnet.shape.families import CATALOGUE
from symnet.shape.families.butterworth import squared_magnitude
from symnet.shape.positive import as_squares, sign_of
from symnet.shape.recognise import Recognition, recognise
from symnet.shape.solving import kernel, put_in, solve, vanishing
from symnet.typeset.tree import Tree, evaluate
from symnet.typeset.writing import to_text
from tests.shape.symbols import Symbols, transfer

FEEDBACK = transfer("1", "1 + s*C2*(R1 + R2) + s^2*R1*R2*C1*C2", "R1 R2 C1 C2")
FEEDBACK_TIED = transfer("1", "1 + 2*s*R*C2 + s^2*R^2*C1*C2", "R C1 C2")
FEEDBACK_GAIN = transfer("K", "1 + s*(C2*(R1 + R2) + (1 - K)*R1*C1) + s^2*R1*R2*C1*C2", "R1 R2 C1 C2 K")
FEEDBACK_HIGH_PASS = transfer("s^2*R1*R2*C1*C2", "1 + s*R1*(C1 + C2) + s^2*R1*R2*C1*C2", "R1 R2 C1 C2")
TWO_RC = transfer("1", "1 + s*(R1*C1 + R1*C2 + R2*C2) + s^2*R1*R2*C1*C2", "R1 C1 R2 C2")
THREE_RC = transfer(
    "1",
    "1 + s*(R1*C1 + (R1 + R2)*C2 + (R1 + R2 + R3)*C3)"
    " + s^2*(R1*C1*R2*C2 + R1*C1*(R2 + R3)*C3 + (R1 + R2)*C2*R3*C3) + s^3*R1*R2*R3*C1*C2*C3",
    "R1 R2 R3 C1 C2 C3",
)
MULTIPLE_FEEDBACK = transfer(
    "-R2", "R1 + s*C2*(R1*R2 + R1*R3 + R2*R3) + s^2*R1*R2*R3*C1*C2", "R1 R2 R3 C1 C2"
)
SINGLY_3 = transfer("R", "R + s*(L1 + L2) + s^2*L1*C*R + s^3*L1*L2*C", "R L1 C L2")
SINGLY_4 = transfer(
    "R",
    "R + s*(L1 + L2) + s^2*R*(L1*C1 + L1*C2 + L2*C2) + s^3*L1*L2*C1 + s^4*L1*L2*C1*C2*R",
    "R L1 C1 L2 C2",
)
PROBE = transfer("R", "2*R + s*(L1 + R^2*(C1 + C2)) + s^2*L1*R*(C1 + C2) + s^3*L1*C1*C2*R^2", "R L1 C1 C2")
PROBE_TIED = transfer("R", "2*R + s*(L + 2*R^2*C) + s^2*2*L*C*R + s^3*L*C^2*R^2", "R L C")
PROBE_FREE = transfer(
    "RL",
    "Rs + RL + s*(L1 + Rs*RL*(C1 + C2)) + s^2*L1*(C1*Rs + C2*RL) + s^3*L1*C1*C2*Rs*RL",
    "Rs RL L1 C1 C2",
)
EVERY = {
    "feedback": FEEDBACK,
    "feedback, R tied": FEEDBACK_TIED,
    "feedback with gain": FEEDBACK_GAIN,
    "feedback, high-pass": FEEDBACK_HIGH_PASS,
    "two RC": TWO_RC,
    "three RC": THREE_RC,
    "multiple feedback": MULTIPLE_FEEDBACK,
    "singly terminated 3": SINGLY_3,
    "singly terminated 4": SINGLY_4,
    "probe": PROBE,
    "probe, all tied": PROBE_TIED,
    "probe, nothing tied": PROBE_FREE,
}


def rows(H: Any, q: str | Fraction | None = None) -> dict[str, str]:
    return dict(conditions(H, q).rows())


def number(tree: Tree, values: Mapping[str, Any]) -> float:
    return float(evaluate(tree, lambda name: math.pi if name == "pi" else values[name], float))


def at(H: Symbols, values: Mapping[str, float]) -> Ratio:
    exact = {name: Fraction(values[name]) for name in H.names}
    return Symbols(H.numerator, H.denominator, exact).numeric()


def fulfilled(H: Symbols, condition: Condition, rng: random.Random) -> dict[str, float] | None:
    """Values that fulfil the condition, free parts drawn at random until the relations hold; None if that fails."""
    for _ in range(200):
        way = rng.choice(condition.alternatives)
        values = {name: math.exp(rng.uniform(-1, 1)) for name in H.names} | dict(condition.symbols)
        for _ in way.values:  # a value may hang on another one
            values |= {name: number(tree, values) for name, tree in way.values}
        if all(value > 0 for value in values.values()) and all(
            number(a, values) > number(b, values) for a, sign, b in way.relations if sign == ">"
        ):
            return values
    return None


SOLVED = [
    (case, condition)
    for case, H in EVERY.items()
    for condition in conditions(H, "0.9" if H.names and case.startswith("feedback") else None).conditions
    if condition.status == "if"
    and not any(s == "=" for w in condition.alternatives for _, s, _ in w.relations)
]


class TestAgainstNumbers:
    """What the symbols say, the recognition of numbers says too: the two share no code but the catalogue."""

    @pytest.mark.parametrize(("case", "condition"), SOLVED, ids=[f"{c}: {k.name}" for c, k in SOLVED])
    def test_values_that_fulfil_it_make_the_shape(self, case: str, condition: Condition) -> None:
        rng = random.Random(3)
        for _ in range(5):
            values = fulfilled(EVERY[case], condition, rng)
            assert values is not None
            found = recognise(at(EVERY[case], values))
            assert isinstance(found, Recognition)
            if condition.name.startswith("Q = "):
                assert found.q == pytest.approx(0.9, rel=1e-9)
                continue
            if found.verdict.startswith("unstable"):
                assert "for a stable H" in conditions(EVERY[case]).note
                continue
            family = condition.name.partition(",")[0].removesuffix(" of some ripple")
            candidate = next(c for c in found.candidates if c.prototype.family == family)
            if candidate.prototype.settings and candidate.prototype.settings[0].value > 11.9:
                continue  # beyond the ripples that are looked for
            if "below" in candidate.name:
                continue
            assert candidate.exact, (values, found.rows())
            for formula in condition.formulas:
                w0 = found.own[0].w
                want = {
                    "f0": w0 / (2 * math.pi),
                    "f0 = f3dB": found.own[1].w / (2 * math.pi),
                    "f3dB": found.own[1].w / (2 * math.pi),
                }.get(formula.name)
                value = formula.factor * number(formula.tree, values | {"f0": w0 / (2 * math.pi)})
                if want is not None:
                    assert value == pytest.approx(want, rel=1e-6)
                else:
                    assert formula.name == "T"
                    assert value == pytest.approx(1 / candidate.prototype.reference("unit_delay").w, rel=1e-6)

    @pytest.mark.parametrize("case", EVERY)
    def test_other_values_do_not(self, case: str) -> None:
        """Random values fulfil no equation, and then no family of fixed shape is exact."""
        rng = random.Random(5)
        H = EVERY[case]
        for _ in range(5):
            values = {name: math.exp(rng.uniform(-1, 1)) for name in H.names}
            found = recognise(at(H, values))
            assert isinstance(found, Recognition)
            assert not any(c.exact for c in found.candidates if c.is_tested and not c.prototype.settings)

    @pytest.mark.parametrize("case", ["two RC", "three RC", "feedback", "probe, all tied"])
    def test_never_and_inequalities_agree_with_numbers(self, case: str) -> None:
        """Chebyshev of order 2 exists exactly where the printed inequality holds, and never where it says never."""
        rng = random.Random(11)
        H = EVERY[case]
        found = conditions(H)
        condition = next(c for c in found.conditions if c.name.startswith("Chebyshev"))
        for _ in range(20):
            values = {name: math.exp(rng.uniform(-2, 2)) for name in H.names}
            holds = condition.status == "if" and all(
                number(a, values) > number(b, values) for a, _, b in condition.alternatives[0].relations
            )
            numeric = recognise(at(H, values))
            assert isinstance(numeric, Recognition)
            candidate = next((c for c in numeric.candidates if c.prototype.family == "Chebyshev"), None)
            if candidate is None:  # the ripple has vanished
                assert not holds
            elif candidate.prototype.settings[0].value < 11.9:
                assert bool(candidate.exact) == holds


class TestSentences:
    def test_tied_resistors(self) -> None:
        """The example of the design: Butterworth if and only if C1 = 2 C2, then f0 = 1/(2 pi R sqrt(C1 C2))."""
        found = rows(FEEDBACK_TIED, "2")
        assert found["Butterworth, order 2, low-pass"] == (
            "if and only if C1 = 2*C2, then f0 = f3dB = 1/(2*pi*R*sqrt(C1*C2))"
        )
        assert found["Bessel, order 2, low-pass"].startswith("if and only if C1 = 4*C2/3, then ")
        assert found["Chebyshev of some ripple, order 2, low-pass"] == "if and only if C1 > 2*C2"
        assert found["Q = 2"].startswith("if and only if C1 = 16*C2")
        assert found["Q"] == "sqrt(C1/C2)/2"
        assert found["assumption"] == "R, C1, C2 > 0"

    def test_from_a_network_with_ties(self) -> None:
        H = derive(
            network("""
            in -- R1 -- x -- C1 -- out
            x -- R2 -- p -- C2 -- gnd
            U1: opamp(plus=p, minus=out, out=out)
            drive in;  read out
            R2 = R1
        """)
        )
        found = recognise(H)
        assert isinstance(found, Conditions)
        assert str(found).startswith(
            "Butterworth, order 2, low-pass: if and only if C1 = 2*C2, then f0 = f3dB = 1/(2*pi*R1*sqrt(C1*C2)); "
        )
        assert str(found).endswith("(assuming R1, C1, C2 > 0)")
        assert not found

    def test_passive_rc_can_never_be(self) -> None:
        """Needs N24: a1^2 - 4 a2 = (R1 C1 - R2 C2)^2 + R1 C2 (...), so Q < 1/2 and no family of a higher Q."""
        found = conditions(TWO_RC)
        assert {c.status for c in found.conditions} == {"never"}
        assert found.quality_bound.startswith(
            "Q < 1/2 always, because a1^2 - 4*a0*a2 = (R1*C1 - R2*C2)^2 + R1*C2*("
        )
        assert "Q < 1/2 always" in str(found)
        assert "= 0, and no term of that is negative" in str(found.conditions[0])

    def test_singly_terminated_ladder(self) -> None:
        """The hand derivation of the third order: L1 = 3 R tau/2, C = 4 tau/(3 R), L2 = R tau/2."""
        found = rows(SINGLY_3)
        assert found["Butterworth, order 3, low-pass"].startswith(
            "if and only if L1 = 3*L2 and C = 8*L2/(3*R^2), then f0 = f3dB = "
        )

    def test_square_roots(self) -> None:
        found = rows(SINGLY_4)
        assert "L1 = L2*sqrt(2)" in found["Butterworth, order 4, low-pass"]
        assert "for a stable H" in found["note"]

    def test_feedback_gain_takes_the_stable_root(self) -> None:
        """K = 3 - sqrt 2 for equal parts, not 3 + sqrt 2."""
        found = conditions(FEEDBACK_GAIN)
        (way,) = found.conditions[0].alternatives
        (name, tree), *_ = way.values
        assert name == "K"
        ones = dict.fromkeys(("R1", "R2", "C1", "C2"), 1.0)
        assert number(tree, ones) == pytest.approx(3 - math.sqrt(2))
        assert "K must be positive" in str(way)

    def test_ladder_of_equal_parts_has_one_shape_only(self) -> None:
        found = rows(PROBE_TIED)
        assert found["Butterworth, order 3, low-pass"].startswith("if and only if L = 2*R^2*C")
        assert found["Bessel, order 3, low-pass"] == "never, no positive parts fulfil all it needs"

    def test_first_order(self) -> None:
        low = transfer("1", "1 + s*R1*C1", "R1 C1")
        high = transfer("s*L1", "R1 + s*L1", "R1 L1")
        assert str(conditions(low)) == (
            "first order, low-pass: always, then f0 = f3dB = 1/(2*pi*R1*C1) (assuming R1, C1 > 0)"
        )
        assert "f0 = f3dB = R1/(2*pi*L1)" in str(conditions(high))
        assert conditions(high)

    @pytest.mark.parametrize(
        ("num", "den", "words"),
        [
            ("s^2*R1", "1 + s*C1", "improper"),
            ("1", "s*R1*C1", "a pole at s = 0"),
            ("R1", "R1 + 1", "no poles"),
            ("0", "1", "H is 0"),
        ],
    )
    def test_not_compared(self, num: str, den: str, words: str) -> None:
        found = conditions(transfer(num, den, "R1 C1"))
        assert words in found.verdict
        assert not found.conditions

    def test_negative_values_void_the_assumption(self) -> None:
        H = transfer("1", "1 + 2*s*R*C2 + s^2*R^2*C1*C2", "R C1 C2", R="-5")
        found = conditions(H)
        assert not found.conditions
        assert "R negative as given" in found.verdict

    def test_too_much_to_write_is_left_open(self) -> None:
        ring = make_ring([f"{kind}{k}" for k in range(1, 7) for kind in "RC"])
        s, *parts = ring.gens
        v, i = ring.one, ring.zero
        for r, c in zip(parts[-2::-2], parts[::-2], strict=True):
            i = i + s * c * v
            v = v + r * i
        found = conditions_of(ring.one, v)
        assert {c.status for c in found.conditions} == {"open"}
        assert "give values to most of the parts" in found.verdict

    @pytest.mark.parametrize("q", ["0", "-1", "two", "1/0"])
    def test_quality_is_positive(self, q: str) -> None:
        with pytest.raises(NotationError, match="positive number"):
            conditions(TWO_RC, q)

    def test_quality_belongs_to_order_2(self) -> None:
        with pytest.raises(UndefinedError, match="order 3"):
            conditions(THREE_RC, "1")


class TestSigns:
    R = make_ring(["x", "y", "z"])

    def test_sign_of(self) -> None:
        _, x, y, _ = self.R.gens
        assert [sign_of(p) for p in (x + y, -x * y, x - y, self.R.zero)] == [1, -1, None, 0]

    @pytest.mark.parametrize("seed", range(20))
    def test_squares_are_what_they_stand_for(self, seed: int) -> None:
        """scale * p equals the tree, whatever the values: a proof, not a decoration."""
        rng = random.Random(seed)
        _, x, y, z = self.R.gens
        p = (rng.randint(1, 4) * x - rng.randint(1, 4) * y) ** 2 * z + rng.randint(0, 2) * x * y * z
        p = p + (x * y - rng.randint(1, 3) * z**2) ** 2
        found = as_squares(p)
        assert found is not None
        assert all(c > 0 for c in found.rest.values())
        values = {"x": Fraction(rng.randint(1, 9)), "y": Fraction(2, 7), "z": Fraction(rng.randint(1, 9), 5)}
        point = [Fraction(0), values["x"], values["y"], values["z"]]
        value = sum(
            Fraction(int(c)) * math.prod(v**e for v, e in zip(point, m, strict=True)) for m, c in p.items()
        )
        assert evaluate(found.tree(), values.__getitem__) == found.scale * value

    def test_no_squares_where_there_are_none(self) -> None:
        _, x, y, _ = self.R.gens
        assert as_squares(x - y) is None
        assert as_squares(x**2 - 3 * x * y + y**2) is None  # 0 at x/y = (3 + sqrt 5)/2

    def test_kernel_keeps_the_sign(self) -> None:
        rng = random.Random(2)
        _, x, y, z = self.R.gens
        p = -2 * x * (x + y) * (x - y) ** 3 * (y - 2 * z) ** 2
        core = kernel(p)
        assert len(core) == 2
        for _ in range(20):
            a, b, c = (rng.randint(1, 9) for _ in range(3))
            values = [(self.R.gens[0], 0), (x, a), (y, b), (z, c)]
            whole, part = (int(q.evaluate(values)) for q in (p, core))
            assert (whole == 0 and b == 2 * c) or (whole > 0) == (part > 0)


class TestSolving:
    R = make_ring(["x", "y", "z"])

    def test_factors_that_cannot_vanish_are_dropped(self) -> None:
        _, x, y, z = self.R.gens
        assert vanishing(x * (x + y) * ((x - y) ** 2 + z**2)) == ()
        assert set(vanishing((x - y) * (x - 2 * z))) == {x - y, x - 2 * z}

    def test_branches(self) -> None:
        """x = y or x = 2 z, the rest being linear in z."""
        _, x, y, z = self.R.gens
        equations = [(x - y) * (x - 2 * z), x + y - 3 * z]
        branches = solve(equations)
        assert len(branches) == 2
        for branch in branches:
            assert not branch.left
            for e in equations:
                for solution in branch.solved:
                    e = put_in(e, solution)
                assert not e

    def test_negative_solutions_close_a_branch(self) -> None:
        _, x, y, z = self.R.gens
        assert solve([(x + y - z) * (x + y), x + y + z - x]) == ()

    def test_no_common_solution(self) -> None:
        """x^2 = 2 y^2 and x^3 = 3 y^3 exclude each other."""
        _, x, y, _ = self.R.gens
        assert solve([x**2 - 2 * y**2, x**3 - 3 * y**3]) == ()

    def test_what_cannot_be_solved_is_left(self) -> None:
        _, x, y, z = self.R.gens
        (branch,) = solve([x**2 + y**2 - 3 * z**2])
        assert branch.left == (x**2 + y**2 - 3 * z**2,)
        assert not branch.solved

    @pytest.mark.parametrize("case", ["singly terminated 3", "probe"])
    def test_solutions_satisfy_the_equations_identically(self, case: str) -> None:
        from symnet.exact.polynomials import by_powers_of_s

        a = by_powers_of_s(EVERY[case].denominator)
        family = next(f for f in CATALOGUE if f.name == "Butterworth")
        equations = family.conditions(a)
        assert equations is not None
        assert equations == squared_magnitude(a)[1:-1]
        (branch,) = solve(equations)
        assert branch.solved
        for e in equations:
            for solution in branch.solved:
                e = put_in(e, solution)
            assert not e

    def test_text(self) -> None:
        """A condition is a formula, so that LaTeX and HTML say the same as the text."""
        found = conditions(FEEDBACK)
        (name, tree), *_ = found.conditions[0].alternatives[0].values
        assert f"{name} = {to_text(tree)}" == "C1 = (R1 + R2)^2*C2/(2*R1*R2)"
