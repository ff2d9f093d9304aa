"""Noise: published figures and closed forms, Nyquist's law, quadrature of an oracle, refusals."""

from __future__ import annotations

import itertools
import math
import random
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

import numpy as np
import pytest
from scipy.integrate import quad

import symnet as sn
from symnet.errors import MissingValueError, NotationError, UndefinedError, UnknownNameError, WiringError
from symnet.response.noise import Noise
from symnet.response.noise_formula import NoiseFormula

BOLTZMANN = Fraction("1.380649e-23")  # J/K, exact: SI, 26th CGPM 2018
KT = 300 * BOLTZMANN


def numbers(net: str | sn.Network, *args: Any, **how: Any) -> Noise:
    found = sn.noise(sn.network(net) if isinstance(net, str) else net, *args, **how)
    assert isinstance(found, Noise)
    return found


def symbols(net: str, *args: Any, **how: Any) -> NoiseFormula:
    found = sn.noise(sn.network(net), *args, **how)
    assert isinstance(found, NoiseFormula)
    return found


def rc(R: str = "10k", C: str = "1 nF") -> str:
    return f"in -- R1 = {R} -- out -- C1 = {C} -- gnd; drive in; read out"


TWO_RC = """
    in -- R1 = 10k -- a -- R2 = 10k -- out; a -- C1 = 1 nF -- gnd; out -- C2 = 1 nF -- gnd; drive in; read out
"""
INVERTING = """
    in -- R1 = 1k -- m -- R2 = 10k -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out
"""


# -- the figures of kT/C ---------------------------------------------------------------------------------------


@pytest.mark.parametrize("R", ["1 ohm", "10k", "1 Mohm"])
def test_kt_over_c_for_any_resistance(R: str) -> None:
    """1 nF at 300 K: 2.035 uV rms, sqrt(kT/C) (common practice, no source)."""
    found = numbers(rc(R))
    assert found.mean_square == KT / Fraction("1e-9")
    assert found.rms == pytest.approx(2.035e-6, abs=5e-10)
    assert str(found.formula.total) == "mean square at out = k_B*T/C1"


def test_two_sections_have_kt_over_c_at_the_last_capacitor() -> None:
    found = numbers(TWO_RC)
    assert found.mean_square == KT / Fraction("1e-9")
    assert str(found.formula.total) == "mean square at out = k_B*T/C2"
    assert [c.name for c in found.contributors] == ["R2", "R1"]
    assert found.share(found.contributors[0]) == pytest.approx(2 / 3, rel=1e-15)


def test_noise_bandwidth_of_first_order_is_half_pi_times_f3db() -> None:
    found = numbers(rc())
    (crossing,) = sn.f3db(sn.derive(found.network))
    assert found.bandwidth == pytest.approx(math.pi / 2 * crossing.f, rel=1e-14)
    assert found.bandwidth == 25000.0  # 1/(4RC)


def test_noise_bandwidth_of_second_order() -> None:
    """Low-pass pi/2 f0 Q, against DC; band-pass pi/2 f0/Q, against its peak (common practice, no source)."""
    text = "in -- R1 = 100 -- a -- L1 = 1 mH -- out -- C1 = 1 nF -- gnd; drive in; read out; read v_R1"
    f0, q = 1 / (2 * math.pi * math.sqrt(1e-12)), math.sqrt(1e-3 / 1e-9) / 100
    low, band = numbers(text, "out"), numbers(text, "v_R1", band="up to 1 MHz")
    assert low.bandwidth == pytest.approx(math.pi / 2 * f0 * q, rel=1e-13)
    assert low.reference.where == "at DC"
    assert band.reference.f == pytest.approx(f0, rel=1e-12)
    assert band.bandwidth == pytest.approx(math.pi / 2 * f0 / q, rel=1e-13)


