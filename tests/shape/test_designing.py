"""Sections solved for chosen parts: the textbook inequalities, and numbers that a root finder confirms."""

from __future__ import annotations

import math
import random
from fractions import Fraction
from typing import Any

import numpy as np
import pytest

import symnet as sn
from symnet.errors import NotationError, UndefinedError, UnknownNameError
from symnet.exact.transfer import Transfer
from symnet.shape.stated import Condition, Conditions
from symnet.typeset.tree import Tree, evaluate
from symnet.typeset.writing import to_text
from tests.shape.symbols import transfer

UNITY_GAIN = """
    in -- R1 -- a -- R2 -- p;  p -- C2 -- gnd;  a -- C1 -- out
    U1: opamp(plus=p, minus=out, out=out)
    drive in;  read out
"""
UNITY_HIGH = """
    in -- C1 -- a -- C2 -- p;  p -- R2 -- gnd;  a -- R1 -- out
    U1: opamp(plus=p, minus=out, out=out)
    drive in;  read out
"""
MULTIPLE_FEEDBACK = """
    in -- R1 -- a -- R3 -- m -- C2 -- out;  a -- R2 -- out;  a -- C1 -- gnd
    U1: opamp(plus=gnd, minus=m, out=out)
    drive in;  read out
"""
MULTIPLE_RESONANT = """
    in -- R1 -- a -- C2 -- m -- R3 -- out;  a -- C1 -- out;  a -- R2 -- gnd
    U1: opamp(plus=gnd, minus=m, out=out)
    drive in;  read out
"""
LOADED_COIL = "in -- R1 -- a -- L -- out;  out -- C || R2 -- gnd;  drive in;  read out"
WIEN = "in -- R1 -- a -- C1 -- out;  out -- R2 || C2 -- gnd;  drive in;  read out"


def solved(text: str, **asked: Any) -> Conditions:
    found = sn.recognise(sn.derive(sn.network(text)), **asked)
    assert isinstance(found, Conditions)
    return found


def relations(condition: Condition) -> set[str]:
    return {
        f"{to_text(left)} {sign} {to_text(right)}"
        for way in condition.alternatives
        for left, sign, right in way.relations
    }


class TestInequalities:
    """N10 of what engineers need: the inequality is the product."""

    def test_unity_gain_section(self) -> None:
        """Real resistors if and only if C1/C2 >= 4 Q^2: common practice, no source."""
        found = solved(UNITY_GAIN, solve="R1 R2")
        first, *families = found.conditions
        assert relations(first) == {"C1/C2 >= 4*Q^2"}
        assert {c.name.partition(",")[0]: relations(c) for c in families} == {
            "Butterworth": {"C1 >= 2*C2"},
            "Bessel": {"3*C1 >= 4*C2"},
            "Linkwitz-Riley": {"C1 >= C2"},
            "critically damped": {"C1 >= C2"},
        }
        assert "free to choose: C2, C1" in found.note

    def test_multiple_feedback(self) -> None:
        """C1/C2 >= 4 Q^2 (1 + |H0|): common practice, no source."""
        found = solved(MULTIPLE_FEEDBACK, solve="R1 R2 R3")
        assert relations(found.conditions[0]) == {"C1/C2 >= 4*Q^2*(1 + H0)"}
        assert relations(found.conditions[1]) == {"C1/C2 >= 2 + 2*H0"}

    def test_capacitors_always_exist(self) -> None:
        found = solved(UNITY_GAIN, solve="C1, C2")
        (way,) = found.conditions[0].alternatives
        assert {name: to_text(tree) for name, tree in way.values} == {
            "C1": "Q*(1/R1 + 1/R2)/w0",
            "C2": "1/(Q*w0*(R1 + R2))",
        }
        assert not way.relations
        assert found.conditions[1].status == "always"
        assert found

    def test_high_pass_mirrors_it(self) -> None:
        """R2/R1 >= 4 Q^2 of the dual section."""
        found = solved(UNITY_HIGH, solve="C1 C2")
        assert relations(found.conditions[0]) == {"R2/R1 >= 4*Q^2"}

    def test_wien_network_never_rings(self) -> None:
        """Q < 1/2 whatever the parts are, so no family of a higher Q."""
        found = solved(WIEN, solve="R1 R2")
        assert [c.status for c in found.conditions[1:]] == ["never"] * 4
        assert "it would need 0 >= 2*C1 + C2" in found.conditions[1].reason


