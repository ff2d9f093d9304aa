"""Twenty hand derivations that go wrong the way hand derivations do, and the same ones put right.

Collected from public questions and engineering notes by the authors of this project; every formula was recomputed
by nodal analysis. Component values are those of the examples. No source is named for the mistakes: they are common
practice. ``first`` is the label of the first wrong line, ``follows`` says which later lines follow from which wrong
one, ``own`` are later lines that are wrong by themselves. ``about`` are the words that an explanation of the first
wrong line cannot do without.
"""

from __future__ import annotations

from dataclasses import dataclass, field

__all__ = ["DERIVATIONS", "Derivation"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Derivation:
    """One wrong derivation and its correction, both in the notation of hand derivations."""

    id: str
    title: str
    network: str
    wrong: str
    first: str
    right: str
    follows: dict[str, str] = field(default_factory=dict)
    own: tuple[str, ...] = ()
    about: tuple[str, ...] = ()


_TWO_SECTIONS = """
    in -- R1 -- x -- R2 -- o
    x -- C1 -- gnd;  o -- C2 -- gnd
    drive in;  read o
"""

_UNITY_SECTION = """
    in -- R1 -- x -- R2 -- p -- C2 -- gnd
    x -- C1 -- out
    U1: opamp(plus=p, minus=out, out=out)
    drive in;  read out
"""

_SECTION_WITH_GAIN = """
    in -- R1 -- x -- R2 -- p -- C2 -- gnd
    x -- C1 -- out
    hold out = K*p
    drive in;  read out
"""

_MULTIPLE_FEEDBACK = """
    in -- R1 -- x -- R2 -- out
    x -- C1 -- gnd
    x -- R3 -- m -- C2 -- out
    U1: opamp(plus=gnd, minus=m, out=out)
    drive in;  read out
"""

DERIVATIONS: tuple[Derivation, ...] = (
    Derivation(
        id="D1",
        title="loading ignored",
        network=_TWO_SECTIONS,
        wrong="""
            1. x/in = 1/(1 + s*R1*C1)
            2. o/x = 1/(1 + s*R2*C2)
            3. o/in = 1/((1 + s*R1*C1)*(1 + s*R2*C2))
        """,
        first="1",
        follows={"3": "1"},
        about=("x", "R2"),
        right="""
            1. node x: (x - in)/R1 + s*C1*x + (x - o)/R2 = 0
            2. o/x = 1/(1 + s*R2*C2)
            3. o/in = 1/(1 + s*(R1*C1 + R1*C2 + R2*C2) + s^2*R1*R2*C1*C2)
        """,
    ),
    Derivation(
        id="D2",
        title="capacitor to the wrong node",
        network=_UNITY_SECTION,
        wrong="""
            1. node x: (x - in)/R1 + (x - p)/R2 + s*C1*x = 0
            2. node p: (p - x)/R2 + s*C2*p = 0
            3. p = out
            4. out/in = 1/(1 + s*(R1*C1 + R1*C2 + R2*C2) + s^2*R1*R2*C1*C2)
        """,
        first="1",
        follows={"4": "1"},
        about=("x", "C1", "out"),
        right="""
            1. node x: (x - in)/R1 + (x - p)/R2 + s*C1*(x - out) = 0
            2. node p: (p - x)/R2 + s*C2*p = 0
            3. p = out
            4. out/in = 1/(1 + s*C2*(R1 + R2) + s^2*R1*R2*C1*C2)
        """,
    ),
    Derivation(
        id="D3",
        title="gain multiplied on afterwards",
        network=_SECTION_WITH_GAIN,
        wrong="""
            1. node x: (x - in)/R1 + (x - p)/R2 + s*C1*(x - p) = 0
            2. node p: (p - x)/R2 + s*C2*p = 0
            3. out = K*p
            4. out/in = K/(1 + s*C2*(R1 + R2) + s^2*R1*R2*C1*C2)
        """,
        first="1",
        follows={"4": "1"},
        about=("x", "C1", "out"),
        right="""
            1. node x: (x - in)/R1 + (x - p)/R2 + s*C1*(x - out) = 0
            2. node p: (p - x)/R2 + s*C2*p = 0
            3. out = K*p
            4. out/in = K/(1 + s*(C2*(R1 + R2) + (1 - K)*R1*C1) + s^2*R1*R2*C1*C2)
        """,
    ),
    Derivation(
        id="D4",
        title="dropped branch",
        network=_MULTIPLE_FEEDBACK,
        wrong="""
            1. node x: (x - in)/R1 + (x - out)/R2 + s*C1*x = 0
            2. x = -s*C2*R3*out
            3. out/in = -(R2/R1)/(1 + s*C2*R3*(1 + R2/R1) + s^2*R2*R3*C1*C2)
        """,
        first="1",
        follows={"3": "1"},
        about=("x", "R3"),
        right="""
            1. node x: (x - in)/R1 + (x - out)/R2 + x/R3 + s*C1*x = 0
            2. x = -s*C2*R3*out
            3. out/in = -(R2/R1)/(1 + s*C2*(R2 + R3 + R2*R3/R1) + s^2*R2*R3*C1*C2)
        """,
    ),
    Derivation(
        id="D5",
        title="sign at the virtual ground",
        network=_MULTIPLE_FEEDBACK,
        wrong="""
            1. node x: (x - in)/R1 + (x - out)/R2 + x/R3 + s*C1*x = 0
            2. x = s*C2*R3*out
            3. out/in = -(R2/R1)/(1 - s*C2*(R2 + R3 + R2*R3/R1) - s^2*R2*R3*C1*C2)
        """,
        first="2",
        follows={"3": "2"},
        about=("sign",),
        right="""
            1. node x: (x - in)/R1 + (x - out)/R2 + x/R3 + s*C1*x = 0
            2. node m: x/R3 + s*C2*out = 0
            3. so x = -s*C2*R3*out
            4. out/in = -(R2/R1)/(1 + s*C2*(R2 + R3 + R2*R3/R1) + s^2*R2*R3*C1*C2)
        """,
    ),
    Derivation(
        id="D6",
        title="source resistance left out",
        network="""
            in -- Rs -- a -- L1 -- x -- L2 -- o
            x -- C1 -- gnd;  o -- RL -- gnd
            drive in;  read o
        """,
        wrong="1. o/in = RL/(L1*L2*C1*s^3 + L1*C1*RL*s^2 + (L1 + L2)*s + RL)",
        first="1",
        about=("Rs",),
        right="""
            1. node x: (a - x)/(s*L1) = s*C1*x + (x - o)/(s*L2)
            2. node a: (a - in)/Rs + (a - x)/(s*L1) = 0
            3. node o: (o - x)/(s*L2) + o/RL = 0
            4. o/in = RL/(L1*L2*C1*s^3 + C1*(L1*RL + L2*Rs)*s^2 + (L1 + L2 + C1*Rs*RL)*s + Rs + RL)
        """,
    ),
    Derivation(
        id="D7",
        title="wrong element in one arm",
        network="""
            in -- R1 -- a -- R2 -- o
            a -- C3 -- gnd
            in -- C1 -- b -- C2 -- o
            b -- R3 -- gnd
            R1 = R;  R2 = R;  R3 = R/2;  C1 = C;  C2 = C;  C3 = 2*C
            drive in;  read o
        """,
        wrong="""
            let n = s*R*C
            1. node a: (a - in)/R + (a - o)/R + s*C*a = 0
            2. node b: s*C*(b - in) + s*C*(b - o) + 2*b/R = 0
            3. node o: (o - a)/R + s*C*(o - b) = 0
            4. o/in = (n^3 + 2*n^2 + 2*n + 2)/(n^3 + 6*n^2 + 8*n + 2)
        """,
        first="1",
        follows={"4": "1"},
        about=("a", "C"),
        right="""
            let n = s*R*C
            1. node a: (a - in)/R + (a - o)/R + 2*s*C*a = 0
            2. node b: s*C*(b - in) + s*C*(b - o) + 2*b/R = 0
            3. node o: (o - a)/R + s*C*(o - b) = 0
            4. o/in = (1 + n^2)/(1 + 4*n + n^2)
        """,
    ),
    Derivation(
        id="D8",
        title="2 zeta read as zeta",
        network="""
            in -- R1 -- x -- R2 -- o
            x -- C1 -- gnd;  o -- C2 -- gnd
            R1 = R;  R2 = R;  C1 = C;  C2 = C
            drive in;  read o
        """,
        wrong="""
            1. o/in = 1/(1 + 2*zeta*s/w0 + s^2/w0^2)
            2. zeta = 3
            3. f3dB = 1/(2*pi*R*C)
        """,
        first="2",
        own=("3",),
        about=("2",),
        right="""
            1. o/in = 1/(1 + 2*zeta*s/w0 + s^2/w0^2)
            2. zeta = 3/2
            3. Q = 1/3
            4. w0 = 1/(R*C)
            5. f3dB = 0.3742/(2*pi*R*C)
        """,
    ),
    Derivation(
        id="D9",
        title="denormalised coefficients in a normalised formula",
        network=_MULTIPLE_FEEDBACK + "R1, R2 = 33.657 k;  R3 = 31.498 k;  C1 = 15 nF;  C2 = 1 nF",
        wrong="""
            let S = s/(2*pi*1.5 kHz)
            let a1 = 6078.04
            let b1 = 62884481
            4. out/in = -1/(1 + a1*S + b1*S^2)
            5. R3 = b1/((1.5 kHz)^2*C1*C2*R2)
        """,
        first="4",
        own=("5",),
        right="""
            let S = s/(2*pi*1.5 kHz)
            let a1 = 0.9109
            let b1 = 1.4125
            4. out/in = -1/(1 + a1*S + b1*S^2)
            5. R3 = b1/((2*pi*1.5 kHz)^2*C1*C2*R2)
        """,
    ),
    Derivation(
        id="D10",
        title="-3 dB taken for the table's unit frequency",
        network="""
            hold out = 15*in/(15 + 15*s*T0 + 6*(s*T0)^2 + (s*T0)^3)   # a Bessel filter as a block
            in -- Rin -- gnd
            T0 = 279.42 us                                            # 1.75567/(2 pi 1 kHz)
            drive in;  read out
        """,
        wrong="""
            let S = s/(2*pi*1 kHz)
            1. out/in is bessel 3
            2. out/in = 15/(S^3 + 6*S^2 + 15*S + 15)
        """,
        first="2",
        right="""
            let S = 1.7557*s/(2*pi*1.000 kHz)
            1. out/in is bessel 3 with f3dB = 1.000 kHz
            2. out/in = 15/(S^3 + 6*S^2 + 15*S + 15)
        """,
    ),
    Derivation(
        id="D11",
        title="signal gain for noise gain",
        network="""
            in -- R1 = 1 k -- m -- R2 = 10 k -- out
            hold out = -wt*m/s
            wt = 6.2832 Mrad/s                                        # a gain-bandwidth product of 1 MHz
            drive in;  read out
        """,
        wrong="""
            1. node m: (m - in)/R1 + (m - out)/R2 = 0
            2. out = -wt*m/s
            3. f3dB = wt/(2*pi)/(R2/R1)
        """,
        first="3",
        right="""
            1. node m: (m - in)/R1 + (m - out)/R2 = 0
            2. out = -wt*m/s
            3. out/in = -R2*wt/(R1*wt + s*(R1 + R2))
            4. f3dB = wt/(2*pi)/(1 + R2/R1)
            5. f3dB = 90.9 kHz
        """,
    ),
    Derivation(
        id="D12",
        title="feedback divider upside down",
        network="""
            out -- R4 -- m -- R3 -- gnd
            U1: opamp(plus=in, minus=m, out=out)
            drive in;  read out
        """,
        wrong="""
            1. node m: m/R3 + (m - out)/R4 = 0
            2. m = in
            3. out/in = R3/(R3 + R4)
        """,
        first="3",
        right="""
            1. node m: m/R3 + (m - out)/R4 = 0
            2. m = in
            3. out/in = 1 + R4/R3
        """,
    ),
    Derivation(
        id="D13",
        title="dimensions",
        network=_SECTION_WITH_GAIN,
        wrong="1. 1/(w0*Q) = R1 + R2*C2 + (1 - K)*R1*C1",
        first="1",
        about=("R1", "ohm"),
        right="1. 1/(w0*Q) = (R1 + R2)*C2 + (1 - K)*R1*C1",
    ),
    Derivation(
        id="D14",
        title="coupled coils in parallel, aiding",
        network="""
            a -- La -- b;  a -- Lb -- b;  b -- Lm -- gnd              # the T equivalent of the coupled coils
            free L1, L2
            La = L1 - M;  Lb = L2 - M;  Lm = M
            drive current into a;  read a
        """,
        wrong="1. H = s*(L1*L2 - M^2)/(L1 + L2 + 2*M)",
        first="1",
        about=("M",),
        right="1. H = s*(L1*L2 - M^2)/(L1 + L2 - 2*M)",
    ),
    Derivation(
        id="D15",
        title="band-pass by product",
        network="""
            in -- R1 -- x -- R2 -- o
            x -- L1 -- gnd;  o -- C1 -- gnd
            drive in;  read o
        """,
        wrong="1. o/in = s*L1/((R1 + s*L1)*(1 + s*R2*C1))",
        first="1",
        about=("R1*L1*C1",),
        right="1. o/in = s*L1/(R1 + s*(L1 + R1*R2*C1) + s^2*L1*C1*(R1 + R2))",
    ),
    Derivation(
        id="D16",
        title="zero of the series resistance lost",
        network="""
            in -- R1 -- o -- C1 + Resr -- gnd
            drive in;  read o
        """,
        wrong="1. o/in = 1/(1 + s*R1*C1)",
        first="1",
        about=("Resr",),
        right="1. o/in = (1 + s*Resr*C1)/(1 + s*(R1 + Resr)*C1)",
    ),
    Derivation(
        id="D17",
        title="cascade of equal Butterworth sections",
        network="""
            in -- R1 -- x -- R2 -- p -- C2 -- gnd;  x -- C1 -- y;    hold y = p
            y -- R3 -- z -- R4 -- q -- C4 -- gnd;   z -- C3 -- out;  hold out = q
            R1 = R;  R2 = R;  R3 = R;  R4 = R;  C1 = 2*C;  C3 = 2*C;  C2 = C;  C4 = C
            drive in;  read out
        """,
        wrong="""
            1. y/in is butterworth 2
            2. out/y is butterworth 2
            3. out/in is butterworth 4
        """,
        first="3",
        about=("Butterworth",),
        right="""
            1. y/in is butterworth 2
            2. out/y is butterworth 2
            3. Q of y/in = 1/sqrt(2)
            4. f3dB = 0.8022/(2*pi*R*C*sqrt(2))
        """,
    ),
    Derivation(
        id="D18",
        title="Q of the series circuit for the parallel one",
        network="""
            a -- R1 || L1 || C1 -- gnd
            drive current into a;  read a
        """,
        wrong="1. Q = sqrt(L1/C1)/R1",
        first="1",
        about=("Q",),
        right="1. Q = R1*sqrt(C1/L1)",
    ),
    Derivation(
        id="D19",
        title="transimpedance amplifier as first order",
        network="""
            m -- Cin = 20 pF -- gnd
            m -- Rf || Cf -- out
            hold out = -wt*m/s
            Rf = 100 k;  Cf = 0.1 pF
            wt = 62.832 Mrad/s                                        # a gain-bandwidth product of 10 MHz
            drive current into m;  read out
        """,
        wrong="""
            1. H = -Rf/(1 + s*Rf*Cf)
            2. f3dB = 15.9 MHz
        """,
        first="1",
        follows={"2": "1"},
        right="""
            1. H = -Rf/(1 + s*(Rf*Cf + 1/wt) + s^2*Rf*(Cin + Cf)/wt)
            2. f0 = 890 kHz
            3. Q = 6.9
        """,
    ),
    Derivation(
        id="D20",
        title="capacitor current as V/C",
        network="in -- C1 -- a -- R1 -- gnd;  drive in;  read a",
        wrong="""
            1. node a: (a - in)/C1 + a/R1 = 0
            2. a/in = R1/(R1 + C1)
        """,
        first="1",
        follows={"2": "1"},
        about=("C1", "s*C1"),
        right="""
            1. node a: s*C1*(a - in) + a/R1 = 0
            2. a/in = s*R1*C1/(1 + s*R1*C1)
        """,
    ),
)
