"""Loop gain: what it is in published networks, and against injection and determinants done by the oracle."""

from __future__ import annotations

import math
from fractions import Fraction
from random import Random

import pytest

import symnet as sn
from symnet.errors import MissingValueError, NotationError, SingularError, UndefinedError, UnknownNameError
from symnet.shape.loop import loop_gain
from symnet.typeset.tree import evaluate
from symnet.typeset.writing import to_text
from tests import oracle

#: A photodiode amplifier (invented): Rf = 100 kohm, Cin = 20 pF, gain-bandwidth product 10 MHz.
PHOTODIODE = """
    drive current into m;  m -- Cin -- gnd;  m -- Rf || Cf -- out
    U1: opamp(plus=gnd, minus=m, out=out, gbw=10 MHz);  read out
    Rf = 100 kohm;  Cin = 20 pF
"""

#: Two RC sections around a gain K of positive feedback: swings at K = 3 with equal parts (common practice, no source).
POSITIVE = """
    in -- R1 -- x -- R2 -- p -- C2 -- gnd;  x -- C1 -- out
    hold out = K*p as amp;  drive in;  read out
"""


def photodiode(Cf: str) -> sn.Network:
    return sn.network(PHOTODIODE).with_values(Cf=Cf)


def test_photodiode_in_symbols() -> None:
    """T = (wt/s)(1 + s Rf Cf)/(1 + s Rf (Cin + Cf)), by hand: the divider from out to m times wt/s."""
    loop = loop_gain(sn.network(PHOTODIODE), "U1")
    assert loop.source == "U1.amp"
    assert str(loop.T) == "T = U1.gbw/s * (1 + s*Rf*Cf)/(1 + s*Rf*(Cin + Cf))"
    assert loop.difference.numerator == loop.T.numerator + loop.T.denominator
    assert loop.difference.denominator == loop.T.denominator


def test_photodiode_without_a_feedback_capacitor() -> None:
    """By hand: tan of the margin = 1/(w Rf Cin) at (w/wt)^2 (1 + (w Rf Cin)^2) = 1; f0 and Q from D."""
    network = photodiode("0 pF")
    loop = loop_gain(network, "U1.amp")
    (crossover,) = loop.crossovers()
    tau, wt = 1e5 * 20e-12, 2 * math.pi * 10e6
    x = (-1 + math.sqrt(1 + 4 * (tau * wt) ** 2)) / (2 * tau**2)  # w^2
    assert crossover.w.value == pytest.approx(math.sqrt(x), rel=1e-14)
    assert loop.phase_margin() == pytest.approx(math.degrees(math.atan(1 / math.sqrt(x) / tau)), rel=1e-10)
    assert round(loop.phase_margin(), 1) == 5.1
    assert loop.gain_margin() == math.inf
    (pair,) = sn.sections(sn.derive(network)).poles
    assert pair.f0 is not None
    assert pair.q is not None
    assert pair.f0 == pytest.approx(892e3, rel=1e-3)
    assert pair.q.value == pytest.approx(11.2, rel=2e-3)


def test_photodiode_with_a_feedback_capacitor() -> None:
    """Cf = 2.005 pF: f0 = 850 kHz, crossover 1.116 MHz, margin 58.3 deg; Q = 1/(w0 (Rf Cf + 1/wt)) = 0.865 by hand."""
    network = photodiode("2.005 pF")
    loop = loop_gain(network, "U1")
    (crossover,) = loop.crossovers()
    assert round(crossover.f / 1e6, 3) == 1.116
    assert round(loop.phase_margin(), 1) == 58.3
    assert crossover.direction == "falling"
    (pair,) = sn.sections(sn.derive(network)).poles
    assert pair.f0 is not None
    assert pair.q is not None
    w0 = math.sqrt(2 * math.pi * 1e7 / (1e5 * 22.005e-12))
    assert round(pair.f0 / 1e3) == 850
    assert pair.q.value == pytest.approx(1 / (w0 * (1e5 * 2.005e-12 + 1 / (2 * math.pi * 1e7))), rel=1e-12)