class TestNumbers:
    def test_no_real_resistors_for_equal_capacitors(self) -> None:
        """N10: f0 = 1 kHz, Q = 0.7071, 10 nF twice: needs C1/C2 >= 2; the formulas give 11.25 k +- j 11.25 k."""
        found = solved(UNITY_GAIN + "C1, C2 = 10 nF", solve="R1 R2", Q="0.7071", f0="1 kHz")
        (condition,) = found.conditions
        assert condition.status == "never"
        assert condition.reason == (
            "it would need C1/C2 >= 4*Q^2 = 2; you have C1/C2 = 1 (R1 and R2 would be 11.25 ± j11.25 kohm)"
        )

    def test_either_order(self) -> None:
        """N10: 22 nF and 10 nF give 7.861 k and 14.647 k, either way round."""
        found = solved(UNITY_GAIN + "C1 = 22 nF;  C2 = 10 nF", solve="R1 R2", Q="0.7071", f0="1 kHz")
        (condition,) = found.conditions
        pairs = [dict(way.worked) for way in condition.alternatives]
        assert pairs == [{"R2": "14.65 kohm", "R1": "7.861 kohm"}, {"R2": "7.861 kohm", "R1": "14.65 kohm"}]
        assert "= 14.65 kohm" in str(found)

    def test_exactly_on_the_limit(self) -> None:
        """Q^2 = 1/2 is exact, so 20 nF and 10 nF are just enough, and 19.999999999 nF are not."""
        found = solved(UNITY_GAIN + "C1 = 20 nF;  C2 = 10 nF", solve="R1 R2")
        assert found.conditions[1].status == "always"
        found = solved(UNITY_GAIN + "C1 = 19.999999999 nF;  C2 = 10 nF", solve="R1 R2")
        assert found.conditions[1].status == "never"
        assert "needs" not in found.conditions[1].reason
        assert "4*Q^2 = 2; you have C1/C2 = 2" in found.conditions[1].reason

    def test_values_of_parts_to_solve_for_are_forgotten(self) -> None:
        numbers = "R1, R2 = 1 kohm;  C1 = 22 nF;  C2 = 10 nF"
        found = solved(UNITY_GAIN + numbers, solve="R1 R2", Q="0.7071", f0="1 kHz")
        assert dict(found.conditions[0].alternatives[0].worked)["R2"] == "14.65 kohm"
        assert found.assumption == "R1, R2 > 0"

    def test_gain_with_a_number(self) -> None:
        text = MULTIPLE_FEEDBACK + "C1 = 100 nF;  C2 = 10 nF"
        found = solved(text, solve="R1 R2 R3", Q="0.7071", f0="1 kHz", gain="2")
        assert found.conditions[0].status == "if"
        found = solved(text, solve="R1 R2 R3", Q="0.7071", f0="1 kHz", gain="10")
        assert found.conditions[0].status == "never"
        assert "4*Q^2*(1 + H0) = 22; you have C1/C2 = 10" in found.conditions[0].reason


#: text, what is solved for, and from which names s^k of N is the gain counted
SECTIONS = {
    "unity gain": (UNITY_GAIN, "R1 R2"),
    "unity gain, capacitors": (UNITY_GAIN, "C1 C2"),
    "unity gain, high-pass": (UNITY_HIGH, "C1 C2"),
    "unity gain, high-pass, resistors": (UNITY_HIGH, "R1 R2"),
    "multiple feedback": (MULTIPLE_FEEDBACK, "R1 R2 R3"),
    "multiple feedback, capacitors": (MULTIPLE_FEEDBACK, "C1 C2"),
    "multiple feedback, band-pass": (MULTIPLE_RESONANT, "R1 R2 R3"),
    "loaded coil": (LOADED_COIL, "L C"),
    "Wien": (WIEN, "R1 R2"),
}


