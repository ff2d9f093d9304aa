"""Voltage-driven, resistor-terminated ladders: Butterworth, Chebyshev, and loudspeaker crossovers.

Prototypes are for 1 ohm and 1 rad/s. Crossover tables print x with L = x R/f and C = x/(R f); the networks here
take R = 1 ohm and f = 1 Hz, so that the digits stand as printed and the nominal frequency is 1 Hz. Chebyshev
tables count 3 dB from the DC gain, which is a ripple minimum when the order is even.
"""

from __future__ import annotations

from tests.reference.cases import Formula, Ladder

__all__ = ["CASES", "HAND_DERIVATION"]

CLOSED_FORM = "closed form (Matthaei/Young/Jones; Weinberg); four-decimal values as usual in handbooks, from memory, equal to the closed form"
WINDER_2_19 = (
    "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.19 p. 69 (ripple 0.5 dB)"
)
WINDER_2_20 = (
    "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.20 p. 69 (ripple 1.0 dB)"
)
DICKASON = "V. Dickason, The Loudspeaker Design Cookbook, 4th ed. 1991, two-way network formulas (as reproduced on public formula pages)"
DICKASON_SECOND_ORDER = "V. Dickason, The Loudspeaker Design Cookbook, 4th ed. 1991, two-way network formulas (as reproduced on public formula pages) (second order; public formula page)"
DICKASON_THIRD_ORDER = "V. Dickason, The Loudspeaker Design Cookbook, 4th ed. 1991, two-way network formulas (as reproduced on public formula pages) (third order; public formula page)"
FROM_DC = "3 dB frequency measured relative to the DC gain; for even n DC is a ripple minimum"
PAPOULIS = "Papoulis L4 shape, -3 dB at 1.118 (published tables do not put it at 1)"

