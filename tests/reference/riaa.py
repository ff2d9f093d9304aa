"""Gramophone reproduction (IEC 60098) and emphasis: published tables, and networks that realise them."""

from __future__ import annotations

from tests.reference.cases import Case, Response

__all__ = [
    "CASES",
    "DEEMPHASIS",
    "J17",
    "J17_ROWS",
    "PREEMPHASIS",
    "REPRODUCTION",
    "RUMBLE",
    "SLIP",
    "TAU_POLES",
    "TAU_ZERO",
]

TABLE = (
    "IEC 60098 / RIAA time constants; 2-decimal attenuation table on a public phono-equalisation page, "
    "10 Hz-40 kHz, 34 rows"
)

#: Reproduction curve: zero 318 us, poles 3180 us and 75 us (seconds).
TAU_ZERO = 318e-6
TAU_POLES = (3180e-6, 75e-6)

#: (f in Hz, dB relative to 1 kHz), printed to 0.01 dB; the last row is printed with one decimal only.
REPRODUCTION: tuple[tuple[float, float], ...] = (
    (10, 19.74),
    (20, 19.27),
    (30, 18.59),
    (40, 17.79),
    (50, 16.95),
    (60, 16.1),
    (80, 14.51),
    (100, 13.09),
    (120, 11.85),
    (150, 10.27),
    (180, 8.97),
    (200, 8.22),
    (300, 5.48),
    (400, 3.78),
    (500, 2.65),
    (600, 1.84),
    (800, 0.75),
    (1000, 0),
    (1200, -0.61),
    (1500, -1.4),
    (1800, -2.12),
    (2000, -2.59),
    (3000, -4.74),
    (4000, -6.61),
    (5000, -8.21),
    (6000, -9.6),
    (8000, -11.89),
    (10000, -13.73),
    (12000, -15.26),
    (15000, -17.16),
    (18000, -18.72),
    (20000, -19.62),
    (30000, -23.12),
    (40000, -25.6),
)

CASES: tuple[Response, ...] = (
    Response(
        id="riaa-passive",
        title="single-stage passive network: series R1, then R2+C1 branch and C2 branch to ground",
        source="S. P. Lipshitz, On RIAA Equalization Networks, JAES 27(6) 1979 (ratios from memory); table as riaa-curve: "
        + TABLE,
        from_memory=True,
        note="R1*C1=2187 us, R1*C2=750 us, R2*C1=318 us, R1/R2=6.877, C1/C2=2.916; exact: R1*C2*R2*C1 = 3180*75 us^2 and "
        "R1*C1+R1*C2+R2*C1 = 3255 us; the rounded triple 2187/750/318 satisfies both identities exactly",
        text="""
            in -- R1 -- out
            out -- (R2 + C1) || C2 -- gnd
            drive in;  read out
            R1 = 100 kohm;  R2 = 318 us/C1
            C1 = 21.87 nF;  C2 = 7.5 nF
        """,
        rows=REPRODUCTION,
        ref_f=1000,
        tol_db=0.0066,
    ),
    Response(
        id="riaa-feedback-ratio",
        title="feedback impedance (R1||C1)+(R2||C2): R1/R2=106/9=11.778, C1/C2=3.6",
        source="Lipshitz 1979 network (a); ratios from memory, both exact: (3180+75k)/(1+k)=318 gives k=2862/243=106/9",
        from_memory=True,
        note="driven by a current source: V/I is proportional to the reproduction curve; R1*C1=3180 us, R2*C2=75 us",
        text="""
            out -- R1 || C1 -- m -- R2 || C2 -- gnd
            drive current into out;  read out
            R1 = 106/9*R2;  R2 = 750 ohm
            C1 = 0.36 uF;  C2 = 0.1 uF
        """,
        rows=REPRODUCTION,
        ref_f=1000,
        tol_db=0.0066,
    ),
    Response(
        id="inverse-riaa-two-section",
        title="two-section inverse network with a 3.18 us extra pole (50 kHz corner)",
        source="J. Hagerman, On Reference RIAA Networks (public copy); section values 3.18k, 353.3, 1 uF, 7.5k, 10 nF",
        note="lead section 3.18 kohm || 1 uF over 353.3 ohm (R1/9), buffer, 7.5 kohm || 10 nF over 332.1 ohm; the 50 kHz pole "
        "bends the top end, so only rows up to 2 kHz are compared, at 0.02 dB",
        text="""
            in -- R1 || C1 -- a -- R2 -- gnd
            hold b = a as buffer
            b -- R3 || C3 -- c -- R4 -- gnd
            drive in;  read c
            R1 = 3.18 kohm;  C1 = 1 uF;  R2 = R1/9
            R3 = 7.5 kohm;  C3 = 10 nF;  R4 = R3*3.18 us/(R3*C3 - 3.18 us)
        """,
        rows=tuple((f, -db) for f, db in REPRODUCTION if f <= 2000),
        ref_f=1000,
        tol_db=0.02,
    ),
)