class TestAgainstRoots:
    """Random Q, f0, gain and free parts put into the formulas: the poles that a root finder sees have that Q and f0."""

    @pytest.mark.parametrize("case", SECTIONS)
    def test_poles(self, case: str) -> None:
        text, chosen = SECTIONS[case]
        H = sn.derive(sn.network(text))
        found = solved(text, solve=chosen)
        rng = random.Random(case)
        seen = 0
        for _ in range(300):
            values = {name: math.exp(rng.uniform(-1.5, 1.5)) for name in H.names}
            values |= {"Q": math.exp(rng.uniform(-1.5, 0.7)), "w0": math.exp(rng.uniform(-1, 1))}
            values["H0"] = math.exp(rng.uniform(-1, 1))
            for way in found.conditions[0].alternatives:
                if not all(
                    number(a, values) >= number(b, values)
                    if sign == ">="
                    else number(a, values) > number(b, values)
                    for a, sign, b in way.relations
                    if not solves(a, chosen) and not solves(b, chosen)
                ):
                    continue
                here = dict(values)
                for name, tree in (*way.values, *way.values):
                    here[name] = number(tree, here)
                if not all(number(a, here) >= number(b, here) for a, _, b in way.relations):
                    continue
                assert all(here[name] > 0 for name in H.names)
                poles = roots_of(H, here)
                assert abs(poles[0] * poles[1]) ** 0.5 == pytest.approx(here["w0"], rel=1e-6)
                assert here["w0"] / -(poles[0] + poles[1]).real == pytest.approx(here["Q"], rel=1e-6)
                if len(chosen.split()) == 3:
                    assert gain_of(H, here) == pytest.approx(here["H0"], rel=1e-6)
                seen += 1
        assert seen > 20

    def test_where_the_inequality_fails_no_resistors_exist(self) -> None:
        """A dense search over R1/R2 finds no Q above sqrt(C1/C2)/2."""
        H = sn.derive(sn.network(UNITY_GAIN))
        best = 0.0
        for k in range(-200, 201):
            values = {"R1": 1.0, "R2": 10 ** (k / 100), "C1": 3.0, "C2": 1.0}
            poles = roots_of(H, values)
            best = max(best, abs(poles[0] * poles[1]) ** 0.5 / -(poles[0] + poles[1]).real)
        assert best == pytest.approx(math.sqrt(3) / 2, rel=1e-9)


def number(tree: Tree, values: dict[str, float]) -> float:
    try:
        return float(evaluate(tree, lambda name: math.pi if name == "pi" else values[name], float))
    except (ValueError, TypeError):
        return math.nan  # a root of a negative number


def solves(tree: Tree, chosen: str) -> bool:
    from symnet.typeset.tree import names_of

    return bool(names_of(tree) & set(chosen.split()))


def coefficients(polynomial: Any, values: dict[str, float]) -> list[float]:
    names = [str(x) for x in polynomial.ring.symbols[1:]]
    found: dict[int, float] = {}
    for (power, *rest), c in polynomial.items():
        term = float(c) * math.prod(values[name] ** e for name, e in zip(names, rest, strict=True) if e)
        found[power] = found.get(power, 0.0) + term
    return [found.get(k, 0.0) for k in range(max(found), -1, -1)]


def roots_of(H: Transfer, values: dict[str, float]) -> Any:
    return np.roots(coefficients(H.denominator, values))


def gain_of(H: Transfer, values: dict[str, float]) -> float:
    """|H| at DC, at infinity or at w0, wherever it is the gain of the band."""
    top, bottom = coefficients(H.numerator, values), coefficients(H.denominator, values)
    at = {1: 1e-9, 3: 1e9}.get(len(top), values["w0"]) * 1j
    return float(abs(np.polyval(top, at) / np.polyval(bottom, at)))


class TestRefusals:
    def test_unknown_part(self) -> None:
        with pytest.raises(UnknownNameError, match="H holds: R1, R2"):
            solved(UNITY_GAIN, solve="R3")

    def test_more_parts_than_figures(self) -> None:
        with pytest.raises(UndefinedError, match="three figures"):
            solved(UNITY_GAIN, solve="R1 R2 C1 C2")

    def test_a_name_that_stands_for_a_figure(self) -> None:
        H = transfer("1", "1 + s*R*C + s^2*Q*R*C", "R C Q")
        with pytest.raises(NotationError, match="Q is a name in H"):
            sn.recognise(H, solve="R C")

    @pytest.mark.parametrize("asked", [{"f0": "0 Hz"}, {"gain": "-1"}])
    def test_figures_are_positive(self, asked: dict[str, str]) -> None:
        with pytest.raises(NotationError, match="positive"):
            solved(UNITY_GAIN, solve="R1 R2", **asked)

    def test_figures_of_other_orders(self) -> None:
        H = transfer("1", "1 + s*R*C + s^2*L*C + s^3*R*L*C^2", "R L C")
        with pytest.raises(UndefinedError, match="order 2"):
            sn.recognise(H, solve="R", f0="1 kHz")

    def test_fraction_as_quality(self) -> None:
        found = solved(UNITY_GAIN, solve="R1 R2", Q=Fraction(1, 2))
        assert found.conditions[0].name.endswith("Q = 1/2")