def test_equipartition() -> None:
    """Every capacitor and every inductor of a network at one temperature has kT/2 on average (H. Nyquist 1928)."""
    text = "R1 = 33; C1 = 1 nF; L1 = 2 mH; R2 = 1k; in -- R1 + L1 -- out; out -- C1 || R2 -- gnd; drive in"
    assert numbers(text, "out").mean_square == KT / Fraction("1e-9")
    assert numbers(text, "i_L1").mean_square == KT / Fraction("2e-3")


# -- Nyquist -----------------------------------------------------------------------------------------------------


def passive_rc(seed: int) -> str:
    rng = random.Random(seed)
    nodes = ["gnd", "a", "b", "c", "d"][: rng.randint(2, 5)]
    lines = []
    for k, node in enumerate(nodes[1:], 1):
        kinds = rng.choice(["R", "C", "C", "RC"])
        lines += [(kind, rng.choice(nodes[:k]), node) for kind in kinds]
    for _ in range(rng.randint(1, 4)):
        one, two = rng.sample(nodes, 2)
        lines.append((rng.choice("RC"), one, two))
    one, two = rng.sample(nodes, 2)
    lines.append(("R", one, two))
    text = []
    for k, (kind, one, two) in enumerate(lines):
        size = f"{rng.randint(1, 99)} {'kohm' if kind == 'R' else 'nF'}"
        text.append(f"{one} -- {kind}{k} = {size} -- {two}")
    return "\n".join(text)


@pytest.mark.parametrize("seed", range(60))
def test_noise_on_a_capacitor_by_nyquists_law(seed: int) -> None:
    """<v^2> = kT (lim s Z at infinity - lim s Z at 0) across every capacitor of a passive RC network, exactly.

    Z is what an outsider sees between its leads. The second term is the charge that no resistor can move: kT/C alone
    holds only where no path of capacitors is left with all resistors open (from Nyquist's 4kT Re Z, closed around the
    right half plane; derivation, no source).
    """
    net = sn.network(passive_rc(seed))
    seen = 0
    for part in net.branches():
        if part.kind != "C":
            continue
        pair = f"{part.start} - {part.end}" if "gnd" not in part.nodes else (set(part.nodes) - {"gnd"}).pop()
        z = sn.driving_point(net, pair).numeric()
        at_infinity = z.num[-1] / z.den[-1] if len(z.num) == len(z.den) - 1 else Fraction(0)
        at_zero = z.num[0] / z.den[1] if not z.den[0] else Fraction(0)
        assert numbers(net, pair).mean_square == KT * (at_infinity - at_zero)
        seen += 1
    assert seen or all(part.kind == "R" for part in net.branches())


def test_a_charge_that_nothing_moves_is_told() -> None:
    net = sn.network(
        "a -- C1 = 1 nF -- b -- C2 = 1 nF -- gnd; a -- R1 = 1k -- gnd; drive current into a; read b"
    )
    found = numbers(net)
    # from the Z of Nyquist's law: the noise of C1 and C2 in series, 0.5 nF, divided by two
    assert found.mean_square == KT / Fraction("0.5e-9") / 4
    assert any("a mode at s = 0" in said and "never settles" in said for said in found.assumptions)


# -- against quadrature of an oracle -------------------------------------------------------------------------