def test_photodiode_made_flat() -> None:
    """Q = 1/sqrt(2) where (Rf Cf + 1/wt)^2 = 2 Rf (Cin + Cf)/wt, a quadratic in Cf: 2.518 pF, by hand."""
    Rf, Cin, tau = (
        1e5,
        20e-12,
        1 / (2 * math.pi * 1e7),
    )  # Rf^2 Cf^2 + tau^2 = 2 Rf Cin tau: the terms in Cf cancel
    Cf = math.sqrt(2 * Rf * Cin * tau - tau**2) / Rf
    (pair,) = sn.sections(sn.derive(photodiode(f"{Cf} F"))).poles
    assert pair.q is not None
    assert pair.q.value == pytest.approx(math.sqrt(0.5), rel=1e-9)
    assert 2.51e-12 < Cf < 2.53e-12


def test_gain_margin_of_positive_feedback_is_the_way_to_three() -> None:
    network = sn.network(POSITIVE).with_values(R1="1k", R2="1k", C1="1n", C2="1n", K=2)
    loop = loop_gain(network, "amp")
    (limit,) = loop.gain_limits()
    assert limit.factor == 1.5  # K = 3
    assert limit.w.closed is not None
    assert limit.f == pytest.approx(1e6 / (2 * math.pi), rel=1e-15)
    assert loop.gain_margin() == pytest.approx(20 * math.log10(1.5), rel=1e-15)
    assert loop.gain_reduction() == math.inf
    assert loop.crossovers() == ()
    assert loop.phase_margin() == math.inf


@pytest.mark.parametrize(("K", "word"), [(3, "marginal"), (4, "unstable")])
def test_what_swings_has_no_margin(K: int, word: str) -> None:
    loop = loop_gain(
        sn.network(POSITIVE).with_values(R1="1k", R2="1k", C1="1n", C2="1n", K=K),
        "amp",
    )
    for figure in (loop.phase_margin, loop.gain_margin, loop.gain_reduction, loop.gain_limits):
        with pytest.raises(UndefinedError, match=f"has no margins: .* the network is {word}"):
            figure()
    assert word in repr(loop)
    assert loop.stability.verdict == word


def test_conditionally_stable() -> None:
    """T = k (1 + s)^2/s^3: real and negative at w = 1 with T = -2k/1, so that the gain may fall to half, not rise too far."""
    network = sn.network("""
        drive current into x;  x -- R9 -- gnd;  R9 = 1 ohm
        push from x to gnd = k*(1 + s*tau)^2/(s*tau)^3*x/R9 as loop;  k = 2;  tau = 1 s;  read x
    """)
    loop = loop_gain(network, "loop")
    (limit,) = loop.gain_limits()
    assert limit.w.closed is not None
    assert limit.w.value == 1.0
    assert limit.factor == pytest.approx(0.25)
    assert loop.gain_margin() == math.inf
    assert loop.gain_reduction() == pytest.approx(20 * math.log10(4))
    halved = loop_gain(network.with_values(k=Fraction(2, 5)), "loop")
    with pytest.raises(UndefinedError, match="unstable"):
        halved.phase_margin()


def test_margin_is_counted_both_ways() -> None:
    """T = k s/(1 + s)^2, k = 10: crosses 1 twice, with +-78.46 deg: 1 rises, the other falls; both are 101.5 deg away."""
    network = sn.network("""
        drive current into x;  x -- R9 -- gnd;  R9 = 1 ohm
        push from x to gnd = k*s*tau/(1 + s*tau)^2*x/R9 as loop;  k = 10;  tau = 1 s;  read x
    """)
    loop = loop_gain(network, "loop")
    low, high = loop.crossovers()
    assert (low.direction, high.direction) == ("rising", "falling")
    assert low.phase == pytest.approx(-high.phase)
    assert low.distance == pytest.approx(-high.distance)
    assert low.w.value is not None
    assert high.w.value is not None
    assert low.w.value * high.w.value == pytest.approx(1.0)
    assert loop.phase_margin() == pytest.approx(180 - low.phase)


def test_static_loop() -> None:
    """T = -K R1/(R1 + R2) at all frequencies: the gain may rise by the factor (R1 + R2)/(K R1)."""
    network = sn.network("""
        in -- R3 -- p -- R1 -- gnd;  p -- R2 -- out;  hold out = K*p as amp;  drive current into in;  read out
        R1, R2, R3 = 1k;  K = 1
    """)
    loop = loop_gain(network, "amp")
    assert [limit.where for limit in loop.gain_limits()] == ["DC", "infinity"]
    assert loop.gain_margin() == pytest.approx(20 * math.log10(2))


