"""LC ladders: the derived H has the poles, the response and the zeros that the published tables claim."""

from __future__ import annotations

from math import inf, pi

import numpy as np
import pytest

import symnet as sn
from symnet.shape.verdict import Recognition
from tests.reference import (
    closed_forms,
    doubly_terminated,
    doubly_terminated_chebyshev,
    doubly_terminated_gaussian,
    finite_zeros,
    singly_terminated,
)
from tests.reference.cases import Ladder
from tests.reference.comparing import assert_same_function, decibels
from tests.reference.ladder_checks import derived, relative_db, scale_free, wanted_poles

CASES = (
    *singly_terminated.CASES,
    *doubly_terminated.CASES,
    *doubly_terminated_chebyshev.CASES,
    *doubly_terminated_gaussian.CASES,
    *finite_zeros.CASES,
)
BY_ID = {case.id: case for case in CASES}
CROSSOVERS = [case for case in CASES if case.nominal_f]


def name(case: Ladder) -> str:
    return case.id


def elements(case: Ladder) -> list[float]:
    """The values of coils and capacitors in the order of their numbers."""
    H = sn.derive(sn.network(case.text))
    return [
        float(H.values[n])
        for n in sorted(H.names, key=lambda n: int(n[1:]) if n[1:].isdigit() else 99)
        if n[0] in "LC"
    ]


@pytest.mark.parametrize("case", CASES, ids=name)
def test_order_and_gain_at_the_pass_end(case: Ladder) -> None:
    H, found = derived(case)
    assert H.order == len(found) == case.order
    if "-hp-" in case.id:
        assert H(complex(inf)) == pytest.approx(1)
    else:
        values = sn.derive(sn.network(case.text)).values
        load = float(values.get("RL", 1))
        assert H(0j) == pytest.approx(load / (load + float(values.get("Rs", 0))), rel=1e-15)


@pytest.mark.parametrize("case", [case for case in CASES if case.tol_pole and not case.nominal_f], ids=name)
def test_poles_are_those_of_the_family(case: Ladder) -> None:
    assert closed_forms.pole_distance(derived(case)[1], wanted_poles(case)) < case.tol_pole


@pytest.mark.parametrize("case", [case for case in CROSSOVERS if case.tol_pole], ids=name)
def test_crossovers_have_the_shape_of_the_family(case: Ladder) -> None:
    # published tables put the nominal frequency where they like; the shape is what they claim
    shape, _ = scale_free(derived(case)[1])
    wanted, _ = scale_free(wanted_poles(case))
    assert closed_forms.pole_distance(shape, wanted) < case.tol_pole


@pytest.mark.parametrize(
    ("case_id", "f", "db"),
    [
        ("xover4-hp-linkwitz_riley", 1, -6.02),
        ("xover4-hp-butterworth", 1, -3.01),
        ("xover4-lp-legendre", 1.118, -3.01),
        ("xover4-hp-legendre", 1 / 1.118, -3.01),
        ("xover4-hp-linear_phase", 1, -6.54),  # computed; nothing is published, see the note
    ],
)
def test_crossovers_at_their_nominal_frequency(case_id: str, f: float, db: float) -> None:
    # the note beside each case; four-digit elements leave 0.05 dB
    assert decibels(derived(BY_ID[case_id])[0], f) == pytest.approx(db, abs=0.05)


@pytest.mark.parametrize("case", [case for case in CASES if case.q], ids=name)
def test_second_order_crossovers_have_the_published_q(case: Ladder) -> None:
    assert 1 / sn.normalise(derived(case)[0]).c[1] == pytest.approx(case.q, rel=case.tol_value)


@pytest.mark.parametrize("case", [case for case in CASES if case.tol_db and "bessel" in case.id], ids=name)
def test_bessel_response_up_to_2_rad_per_second(case: Ladder) -> None:
    w = np.linspace(0, 2, 101)
    s = 1j * w[:, None]
    wanted = np.array(wanted_poles(case))
    family = -20 * np.log10(np.abs(1 - s / wanted)).sum(axis=1)
    assert np.max(np.abs(relative_db(derived(case)[0], w) - family)) < case.tol_db