@dataclass(frozen=True)
class Sketch:
    """Branches as (kind, node, node, value), transconductances as (from, to, plus, minus, gm); node 0 is gnd."""

    nodes: int
    branches: tuple[tuple[str, int, int, float], ...]
    transconductances: tuple[tuple[int, int, int, int, float], ...]

    def text(self) -> str:
        name = ["gnd", "a", "b", "c", "d"]
        lines = [
            f"{name[p]} -- {kind}{k} -- {name[q]}; {kind}{k} = {value!r}"
            for k, (kind, p, q, value) in enumerate(self.branches)
        ]
        for p, q, plus, minus, gm in self.transconductances:
            a, b = ("0" if n == 0 else name[n] for n in (plus, minus))
            lines.append(f"push from {name[p]} to {name[q]} = {gm!r} S*({a} - {b})".replace("(0 - ", "(-"))
        return "\n".join(lines).replace(" - 0)", ")")

    def density(self, w: Any, read: int) -> Any:
        """The sum of 4kT/R |transimpedance|^2, by node equations in doubles, solved at every frequency."""
        w = np.atleast_1d(w)
        y = np.zeros((len(w), self.nodes + 1, self.nodes + 1), dtype=complex)
        for kind, p, q, value in self.branches:
            admittance = {"R": 1 / value + 0 * w, "C": 1j * w * value, "L": 1 / (1j * w * value)}[kind]
            for row, column, sign in ((p, p, 1), (q, q, 1), (p, q, -1), (q, p, -1)):
                y[:, row, column] += sign * admittance
        for p, q, plus, minus, gm in self.transconductances:
            for row, column, sign in ((p, plus, 1), (p, minus, -1), (q, plus, -1), (q, minus, 1)):
                y[:, row, column] += sign * gm
        inverse = np.linalg.inv(y[:, 1:, 1:])
        way = np.concatenate([np.zeros((len(w), 1)), inverse[:, read - 1, :]], axis=1)
        resistors = [(p, q, value) for kind, p, q, value in self.branches if kind == "R"]
        return sum(
            4 * 1.380649e-23 * 300 / value * np.abs(way[:, p] - way[:, q]) ** 2 for p, q, value in resistors
        )


def sketch(seed: int) -> Sketch:
    """Every node has R and C to gnd, so that all noise falls off; R, L, C and transconductances between nodes."""
    rng = random.Random(seed)
    nodes = rng.randint(1, 4)
    size = {"R": (100, 100_000), "C": (1e-10, 1e-8), "L": (1e-4, 1e-2)}

    def value(kind: str) -> float:
        low, high = size[kind]
        return float(f"{low * (high / low) ** rng.random():.3g}")

    branches = [(kind, 0, k, value(kind)) for k in range(1, nodes + 1) for kind in "RC"]
    for _ in range(rng.randint(1, 4)):
        p, q = rng.sample(range(nodes + 1), 2)
        kind = rng.choice("RRCL")
        branches.append((kind, p, q, value(kind)))
    active = []
    for _ in range(rng.randint(0, 2)):
        p, q = rng.sample(range(nodes + 1), 2)
        plus, minus = rng.sample(range(nodes + 1), 2)
        active.append((p, q, plus, minus, float(f"{10 ** rng.uniform(-5, -3):.3g}")))
    return Sketch(nodes, tuple(branches), tuple(active))


def stable_sketches(count: int) -> list[Sketch]:
    """Those of the first seeds whose natural frequencies, by the eigenvalues of a state matrix, are to the left."""
    found: list[Sketch] = []
    seed = 0
    while len(found) < count:
        seed += 1
        one = sketch(seed)
        # C dv/dt = -G v - i_L, L di/dt = v across: eigenvalues of the state matrix
        coils = [branch for branch in one.branches if branch[0] == "L"]
        size = one.nodes
        c, a = (
            np.zeros((size + len(coils), size + len(coils))),
            np.zeros((size + len(coils), size + len(coils))),
        )
        for kind, p, q, value in one.branches:
            for row, column, sign in ((p, p, 1), (q, q, 1), (p, q, -1), (q, p, -1)):
                if row and column and kind in "RC":
                    (c if kind == "C" else a)[row - 1, column - 1] += sign * (
                        value if kind == "C" else -1 / value
                    )
        for p, q, plus, minus, gm in one.transconductances:
            for row, column, sign in ((p, plus, -1), (p, minus, 1), (q, plus, 1), (q, minus, -1)):
                if row and column:
                    a[row - 1, column - 1] += sign * gm
        for k, (_, p, q, value) in enumerate(coils, size):
            c[k, k] = value
            for node, sign in ((p, 1), (q, -1)):
                if node:
                    a[k, node - 1], a[node - 1, k] = sign, -sign
        natural = np.linalg.eigvals(np.linalg.solve(c, a))
        if natural.real.max() < -1e-3 * abs(natural).min() and (natural.real / abs(natural)).max() < -0.01:
            found.append(one)
    return found


STABLE = stable_sketches(50)


