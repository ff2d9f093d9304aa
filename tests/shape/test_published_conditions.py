"""Conditions of published networks, numbers put in: scipy's prototypes and a root finder judge what comes out.

Free parts are drawn at random, the others follow from the printed condition, and the poles of the H that results are
those of the family: nothing of symnet is used on the way from the numbers to the poles and to the prototype.
"""

from __future__ import annotations

import math
import random
from functools import cache
from typing import Any

import numpy as np
import pytest
from scipy import signal

import symnet as sn
from symnet.exact.transfer import Transfer
from symnet.shape.stated import Alternative, Condition, Conditions
from tests.reference import active_sections, passive_sections
from tests.reference.cases import Formula
from tests.shape.test_designing import coefficients, number

CASES: dict[str, Formula] = {c.id: c for c in (*active_sections.CASES, *passive_sections.CASES)}

SOLVED = (
    "sk-lp-K",
    "sk-lp-opamp-gain",
    "sk-hp-K",
    "mfb-lp",
    "mfb-hp",
    "svf-lp",
    "tt-lp",
    "sk-loaded-source",
    "rlc-lp",
    "lp2-loaded",
    "ladder3-single",
)
BAND_PASS = ("sk-bp-equal", "svf-bp", "tt-bp", "wien")
FAMILIES = {
    "Butterworth",
    "Bessel",
    "critically damped",
    "Linkwitz-Riley",
    "Gaussian",
    "Legendre-Papoulis",
}
NEVER = ("rc3-hp",)


@cache
def found_for(case: str) -> tuple[Transfer, Conditions]:
    H = sn.derive(sn.network(CASES[case].text))
    found = sn.recognise(H)
    assert isinstance(found, Conditions)
    return H, found