def test_crossover_in_symbols() -> None:
    network = sn.network("in -- R1 -- m -- R2 -- out;  hold out = -wt*m/s as amp;  drive in;  read out")
    loop = loop_gain(network, "amp")
    assert loop.crossover_in_symbols is not None
    assert to_text(loop.crossover_in_symbols) == "wt*R1/(R1 + R2)"
    with pytest.raises(MissingValueError, match="R1"):
        loop.phase_margin()
    valued = loop_gain(network.with_values(R1="1k", R2="9k", wt="1e6"), "amp")
    assert valued.crossovers()[0].w.value == pytest.approx(1e5)
    assert valued.phase_margin() == pytest.approx(90)


def test_crossover_of_second_degree_in_symbols() -> None:
    """(w Rf Cin)^2 w^2 + w^2 = wt^2 by hand; with Cf the sign of the middle term is open, and there is one root all the same."""
    flat = sn.network(PHOTODIODE.replace("Rf || Cf", "Rf")).with_values(
        {"U1.gbw": None, "Rf": None, "Cin": None}
    )
    formula = loop_gain(flat, "U1").crossover_in_symbols
    assert formula is not None
    assert to_text(formula) == "sqrt((sqrt(1 + 4*U1.gbw^2*Rf^2*Cin^2) - 1)/(2*Rf^2*Cin^2))"
    loop = loop_gain(photodiode("2.005 pF"), "U1")
    assert loop.crossover_in_symbols is not None
    values = {name: float(value) for name, value in loop.exact.naming.numbers.items()}
    assert evaluate(loop.crossover_in_symbols, values.__getitem__, float) == pytest.approx(
        loop.crossovers()[0].w.value, rel=1e-9
    )


def test_no_loop() -> None:
    network = sn.network("in -- R1 -- gnd;  hold out = K*in as amp;  out -- R2 -- gnd;  drive in;  read out")
    loop = loop_gain(network.with_values(K=2, R1="1k", R2="1k"), "amp")
    assert str(loop.T) == "T = 0"
    with pytest.raises(UndefinedError, match="no loop"):
        loop.phase_margin()


def test_poles_outside_the_loop_are_told_apart() -> None:
    network = sn.network("""
        in -- R1 -- m -- R2 -- out;  hold out = -A*m as amp;  drive in;  read out
        in -- L1 -- y -- C1 -- gnd
        R1, R2 = 1k;  A = 1000;  L1 = 1 mH;  C1 = 1 nF
    """)
    with pytest.raises(UndefinedError, match="outside the loop"):
        loop_gain(network, "amp").phase_margin()


def test_what_has_no_return_ratio() -> None:
    ideal = sn.network(
        "in -- R1 -- m -- R2 -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out"
    )
    with pytest.raises(UndefinedError, match=r'with_opamp\("U1", gbw='):
        loop_gain(ideal, "U1")
    assert str(loop_gain(ideal.with_opamp("U1", gain=None), "U1").T) == "T = U1.gain*R1/(R1 + R2)"
    with pytest.raises(NotationError, match="R1 is no dependent source"):
        loop_gain(ideal, "R1")
    with pytest.raises(UnknownNameError, match="known: U1"):
        loop_gain(ideal, "U2")
    untied = sn.network("""
        drive current into a;  hold b = K*a as one;  b -- R1 -- gnd
        push from a to gnd = b/R1 as two;  read a
    """)
    with pytest.raises(SingularError, match="its return ratio is infinite"):
        _ = loop_gain(untied, "two").T
    with pytest.raises(SingularError, match="its return ratio is infinite"):
        loop_gain(untied.with_values(K=1, R1="1k"), "two").numeric()


def test_kept_symbols() -> None:
    loop = loop_gain(photodiode("2 pF"), "U1", symbols="Cf")
    assert [str(symbol) for symbol in loop.T.numerator.ring.symbols] == ["s", "Cf"]
    assert loop.phase_margin() == loop_gain(photodiode("2 pF"), "U1").phase_margin()
    with pytest.raises(UnknownNameError):
        loop_gain(photodiode("2 pF"), "U1", symbols="Cx")


