"""Elliptic filters against printed tables, against Jacobi functions of mpmath, and against what defines them.

The oracle is mpmath's own theta functions at the nome; the package computes by Landen's transformation instead.
"""

from __future__ import annotations

import math
from typing import Any

import mpmath
import numpy as np
import pytest

import symnet as sn
from symnet.errors import LimitError, NotationError
from symnet.shape.families.chebyshev import chebyshev
from symnet.shape.families.elliptic import elliptic
from symnet.shape.families.inverse_chebyshev import inverse_chebyshev
from symnet.shape.families.prototype import Prototype
from tests.reference import families_with_zeros as published
from tests.reference import finite_zeros
from tests.reference.cases import Ladder
from tests.reference.ladder_checks import derived
from tests.shape.families.comparing import decimals_agree, extremes, nearest

MEMBERS = [(0.1, 40.0), (1.0, 60.0), (0.001, 80.0), (3.0, 20.0), (0.5, 150.0)]
#: Ripple, attenuation, and orders up to which the stop band begins farther out than 1e-9.
CASES = [
    (order, ripple, attenuation)
    for ripple, attenuation in MEMBERS
    for order in [*range(1, 13), 16, 30, 60]
    if order <= {(0.1, 40.0): 30, (1.0, 60.0): 30, (3.0, 20.0): 16}.get((ripple, attenuation), 60)
]


def made_of(order: int, ripple: float, attenuation: float, variant: str = "a") -> Prototype:
    return elliptic(order, f"{ripple} dB", f"{attenuation} dB", variant=variant)


def squared_epsilon(db: float) -> Any:
    return mpmath.power(10, mpmath.mpf(repr(db)) / 10) - 1


class TestPrintedTables:
    @pytest.mark.parametrize("row", published.CAUER, ids=lambda row: row.id)
    def test_zeros_and_attenuation(self, row: published.Cauer) -> None:
        made = elliptic(row.order, row.ripple, edge=row.edge)
        assert made.reference("stop_edge").w == pytest.approx(row.edge, rel=1e-14)
        # all but one to the last digit; that one, 4.130155, is a misprint (tests/reference/misprints.py)
        upper = sorted((z.imag for z in made.zeros if z.imag > 0), reverse=True)
        assert upper == pytest.approx(row.zeros, abs=1.1e-4 if row.id.endswith("n6-ws1.3") else 1.2e-6)
        assert math.floor(made.settings[1].value) == row.attenuation_db

    @pytest.mark.parametrize("row", published.CAUER, ids=lambda row: row.id)
    def test_poles_to_the_digits_that_the_table_has(self, row: published.Cauer) -> None:
        """Within k1^2 of the definition: the table takes sn(jx, k1) = j/e for sinh x = 1/e."""
        made = elliptic(row.order, row.ripple, edge=row.edge)
        k1 = math.sqrt(
            math.expm1(0.1 * math.log(10)) / math.expm1(made.settings[1].value / 10 * math.log(10))
        )
        for sigma, omega in row.sigma_omega:
            p = complex(-sigma, omega)
            assert abs(nearest(p, made.poles) - p) <= (k1**2 + 5e-6) * abs(p)

    @pytest.mark.parametrize("row", published.CAUER, ids=lambda row: row.id)
    def test_printed_poles_are_those_of_the_usual_approximation(self, row: published.Cauer) -> None:
        with mpmath.workdps(30):
            k = 1 / mpmath.mpf(repr(row.edge))
            v = mpmath.asinh(1 / mpmath.sqrt(squared_epsilon(1.0))) * 2 / (mpmath.pi * row.order)
            found = [complex(jacobi_pole(k, v, row.order, i)) for i in range(1, row.order + 1)]
        for place, printed in enumerate(row.sigma_omega):
            assert decimals_agree(printed, found, 7, units=1.1) == (place != row.misprint)
        if row.misprint is not None:
            assert decimals_agree(row.right, found, 7)


def jacobi_pole(k: Any, v: Any, order: int, i: int) -> Any:
    """j cd((u - jv) K, k), u = (2i - 1)/N (Orfanidis 2006)."""
    u = mpmath.mpf(2 * i - 1) / order
    return 1j * mpmath.ellipfun("cd", (u - 1j * v) * mpmath.ellipk(k**2), k=k)