@pytest.mark.parametrize("number", range(50))
def test_integrals_over_all_frequencies_against_quadrature(number: int) -> None:
    """To 1e-10. The rule of trapezoids over ln w: for what is analytic in a strip its error falls exponentially."""
    one = STABLE[number]
    h = 0.002
    ln_w = np.arange(math.log(1e-10), math.log(1e23), h)
    w = np.exp(ln_w)
    total = float(np.sum(one.density(w, 1) * w)) * h / (2 * math.pi)
    assert numbers(one.text(), "a").rms ** 2 == pytest.approx(total, rel=1e-10)


@pytest.mark.parametrize("number", range(0, 50, 5))
def test_integrals_over_a_band_against_quadrature(number: int) -> None:
    one = STABLE[number]
    edges = np.geomspace(100, 1e6, 30)
    parts = [
        quad(lambda f: float(one.density(2 * math.pi * f, 1)[0]), a, b, epsabs=0, epsrel=1e-12)[0]
        for a, b in itertools.pairwise(edges)
    ]
    found = numbers(one.text(), "a", band="100 Hz to 1 MHz")
    assert float(found.mean_square) == pytest.approx(sum(parts), rel=1e-10)


def test_spectral_density_against_the_oracle() -> None:
    for one in STABLE[:10]:
        f = np.geomspace(1, 1e8, 17)
        found = numbers(one.text(), "a").density(f)
        assert found == pytest.approx(np.sqrt(one.density(2 * math.pi * f, 1)), rel=1e-10)


# -- op amps -----------------------------------------------------------------------------------------------------


def test_inverting_stage_against_the_textbook_sum() -> None:
    """en^2 (1 + R2/R1)^2 + (in R2)^2 + 4kT R1 (R2/R1)^2 + 4kT R2 (common practice, no source)."""
    found = numbers(INVERTING, band="up to 20 kHz", U1="en = 5 nV/rtHz, in = 1 pA/rtHz")
    en, i_n = Fraction("5e-9"), Fraction("1e-12")
    expected = {
        "en of U1": en**2 * 11**2,
        "in of U1, minus": (i_n * 10_000) ** 2,
        "R1": 4 * KT * 1000 * 100,
        "R2": 4 * KT * 10_000,
    }
    assert {c.name: c.density.num[0] for c in found.contributors} == expected
    assert found.density(123.0) == pytest.approx(math.sqrt(sum(expected.values())), rel=1e-14)
    assert float(found.mean_square) == pytest.approx(float(20_000 * sum(expected.values())), rel=1e-15)
    assert found.input_density(1000.0) == pytest.approx(found.density(1000.0) / 10, rel=1e-15)
    assert found.input_rms == pytest.approx(found.rms / 10, rel=1e-15)


def test_non_inverting_stage_with_a_source_resistance() -> None:
    """At the read, with G = 1 + R2/R1: (en G)^2 + (in_plus Rs G)^2 + 4kT Rs G^2 + (in_minus R2)^2 + ..."""
    text = """
        in -- Rs = 2k -- p; gnd -- R1 = 1k -- m -- R2 = 9k -- out; U1: opamp(plus=p, minus=m, out=out)
        drive in; read out
    """
    found = numbers(
        text,
        band="up to 1 kHz",
        temperature="27 degC",
        U1="en = 4 nV/rtHz, in_plus = 2 pA/rtHz, in_minus = 3 pA/rtHz",
    )
    four_kt = 4 * BOLTZMANN * Fraction("300.15")
    assert {c.name: c.density.num[0] for c in found.contributors} == {
        "en of U1": Fraction("4e-9") ** 2 * 100,
        "in of U1, plus": (Fraction("2e-12") * 2000) ** 2 * 100,
        "in of U1, minus": (Fraction("3e-12") * 9000) ** 2,
        "Rs": four_kt * 2000 * 100,
        "R1": four_kt * 1000 * 81,
        "R2": four_kt * 9000,
    }


