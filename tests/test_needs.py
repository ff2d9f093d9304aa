"""What practitioners ran into, as worked figures: each number was computed apart from this package.

One class for one need. Networks are invented; values are round so that a reader can check them by hand.
"""

from __future__ import annotations

from fractions import Fraction
from math import log10, pi, sqrt

import pytest

import symnet as sn
from symnet.circuit.notes import code_note, notes
from symnet.errors import NotationError, SingularError, WiringError
from symnet.exact.ratio import Ratio
from symnet.exact.transfer import Transfer
from symnet.response.frequency import phase
from symnet.shape.families import Prototype
from symnet.shape.figures import f3db, turning_points
from symnet.shape.forms import Style
from tests.reference.comparing import assert_same_figure, assert_same_function

TWO_SECTIONS = """
    in -- R1 -- x -- R2 -- out
    x -- C1 -- gnd
    out -- C2 -- gnd
    drive in
    read out
"""
EQUAL = "R1, R2 = 1 kohm;  C1, C2 = 100 nF"
MULTIPLE_FEEDBACK = """
    in -- R1 -- x -- R3 -- m -- C2 -- out
    x -- R2 -- out
    x -- C1 -- gnd
    U1: opamp(plus=gnd, minus=m, out=out)
    drive in
    read out
"""


def derive(text: str, **values: str) -> Transfer:
    H: Transfer = sn.derive(sn.network(text).with_values(values))
    return H


class TestLoading:
    """Loading between stages must be impossible to forget (N1)."""

    def test_h_of_two_sections_and_the_term_that_a_product_of_sections_lacks(self) -> None:
        H = derive(TWO_SECTIONS)
        assert_same_function(H, "1/(1 + s*(R1*C1 + R1*C2 + R2*C2) + s^2*R1*R2*C1*C2)")
        buffered = derive(TWO_SECTIONS.replace("x -- R2", "x;  b -- R2") + "hold b = x as buffer")
        assert_same_function(buffered, "1/((1 + s*R1*C1)*(1 + s*R2*C2))")
        missing = H.denominator - buffered.denominator.set_ring(H.ring)
        assert str(missing) == "s*R1*C2"

    def test_figures_at_1_khz(self) -> None:
        H = sn.derive(sn.network(TWO_SECTIONS + EQUAL)).numeric()
        at_1_khz = 2j * pi * 1000
        assert abs(H(at_1_khz)) == pytest.approx(0.5051, abs=5e-5)
        assert phase(H, 2 * pi * 1000) == pytest.approx(-72.20, abs=5e-3)
        product = Ratio.of([10**8], [10**8, 20000, 1])
        assert abs(product(at_1_khz)) == pytest.approx(0.7170, abs=5e-5)
        assert phase(product, 2 * pi * 1000) == pytest.approx(-64.28, abs=5e-3)
        (loaded,) = f3db(H)
        (ideal,) = f3db(product)
        assert loaded.w.value == pytest.approx(0.3742 * 1e4, rel=2e-4)  # 0.3742/(RC), not 0.6436/(RC)
        assert ideal.w.value == pytest.approx(0.6436 * 1e4, rel=2e-4)