RING = """
    # two integrators and an inverter in a ring (invented)
    in -- R1 -- a -- C1 || R2 -- x;  U1: opamp(plus=gnd, minus=a, out=x)
    x -- R3 -- b -- C2 -- y;  U2: opamp(plus=gnd, minus=b, out=y)
    y -- R4 -- c -- R5 -- z;  U3: opamp(plus=gnd, minus=c, out=z)
    z -- R6 -- a;  drive in;  read y
    R1, R3, R4, R5, R6 = 10k;  R2 = 20k;  C1, C2 = 1.59n
"""


@pytest.mark.parametrize("name", ["U1", "U2", "U3"])
def test_each_of_three_op_amps_has_its_own_loop(name: str) -> None:
    """Far above the filter each op amp sees its own feedback only: U1, U2 all of its output, U3 one half of it."""
    network = sn.network(RING)
    for opamp in ("U1", "U2", "U3"):
        network = network.with_opamp(opamp, gbw="1 MHz")
    loop = loop_gain(network, name)
    (crossover,) = loop.crossovers()
    assert crossover.f == pytest.approx(0.5e6 if name == "U3" else 1e6, rel=1e-3)
    assert loop.phase_margin() == pytest.approx(90, abs=1.5)
    # all three have the same determinant D: the zeros of every 1 + T are the poles of the network
    poles = sorted((pole.value.real, pole.value.imag) for pole in sn.derive(network).numeric().poles())
    zeros = sorted((zero.value.real, zero.value.imag) for zero in loop.difference.numeric().zeros())
    assert [pytest.approx(place, rel=1e-9) for place in zeros] == poles


# -- against the oracle ----------------------------------------------------------------------------------------


def random_network(random: Random) -> tuple[list[oracle.Part], dict[str, Fraction]]:
    """Three nodes and out with R, L, C between them, and a source behind R0 with R9 beside it, followed by the wire q."""
    nodes = ["out", "a", "b", "c"]
    parts: list[oracle.Part] = []
    values: dict[str, Fraction] = {}

    def put(kind: str, start: str, end: str) -> None:
        name = f"{kind}{len(parts) + 1}"
        values[name] = Fraction(random.randint(1, 9), random.randint(1, 9))
        parts.append((kind, name, start, end, name))

    for k, node in enumerate(nodes):
        put(random.choice("RLC"), node, random.choice([*nodes[:k], "gnd"]))
    for _ in range(4):
        start, end = random.sample([*nodes, "gnd"], 2)
        put(random.choice("RLC"), start, end)
    return parts, values


def written(parts: list[oracle.Part]) -> str:
    return "\n".join(f"{start} -- {name} -- {end}" for _, name, start, end, _ in parts)


@pytest.mark.parametrize("seed", range(40))
def test_law_double_injection_gives_the_return_ratio(seed: int) -> None:
    """T = (Tv Ti - 1)/(Tv + Ti + 2) with voltage in series, current beside, at a wire through which all of it goes.

    R. D. Middlebrook, Measurement of loop gain in feedback systems, Int. J. Electronics 38 (1975), 485-512 (from memory).
    """
    random = Random(seed)
    parts, values = random_network(random)
    values |= {
        "R0": Fraction(random.randint(1, 9)),
        "R9": Fraction(random.randint(1, 9)),
        "mu": Fraction(random.randint(1, 50)),
    }
    plus, minus = random.sample(["out", "a", "b", "c"], 2)
    network = sn.network(f"""
        {written(parts)}
        p -- R0 -- out -- R9 -- gnd
        hold p = mu*({plus} - {minus}) as amp
        drive current into a;  read out
    """).with_values(values)
    loop = loop_gain(network, "amp").numeric()
    side = [("R", "R0", "p", "q", "R0"), ("R", "R9", "q", "gnd", "R9")]
    law = ("hold", "amp", "p", "gnd", f"mu*({plus} - {minus})")
    cut = [*parts, *side, law]
    for s in (Fraction(1), Fraction(2, 3), Fraction(-5, 7), Fraction(11)):
        names = {**values, "s": s}
        ahead, back = (
            oracle.transfer_exact(oracle.Drawing(tuple(cut), ("voltage", "out", "q"), read), names)
            for read in ("out", "q")
        )
        whole = [tuple("out" if entry == "q" else entry for entry in part) for part in cut]
        into_source = oracle.transfer_exact(
            oracle.Drawing(tuple(whole), ("current", "gnd", "out"), "(out - p)/R0 + out/R9"), names
        )
        # with e = v_out - v_q, and 1 A split between what follows the wire and what comes before it
        voltage, current = -back / ahead, into_source / (1 - into_source)
        assert loop.at(s) == (voltage * current - 1) / (voltage + current + 2)