class TestDefinition:
    @pytest.mark.parametrize(("order", "ripple", "attenuation"), CASES)
    def test_degree_equation(self, order: int, ripple: float, attenuation: float) -> None:
        """N K'(k)/K(k) = K'(k1)/K(k1) at the stop-band edge found (Cauer, Darlington 1939).

        At order 16 with 20 dB the edge is 1 + 4e-9 and a double has 7 digits of the distance; the tolerance follows.
        """
        edge = made_of(order, ripple, attenuation).reference("stop_edge").w
        with mpmath.workdps(40):
            k2 = 1 / mpmath.mpf(edge) ** 2
            k12 = squared_epsilon(ripple) / squared_epsilon(attenuation)
            left = order * mpmath.ellipk(1 - k2) / mpmath.ellipk(k2)
            right = mpmath.ellipk(1 - k12) / mpmath.ellipk(k12)
            assert abs(left / right - 1) < 1e-13 + 1e-15 / float(1 - k2)

    @pytest.mark.parametrize("order", [1, 2, 3, 6, 9])
    @pytest.mark.parametrize(("ripple", "attenuation"), MEMBERS)
    def test_poles_and_zeros_by_jacobi_functions(self, order: int, ripple: float, attenuation: float) -> None:
        """Zeros at 1/(k cd(uK, k)), poles at j cd((u - jv)K, k), sn(jNvK1, k1) = j/e: 1e-15 of mpmath."""
        made = made_of(order, ripple, attenuation)
        with mpmath.workdps(40):
            e2 = squared_epsilon(ripple)
            k1 = mpmath.sqrt(e2 / squared_epsilon(attenuation))
            q = mpmath.qfrom(k=k1) ** (mpmath.mpf(1) / order)
            k = mpmath.kfrom(q=q)
            phi = mpmath.atan(1 / mpmath.sqrt(e2))
            v = mpmath.ellipf(phi, 1 - k1**2) / (order * mpmath.ellipk(k1**2))
            poles = [complex(jacobi_pole(k, v, order, i)) for i in range(1, order + 1)]
            peaks = [
                mpmath.ellipfun("cd", mpmath.mpf(2 * i - 1) / order * mpmath.ellipk(k**2), k=k)
                for i in range(1, order // 2 + 1)
            ]
            zeros = [float(1 / (k * g)) for g in peaks]
        for p in poles:
            assert abs(nearest(p, made.poles) - p) <= 2e-15 * abs(p)
        assert [z.imag for z in made.zeros if z.imag > 0] == pytest.approx(zeros, rel=2e-15)

    @pytest.mark.parametrize("order", [5, 8, 20, 30])
    def test_equal_ripples_in_both_bands(self, order: int) -> None:
        """n - 1 extremes between DC and the edge, peaks of 0 dB and minima of the ripple in turn; all lobes at the attenuation."""
        ripple, attenuation = 0.5, 45.0
        made = made_of(order, ripple, attenuation)
        edge = made.reference("stop_edge").w
        # extremes crowd towards the edges: sample where tanh spreads them out
        t = np.linspace(0, math.atanh(1 - 1e-3 * (edge - 1)), 4000 * order)
        inside = 20 * np.log10(np.abs(made(1j * np.tanh(t))))
        found = extremes(inside)
        assert len(found) == order - 1
        assert np.minimum(np.abs(found), np.abs(found + ripple)) == pytest.approx(0, abs=1e-4)
        assert np.abs(np.diff(found)) == pytest.approx(ripple, abs=2e-4)
        assert inside.max() < 1e-9
        outside = 20 * np.log10(np.abs(made(1j * edge / np.tanh(t[1:]))) + 1e-300)
        lobes = np.array([level for level in extremes(outside) if level > -attenuation - 1])
        assert len(lobes) == (order - 1) // 2
        assert lobes == pytest.approx(-attenuation, abs=1e-3)

    @pytest.mark.parametrize(("order", "ripple", "attenuation"), [case for case in CASES if case[0] <= 30])
    def test_every_reference_is_what_its_label_says(
        self, order: int, ripple: float, attenuation: float
    ) -> None:
        for variant in "abc" if order % 2 == 0 and order > 2 else "a":
            made = made_of(order, ripple, attenuation, variant)
            dc = 0.0 if order % 2 or variant == "c" else -ripple
            assert made.decibels(0) == pytest.approx(dc, abs=1e-9)
            assert made.reference("ripple_edge").w == 1.0
            half = 10 * math.log10(2)
            levels = {
                "w3dB": dc - half,
                "w3dB_peak": -half,
                "ripple_edge": -ripple,
                "stop_edge": -attenuation,
            }
            for reference in made.references:
                if reference.name in levels:
                    # a response so steep turns the last place of w, or of a pole, into 1e-6 dB and more
                    steep = abs(
                        made.decibels(reference.w * (1 + 1e-15)) - made.decibels(reference.w * (1 - 1e-15))
                    )
                    wanted = levels[reference.name]
                    assert made.decibels(reference.w) == pytest.approx(wanted, abs=1e-9 + 5 * steep)
            assert ("w3dB_peak" in {r.name for r in made.references}) == (dc < 0)

    def test_more_digits(self) -> None:
        """Doubles are the digits rounded, at every order, the last place or two aside."""
        for order in (3, 8, 15, 30):
            for variant in "abc" if order % 2 == 0 else "a":
                made = made_of(order, 0.1, 60.0, variant)
                poles, zeros = made.precise(40)
                assert [complex(p) for p in poles] == pytest.approx(made.poles, rel=3e-15, abs=0)
                assert [complex(z) for z in zeros] == pytest.approx(made.zeros, rel=3e-15, abs=0)

    def test_real_parts_keep_their_digits(self) -> None:
        """The pair of highest Q of order 20: its real part, 1e-4 of the magnitude, to 1e-14."""
        made = made_of(20, 0.1, 80.0)
        poles, _ = made.precise(40)
        assert abs(made.poles[-1].real) < 1e-3
        for p, exact in zip(made.poles, poles, strict=True):
            assert p.real == pytest.approx(float(exact.real), rel=1e-14)


class TestLimits:
    def test_a_far_stop_band_leaves_chebyshev(self) -> None:
        """Poles differ by the order of k1 and of the inverse square of the zeros."""
        made = elliptic(3, "0.5 dB", "250 dB")
        assert made.poles == pytest.approx(chebyshev(3, "0.5 dB").poles, rel=1e-7)

    @pytest.mark.parametrize("order", [2, 3, 4])
    def test_a_small_ripple_leaves_inverse_chebyshev(self, order: int) -> None:
        """Slowly: the distance falls with the n-th root of e."""
        wanted = inverse_chebyshev(order, "60 dB").scaled("w0", 1.0)
        distances = []
        for ripple in ("1e-6 dB", "1e-12 dB"):
            made = elliptic(order, ripple, "60 dB").scaled("w0", 1.0)
            distances.append(max(abs(nearest(p, made.poles) - p) for p in wanted.poles))
        assert distances[1] < 0.002
        assert distances[1] < 0.1 * distances[0]

    def test_order_1(self) -> None:
        """The pole is -1/e, as that of Chebyshev."""
        assert elliptic(1, "1 dB", "40 dB").poles == pytest.approx(chebyshev(1, "1 dB").poles, rel=1e-15)

    def test_order_2_by_hand(self) -> None:
        """R is of degree 1 in w^2: |R| is 1 at w = 0, at w = 1 in the other sense, and E/e at infinity."""
        made = elliptic(2, "1 dB", "30 dB")
        assert made.decibels(0) == pytest.approx(-1, abs=1e-12)
        assert made.decibels(1) == pytest.approx(-1, abs=1e-12)
        assert made.decibels(1e9) == pytest.approx(-30, abs=1e-9)


LADDERS = [case for case in finite_zeros.CASES if case.family == "elliptic"]
INVERSE_LADDERS = [case for case in finite_zeros.CASES if case.family.startswith("inverse")]


class TestLadders:
    """Printed ladders as networks have the poles and zeros of their family to the printed digits."""

    @pytest.mark.parametrize("case", LADDERS, ids=lambda case: case.id)
    def test_elliptic(self, case: Ladder) -> None:
        """Four printed digits; an even order between equal terminations is variant c."""
        H, found = derived(case)
        variant = "a" if case.order % 2 else "c"
        made = elliptic(case.order, f"{case.ripple_db} dB", edge=case.stop_w, variant=variant)
        for p in made.poles:
            assert abs(nearest(p, found) - p) <= 5e-4 * abs(p)
        zeros = [root.value for root in H.zeros()]
        assert len(zeros) == len(made.zeros)
        for z in made.zeros:
            assert abs(nearest(z, zeros) - z) <= 5e-4 * abs(z)
        assert case.stop_db is not None
        assert case.stop_db <= made.settings[1].value < case.stop_db + 10

    @pytest.mark.parametrize("case", INVERSE_LADDERS, ids=lambda case: case.id)
    def test_inverse_chebyshev(self, case: Ladder) -> None:
        H, found = derived(case)
        made = inverse_chebyshev(case.order, f"{case.stop_db} dB")
        if case.family.endswith("3db"):
            made = made.scaled("w3dB", 1.0)
        for p in made.poles:
            assert abs(nearest(p, found) - p) <= case.tol_pole * abs(p)
        for z in made.zeros:
            assert abs(nearest(z, [root.value for root in H.zeros()]) - z) <= case.tol_zero * abs(z)


class TestRefusals:
    @pytest.mark.parametrize(
        ("arguments", "message"),
        [
            ({"attenuation": "50"}, "number of dB"),
            ({"attenuation": "3.1 dB"}, "above 3.1103 dB"),
            ({"attenuation": "40 dB", "edge": 2.0}, "both given"),
            ({"edge": 0.9}, "beyond the ripple edge"),
            ({"edge": 1.0000001}, "higher order or a wider transition"),
            ({"edge": 1e5, "order": 40}, "lower order"),
            ({"variant": "d"}, "variants of an elliptic filter"),
            ({"variant": "c"}, "even orders from 4"),
            ({"variant": "b", "order": 2}, "even orders from 4"),
            ({"ripple": "0 dB"}, "Butterworth"),
        ],
    )
    def test_says_what_is_wrong(self, arguments: dict[str, Any], message: str) -> None:
        with pytest.raises(NotationError, match=message):
            sn.elliptic(arguments.pop("order", 3), arguments.pop("ripple", "0.1 dB"), **arguments)

    def test_order(self) -> None:
        with pytest.raises(LimitError):
            sn.elliptic(61)
        with pytest.raises(LimitError, match="within 1e-9 of the ripple edge"):
            sn.elliptic(60, "0.1 dB", "40 dB")