class TestReadableForms:
    """One standard form, on request another (N2): from R2 wt/(R1 wt + s (R1 + R2))."""

    H = derive("in -- R1 -- m -- R2 -- out; hold out = -(wt/s)*m; drive in; read out")

    def test_constant_term_1(self) -> None:
        form = sn.form(self.H, "constant term 1")
        assert len(form.denominator) == 2
        assert_same_figure(form.denominator[0], "1")
        assert_same_figure(form.denominator[1], "(R1 + R2)/(wt*R1)")
        assert_same_figure(form.gain, "-R2/R1")

    def test_monic(self) -> None:
        form = sn.form(self.H, "monic")
        assert len(form.denominator) == 2
        assert_same_figure(form.denominator[0], "wt*R1/(R1 + R2)")
        assert_same_figure(form.denominator[1], "1")
        assert_same_figure(form.gain, "-wt*R2/(R1 + R2)")

    @pytest.mark.parametrize(
        "style", ["coefficients", "constant term 1", "monic", "poles and zeros", "w0/Q", "time constants"]
    )
    def test_every_form_is_the_same_function(self, style: Style) -> None:
        numbers = self.H.with_values(R1="1 kohm", R2="10 kohm", wt="6.3e6 rad/s").numeric()
        form = sn.form(numbers, style)
        s = 3e5 + 2e6j
        num, den = (
            sum((c.value or 0) * s**k for k, c in enumerate(part))
            for part in (form.numerator, form.denominator)
        )
        assert (form.gain.value or 0) * s**form.power * num / den == pytest.approx(numbers(s), rel=1e-12)

    def test_powers_of_s_rise_in_numerator_and_denominator_alike(self) -> None:
        H = derive("in -- R1 + C1 -- out -- R2 || C2 -- gnd; drive in; read out")
        form = sn.form(H, "coefficients")
        for found, wanted in zip(form.numerator, ("0", "R2*C1"), strict=True):
            assert_same_figure(found, wanted)
        for found, wanted in zip(
            form.denominator, ("1", "R1*C1 + R2*C1 + R2*C2", "R1*R2*C1*C2"), strict=True
        ):
            assert_same_figure(found, wanted)


class TestSourceAndLoad:
    """A source or load resistance left out (N6, D6)."""

    IDEAL = "in -- L1 -- x -- L2 -- o; x -- C1 -- gnd; o -- RL -- gnd; drive in; read o"
    REAL = "in -- Rs -- a -- L1 -- x -- L2 -- o; x -- C1 -- gnd; o -- RL -- gnd; drive in; read o"

    def test_both_formulas(self) -> None:
        assert_same_function(derive(self.IDEAL), "RL/(L1*L2*C1*s^3 + L1*C1*RL*s^2 + (L1 + L2)*s + RL)")
        assert_same_function(
            derive(self.REAL),
            "RL/(L1*L2*C1*s^3 + C1*(L1*RL + L2*Rs)*s^2 + (L1 + L2 + C1*Rs*RL)*s + Rs + RL)",
        )

    def test_figures(self) -> None:
        values = {"L1": "1 H", "L2": "1 H", "C1": "2 F", "RL": "1 ohm"}
        right, claimed = (
            derive(self.REAL, Rs="1 ohm", **values).numeric(),
            derive(self.IDEAL, **values).numeric(),
        )
        assert abs(right(0j)) == 0.5
        assert abs(right(1j)) == pytest.approx(0.5 / sqrt(2), rel=1e-15)  # 0.3536: Butterworth/2
        assert abs(claimed(0j)) == 1
        assert abs(claimed(1j)) == pytest.approx(1, rel=1e-15)

    def test_a_load_is_one_step(self) -> None:
        net = sn.network(TWO_SECTIONS)
        loaded = sn.derive(net.add("out -- RL -- gnd"))
        assert_same_function(
            loaded, "RL/(RL + R1 + R2 + s*(R1*C1*(R2 + RL) + (R1 + R2)*RL*C2) + s^2*R1*R2*C1*C2*RL)"
        )

    def test_the_brief_says_what_drives_and_what_loads(self) -> None:
        text = " ".join(str(sn.brief(sn.network(TWO_SECTIONS))).split())
        assert "driven by an ideal voltage source" in text
        assert "nothing loads it" in text


class TestDimensions:
    """Units and dimensions are checked wherever an expression stands (N7)."""

    @pytest.mark.parametrize(
        ("text", "at", "message"),
        [
            ("R1 = 1 kohm + 1 nF", "1 nF", "this is in F and what stands before it is in ohm"),
            ("R1 = 4.7 nF", "4.7 nF", "R1 is in ohm, its value is in F"),
            ("push from gnd to out = in/R1 + out/C1", "out/C1", "out/C1 is in ohm*V/s and in/R1 is in A"),
            ("push from gnd to out = (in - out)/C1", "(in - out)/C1", "a push gives a current (A)"),
            ("hold x = in/R1", "in/R1", "a hold gives a voltage (V); this is in A"),
        ],
    )
    def test_the_term_is_named(self, text: str, at: str, message: str) -> None:
        with pytest.raises(NotationError) as caught:
            sn.network(f"in -- R1 -- out -- C1 -- gnd; drive in; read out; {text}")
        (fault,) = caught.value.faults
        assert message in fault.message
        assert fault.span is not None
        assert caught.value.text is not None
        assert caught.value.text[fault.span.start : fault.span.end].strip("() ") in at