def prototype(family: str, order: int) -> Any:
    """Poles of the low-pass, at any scale."""
    match family:
        case "Butterworth":
            return signal.buttap(order)[1]
        case "Bessel":
            return signal.besselap(order)[1]
        case "critically damped":
            return -np.ones(order)
        case "Linkwitz-Riley":
            return np.repeat(signal.buttap(order // 2)[1], 2)
        case "Gaussian":  # |D(jw)|^2 is exp(w^2) up to the term of w^(2n)
            return left([1 / math.factorial(k) for k in range(order + 1)])
        case "Legendre-Papoulis" if order == 3:  # Papoulis 1958: 1 + w^2 - 3 w^4 + 3 w^6
            return left([1, 1, -3, 3])
    raise KeyError(family)


def left(squared: list[float]) -> Any:
    """The poles of the |D(jw)|^2 with these coefficients of w^(2k): those of D(s) D(-s) in the left half plane."""
    in_s = [c * (-1) ** k if power == 0 else 0 for k, c in enumerate(squared) for power in (0, 1)][:-1]
    roots = np.roots(in_s[::-1])
    return roots[roots.real < 0]


def shape(roots: Any) -> Any:
    """What no frequency scale changes: the monic polynomial of the roots divided by their geometric mean."""
    roots = np.asarray(roots, dtype=complex)
    return np.poly(roots / np.exp(np.mean(np.log(np.abs(roots))))).real


def holds(way: Alternative, values: dict[str, float]) -> bool:
    return all(
        number(a, values) > number(b, values) if sign == ">" else number(a, values) >= number(b, values)
        for a, sign, b in way.relations
    )


def fulfilled(
    H: Transfer, way: Alternative, rng: random.Random, symbols: tuple[tuple[str, float], ...] = ()
) -> dict[str, float] | None:
    for _ in range(400):
        values = {name: math.exp(rng.uniform(-1, 1)) for name in H.names} | dict(symbols)
        for _ in way.values:
            values |= {name: number(tree, values) for name, tree in way.values}
        if all(x > 0 for x in values.values()) and holds(way, values):
            return values
    return None


def solved_families(case: str) -> list[Condition]:
    return [
        c
        for c in found_for(case)[1].conditions
        if c.status == "if"
        and c.name.partition(",")[0] in FAMILIES
        and not any(sign == "=" for way in c.alternatives for _, sign, _ in way.relations)
    ]


@pytest.mark.parametrize("case", SOLVED)
def test_poles_are_those_of_the_prototype(case: str) -> None:
    H, found = found_for(case)
    order, band = found.order, found.band
    checked = 0
    for condition in solved_families(case):
        rng = random.Random(f"{case} {condition.name}")
        want = shape(prototype(condition.name.partition(",")[0], order))
        for way in condition.alternatives:
            for _ in range(3):
                values = fulfilled(H, way, rng, condition.symbols)
                if values is None:
                    continue
                poles = np.roots(coefficients(H.denominator, values))
                if any(p.real >= 0 for p in poles):
                    assert "for a stable H" in found.note
                    continue
                low = poles if band == "low-pass" else 1 / poles
                assert shape(low) == pytest.approx(want, rel=1e-6)
                f0 = next(f for f in condition.formulas if f.name.startswith("f0"))
                w0 = np.exp(np.mean(np.log(np.abs(poles))))
                assert number(f0.tree, values) == pytest.approx(w0 / (2 * math.pi), rel=1e-9)
                checked += 1
    assert checked >= 6


@pytest.mark.parametrize("case", BAND_PASS)
def test_band_passes_of_order_2_have_these_figures(case: str) -> None:
    """f0 where |H| is largest, B between the -3.0103 dB frequencies, their quotient Q, the gain at f0: measured."""
    H, found = found_for(case)
    (condition,) = found.conditions
    assert (condition.name, condition.status) == ("second order, band-pass", "always")
    rng = random.Random(case)
    for _ in range(5):
        values = {name: math.exp(rng.uniform(-0.5, 0.5)) for name in H.names}
        top, bottom = coefficients(H.numerator, values), coefficients(H.denominator, values)
        if any(p.real >= 0 for p in np.roots(bottom)):
            continue
        told = {f.name: number(f.tree, values) for f in condition.formulas}
        w = 2 * math.pi * told["f0"]
        middle = abs(np.polyval(top, 1j * w) / np.polyval(bottom, 1j * w))
        assert told["H at f0"] == pytest.approx(np.real(np.polyval(top, 1j * w) / np.polyval(bottom, 1j * w)))
        assert told["B3dB"] == pytest.approx(told["f0"] / told["Q"])
        half = told["B3dB"] / 2
        for side in (-1, 1):
            f = math.hypot(told["f0"], half) + side * half
            level = np.polyval(top, 2j * math.pi * f) / np.polyval(bottom, 2j * math.pi * f)
            assert abs(level) == pytest.approx(middle / math.sqrt(2), rel=1e-9)


@pytest.mark.parametrize("case", NEVER)
def test_a_forced_coefficient_is_the_one_that_numbers_have(case: str) -> None:
    """Three equal CR sections: 1 + 5x + 6x^2 + x^3, so a_2^2/(a_1 a_3) = 36/5 with any parts."""
    H, found = found_for(case)
    assert {c.status for c in found.conditions} == {"never"}
    assert "a_2^2/(a_1*a_3) = 7.2 whatever the parts are, and Butterworth of order 3 has 2" in str(found)
    a = coefficients(H.denominator, dict.fromkeys(H.names, 1.7))[::-1]
    assert a[2] ** 2 / (a[1] * a[3]) == pytest.approx(7.2)


def test_twin_t_null() -> None:
    """The null of a twin-T of six free parts: C3 = R3 (C1 + C2)(1/R1 + 1/R2), common practice, no source."""
    H = sn.derive(
        sn.network("""
        in -- R1 -- a -- R2 -- out;  in -- C1 -- b -- C2 -- out
        a -- C3 -- gnd;  b -- R3 -- gnd
        drive in;  read out
    """)
    )
    found = sn.recognise(H)
    assert isinstance(found, Conditions)
    condition = next(c for c in found.conditions if c.name == "a null on the jw axis")
    (way,) = condition.alternatives
    assert str(way) == "C3 = R3*(C1 + C2)*(1/R1 + 1/R2)"
    rng = random.Random(1)
    for _ in range(5):
        values = {name: math.exp(rng.uniform(-1, 1)) for name in H.names}
        values["C3"] = number(way.values[0][1], values)
        w = 2 * math.pi * number(condition.formulas[0].tree, values)
        top = np.polyval(coefficients(H.numerator, values), 1j * w)
        bottom = np.polyval(coefficients(H.denominator, values), 1j * w)
        assert abs(top / bottom) < 1e-12


KNOWN = {
    # the singly matched pi of 1 ohm: 1, 2, 1 (Matthaei, Young, Jones 1964, table 4.05-1, from memory)
    "pi-double": {"Rs": 1.0, "Rl": 1.0, "C1": 1.0, "L": 2.0, "C2": 1.0},
    # unity-gain capacitors 1.392, 3.546, 0.2024 (Geffe; Williams and Taylor, from memory)
    "sk3-unity": {"R": 1.0, "C1": 1.392, "C2": 3.546, "C3": 0.2024},
}


@pytest.mark.parametrize("case", KNOWN)
def test_tabled_values_satisfy_what_is_left_as_equations(case: str) -> None:
    _, found = found_for(case)
    assert found.conditions[0].name.startswith("Butterworth")
    ways = found.conditions[0].alternatives
    assert any(
        all(
            number(a, KNOWN[case]) == pytest.approx(number(b, KNOWN[case]), rel=2e-3)
            for a, _, b in way.relations
        )
        and all(
            number(tree, KNOWN[case]) == pytest.approx(KNOWN[case][name], rel=2e-3)
            for name, tree in way.values
        )
        for way in ways
    )


def test_first_order_all_pass() -> None:
    H = sn.derive(
        sn.network("""
        in -- R1 -- m -- R2 -- out;  in -- R3 -- p -- C -- gnd
        U1: opamp(plus=p, minus=m, out=out)
        drive in;  read out
    """)
    )
    found = sn.recognise(H)
    assert isinstance(found, Conditions)
    assert "first order, all-pass: if and only if R1 = R2" in str(found)


def test_notch_with_a_series_circuit() -> None:
    found = sn.recognise(sn.derive(sn.network("in -- R -- out;  out -- L + C -- gnd;  drive in;  read out")))
    assert "notch, order 2: always, then f0 = 1/(2*pi*sqrt(L*C)), Q = sqrt(L/C)/R" in str(found)


@pytest.mark.parametrize("family", ["Butterworth", "Bessel", "Linkwitz-Riley"])
def test_band_pass_of_order_4(family: str) -> None:
    """A series and a parallel resonator: scipy's band-pass has the poles that the conditions give."""
    H = sn.derive(
        sn.network("in -- L1 -- a -- C1 -- out;  out -- L2 || C2 || R -- gnd;  drive in;  read out")
    )
    found = sn.recognise(H)
    assert isinstance(found, Conditions)
    condition = next(c for c in found.conditions if c.name.startswith(family))
    (way,) = condition.alternatives
    rng = random.Random(family)
    values = fulfilled(H, way, rng)
    assert values is not None
    poles = np.roots(coefficients(H.denominator, values))
    w0 = math.exp(float(np.mean(np.log(np.abs(poles)))))
    assert number(condition.formulas[0].tree, values) == pytest.approx(w0 / (2 * math.pi))
    low = prototype(family, 2)
    # the pole pairs of the low-pass are (p^2 + w0^2)/(p B) of each p, twice
    behind = shape((poles**2 + w0**2) / poles)
    assert behind == pytest.approx(shape(np.repeat(low, 2)), rel=1e-6)


class TestWhatATopologyCannotBe:
    def test_resistors_and_capacitors(self) -> None:
        """Five RC sections: 2500 terms could not be written out, and need not be."""
        sections = ";  ".join(f"n{k} -- R{k} -- n{k + 1};  n{k + 1} -- C{k} -- gnd" for k in range(1, 6))
        found = sn.recognise(sn.derive(sn.network(f"{sections};  drive n1;  read n6")))
        assert isinstance(found, Conditions)
        reasons = {c.name.partition(",")[0]: (c.status, c.reason) for c in found.conditions}
        assert reasons["Butterworth"] == (
            "never",
            "resistors and capacitors alone have real poles only, and Butterworth of order 5 has complex poles",
        )
        assert reasons["critically damped"][0] == "open"

    def test_two_sections_by_the_discriminant(self) -> None:
        """N24: a1^2 - 4 a2 = (R1 C1 - R2 C2)^2 + R1 C2 (R1 C2 + 2 R1 C1 + 2 R2 C2)."""
        H = sn.derive(
            sn.network("in -- R1 -- a -- R2 -- out;  a -- C1 -- gnd;  out -- C2 -- gnd;  drive in;  read out")
        )
        found = sn.recognise(H)
        assert isinstance(found, Conditions)
        assert found.quality_bound.startswith("Q < 1/2 always, because a1^2 - 4*a0*a2 = (R1*C1 - R2*C2)^2 + ")
        assert {c.status for c in found.conditions} == {"never"}

    def test_lossless(self) -> None:
        found = sn.recognise(
            sn.derive(
                sn.network(
                    "in -- L1 -- a -- L2 -- out;  a -- C1 -- gnd;  out -- C2 -- gnd;  drive in;  read out"
                )
            )
        )
        assert "poles on the jw axis only" in str(found)

    def test_finite_zeros(self) -> None:
        found = sn.recognise(
            sn.derive(sn.network("in -- R1 -- out;  out -- R2 + C -- gnd;  drive in;  read out"))
        )
        assert "any family without finite zeros: never, H has 1 finite zero" in str(found)

    def test_unequal_slopes(self) -> None:
        H = sn.derive(
            sn.network("in -- C1 -- a -- L1 -- gnd;  a -- L2 -- out;  out -- R -- gnd;  drive in;  read out")
        )
        assert "2 of its zeros are at s = 0 and 1 at infinite frequency" in str(sn.recognise(H))


class TestGivenValues:
    """Names that have a number keep it: no condition asks for another one."""

    TEXT = "in -- L1 -- a -- L2 -- out;  a -- C -- gnd;  out -- R -- gnd;  drive in;  read out;  "

    def test_solved_for_what_is_free(self) -> None:
        found = sn.recognise(sn.derive(sn.network(self.TEXT + "R = 600 ohm;  L2 = 1 mH")))
        assert isinstance(found, Conditions)
        (way,) = found.conditions[0].alternatives
        assert dict(way.worked) == {"L1": "3 mH", "C": "7.407 nF"}
        assert found.assumption == "L1, C > 0"
        assert str(found.conditions[0]).startswith(
            "Butterworth, order 3, low-pass: if and only if L1 = 3*L2 = 3 mH and C = 8*L2/(3*R^2) = 7.407 nF, then "
        )

    def test_values_that_stand_against_it(self) -> None:
        found = sn.recognise(sn.derive(sn.network(self.TEXT + "L1 = 2 mH;  L2 = 1 mH")))
        assert isinstance(found, Conditions)
        assert found.conditions[0].status == "never"
        assert "L1 = 2 mH" in found.conditions[0].reason
        assert "L2 = 1 mH" in found.conditions[0].reason

    def test_values_that_agree(self) -> None:
        found = sn.recognise(sn.derive(sn.network(self.TEXT + "L1 = 3 mH;  L2 = 1 mH")))
        assert isinstance(found, Conditions)
        (way,) = found.conditions[0].alternatives
        assert [name for name, _ in way.values] in (["C"], ["R"])