@pytest.mark.parametrize("case", [case for case in CASES if case.tol_shape], ids=name)
def test_rows_with_the_scale_error_have_the_right_shape(case: Ladder) -> None:
    shape, w0 = scale_free(derived(case)[1])
    wanted, wanted_w0 = scale_free(wanted_poles(case))
    assert closed_forms.pole_distance(shape, wanted) < case.tol_shape
    assert abs(w0 / wanted_w0 - 1) < case.tol_scale


@pytest.mark.parametrize("case", doubly_terminated_chebyshev.CASES, ids=name)
def test_ripple_is_the_published_one(case: Ladder) -> None:
    # in the pass band |H| swings between 0 and -ripple dB below its peak, (n + 1)//2 times between DC and the edge
    H, _ = derived(case)
    edge = (
        1.0
        if case.family == "chebyshev"
        else abs(closed_forms.chebyshev_3db(case.order, case.ripple_db or 0, from_dc=False)[0])
        / abs(closed_forms.chebyshev(case.order, case.ripple_db or 0)[0])
    )
    db = relative_db(H, np.linspace(0, edge, 4001))
    assert np.ptp(db) == pytest.approx(case.ripple_db, abs=5e-4)
    assert np.count_nonzero(np.diff(np.sign(np.diff(db))) != 0) == case.order - 1


@pytest.mark.parametrize(
    "case", [case for case in doubly_terminated_chebyshev.CASES if case.tol_value], ids=name
)
def test_printed_g_values_are_those_of_the_closed_form(case: Ladder) -> None:
    H = sn.derive(sn.network(case.text))
    *wanted, load = closed_forms.chebyshev_g(case.order, case.ripple_db or 0)
    assert elements(case) == pytest.approx(wanted, abs=case.tol_value)
    assert float(H.values["RL"]) == pytest.approx(load, abs=case.tol_value)
    assert closed_forms.pole_distance(derived(case)[1], wanted_poles(case)) < 1e-4


@pytest.mark.parametrize("case", [case for case in singly_terminated.CASES if case.published], ids=name)
def test_printed_butterworth_elements_are_those_of_the_closed_form(case: Ladder) -> None:
    wanted = closed_forms.singly_terminated_butterworth(case.order)
    assert elements(case) == pytest.approx(wanted, rel=1e-14)
    assert case.published == pytest.approx(wanted, abs=case.tol_value)


@pytest.mark.parametrize("case", doubly_terminated_gaussian.CASES, ids=name)
def test_gaussian_down_to_the_stated_level(case: Ladder) -> None:
    level = 6 if case.family == "gaussian_to_6db" else 12
    w = np.linspace(0, np.sqrt(level / 3.0103), 201)
    db = relative_db(derived(case)[0], w)
    assert np.max(np.abs(db + 3.0103 * w**2)) < case.tol_db
    # -3 dB at 1 rad/s within 1 %
    outer, inner = relative_db(derived(case)[0], [1 + case.tol_scale, 1 - case.tol_scale])
    assert outer < -3.0103 < inner


@pytest.mark.parametrize("case", [case for case in CASES if case.tol_zero], ids=name)
def test_zeros_of_inverse_chebyshev_ladders(case: Ladder) -> None:
    H, _ = derived(case)
    found = sorted(root.value.imag for root in H.zeros() if root.value.imag > 0)
    wanted = closed_forms.inverse_chebyshev_zeros(
        case.order, case.stop_db or 0, at_3db=case.family.endswith("3db")
    )
    assert found == pytest.approx(wanted, rel=case.tol_zero)
    assert all(root.value.real == 0 for root in H.zeros())


@pytest.mark.parametrize("case", [case for case in CASES if case.family == "inverse_chebyshev"], ids=name)
def test_stop_band_of_inverse_chebyshev_ladders(case: Ladder) -> None:
    # from the edge at 1 rad/s on the loss never falls below the stated one; six printed digits leave 0.01 dB
    db = relative_db(derived(case)[0], 1 / np.linspace(1e-3, 1, 4000))
    assert np.max(db) == pytest.approx(-(case.stop_db or 0), abs=0.01)