class TestQuickLooks:
    """Limits, from H and from the network with its capacitors opened and shorted (N8)."""

    def test_multiple_feedback(self) -> None:
        H = derive(MULTIPLE_FEEDBACK)
        ends = sn.limits(H)
        assert str(ends.dc.numerator.as_expr() / ends.dc.denominator.as_expr()) == "-R2/R1"
        assert ends.dc.reason == "C2, C1 open"
        assert ends.dc.from_network is True
        assert ends.high.is_zero
        assert ends.high.slope == -40
        assert ends.dc.slope == 0

    def test_ends_do_not_prove_h(self) -> None:
        # without the branch R3 in the node equation (D4) both ends and w0 are right, and H is not
        wrong = "-(R2/R1)/(1 + s*C2*R3*(1 + R2/R1) + s^2*R2*R3*C1*C2)"
        right = "-(R2/R1)/(1 + s*C2*(R2 + R3 + R2*R3/R1) + s^2*R2*R3*C1*C2)"
        H = derive(MULTIPLE_FEEDBACK)
        assert_same_function(H, right)
        with pytest.raises(AssertionError):
            assert_same_function(H, wrong)
        form = sn.normalise(
            H.with_values(R1="33.66 kohm", R2="33.66 kohm", R3="31.5 kohm", C1="15 nF", C2="1 nF").numeric()
        )
        assert form.f0 == pytest.approx(1262, abs=0.5)
        assert 1 / form.c[1] == pytest.approx(1.305, abs=5e-4)  # claimed 2.00

    def test_order_against_the_number_of_reactances(self) -> None:
        text = str(sn.brief(sn.network(MULTIPLE_FEEDBACK)))
        assert "order 2; parts that store energy: C2, C1" in text


class TestQFromCoefficients:
    """w0, Q, zeta, tau without the factor 2 (N9)."""

    def test_two_equal_sections(self) -> None:
        H = sn.derive(sn.network(TWO_SECTIONS + "R1 = R;  R2 = R;  C1 = C;  C2 = C"))
        assert_same_function(H, "1/(1 + 3*s*R*C + s^2*R^2*C^2)")
        whole = sn.sections(H).whole
        assert whole is not None
        assert whole.w0 is not None
        assert whole.q is not None
        assert whole.zeta is not None
        assert_same_figure(whole.w0, "1/(R*C)")
        assert_same_figure(whole.q, "1/3")
        assert_same_figure(whole.zeta, "3/2")
        slow, fast = sn.sections(H.with_values(R="1 kohm", C="1 mF").numeric()).poles
        assert [slow.kind, fast.kind] == ["first order", "first order"]
        assert [slow.roots[0].value.real, fast.roots[0].value.real] == pytest.approx(
            [-0.3820, -2.6180], abs=5e-5
        )

    @pytest.mark.parametrize(
        ("text", "q"),
        [
            ("in -- R -- a -- L -- out -- C -- gnd; drive in; read out", 0.3162),
            ("out -- R || L || C -- gnd; drive current into out; read out", 3.162),
        ],
        ids=["series", "parallel"],
    )
    def test_series_and_parallel_resonance(self, text: str, q: float) -> None:
        # sqrt(L/C)/R in series, R sqrt(C/L) in parallel
        form = sn.sections(derive(text, R="1 kohm", L="10 mH", C="100 nF")).whole
        assert form is not None
        assert form.f0 == pytest.approx(5033, abs=0.5)
        assert form.q is not None
        assert form.q.value == pytest.approx(q, rel=2e-4)

    def test_exact_q_with_the_resistance_inverted(self) -> None:
        series = sn.sections(derive("in -- R -- a -- L -- out -- C -- gnd; drive in; read out")).whole
        parallel = sn.sections(derive("out -- R || L || C -- gnd; drive current into out; read out")).whole
        assert series is not None
        assert parallel is not None
        assert series.w0 is not None
        assert parallel.w0 is not None
        assert series.q is not None
        assert parallel.q is not None
        for w0 in (series.w0, parallel.w0):
            assert_same_figure(w0, "1/(L*C)", power=2)
        assert_same_figure(series.q, "L/(R^2*C)", power=2)
        assert_same_figure(parallel.q, "R^2*C/L", power=2)