def test_flicker_noise_over_a_band() -> None:
    """A follower: en^2 (f2 - f1 + corner ln(f2/f1)) (common practice, no source)."""
    text = "in -- R1 = 0 -- p; U1: opamp(plus=p, minus=out, out=out); drive in; read out"
    found = numbers(text, band="0.1 Hz to 10 Hz", U1="en = 5 nV/rtHz, corner = 40 Hz")
    assert float(found.mean_square) == pytest.approx(25e-18 * (9.9 + 40 * math.log(100)), rel=1e-14)
    assert found.density(40.0) == pytest.approx(5e-9 * math.sqrt(2), rel=1e-14)
    assert found.density(0.0) == math.inf
    assert [c.name for c in found.contributors] == ["en of U1"]


def test_flicker_noise_through_a_pole_without_an_upper_limit() -> None:
    """Integral of (1 + c/f)/(1 + (f/p)^2) from a up: p (pi/2 - atan(a/p)) + (c/2) ln(1 + (p/a)^2) (any table)."""
    text = f"in -- R1 = 1e-9 -- p; U1: opamp(plus=p, minus=out, out=out, gbw={2 * math.pi * 1e3!r} rad/s); drive in; read out"
    found = numbers(text, band="from 10 Hz", U1="en = 5 nV/rtHz, corner = 40 Hz")
    amp = next(c for c in found.contributors if c.name == "en of U1")
    expected = 25e-18 * (1e3 * (math.pi / 2 - math.atan(0.01)) + 20 * math.log(1 + 1e4))
    assert float(amp.mean_square) == pytest.approx(expected, rel=1e-13)


def test_a_real_op_amp_as_its_gain_grows() -> None:
    """Law: the richer model has the simpler one as its limit; en stands in front of what the model holds."""
    real = INVERTING.replace("out=out", "out=out, gain=1e9, Rin=1 Mohm, Rout=50")
    data = {"band": "up to 20 kHz", "U1": "en = 5 nV/rtHz, in = 1 pA/rtHz, corner = 10 Hz"}
    data["band"] = "20 Hz to 20 kHz"
    one, other = numbers(INVERTING, **data), numbers(real, **data)
    assert one.rms == pytest.approx(other.rms, rel=1e-6)
    assert any("U1.Rin, U1.Rout" in said for said in other.assumptions)


def test_an_op_amp_inside_a_section_is_given_by_its_whole_name() -> None:
    text = """
        define stage(a, b)
            a -- R1 = 1k -- m -- R2 = 10k -- b
            U1: opamp(plus=gnd, minus=m, out=b{})
        done
        A1: stage(a=in, b=out); drive in; read out
    """
    for real in ("", ", gbw=1 GHz"):
        found = numbers(text.format(real), band="up to 1 kHz", amplifiers={"A1.U1": "en = 5 nV/rtHz"})
        assert {c.name for c in found.contributors} == {"A1.R1", "A1.R2", "en of A1.U1"}
        assert found.density(0.0, "en of A1.U1") == pytest.approx(55e-9, rel=1e-6)


def test_transistors_say_what_is_left_out() -> None:
    text = """
        in -- Rs = 50 -- b; vc -- RC = 1k -- gnd; vc -- C1 = 1 nF -- gnd; drive in; read vc
        Q1: bjt(collector=vc, base=b, emitter=gnd, gm=40 mS, Rpi=2500, Rb=100)
    """
    found = numbers(text)
    assert {c.name for c in found.contributors} == {"Rs", "RC", "Q1.Rb"}
    assert any("shot and channel noise" in said and "Q1" in said for said in found.assumptions)
    assert any("Q1.Rpi" in said for said in found.assumptions)


# -- branches, currents ------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    "branch",
    ["Z1 = 1000 ohm/(1 + s*1000 ohm*1 nF)", "Y1 = 1/(1000 ohm) + s*1 nF"],
)
@pytest.mark.parametrize("read", ["a", "v_{0}", "a + 0 V/A*i_{0}"])
def test_a_branch_that_is_an_expression(branch: str, read: str) -> None:
    """4kT Re Z of a resistor beside a capacitor: kT/C between its ends (Nyquist), however it is read."""
    name = branch[:2]
    found = numbers(f"a -- {name} -- gnd; {branch}; drive current into a", read.format(name))
    assert found.mean_square == KT / Fraction("1e-9")