#: Published slip: the same article states 353.3 ohm also for the second section. R2 = R1*tau_p/(R1*C1-tau_p) =
#: 332.1 ohm; 353.3 ohm puts the pole at 3.374 us instead of 3.18 us. (Text of the scraped copy; the article's figure was
#: not visible.) Source: J. Hagerman, On Reference RIAA Networks, text after the lag-lead equation.
SLIP = Case(
    id="inverse-riaa-slip",
    source="J. Hagerman, On Reference RIAA Networks, text after the lag-lead equation",
    text="""
        b -- R3 || C3 -- c -- R4 -- gnd
        drive b;  read c
        R3 = 7.5 kohm;  C3 = 10 nF;  R4 = 353.3 ohm
    """,
)

#: -3.01 dB at 20.02 Hz within 0.01 dB. The high-pass is constructed from the time constant 7950 us.
RUMBLE = Response(
    id="riaa-iec-rumble",
    title="IEC amendment high-pass 7950 us",
    source="IEC 60098 amendment; from memory, trivially checkable",
    from_memory=True,
    text="""
        in -- C1 -- out -- R1 -- gnd
        drive in;  read out
        R1 = 7.95 kohm;  C1 = 1 uF
    """,
    rows=((20.02, -3.01),),
    ref_f=float("inf"),
    tol_db=0.01,
)

#: ITU-T J.17: f in Hz, insertion loss in dB = 10*log10((75+(w/3000)^2)/(1+(w/3000)^2)).
J17_ROWS: tuple[tuple[float, float], ...] = (
    (0, 18.75),
    (50, 18.7),
    (200, 18.06),
    (400, 16.48),
    (800, 13.1),
    (2000, 6.98),
    (4000, 3.1),
    (6400, 1.49),
    (8000, 1.01),
    (10000, 0.68),
)

J17 = Response(
    id="j17-network",
    title="constructed one-zero one-pole divider with the J.17 characteristic (zero 3000 rad/s, pole sqrt(75)*3000 rad/s)",
    source="constructed; table as j17-table: CCITT/ITU-T J.17 formula and table as quoted in a public engineering forum post",
    text="""
        in -- R1 || C1 -- out -- R2 -- gnd
        drive in;  read out
        R1 = 10 kohm;  R2 = 1305.439734843836 ohm;  C1 = 1 ms/(3*R1)
    """,
    rows=tuple((f, -db) for f, db in J17_ROWS),
    ref_f=float("inf"),
    tol_db=0.0051,
    note="R2 = R1/(sqrt(75) - 1), to the digits of a double",
)

#: De-emphasis 50 us and 75 us, |H|=1/sqrt(1+(w tau)^2); a plain RC low-pass is constructed from the time constant.
DEEMPHASIS: tuple[Response, ...] = (
    Response(
        id="deemph-75",
        source="closed form; figures computed here",
        from_memory=True,
        text="in -- R1 -- out -- C1 -- gnd;  drive in;  read out;  R1 = 7.5 kohm;  C1 = 10 nF",
        rows=((15000, -17.07), (1000, -0.87), (10000, -13.66)),
        ref_f=0,
        tol_db=0.006,
    ),
    Response(
        id="deemph-50",
        source="closed form; figures computed here",
        from_memory=True,
        text="in -- R1 -- out -- C1 -- gnd;  drive in;  read out;  R1 = 5 kohm;  C1 = 10 nF",
        rows=((15000, -13.66), (10000, -10.36), (1000, -0.41)),
        ref_f=0,
        tol_db=0.006,
    ),
)

#: (1+s50us)/(1+s15us) over its DC gain; at infinity 10.458 dB. The divider is constructed from the time constants.
PREEMPHASIS = Response(
    id="emph-50-15",
    title="50/15 us pre-emphasis (1+s50us)/(1+s15us)",
    source="IEC 60908 time constants; values from memory of usual tables, recomputed",
    from_memory=True,
    text="""
        in -- R1 || C1 -- out -- R2 -- gnd
        drive in;  read out
        R1 = 5 kohm;  C1 = 10 nF;  R2 = 3/7*R1
    """,
    rows=((1000, 0.37), (5000, 4.53), (10000, 7.6), (16000, 9.04), (20000, 9.49), (float("inf"), 10.458)),
    ref_f=0,
    tol_db=0.01,
)