class TestHalfPowerIsNotW0:
    """-3 dB is not w0 (N12)."""

    # w3/w0 = sqrt(1 - 2z^2 + sqrt(4z^4 - 4z^2 + 2)), z = 1/(2Q)
    @pytest.mark.parametrize(
        ("q", "w3"),
        [("1/3", 0.3742), ("1/2", 0.6436), ("0.70710678118654752", 1), ("1", 1.2720), ("2", 1.4845)],
    )
    def test_second_order_low_pass(self, q: str, w3: float) -> None:
        H = Ratio.of([1], [1, 1 / Fraction(q), 1])
        (crossing,) = f3db(H)
        assert crossing.w.value == pytest.approx(w3, abs=5e-5)
        z = 1 / (2 * float(Fraction(q)))
        assert crossing.w.value == pytest.approx(
            sqrt(1 - 2 * z**2 + sqrt(4 * z**4 - 4 * z**2 + 2)), rel=1e-14
        )
        assert abs(H(1j)) == pytest.approx(float(Fraction(q)), rel=1e-15)  # |H(j w0)| = Q

    def test_every_crossing_and_its_reference(self) -> None:
        resonant = Ratio.of([1], [1, Fraction(1, 5), 1])
        assert f3db(resonant).reference == "DC"
        around_the_peak = f3db(resonant, "peak")
        assert [c.direction for c in around_the_peak] == ["rising", "falling"]
        high_pass = Ratio.of([0, 0, 1], [1, 1, 1])
        assert f3db(high_pass).reference == "infinity"


class TestHiddenModes:
    """A cancelled factor is listed, never dropped silently (N32)."""

    DIVIDER = "in -- R1 || C1 -- out -- R2 || C2 -- gnd; drive in; read out"

    def test_compensated_divider(self) -> None:
        H = sn.derive(sn.network(self.DIVIDER + "; C2 = R1*C1/R2"))
        assert_same_function(H, "R2/(R1 + R2)")
        (mode,) = H.hidden
        s, R1, C1 = (H.ring.gens[list(map(str, H.ring.symbols)).index(name)] for name in ("s", "R1", "C1"))
        assert mode.factor == 1 + s * R1 * C1  # natural frequency -1/(R1 C1)
        text = " ".join(str(sn.brief(sn.network(self.DIVIDER + "; C2 = R1*C1/R2"))).split())
        assert "hidden mode at s = -1/(R1*C1): R1, C1, C2; it cancels through values" in text
        assert "it dies out (for all positive values" in text

    def test_not_compensated_has_nothing_hidden(self) -> None:
        H = derive(self.DIVIDER)
        assert H.hidden == ()
        # a slow tail with the time constant (C1 + C2) (R1 || R2)
        assert_same_function(H, "R2*(1 + s*R1*C1)/(R1 + R2 + s*R1*R2*(C1 + C2))")

    def test_compensated_by_values_only_is_said_in_the_brief(self) -> None:
        net = sn.network(self.DIVIDER).with_values(R1="9 Mohm", R2="1 Mohm", C1="10 pF", C2="90 pF")
        assert sn.derive(net).numeric() == Ratio.of([1], [10])
        text = " ".join(str(sn.brief(net)).split())
        assert "for these values factors cancel" in text
        assert "hidden modes: none" not in text

    def test_a_current_through_a_coil_hides_nothing(self) -> None:
        # one coil, order 1: there is no second natural frequency that could hide
        H = derive("in -- R1 -- a -- L1 -- gnd; drive in; read i_L1")
        assert_same_function(H, "1/(R1 + s*L1)")
        assert H.hidden == ()