@pytest.mark.parametrize("case", [case for case in CASES if case.family == "elliptic"], ids=name)
def test_ripple_and_stop_band_of_elliptic_ladders(case: Ladder) -> None:
    assert case.stop_db is not None
    assert case.stop_w is not None
    H, _ = derived(case)
    assert np.ptp(relative_db(H, np.linspace(0, 1, 4001))) == pytest.approx(
        case.ripple_db, abs=case.tol_ripple_db
    )
    stop = relative_db(H, case.stop_w / np.linspace(1e-3, 1, 4000))
    # "50 dB" in print is the class of the row; the loss is at least that, and less than the next class
    assert -case.stop_db - 10 < np.max(stop) <= -case.stop_db


RECOGNISED = {
    "butterworth": "Butterworth",
    "bessel_mag": "Bessel",
    "chebyshev": "Chebyshev",
    "chebyshev_3db": "Chebyshev",
    "chebyshev_3db_dcref": "Chebyshev",
    "papoulis": "Legendre-Papoulis",
    "butterworth1^2": "Linkwitz-Riley",
    "butterworth2^2": "Linkwitz-Riley",
    "inverse_chebyshev": "inverse Chebyshev",
    "inverse_chebyshev_3db": "inverse Chebyshev",
    "elliptic": "elliptic",
    "linear_phase": "equiripple linear phase",
}


@pytest.mark.parametrize("case", [case for case in CASES if case.family in RECOGNISED], ids=name)
def test_the_family_of_the_table_is_recognised(case: Ladder) -> None:
    found = sn.recognise(derived(case)[0])
    assert isinstance(found, Recognition)
    if case.order == 1:
        assert str(found).startswith("first order, low-pass")
        return
    assert found.match is not None
    # even orders between equal terminations are variant c, the one that has them
    variant = ", variant c" if case.family == "elliptic" and case.order % 2 == 0 else ""
    assert found.match.name.startswith(f"{RECOGNISED[case.family]}{variant}, order {case.order}")
    assert found.match.name.endswith("high-pass" if "-hp-" in case.id else "low-pass")
    if case.ripple_db:
        assert found.match.prototype.settings[0].value == pytest.approx(case.ripple_db, rel=2e-3)
    if case.family.startswith("inverse"):
        assert found.match.prototype.settings[0].value == pytest.approx(case.stop_db, abs=0.01)
        assert f", attenuation {case.stop_db:g} dB, " in found.match.name
    if case.stop_w:
        made = found.match.prototype
        assert made.reference("ripple_edge").w == pytest.approx(1, abs=1e-3)
        assert made.reference("stop_edge").w == pytest.approx(case.stop_w, rel=1e-3)


def test_the_linear_phase_crossover_is_the_one_of_0_05_degree() -> None:
    # no source says which error; the elements fit 0.05 degree to 0.12 % of the poles, as well as four digits can
    found = sn.recognise(derived(BY_ID["xover4-hp-linear_phase"])[0])
    assert isinstance(found, Recognition)
    assert found.match is not None
    assert found.match.prototype.settings[0].value == pytest.approx(0.05, abs=0.002)
    assert found.match.pole_error_percent < 0.2


def test_hand_derivation_of_the_third_order_ladder() -> None:
    case = singly_terminated.HAND_DERIVATION
    H = sn.derive(sn.network(case.text))
    assert_same_function(H, case.formula)
    numbers = (
        H.with_values(R="1 kohm", tau="1 ms").numeric()
        if "R" in H.names
        else H.with_values(tau="1 ms").numeric()
    )
    degrees = np.degrees(np.unwrap(np.angle(numbers(1j * np.geomspace(1, 1e9, 2001)))))
    assert degrees[-1] == pytest.approx(-270, abs=0.01)
    at = np.angle(numbers(1j * 1000 * np.array([1, (3 - np.sqrt(5)) / 2])), deg=True)
    assert at == pytest.approx([-135, -45], abs=1e-9)


def test_crossover_values_are_the_hand_derivation_over_2_pi() -> None:
    # 0.2387=1.5/2pi, 0.2122=(4/3)/2pi, 0.0796=0.5/2pi
    assert [2 * pi * value for value in elements(BY_ID["xover3-lp-butterworth"])] == pytest.approx(
        [1.5, 4 / 3, 0.5], abs=4e-4
    )