def test_a_lossless_branch_makes_no_noise() -> None:
    found = numbers("in -- R1 = 1k -- a; a -- Z1 -- gnd; Z1 = 1/(s*1 nF); drive in; read a")
    assert [c.name for c in found.contributors] == ["R1"]
    assert found.mean_square == KT / Fraction("1e-9")


def test_the_current_through_a_resistor_includes_its_own_noise() -> None:
    """Shorted: 4kT/R; with a capacitor the same current goes through both: i_R1 = -i_C1 in the loop."""
    shorted = numbers("in -- R1 = 1k -- gnd; drive in; read i_R1", band="up to 1 kHz")
    assert shorted.density(5.0) == pytest.approx(math.sqrt(4 * float(KT) / 1000), rel=1e-15)
    loop = "in -- R1 = 1k -- out -- C1 = 1 nF -- gnd; drive in"
    one, other = (numbers(loop, read, band="up to 1 MHz").mean_square for read in ("i_R1", "i_C1"))
    assert one == other
    across = numbers(loop, "v_R1 + 0 ohm*i_R1")
    assert across.mean_square == KT / Fraction("1e-9")


def test_a_negative_resistor_is_left_out_and_told() -> None:
    found = numbers("in -- R1 = 1k -- a; a -- R2 = -5k -- gnd; a -- C1 = 1 nF -- gnd; drive in; read a")
    assert [c.name for c in found.contributors] == ["R1"]
    assert any("R2" in said and "negative" in said for said in found.assumptions)


# -- figures beside the rms value --------------------------------------------------------------------------------


def test_signal_to_noise_and_peak_to_peak() -> None:
    found = numbers(rc(), signal="1 mV")
    assert found.signal_to_noise == pytest.approx(20 * math.log10(1e-3 / found.rms), rel=1e-14)
    f = 1 / (2 * math.pi * 1e-5)
    at_corner = numbers(rc(), signal=f"1 mV at {f!r} Hz")
    assert at_corner.signal_to_noise == pytest.approx(
        found.signal_to_noise - 20 * math.log10(math.sqrt(2)), rel=1e-12
    )
    assert found.peak_to_peak(6.6) == pytest.approx(6.6 * found.rms, rel=1e-15)
    with pytest.raises(UndefinedError, match="no signal"):
        _ = numbers(rc()).signal_to_noise
    undriven = numbers("gnd -- R1 = 1k -- a -- C1 = 1 nF -- gnd", "a", signal="1 mV")
    assert undriven.signal_to_noise == pytest.approx(found.signal_to_noise, rel=1e-14)


def test_what_is_referred_to_the_drive_needs_one() -> None:
    found = numbers("gnd -- R1 = 1k -- a -- C1 = 1 nF -- gnd", "a")
    for name in ("reference", "bandwidth", "input_rms"):
        with pytest.raises(UndefinedError, match="no drive"):
            getattr(found, name)
    two = numbers(
        "in -- R1 = 1k -- a -- C1 = 1 nF -- gnd; drive in as V1; drive current into a as I1; read a"
    )
    with pytest.raises(UndefinedError, match="no drive"):
        _ = two.bandwidth
    chosen = numbers(two.network, drive="I1")
    assert chosen.mean_square == two.mean_square
    assert chosen.input_density(0.0) == pytest.approx(two.density(0.0) / 1000, rel=1e-14)


def test_high_pass_is_referred_to_high_frequencies() -> None:
    text = "in -- C1 = 1 nF -- out -- R1 = 10k -- gnd; out -- R2 = 10k -- x -- C2 = 1 pF -- gnd; drive in; read out; read x"
    found = numbers(text, "out", band="up to 1 MHz")
    assert found.reference.where == "at high frequencies"
    assert found.reference.gain == pytest.approx(1.0)
    with pytest.raises(UndefinedError, match="fall off"):
        _ = found.bandwidth