class TestWrongElement:
    """C instead of 2C in the shunt arm of a twin-T (D7): order 3, and the notch is gone."""

    TWIN_T = """
        in -- R1 -- a -- R2 -- o
        in -- C1 -- b -- C2 -- o
        a -- C3 -- gnd
        b -- R3 -- gnd
        drive in;  read o
        R1 = R;  R2 = R;  R3 = R/2
        C1 = C;  C2 = C
    """

    def test_right(self) -> None:
        H = sn.derive(sn.network(self.TWIN_T + "C3 = 2*C"))
        assert_same_function(H, "(1 + s^2*R^2*C^2)/(1 + 4*s*R*C + s^2*R^2*C^2)")
        (mode,) = H.hidden
        assert mode.factor is not None
        assert mode.factor.degree(0) == 1  # three capacitors, order 2
        assert H.with_values(R="1 ohm", C="1 F").numeric()(1j) == 0  # exactly 0 at w = 1/(RC)

    def test_wrong(self) -> None:
        H = sn.derive(sn.network(self.TWIN_T + "C3 = C"))
        x = "(s*R*C)"
        assert_same_function(H, f"({x}^3 + 2*{x}^2 + 2*{x} + 2)/({x}^3 + 6*{x}^2 + 8*{x} + 2)")
        ratio = H.with_values(R="1 ohm", C="1 F").numeric()
        assert abs(ratio(1j)) == pytest.approx(0.124, abs=5e-4)
        lowest = min(
            (point for point in turning_points(ratio) if point.kind == "minimum"), key=lambda p: p.value
        )
        assert lowest.value == pytest.approx(0.104, abs=5e-4)
        assert lowest.w.value == pytest.approx(1.139, abs=5e-4)


class TestFloatingNodes:
    """Floating nodes and singular systems in the words of the drawing (N31).

    A transformer's secondary without reference is not here: there is no transformer in this notation yet.
    """

    @pytest.mark.parametrize(
        ("text", "nodes", "parts"),
        [
            ("in -- R1 -- out -- C1 -- gnd; a -- R2 -- b; drive in; read out", {"a", "b"}, {"R2"}),
            ("drive in; hold in = 2*out as twin; in -- R1 -- out -- R2 -- gnd; read out", {"in"}, {"twin"}),
            (
                "in -- R1 -- p -- R2 -- gnd; U1: opamp(plus=p, minus=gnd, out=out); out -- R3 -- gnd; drive in; read out",
                {"p", "out"},
                {"U1"},
            ),
            (
                """in -- R1 -- m -- R2 -- out;  U1: opamp(plus=gnd, minus=m, out=out)
                in -- R3 -- n -- R4 -- out;  U2: opamp(plus=gnd, minus=n, out=out)
                drive in;  read out""",
                {"out"},
                {"U1", "U2"},
            ),
            ("drive current into a; b -- R1 -- gnd; read a", {"a"}, set()),
        ],
        ids=["isolated part", "sources in parallel", "no feedback", "outputs tied", "open current source"],
    )
    def test_wiring_faults_name_nodes_and_parts(self, text: str, nodes: set[str], parts: set[str]) -> None:
        with pytest.raises(WiringError) as caught:
            sn.derive(sn.network(text))
        said = str(caught.value)
        assert any(nodes <= {*fault.nodes, "gnd"} for fault in caught.value.faults)
        for name in nodes | parts:
            assert name in said

    def test_a_shorted_ideal_source(self) -> None:
        with pytest.raises((WiringError, NotationError), match="in"):
            sn.derive(sn.network("in -- R1 -- gnd; drive in - in; read in"))

    def test_a_node_with_one_part_is_legal_and_said(self) -> None:
        net = sn.network(TWO_SECTIONS + "out -- C3 -- vout")
        assert "node vout has only C3" in " ".join(notes(net))
        assert_same_function(sn.derive(net), "1/(1 + s*(R1*C1 + R1*C2 + R2*C2) + s^2*R1*R2*C1*C2)")

    @pytest.mark.parametrize(
        "text",
        [
            "in -- R1 -- p -- R2 -- o; hold o = K*p as amp; drive current into p; read o; R1 = 1 kohm; K = 1; R2 = 1 kohm",
            "a -- R1 -- gnd; a -- R2 -- gnd; drive current into a; read a; R1 = 1 kohm; R2 = -1 kohm",
        ],
        ids=["gain of exactly one", "negative resistor"],
    )
    def test_singular_for_these_values_is_another_matter(self, text: str) -> None:
        assert sn.derive(sn.network(text)).denominator
        with pytest.raises(SingularError):
            sn.derive(sn.network(text)).numeric()


