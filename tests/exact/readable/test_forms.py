"""H(s) as a designer writes it. Every H here was found by hand from the network named beside it."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.errors import SingularError
from symnet.exact.polynomials import by_powers_of_s, make_ring
from symnet.exact.readable.forms import Form, as_ratio, readable, readable_ratio, readable_transfer
from symnet.typeset.length import length
from symnet.typeset.tree import Atom, evaluate, minus, over, plus
from symnet.typeset.writing import to_latex, to_text

FORMS: tuple[Form, ...] = ("readable", "constant term 1", "monic", "one fraction")


def gens(names: str) -> Sequence[Any]:
    found: Sequence[Any] = make_ring(names.split()).gens
    return found


def shown(n: Any, d: Any, form: Form = "readable") -> str:
    tree = readable_transfer(n, d, form)
    above, below = as_ratio(tree, d.ring)
    assert above * d == n * below
    return to_text(tree)


def test_lag_network() -> None:
    """R1 in-out, R2 + C out-gnd."""
    s, R1, R2, C = gens("R1 R2 C")
    assert shown(1 + s * R2 * C, 1 + s * (R1 + R2) * C) == "(1 + s*R2*C)/(1 + s*(R1 + R2)*C)"


def test_loaded_low_pass() -> None:
    """R1 in-out, C || R2 out-gnd."""
    s, R1, R2, C = gens("R1 R2 C")
    n, d = R2, R1 + R2 + s * R1 * R2 * C
    assert shown(n, d) == "R2/(R1 + R2) * 1/(1 + s*(R1||R2)*C)"
    assert shown(n, d, "one fraction") == "R2/(R1 + R2 + s*R1*R2*C)"
    assert shown(n, d, "monic") == "1/(R1*C) * 1/((1/R1 + 1/R2)/C + s)"
    assert to_latex(readable_transfer(n, d)) == (
        r"\frac{R_{2}}{R_{1} + R_{2}} \cdot \frac{1}{1 + s \left(R_{1} \parallel R_{2}\right) C}"
    )


def test_two_sections_loaded_and_buffered() -> None:
    s, R1, R2, C1, C2 = gens("R1 R2 C1 C2")
    one = s.ring.one
    loaded = 1 + s * (R1 * C1 + R1 * C2 + R2 * C2) + s**2 * R1 * R2 * C1 * C2
    assert shown(one, loaded) == "1/(1 + s*(R1*C1 + (R1 + R2)*C2) + s^2*R1*R2*C1*C2)"
    assert shown(one, (1 + s * R1 * C1) * (1 + s * R2 * C2)) == "1/((1 + s*R1*C1)*(1 + s*R2*C2))"


def test_compensated_divider() -> None:
    """R1 || C1 over R2 || C2."""
    s, R1, R2, C1, C2 = gens("R1 R2 C1 C2")
    n, d = R2 * (1 + s * R1 * C1), R1 + R2 + s * R1 * R2 * (C1 + C2)
    assert shown(n, d) == "R2/(R1 + R2) * (1 + s*R1*C1)/(1 + s*(R1||R2)*(C1 + C2))"


def test_multiple_feedback_low_pass() -> None:
    """R1 in-x, R2 x-out, C1 x-gnd, R3 x-m, C2 m-out, ideal op amp."""
    s, R1, R2, R3, C1, C2 = gens("R1 R2 R3 C1 C2")
    n, d = -R2, R1 + s * C2 * (R1 * R2 + R1 * R3 + R2 * R3) + s**2 * R1 * R2 * R3 * C1 * C2
    assert shown(n, d) == "-(R2/R1)/(1 + s*(R2 + R3 + R2*R3/R1)*C2 + s^2*R2*R3*C1*C2)"
    assert shown(n, d, "one fraction") == "-R2/(R1 + s*C2*(R1*R2 + R3*(R1 + R2)) + s^2*R1*R2*R3*C1*C2)"
    assert shown(n, d, "monic") == "-1/(R1*R3*C1*C2) * 1/(1/(R2*R3*C1*C2) + s*(1/R1 + 1/R2 + 1/R3)/C1 + s^2)"
    assert to_text(readable_transfer(n, d, descending=True)) == (
        "-(R2/R1)/(s^2*R2*R3*C1*C2 + s*(R2 + R3 + R2*R3/R1)*C2 + 1)"
    )
    assert to_latex(readable_transfer(n, d)).startswith(r"-\frac{R_{2}}{R_{1}} \cdot \frac{1}{1 + s \left(")


def test_positive_feedback_low_pass_with_gain() -> None:
    """R1 in-x, R2 x-p, C2 p-gnd, C1 x-out, out = K*p."""
    s, R1, R2, C1, C2, K = gens("R1 R2 C1 C2 K")
    d = 1 + s * (C2 * (R1 + R2) + (1 - K) * R1 * C1) + s**2 * R1 * R2 * C1 * C2
    assert shown(K, d) == "K/(1 + s*((R1 + R2)*C2 + (1 - K)*R1*C1) + s^2*R1*R2*C1*C2)"


def test_twin_t_and_wien_arm() -> None:
    s, R, C = gens("R C")
    x = s * R * C
    assert shown(1 + x**2, 1 + 4 * x + x**2) == "(1 + s^2*R^2*C^2)/(1 + 4*s*R*C + s^2*R^2*C^2)"
    assert shown(x, 1 + 3 * x + x**2) == "s*R*C/(1 + 3*s*R*C + s^2*R^2*C^2)"


def test_loaded_ladders() -> None:
    """Rs, L1 in series, C1 shunt, L2 in series, (C2 ||) RL."""
    s, Rs, L1, C1, L2, RL = gens("Rs L1 C1 L2 RL")
    third = L1 * L2 * C1 * s**3 + C1 * (L1 * RL + L2 * Rs) * s**2 + (L1 + L2 + C1 * Rs * RL) * s + Rs + RL
    assert shown(RL, third) == (
        "RL/(Rs + RL + s*(L1 + L2 + Rs*RL*C1) + s^2*C1*(Rs*L2 + RL*L1) + s^3*L1*L2*C1)"
    )
    assert shown(RL, third, "constant term 1").startswith(
        "RL/(Rs + RL) * 1/(1 + s*(L1 + L2 + Rs*RL*C1)/(Rs + RL) + s^2*C1*"
    )
    s, Rs, L1, C1, L2, C2, RL = gens("Rs L1 C1 L2 C2 RL")
    # From the load towards the source: voltage and current for RL volts at the output.
    voltage, current = RL, 1 + s * C2 * RL
    voltage += s * L2 * current
    current += s * C1 * voltage
    voltage += (Rs + s * L1) * current
    assert shown(RL, voltage) == (
        "RL/(Rs + RL + s*(L1 + L2 + Rs*RL*(C1 + C2)) + s^2*(C1*(Rs*L2 + RL*L1) + RL*(L1 + L2)*C2)"
        " + s^3*L2*C1*(L1 + Rs*RL*C2) + s^4*RL*L1*L2*C1*C2)"
    )


def test_integrators_and_poles_at_the_origin() -> None:
    s, R1, R2, C = gens("R1 R2 C")
    one = s.ring.one
    assert shown(-one, s * R1 * C) == "-1/(s*R1*C)"
    assert shown(-(1 + s * R2 * C), s * R1 * C) == "-(1 + s*R2*C)/(s*R1*C)"
    assert shown(1 + s * R2 * C, s * R1 * C * (1 + s * R1 * C)) == "(1 + s*R2*C)/(s*R1*C*(1 + s*R1*C))"
    assert shown(s * R1 * C, one) == "s*R1*C"


def test_finite_gain_bandwidth_shows_the_sign_of_the_pole() -> None:
    """Inverting amplifier, open-loop gain wt/s: inputs as they should be, and exchanged."""
    s, R1, R2, wt = gens("R1 R2 wt")
    assert shown(-R2 * wt, R1 * wt + s * (R1 + R2)) == "-(R2/R1)/(1 + s*(1 + R2/R1)/wt)"
    assert shown(R2 * wt, s * (R1 + R2) - R1 * wt) == "-(R2/R1)/(1 - s*(1 + R2/R1)/wt)"


def test_coupled_coils() -> None:
    """R1 in series with L1, load R2 on L2, mutual inductance M."""
    s, R1, R2, L1, L2, M = gens("R1 R2 L1 L2 M")
    assert shown(s * M * R2, R1 * R2 + s * (L1 * R2 + L2 * R1) + s**2 * (L1 * L2 - M**2)) == (
        "(s*M/R1)/(1 + s*(L1/R1 + L2/R2) + s^2*(L1*L2 - M^2)/(R1*R2))"
    )


def test_numbers_only() -> None:
    (s,) = gens("")
    assert shown(3 * s + 5, 7 * s**2 + 4 * s + 2) == "(5 + 3*s)/(2 + 4*s + 7*s^2)"
    assert shown(s.ring(10**7), s**2 + 3 * 10**5 * s + 10**9) == "(1/100)/(1 + 3*s/10000 + s^2/1000000000)"
    assert shown(s.ring(3), s.ring(6)) == "1/2"
    assert shown(s.ring(-3), s.ring(1)) == "-3"


@pytest.mark.parametrize(
    ("numerator", "denominator", "text"),
    [
        ("a*b", "a+b", "R1||R2"),
        ("a*b*C", "a+b", "(R1||R2)*C1"),
        ("a*b*c", "ab+ac+bc", "R1||R2||R3"),
        ("a*(b+c)", "a+b+c", "R1||(R2 + R3)"),
        ("(a+b)*(c+d)", "a+b+c+d", "(R1 + R2)||(R3 + R4)"),
        ("a*b*(c+d)", "nested", "R1||R2||(R3 + R4)"),
        ("ab+ac+bc", "a+b", "R3 + R1||R2"),
        ("(ab+ac+bc)*C", "a", "(R2 + R3 + R2*R3/R1)*C1"),
        ("a+b", "a", "1 + R2/R1"),
        ("b", "a+b", "R2/(R1 + R2)"),
        ("a*b", "ab+ac+bc", "R1*R2/(R1*R2 + R3*(R1 + R2))"),
        ("L*M", "L+M", "L1||L2"),
        ("C*D", "C+D", "C1*C2/(C1 + C2)"),
        ("1", "sC", "1/(s*C1)"),
        ("0", "a+b", "0"),
        ("a-b", "b-a", "-1"),
        ("2a", "3b", "2*R1/(3*R2)"),
    ],
)
def test_ratios(numerator: str, denominator: str, text: str) -> None:
    s, a, b, c, d, L, M, C, D = gens("R1 R2 R3 R4 L1 L2 C1 C2")
    known = {
        "a*b": a * b,
        "a*b*C": a * b * C,
        "a*b*c": a * b * c,
        "a*(b+c)": a * (b + c),
        "(a+b)*(c+d)": (a + b) * (c + d),
        "a*b*(c+d)": a * b * (c + d),
        "ab+ac+bc": a * b + a * c + b * c,
        "(ab+ac+bc)*C": (a * b + a * c + b * c) * C,
        "a": a,
        "b": b,
        "a+b": a + b,
        "a+b+c": a + b + c,
        "a+b+c+d": a + b + c + d,
        "nested": a * b + (a + b) * (c + d),
        "L*M": L * M,
        "L+M": L + M,
        "C*D": C * D,
        "C+D": C + D,
        "1": s.ring.one,
        "0": s.ring.zero,
        "sC": s * C,
        "a-b": a - b,
        "b-a": b - a,
        "2a": 2 * a,
        "3b": 3 * b,
    }
    n, m = known[numerator], known[denominator]
    tree = readable_ratio(n, m)
    assert to_text(tree) == text
    above, below = as_ratio(tree, s.ring)
    assert above * m == n * below


def test_parallel_is_written_only_where_it_is_exactly_that() -> None:
    _, a, b, c, C = gens("R1 R2 R3 C")
    for n, m in ((2 * a * b, a + 2 * b), (a * b, a - b), (a * C, a + C), (a * b, a + b + c)):
        assert "R1||R2" not in to_text(readable_ratio(n, m))


def test_a_polynomial_with_s_is_written_in_ascending_powers() -> None:
    s, R1, R2, C = gens("R1 R2 C")
    assert to_text(readable(s**2 * R1 * R2 * C**2 + s * R1 * C + s * R2 * C + 1)) == (
        "1 + s*(R1 + R2)*C + s^2*R1*R2*C^2"
    )
    assert to_text(readable(s.ring.zero)) == "0"


def test_coefficients_by_powers_of_s_are_the_same_input() -> None:
    s, R1, R2, C = gens("R1 R2 C")
    n, d = R2, R1 + R2 + s * R1 * R2 * C
    for form in FORMS:
        assert readable_transfer(by_powers_of_s(n), by_powers_of_s(d), form) == readable_transfer(n, d, form)
    assert to_text(readable_transfer((), by_powers_of_s(d))) == "0"


def test_a_zero_denominator_is_refused() -> None:
    s, R1 = gens("R1")
    with pytest.raises(SingularError, match="the denominator is zero"):
        readable_transfer(R1, s.ring.zero)
    with pytest.raises(SingularError, match="the denominator is zero"):
        readable_transfer(by_powers_of_s(R1), ())
    with pytest.raises(SingularError, match="the denominator is zero"):
        readable_ratio(R1, s.ring.zero)


def test_as_ratio_of_a_name_that_is_not_there() -> None:
    s, _ = gens("R1")
    with pytest.raises(KeyError):
        as_ratio(Atom("R2"), s.ring)


def test_a_very_large_h_is_collected_and_counted() -> None:
    s, *r = gens(" ".join(f"R{k}" for k in range(1, 7)))
    many = sum(r, s.ring.zero) ** 8
    assert len(many) == 1287
    text = to_text(readable_transfer(s.ring.one, 1 + s * many + s**2 * many))
    assert text.startswith("1/(1 + s*(R1^8 + 8*R1^7*R2 + ")
    assert text.count("... 1263 more terms") == 2
    assert to_text(readable(many * (1 + s))).count("more terms") == 2


R_NAMES, C_NAMES = ("R1", "R2", "R3", "R4"), ("C1", "C2")
RING = make_ring([*R_NAMES, *C_NAMES, "L1", "K"])
S, *_NAMED = RING.gens
BY_NAME = dict(zip([*R_NAMES, *C_NAMES, "L1", "K"], _NAMED, strict=True))


def sums(names: Sequence[str], most: int = 3) -> st.SearchStrategy[Any]:
    """Sums of some of the names, all signs plus: what resistances in series look like."""
    return st.lists(st.sampled_from(names), min_size=1, max_size=most, unique=True).map(
        lambda chosen: sum((BY_NAME[name] for name in chosen), RING.zero)
    )


def anything(most: int = 5) -> st.SearchStrategy[Any]:
    monomial = st.lists(st.sampled_from([S, *_NAMED]), max_size=3).map(
        lambda chosen: RING(1) if not chosen else _product(chosen)
    )
    pairs = st.lists(st.tuples(st.sampled_from([1, 1, -1, 2, -3]), monomial), max_size=most)
    return pairs.map(lambda terms: sum((c * m for c, m in terms), RING.zero))


def _product(factors: Sequence[Any]) -> Any:
    total = RING.one
    for factor in factors:
        total *= factor
    return total


RESISTIVE = st.lists(sums(R_NAMES), min_size=1, max_size=3).map(_product)


@settings(deadline=None)
@given(RESISTIVE, sums(R_NAMES, 4), sums(C_NAMES))
def test_ratios_of_resistances_keep_their_value(n: Any, d: Any, c: Any) -> None:
    """Law: the tree of n/d has the value n/d, in the ring and at a point."""
    tree = readable_ratio(n * c, d)
    above, below = as_ratio(tree, RING)
    assert above * d == n * c * below
    values = {str(symbol): Fraction(k + 2, 2 * k + 3) for k, symbol in enumerate(RING.symbols)}
    point = [values[str(symbol)] for symbol in RING.symbols]
    expected = _at(n * c, point) / _at(d, point)
    assert evaluate(tree, values.__getitem__) == expected


def _at(p: Any, point: Sequence[Fraction]) -> Fraction:
    total = Fraction(0)
    for monomial, coefficient in p.items():
        term = Fraction(int(coefficient))
        for base, exponent in zip(point, monomial, strict=True):
            term *= base**exponent
        total += term
    return total


@settings(deadline=None)
@given(anything(), anything(), anything(), sums(R_NAMES), st.sampled_from(FORMS))
def test_every_form_of_h_keeps_its_value(a: Any, b: Any, c: Any, common: Any, form: Form) -> None:
    """Law: H written in any form, multiplied out in the ring, is N/D."""
    n, d = a * common, (b * common + c) * (1 + S * common)
    if not d:
        return
    tree = readable_transfer(n, d, form)
    above, below = as_ratio(tree, RING)
    assert below
    assert above * d == n * below
    turned = readable_transfer(n, d, form, descending=True)
    above, below = as_ratio(turned, RING)
    assert above * d == n * below


@settings(deadline=None)
@given(anything(), anything())
def test_the_readable_form_is_the_shorter_one(n: Any, d: Any) -> None:
    """Law: readable is "constant term 1", or it is shorter than that."""
    if not n or not d:
        return
    found = readable_transfer(n, d)
    divided = readable_transfer(n, d, "constant term 1")
    assert found == divided or length(found) < length(divided)


def test_as_ratio_follows_the_tree() -> None:
    a, b = Atom("R1"), Atom("R2")
    tree = minus(over(plus(a, b), plus(a, minus(b))))
    above, below = as_ratio(tree, RING)
    assert above * (BY_NAME["R1"] - BY_NAME["R2"]) == -(BY_NAME["R1"] + BY_NAME["R2"]) * below


def test_a_form_that_fails_its_check_is_not_shown(monkeypatch: pytest.MonkeyPatch) -> None:
    from symnet.exact.readable import forms as module
    from symnet.typeset.tree import ONE

    _, R1, R2 = gens("R1 R2")
    monkeypatch.setattr(module, "_written", lambda *_, **__: ONE)
    with pytest.warns(module.DoubtfulFormWarning, match="did not pass its check"):
        tree = readable_transfer(R1, R1 + R2)
    above, below = as_ratio(tree, R1.ring)
    assert above * (R1 + R2) == below * R1


def test_factors_that_would_need_a_root_of_s_are_none() -> None:
    """Found by random forms: with s = 1, s*R^2 - 1 is (R - 1)*(R + 1), and neither factor can take s back."""
    s, R1 = gens("R1")
    for sign in (1, -1):
        tree = readable_transfer(R1.ring.one, s * R1**2 - sign)
        above, below = as_ratio(tree, R1.ring)
        assert above * (s * R1**2 - sign) == below