CASES: tuple[Ladder, ...] = (
    Ladder(
        id="bw-singly-2",
        family="butterworth",
        order=2,
        tol_pole=1e-08,
        tol_value=6e-05,
        published=(1.4142, 0.7071),
        source=CLOSED_FORM,
        from_memory=True,
        text="""
            in -- L1 -- out
            out -- C2 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.414213562373095 H;  C2 = 0.7071067811865475 F
        """,
    ),
    Ladder(
        id="bw-singly-3",
        family="butterworth",
        order=3,
        tol_pole=1e-08,
        tol_value=6e-05,
        published=(1.5, 1.3333, 0.5),
        source=CLOSED_FORM,
        from_memory=True,
        text="""
            in -- L1 -- a -- L3 -- out
            a -- C2 -- gnd;  out -- RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.5 H;  C2 = 1.333333333333333 F;  L3 = 0.5 H
        """,
    ),
    Ladder(
        id="bw-singly-4",
        family="butterworth",
        order=4,
        tol_pole=1e-08,
        tol_value=6e-05,
        published=(1.5307, 1.5772, 1.0824, 0.3827),
        source=CLOSED_FORM,
        from_memory=True,
        text="""
            in -- L1 -- a -- L3 -- out
            a -- C2 -- gnd;  out -- C4 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.530733729460359 H;  C2 = 1.577161014949475 F;  L3 = 1.082392200292394 H
            C4 = 0.3826834323650898 F
        """,
    ),
    Ladder(
        id="bw-singly-6",
        family="butterworth",
        order=6,
        tol_pole=1e-08,
        tol_value=6e-05,
        published=(1.5529, 1.7593, 1.5529, 1.2016, 0.7579, 0.2588),
        source=CLOSED_FORM,
        from_memory=True,
        text="""
            in -- L1 -- a -- L3 -- b -- L5 -- out
            a -- C2 -- gnd;  b -- C4 -- gnd;  out -- C6 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.552914270615125 H;  C2 = 1.759305622509789 F;  L3 = 1.552914270615125 H
            C4 = 1.201628086684584 F;  L5 = 0.757874763926024 H;  C6 = 0.2588190451025208 F
        """,
    ),
    Ladder(
        id="bw-singly-8",
        family="butterworth",
        order=8,
        tol_pole=1e-08,
        tol_value=6e-05,
        published=(1.5607, 1.8246, 1.7287, 1.5283, 1.2588, 0.9371, 0.5776, 0.1951),
        source=CLOSED_FORM,
        from_memory=True,
        text="""
            in -- L1 -- a -- L3 -- b -- L5 -- c -- L7 -- out
            a -- C2 -- gnd;  b -- C4 -- gnd;  c -- C6 -- gnd;  out -- C8 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.560722576129026 H;  C2 = 1.824641424798066 F;  L3 = 1.728735293975934 H
            C4 = 1.528318552979502 F;  L5 = 1.258821028352124 H;  C6 = 0.9370517337539396 F
            L7 = 0.577551997025929 H;  C8 = 0.1950903220161283 F
        """,
    ),
    Ladder(
        id="cheb0.5-singly-4",
        family="chebyshev_3db_dcref",
        order=4,
        ripple_db=0.5,
        tol_pole=1e-05,
        source=WINDER_2_19,
        text="""
            in -- L1 -- a -- L3 -- out
            a -- C2 -- gnd;  out -- C4 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.45345 H;  C2 = 1.91162 F;  L3 = 1.53954 H;  C4 = 0.92395 F
        """,
        note=FROM_DC,
    ),
    Ladder(
        id="cheb0.5-singly-5",
        family="chebyshev_3db_dcref",
        order=5,
        ripple_db=0.5,
        tol_pole=1e-05,
        source=WINDER_2_19,
        text="""
            in -- L1 -- a -- L3 -- b -- L5 -- out
            a -- C2 -- gnd;  b -- C4 -- gnd;  out -- RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.62994 H;  C2 = 1.73996 F;  L3 = 1.92168 H;  C4 = 1.51377 F;  L5 = 0.90343 H
        """,
        note=FROM_DC,
    ),
    Ladder(
        id="cheb0.5-singly-7",
        family="chebyshev_3db_dcref",
        order=7,
        ripple_db=0.5,
        tol_pole=1e-05,
        source=WINDER_2_19,
        text="""
            in -- L1 -- a -- L3 -- b -- L5 -- c -- L7 -- out
            a -- C2 -- gnd;  b -- C4 -- gnd;  c -- C6 -- gnd;  out -- RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.64643 H;  C2 = 1.77716 F;  L3 = 2.03065 H;  C4 = 1.78918 F;  L5 = 1.92388 H
            C6 = 1.50337 F;  L7 = 0.89478 H
        """,
        note=FROM_DC,
    ),
    Ladder(
        id="cheb0.5-singly-8",
        family="chebyshev_3db_dcref",
        order=8,
        ripple_db=0.5,
        tol_pole=1e-05,
        source=WINDER_2_19,
        text="""
            in -- L1 -- a -- L3 -- b -- L5 -- c -- L7 -- out
            a -- C2 -- gnd;  b -- C4 -- gnd;  c -- C6 -- gnd;  out -- C8 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.47565 H;  C2 = 2.00848 F;  L3 = 1.83056 H;  C4 = 2.05041 F;  L5 = 1.79671 H
            C6 = 1.92786 F;  L7 = 1.50504 H;  C8 = 0.89543 F
        """,
        note="3 dB frequency measured relative to the DC gain; for even n DC is a ripple minimum; last element printed 0.89433 in the text copy, 0.89543 restores the response",
    ),
    Ladder(
        id="cheb1.0-singly-2",
        family="chebyshev_3db_dcref",
        order=2,
        ripple_db=1,
        tol_pole=1e-05,
        source=WINDER_2_20,
        text="""
            in -- L1 -- out
            out -- C2 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.30223 H;  C2 = 1.19145 F
        """,
        note=FROM_DC,
    ),
    Ladder(
        id="cheb1.0-singly-4",
        family="chebyshev_3db_dcref",
        order=4,
        ripple_db=1,
        tol_pole=1e-05,
        source=WINDER_2_20,
        text="""
            in -- L1 -- a -- L3 -- out
            a -- C2 -- gnd;  out -- C4 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.37686 H;  C2 = 2.05105 F;  L3 = 1.5174 H;  C4 = 1.12742 F
        """,
        note=FROM_DC,
    ),
    Ladder(
        id="cheb1.0-singly-5",
        family="chebyshev_3db_dcref",
        order=5,
        ripple_db=1,
        tol_pole=1e-05,
        source=WINDER_2_20,
        text="""
            in -- L1 -- a -- L3 -- b -- L5 -- out
            a -- C2 -- gnd;  b -- C4 -- gnd;  out -- RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.72155 H;  C2 = 1.64455 F;  L3 = 2.06119 H;  C4 = 1.49297 F;  L5 = 1.10354 H
        """,
        note=FROM_DC,
    ),
    Ladder(
        id="cheb1.0-singly-9",
        family="chebyshev_3db_dcref",
        order=9,
        ripple_db=1,
        tol_pole=1e-05,
        source=WINDER_2_20,
        text="""
            in -- L1 -- a -- L3 -- b -- L5 -- c -- L7 -- d -- L9 -- out
            a -- C2 -- gnd;  b -- C4 -- gnd;  c -- C6 -- gnd;  d -- C8 -- gnd
            out -- RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.7497 H;  C2 = 1.6881 F;  L3 = 2.17984 H;  C4 = 1.73916 F;  L5 = 2.18069 H
            C6 = 1.70937 F;  L7 = 2.08153 H;  C8 = 1.49435 F;  L9 = 1.10119 H
        """,
        note=FROM_DC,
    ),
    Ladder(
        id="cheb1.0-singly-10",
        family="chebyshev_3db_dcref",
        order=10,
        ripple_db=1,
        tol_pole=1e-05,
        source=WINDER_2_20,
        text="""
            in -- L1 -- a -- L3 -- b -- L5 -- c -- L7 -- d -- L9 -- out
            a -- C2 -- gnd;  b -- C4 -- gnd;  c -- C6 -- gnd;  d -- C8 -- gnd
            out -- C10 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 1.39636 H;  C2 = 2.13592 F;  L3 = 1.7417 H;  C4 = 2.20597 F;  L5 = 1.75099 H
            C6 = 2.19124 F;  L7 = 1.71609 H;  C8 = 2.08873 F;  L9 = 1.49916 H;  C10 = 1.10462 F
        """,
        note=FROM_DC,
    ),
    Ladder(
        id="xover4-hp-linkwitz_riley",
        family="butterworth2^2",
        order=4,
        tol_pole=0.05,
        nominal_f=1,
        source=DICKASON,
        text="""
            in -- C1 -- a -- C2 -- out
            a -- L1 -- gnd;  out -- L2 || R -- gnd
            drive in;  read out
            R = 1 ohm
            C1 = 0.0844 F;  L1 = 0.1 H;  C2 = 0.1688 F;  L2 = 0.4501 H
        """,
        note="shape of squared Butterworth-2, -6.02 dB at w=1 (double pole pair: pole distance is sqrt-sensitive, use response)",
    ),
    Ladder(
        id="xover4-hp-butterworth",
        family="butterworth",
        order=4,
        tol_pole=0.004,
        nominal_f=1,
        source=DICKASON,
        text="""
            in -- C1 -- a -- C2 -- out
            a -- L1 -- gnd;  out -- L2 || R -- gnd
            drive in;  read out
            R = 1 ohm
            C1 = 0.104 F;  L1 = 0.1009 H;  C2 = 0.147 F;  L2 = 0.4159 H
        """,
        note="-3.01 dB at w=1",
    ),
    Ladder(
        id="xover4-lp-legendre",
        family="papoulis",
        order=4,
        tol_pole=0.003,
        nominal_f=1,
        source=DICKASON,
        text="""
            in -- L1 -- a -- L3 -- out
            a -- C2 -- gnd;  out -- C4 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 0.2294 H;  C2 = 0.2365 F;  L3 = 0.2034 H;  C4 = 0.091 F
        """,
        note=PAPOULIS,
    ),
    Ladder(
        id="xover4-hp-legendre",
        family="papoulis",
        order=4,
        tol_pole=0.003,
        nominal_f=1,
        source=DICKASON,
        text="""
            in -- C1 -- a -- C2 -- out
            a -- L1 -- gnd;  out -- L2 || R -- gnd
            drive in;  read out
            R = 1 ohm
            C1 = 0.1104 F;  L1 = 0.1073 H;  C2 = 0.1246 F;  L2 = 0.2783 H
        """,
        note=PAPOULIS,
    ),
    Ladder(
        id="xover4-hp-linear_phase",
        family="linear_phase",
        order=4,
        nominal_f=1,
        source=DICKASON,
        text="""
            in -- C1 -- a -- C2 -- out
            a -- L1 -- gnd;  out -- L2 || R -- gnd
            drive in;  read out
            R = 1 ohm
            C1 = 0.0741 F;  L1 = 0.1079 H;  C2 = 0.1524 F;  L2 = 0.3853 H
        """,
        note="said to be -6.0 dB at w=1, but the printed elements give -6.54 dB; the shape is that of linear phase with an equiripple error of 0.05 degree, within 0.12 % of the poles",
    ),
    Ladder(
        id="xover2-lp-chebychev_q1",
        family="Q=1 section",
        order=2,
        q=1.0,
        tol_value=0.003,
        nominal_f=1,
        source=DICKASON_SECOND_ORDER,
        text="""
            in -- L1 -- out
            out -- C2 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 0.1592 H;  C2 = 0.1592 F
        """,
    ),
    Ladder(
        id="xover2-lp-linkwitz_riley",
        family="butterworth1^2",
        order=2,
        q=0.5,
        tol_value=0.003,
        nominal_f=1,
        source=DICKASON_SECOND_ORDER,
        text="""
            in -- L1 -- out
            out -- C2 || RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 0.3183 H;  C2 = 0.0796 F
        """,
    ),
    Ladder(
        id="xover3-lp-butterworth",
        family="butterworth",
        order=3,
        tol_pole=0.002,
        nominal_f=1,
        source=DICKASON_THIRD_ORDER,
        text="""
            in -- L1 -- a -- L3 -- out
            a -- C2 -- gnd;  out -- RL -- gnd
            drive in;  read out
            RL = 1 ohm
            L1 = 0.2387 H;  C2 = 0.2122 F;  L3 = 0.0796 H
        """,
        note="0.2387=1.5/2pi, 0.2122=(4/3)/2pi, 0.0796=0.5/2pi: the same hand derivation bw3",
    ),
)

HAND_DERIVATION = Formula(
    id="bw3-hand-derivation",
    title="third-order ladder, stiff source, L1 - shunt C - L2 - load R",
    source="standard result; verified symbolically here",
    text="""
            in -- L1 -- a -- L2 -- out
            a -- C -- gnd;  out -- R -- gnd
            drive in;  read out
            L1 = 3*R*tau/2;  C = 4*tau/(3*R);  L2 = R*tau/2
    """,
    formula="1/((s*tau + 1)*(s^2*tau^2 + s*tau + 1))",
    facts={
        "phase at w*tau = 1": "-135",
        "phase at infinity": "-270",
        "w*tau of -45 degrees": "(3 - sqrt(5))/2",
    },
    note="phase is exactly -45 deg at w*tau=(3-sqrt(5))/2=0.381966 (root of x^2-3x+1), -135 deg at w*tau=1 and "
    "tends to -270 deg; the -45 deg of the 'first-order factor alone' happens at w*tau=1",
)