def test_temperature_is_a_factor() -> None:
    assert numbers(rc(), temperature="27 degC").mean_square == BOLTZMANN * Fraction("300.15") / Fraction(
        "1e-9"
    )
    assert numbers(rc(), temperature="0 K").rms == 0


# -- refusals ----------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (
            "in -- R1 = 1k -- a; a -- R2 = -500 -- gnd; a -- C1 = 1 nF -- gnd; drive in; read a",
            "right half plane",
        ),
        (
            "gnd -- R1 = 1k -- m -- C1 = 1 nF -- out; U1: opamp(plus=gnd, minus=m, out=out); read out",
            "a mode at s = 0",
        ),
        # a Wien network with a gain of exactly 3 just oscillates
        (
            "out -- R1 = 1k + C1 = 1 nF -- p; p -- R2 = 1k || C2 = 1 nF -- gnd; hold out = 3*p; read out".replace(
                "R1 = 1k + C1 = 1 nF", "R1 + C1"
            ).replace("R2 = 1k || C2 = 1 nF", "R2 || C2")
            + "; R1, R2 = 1k; C1, C2 = 1 nF",
            "on the jw axis",
        ),
        # an unstable loop that the read does not see
        (
            """in -- R1 = 1k -- out -- C1 = 1 nF -- gnd; x -- C2 = 1 nF -- gnd; x -- R3 = -1k -- gnd; x -- R2 = 5k -- in
            drive in; read out""",
            "which the read does not show",
        ),
        ("in -- R1 = 1k -- out -- R2 = 1k -- gnd; drive in; read out", "infinite"),
        (
            "in -- L1 = 1 mH -- out -- C1 = 1 nF -- gnd; drive in; read out",
            "nothing in this network makes noise",
        ),
    ],
)
def test_no_number_for_what_has_none(text: str, message: str) -> None:
    with pytest.raises(UndefinedError, match=message):
        sn.noise(sn.network(text))


def test_a_band_does_not_make_an_unstable_network_stable() -> None:
    text = "in -- R1 = 1k -- a; a -- R2 = -500 -- gnd; a -- C1 = 1 nF -- gnd; drive in; read a"
    with pytest.raises(UndefinedError, match="right half plane"):
        sn.noise(sn.network(text), band="up to 1 MHz")


def test_flicker_noise_needs_a_lower_limit() -> None:
    data = "en = 5 nV/rtHz, corner = 40 Hz"
    filtered = INVERTING.replace("R2 = 10k -- out", "R2 = 10k -- out; m -- C2 = 1 nF -- out").replace(
        "out=out", "out=out, gbw=1 MHz"
    )
    with pytest.raises(UndefinedError, match="diverges at 0 Hz"):
        sn.noise(sn.network(filtered), U1=data)
    with pytest.raises(UndefinedError, match="where the band begins"):
        sn.noise(sn.network(filtered), U1=data, band="up to 1 kHz")
    with pytest.raises(UndefinedError, match="infinite"):
        sn.noise(sn.network(INVERTING), U1="en = 5 nV/rtHz", band="from 1 Hz")


def test_names_and_reads_that_are_not_there() -> None:
    net = sn.network(INVERTING)
    with pytest.raises(UnknownNameError, match="did you mean U1"):
        sn.noise(net, U11="en = 5 nV/rtHz")
    with pytest.raises(UnknownNameError):
        sn.noise(sn.network(rc()), U1="en = 5 nV/rtHz")
    with pytest.raises(NotationError, match="outt"):
        sn.noise(net, "outt")
    with pytest.raises(WiringError, match="no read"):
        sn.noise(sn.network("in -- R1 = 1k -- a -- C1 = 1n -- gnd; drive in"))
    with pytest.raises(UnknownNameError):
        numbers(rc()).density(1.0, "R9")
    with pytest.raises(MissingValueError, match="R1"):
        sn.noise(sn.network("in -- R1 -- out -- C1 = 1 nF -- gnd; drive in; read out"), band="up to 1 MHz")