class TestValueNotation:
    """Value notation of the trade, IEC 60062 codes among it (N45)."""

    @pytest.mark.parametrize(
        ("name", "text", "value"),
        [
            ("R1", "4k7", 4700),
            ("R1", "4.7k", 4700),
            ("R1", "4R7", 4.7),
            ("R1", "M47", 470e3),
            ("C1", "100n", 100e-9),
            ("C1", "0.1u", 100e-9),
            ("C1", "u47", 470e-9),
            ("C1", "U47", 470e-9),
        ],
    )
    def test_codes(self, name: str, text: str, value: float) -> None:
        H = derive("in -- R1 -- out -- C1 -- gnd; drive in; read out", **{name: text})
        assert float(H.values[name]) == value

    def test_m_and_big_m_are_decided_by_the_part_and_reported(self) -> None:
        assert code_note("M47", "R1") == "M47 for R1 is read as 470 kohm"
        assert code_note("m47", "C1").startswith("m47 for C1 is read as 470 uF, which is unusual")

    def test_a_bare_number_of_farads_is_flagged(self) -> None:
        (note,) = notes(sn.network("in -- R1 = 1k -- out -- C1 = 0.1 -- gnd; drive in; read out"))
        assert note == "C1 = 100 mF is much for a capacitor; did you mean 0.1 uF?"


class TestMessages:
    """Line, column, the line with a caret, the nearest name; all faults in one pass (N46)."""

    def test_all_faults_of_a_text(self) -> None:
        text = "in -- R1 -- Vout -- C1 -- gnd\nin - R2 - Vout\ndrive in\nread vout\nC1 = 100 nf"
        with pytest.raises(NotationError) as caught:
            sn.network(text)
        said = str(caught.value)
        assert "line 2, column 4: " in said
        assert "    in - R2 - Vout\n       ^" in said
        assert "did you mean Vout?" in said or "nodes: in, Vout" in said
        assert "did you mean 100 nF?" in said
        assert len(caught.value.faults) == 3

    def test_a_node_that_appears_once_in_another_case(self) -> None:
        found = notes(sn.network("in -- R1 -- Vout -- C1 -- gnd; vout -- C2 -- gnd; drive in; read Vout"))
        assert "node vout has only C2; did you mean Vout?" in found

    def test_a_part_in_the_place_of_a_node(self) -> None:
        with pytest.raises(NotationError, match="C1 stands where a node must stand"):
            sn.network("in -- R1 -- C1 -- R2 -- out; drive in; read out")


class TestHertzAndRadians:
    """rad/s or Hz, everywhere visible (N48)."""

    def test_both_stand_in_the_brief(self) -> None:
        net = sn.network("in -- R1 = 1 kohm -- out -- C1 = 10 nF -- gnd; drive in; read out")
        form = sn.normalise(sn.derive(net))
        assert form.w0 is not None
        assert form.w0.value == 100_000
        assert form.f0 == pytest.approx(15.915e3, abs=0.5)
        text = " ".join(str(sn.brief(net)).split())
        assert "100 krad/s" in text
        assert "15.915 kHz" in text
        (crossing,) = f3db(sn.derive(net))
        assert (crossing.w.value, crossing.f) == pytest.approx((1e5, 1e5 / (2 * pi)))
        assert phase(sn.derive(net), 1e5) == pytest.approx(-45)