@pytest.mark.parametrize("seed", range(40))
def test_law_return_difference_is_a_quotient_of_determinants(seed: int) -> None:
    """1 + T = D/D0 (Bode), D being any determinant of the network: here the one of the oracle's tableau."""
    random = Random(1000 + seed)
    parts, values = random_network(random)
    values["g"] = Fraction(random.randint(1, 50), random.randint(1, 5))
    start, end = random.sample(["out", "a", "b", "c", "gnd"], 2)
    plus, minus = random.sample(["out", "a", "b", "c"], 2)
    kind = "push" if seed % 2 else "hold"
    law = f"push from {start} to {end}" if kind == "push" else "hold x"
    beside: list[oracle.Part] = (
        [] if kind == "push" else [("R", "R0", "x", "out", "R0"), ("R", "R9", "x", "gnd", "R9")]
    )
    values |= {name: Fraction(3) for _, name, *_ in beside}
    network = sn.network(f"""
        {written([*parts, *beside])}
        {law} = g*({plus} - {minus}) as source
        drive current into a;  read out
    """).with_values(values)
    found = loop_gain(network, "source")
    difference = found.difference.numeric()
    ends = (start, end) if kind == "push" else ("x", "gnd")
    drawing = oracle.Drawing(
        (*parts, *beside, (kind, "source", *ends, f"g*({plus} - {minus})")), ("current", "gnd", "a"), "out"
    )
    for s in (Fraction(1), Fraction(3, 4), Fraction(-7, 3)):
        whole, dead = (
            determinant(oracle.tableau(drawing, {**values, "s": s, "g": g}, Fraction)[0])
            for g in (values["g"], Fraction(0))
        )
        assert difference.at(s) * dead == whole
    assert (1 + found.numeric().at(Fraction(1, 7))) == difference.at(Fraction(1, 7))


def determinant(matrix: list[list[Fraction]]) -> Fraction:
    rows = [list(row) for row in matrix]
    total = Fraction(1)
    for k in range(len(rows)):
        pivot = next((r for r in range(k, len(rows)) if rows[r][k]), None)
        if pivot is None:
            return Fraction(0)
        if pivot != k:
            rows[k], rows[pivot], total = rows[pivot], rows[k], -total
        total *= rows[k][k]
        for row in rows[k + 1 :]:
            factor = row[k] / rows[k][k]
            if factor:
                for c in range(k, len(rows)):
                    row[c] -= factor * rows[k][c]
    return total


@pytest.mark.parametrize("seed", range(30))
def test_law_the_margins_lead_to_the_edge(seed: int) -> None:
    """With the gain changed by a gain limit, poles lie on the jw axis or have gone to infinity; a little less, they do not."""
    random = Random(2000 + seed)
    parts, values = random_network(random)
    plus, minus = random.sample(["out", "a", "b", "c"], 2)
    values |= {"R0": Fraction(1), "R9": Fraction(1), "mu": Fraction(1, 20)}
    network = sn.network(f"""
        {written(parts)}
        p -- R0 -- out -- R9 -- gnd;  hold p = mu*({plus} - {minus}) as amp
        drive current into a;  read out
    """).with_values(values)
    loop = loop_gain(network, "amp")
    try:
        limits = [limit for limit in loop.gain_limits() if limit.factor > 1]
    except UndefinedError:
        assert loop.stability.verdict != "stable" or not loop.T.numerator
        return
    edge = min((limit.factor for limit in limits), default=1e6)
    for share, verdict in ((0.999, "stable"), (1.001, "not")):
        if share > 1 and not limits:
            continue
        mu = Fraction(edge * share).limit_denominator(10**12) * values["mu"]
        found = loop_gain(network.with_values(mu=mu), "amp").stability.verdict
        assert (found == "stable") == (verdict == "stable")