def test_what_is_assumed_is_said() -> None:
    found = numbers(INVERTING, band="up to 1 kHz")
    said = "\n".join(found.assumptions)
    for words in ("300 K", "one-sided", "noiseless, no noise data given: U1", "only the stated band"):
        assert words in said


# -- symbols -----------------------------------------------------------------------------------------------------


def test_closed_forms_in_symbols() -> None:
    """kT/C by Nyquist's law; the sections share it by their resistors (derivation by hand, no source)."""
    found = symbols("in -- R1 -- a -- R2 -- out; a -- C1 -- gnd; out -- C2 -- gnd; drive in; read out")
    assert str(found.total) == "mean square at out = k_B*T/C2"
    assert {name: str(each).partition(" = ")[2] for name, each in found.contributors} == {
        "R1": "k_B*T*R1/(R1*C1 + (R1 + R2)*C2)",
        "R2": "k_B*T*(R2 + R1*C1/C2)/(R1*C1 + (R1 + R2)*C2)",
    }
    assert not found.conditions
    assert str(found.total.dimension) == "V^2"


def test_a_formula_and_the_numbers_agree() -> None:
    """Orders 1 to 4: RC ladders, from the third section on of equal parts; read at the first section."""
    for count in range(1, 5):
        text = "; ".join(f"n{k} -- R{k} -- n{k + 1} -- C{k} -- gnd" for k in range(count))
        values = "; ".join(
            f"R{k} = {k + 1}k; C{k} = {k + 3} nF" if k < 2 else f"R{k} = R0; C{k} = C0" for k in range(count)
        )
        found = numbers(f"{text}; {values}; drive n0; read n1")
        assert found.formula.order == count
        total = found.formula.total.numeric()
        assert total.num[0] / total.den[0] == found.mean_square


def test_a_formula_with_op_amp_noise() -> None:
    text = """
        in -- R1 = 1k -- m -- R2 -- out; R2 = 10k; m -- C2 = 100 pF -- out
        U1: opamp(plus=gnd, minus=m, out=out, gbw=10 MHz); drive in; read out
    """
    found = numbers(text, U1="en = 5 nV/rtHz, in = 1 pA/rtHz")
    assert "en_U1^2" in str(found.formula.total)
    total = found.formula.total.numeric()
    assert total.num[0] / total.den[0] == found.mean_square


def test_a_condition_of_stability_is_given_with_the_formula() -> None:
    """Sallen and Key with a gain K: stable if and only if (R1 + R2) C2 + (1 - K) R1 C1 > 0 (textbook, from memory)."""
    found = symbols(
        "in -- R1 -- a -- R2 -- p; a -- C1 -- out; p -- C2 -- gnd; hold out = K*p; drive in; read out"
    )
    (condition,) = found.conditions
    R1, R2, C1, C2, K = (
        condition.ring.gens[[*map(str, condition.ring.symbols)].index(name)]
        for name in ("R1", "R2", "C1", "C2", "K")
    )
    assert condition == (R1 + R2) * C2 + (1 - K) * R1 * C1
    assert "stable where the conditions hold" in "\n".join(found.assumptions)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("gnd -- R1 -- m -- C1 -- out; U1: opamp(plus=gnd, minus=m, out=out); read out", "a mode at s = 0"),
        ("in -- R1 -- out -- R2 -- gnd; drive in; read out", "infinite"),
        ("a -- R1 -- gnd; a -- C1 -- gnd; push into a = G*a; G = 2/R1; read a", "to the right"),
    ],
)
def test_formulas_that_do_not_exist(text: str, message: str) -> None:
    with pytest.raises(UndefinedError, match=message):
        sn.noise(sn.network(text))


def test_names_that_are_taken_are_left_alone() -> None:
    found = symbols("in -- R1 -- a -- C1 -- gnd; hold out = T*a; drive in; read out")
    assert str(found.total) == "mean square at out = T^2*k_B*T_/C1"