class TestFrequencyReferences:
    """A cut-off frequency says what it is (N11, N12), and table coefficients know what they are normalised to (N17)."""

    @pytest.mark.parametrize(
        ("made", "reference", "level_at_1", "w3"),
        [
            (sn.bessel(3), "unit_delay", -0.903, 1.7557),
            (sn.bessel(3), "w0", -6.24, None),
            (sn.bessel(3), "w3dB", -3.01, 1.0),
            (sn.butterworth(3), "w0", -3.01, 1.0),
            (sn.chebyshev(3, "0.5 dB"), "ripple_edge", -0.5, 1.1675),
        ],
    )
    def test_what_the_same_shape_has_at_1_rad_per_second(
        self, made: Prototype, reference: str, level_at_1: float, w3: float | None
    ) -> None:
        at_1 = made.at(**{reference: "1 rad/s"})
        assert at_1.decibels(1.0) == pytest.approx(level_at_1, abs=5e-3)
        if w3 is not None:
            assert at_1.reference("w3dB").w == pytest.approx(w3, abs=5e-5)

    def test_3_db_of_an_even_chebyshev_is_counted_from_two_levels(self) -> None:
        made = sn.chebyshev(2, "1 dB")
        assert made.reference("w3dB_peak").w == pytest.approx(1.2176, abs=5e-5)
        assert made.reference("w3dB_peak").label.endswith("relative to the ripple peak")
        assert "DC" in made.reference("w3dB").label

    def test_denormalised_coefficients_stop_with_the_normalised_ones(self) -> None:
        with pytest.raises(
            NotationError,
            match=r"denormalised \(w0 = 7930 rad/s\); normalised they are a = 0.91094, b = 1.41253",
        ):
            sn.prototypes.table_section("6078.04", "62884481", "-44518803", f="1.5 kHz")


class TestParasitics:
    """Parasitics are named add-ons (N28), also in a supply filter (N29)."""

    def test_the_series_resistance_of_a_capacitor(self) -> None:
        ideal = sn.network("in -- R1 = 68 -- out -- C1 = 5 uF -- gnd; drive in; read out")
        H = sn.derive(ideal.with_parasitics("C1", ESR="1 ohm"))
        assert_same_function(H, "(1 + s*R_C1*C1)/(1 + s*(R1 + R_C1)*C1)")
        h = H.numeric()
        (zero,), (pole,) = h.zeros(), h.poles()
        assert -zero.value.real / (2 * pi) == pytest.approx(31.8e3, rel=2e-3)
        assert -pole.value.real / (2 * pi) == pytest.approx(461, rel=1e-3)
        assert 20 * log10(abs(h(2j * pi * 1e12))) == pytest.approx(-36.8, abs=0.05)

    def test_resonance_of_a_bypass_capacitor(self) -> None:
        ideal = sn.network("in -- R1 = 50 -- out -- C1 = 100 nF -- gnd; drive in; read out")
        real = sn.derive(ideal.with_parasitics("C1", ESL="5 nH", ESR="20 mohm")).numeric()
        plain = sn.derive(ideal).numeric()
        resonance = 1 / (2 * pi * sqrt(5e-9 * 100e-9))
        assert resonance == pytest.approx(7.118e6, rel=1e-4)
        for f, with_them, without in ((resonance, -68.0, -47.0), (100e6, -24.1, -69.9)):
            assert 20 * log10(abs(real(2j * pi * f))) == pytest.approx(with_them, abs=0.05)
            assert 20 * log10(abs(plain(2j * pi * f))) == pytest.approx(without, abs=0.05)

    @pytest.mark.parametrize(
        ("name", "parasitics"),
        [("C1", {"ESR": None}), ("C1", {"ESL": None, "ESR": None}), ("L1", {"DCR": None, "Cw": None})],
    )
    def test_without_them_h_is_the_earlier_one(self, name: str, parasitics: dict[str, None]) -> None:
        ideal = sn.network("in -- R1 -- a -- L1 -- out -- C1 || RL -- gnd; drive in; read out")
        real = ideal.with_parasitics(name, **parasitics)
        added = [part for part in real.part_names if part not in ideal.part_names]
        assert len(added) == len(parasitics)
        none = sn.derive(real.with_values(dict.fromkeys(added, 0)), symbols="R1 L1 C1 RL")
        assert none == sn.derive(ideal)

    def test_a_supply_filter_and_the_peak_of_its_output_impedance(self) -> None:
        net = sn.network(
            "in -- L1 = 10 uH -- out -- C1 = 100 uF -- gnd; out -- R = 1 -- gnd; drive in; read out"
        )
        real = net.with_parasitics("L1", DCR="30 mohm").with_parasitics("C1", ESR="5 mohm")
        H = sn.derive(real)
        assert_same_function(
            H,
            "R*(1 + s*R_C1*C1)/(R + R_L1 + s*(L1 + C1*(R*R_C1 + R*R_L1 + R_C1*R_L1)) + s^2*L1*C1*(R + R_C1))",
        )
        h = H.numeric()
        pole = next(root.value for root in h.poles() if root.value.imag > 0)
        assert abs(pole) / (2 * pi) == pytest.approx(5.095e3, rel=1e-4)
        assert abs(pole) / (-2 * pole.real) == pytest.approx(2.38, abs=0.005)
        assert -h.zeros()[0].value.real / (2 * pi) == pytest.approx(318e3, rel=2e-3)
        assert h.num[0] / h.den[0] == pytest.approx(0.9709, abs=5e-5)
        shorted = real.add("drive current into out as Iout")
        zout = sn.derive(shorted, drive="Iout", read="out").numeric()
        peak = max(abs(zout(2j * pi * f)) for f in range(4800, 5400, 5))
        assert peak == pytest.approx(0.743, abs=5e-4)

    def test_what_cannot_be_made_real(self) -> None:
        net = sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")
        with pytest.raises(NotationError, match="R1 is no capacitor or inductor"):
            net.with_parasitics("R1", ESR="1 ohm")
        with pytest.raises(NotationError, match="C1 has no DCR"):
            net.with_parasitics("C1", DCR="1 ohm")


class TestPotentiometer:
    """A potentiometer is a part with a wiper (N34); its ends are limits, not divisions by zero."""

    NETWORK = "P1: potentiometer(top=in, wiper=out, bottom=gnd, Rt, x); out -- RL -- gnd; drive in; read out"

    def test_loaded_wiper(self) -> None:
        H = derive(self.NETWORK)
        assert str(H) == "out/in = P1.x*RL/(RL + P1.x*(1 - P1.x)*P1.Rt)"
        half = H.with_values({"P1.x": "0.5", "P1.Rt": "10k", "RL": "10k"}).numeric()
        assert half.num[0] / half.den[0] == Fraction(2, 5)

    @pytest.mark.parametrize(("x", "gain"), [("0", 0), ("1", 1)])
    def test_the_ends_are_exact(self, x: str, gain: int) -> None:
        network = sn.network(self.NETWORK).with_values({"P1.x": x, "P1.Rt": "10k", "RL": "10k"})
        for H in (sn.derive(network), sn.derive(network, symbols="RL")):
            assert H.numeric() == Ratio.of((Fraction(gain),), (Fraction(1),))


class TestProbe:
    """The probe is part of the network (N40)."""

    def test_before_and_after(self) -> None:
        net = sn.network("in -- R1 = 1 Mohm -- out -- C1 = 10 pF -- gnd; drive in; read out")
        probed = net.with_probe("out", R="10 Mohm", C="10 pF")
        before, after = (f3db(sn.derive(n).numeric())[0].f for n in (net, probed))
        assert before == pytest.approx(15.92e3, rel=3e-4)
        assert after == pytest.approx(8.754e3, rel=1e-4)
        h = sn.derive(probed).numeric()
        assert h.num[0] / h.den[0] == pytest.approx(0.909, abs=5e-4)
        assert "added R_probe, C_probe" in repr(sn.compare(net, probed))


class TestSwappedInputs:
    """Ideal algebra cannot tell swapped inputs (N13): the brief warns of net positive feedback."""

    INVERTING = "in -- R1 -- m -- R2 -- out; U1: opamp(plus={}, minus={}, out=out); drive in; read out"

    def test_the_same_h_and_one_warning(self) -> None:
        right, wrong = (sn.network(self.INVERTING.format(*ends)) for ends in (("gnd", "m"), ("m", "gnd")))
        assert sn.derive(right) == sn.derive(wrong)
        assert "net positive" not in str(sn.brief(right))
        assert "the feedback of U1 is net positive" in " ".join(str(sn.brief(wrong)).split())

    def test_a_real_gain_shows_the_pole(self) -> None:
        """R2 wt/(s (R1 + R2) - R1 wt): a pole in the right half plane."""
        real = self.INVERTING.replace("out=out", "out=out, gbw=wt").format("m", "gnd")
        assert_same_function(derive(real), "R2*wt/(s*(R1 + R2) - R1*wt)")
