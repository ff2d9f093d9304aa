"""Active building blocks with their exact H(s) or Zin(s), as the textbooks print them."""

from __future__ import annotations

from tests.reference.cases import Formula

__all__ = ["CASES"]

OP_AMPS_FOR_EVERYONE = (
    'R. Mancini/B. Carter (eds.), Op Amps for Everyone, 5th ed., ch. 16 "Active filter design techniques", '
)
RECALLED = "textbook standard; formula recalled, proven here symbolically by nodal analysis"
STATE_VARIABLE = "Kerwin/Huelsman/Newcomb 1967; " + RECALLED
TWO_INTEGRATOR = "Tow 1968 / Thomas 1971; " + RECALLED

_STATE_VARIABLE_DRAWING = """
    in -- Ra -- p -- Rb -- bp                        # summing amplifier
    lp -- R1 -- m -- R2 -- hp
    U1: opamp(plus=p, minus=m, out=hp)
    hp -- R5 -- x -- C1 -- bp                        # first integrator
    U2: opamp(plus=gnd, minus=x, out=bp)
    bp -- R6 -- y -- C2 -- lp                        # second integrator
    U3: opamp(plus=gnd, minus=y, out=lp)
    drive in
"""

_TWO_INTEGRATOR_DRAWING = """
    in -- R1 -- m1 -- R2 || C1 -- bp                 # lossy integrator
    U1: opamp(plus=gnd, minus=m1, out=bp)
    bp -- R3 -- m2 -- C2 -- lp                       # integrator
    U2: opamp(plus=gnd, minus=m2, out=lp)
    lp -- Ri -- m3 -- Rf -- inv -- R4 -- m1          # inverter and the way back
    U3: opamp(plus=gnd, minus=m3, out=inv)
    Ri = r;  Rf = r
    drive in
"""

CASES: tuple[Formula, ...] = (
    Formula(
        id="sk-lp-K",
        title="positive-feedback two-pole low-pass, gain K",
        source=OP_AMPS_FOR_EVERYONE + "ch. 16, Fig. 16-15 and its transfer function (public excerpt)",
        text="""
            in -- R1 -- a -- R2 -- p
            p -- C1 -- gnd
            a -- C2 -- out
            hold out = K*p as amp1
            drive in
            read out
        """,
        formula="K/(1 + s*(C1*(R1 + R2) + (1 - K)*R1*C2) + s^2*R1*R2*C1*C2)",
        facts={
            "w0": "1/sqrt(R1*R2*C1*C2)",
            "Q": "sqrt(R1*R2*C1*C2)/(C1*(R1 + R2) + (1 - K)*R1*C2)",
        },
    ),
    Formula(
        id="sk-lp-opamp-gain",
        title="same with op-amp and divider R3 (to ground), R4 (feedback)",
        source=OP_AMPS_FOR_EVERYONE + "ch. 16, Fig. 16-15 (A0=1+R4/R3)",
        text="""
            in -- R1 -- a -- R2 -- p -- C1 -- gnd
            a -- C2 -- out
            out -- R4 -- m -- R3 -- gnd
            U1: opamp(plus=p, minus=m, out=out)
            drive in
            read out
        """,
        formula="(1 + R4/R3)/(1 + s*(C1*(R1 + R2) - R4/R3*R1*C2) + s^2*R1*R2*C1*C2)",
    ),
    Formula(
        id="sk-hp-K",
        title="positive-feedback two-pole high-pass, gain K",
        source=OP_AMPS_FOR_EVERYONE + "ch. 16, high-pass section",
        from_memory=True,
        text="""
            in -- C1 -- a -- C2 -- p
            p -- R1 -- gnd
            a -- R2 -- out
            hold out = K*p as amp1
            drive in
            read out
        """,
        formula="K*s^2*R1*R2*C1*C2/(1 + s*(R2*(C1 + C2) + (1 - K)*R1*C2) + s^2*R1*R2*C1*C2)",
    ),
    Formula(
        id="sk-bp-equal",
        title="positive-feedback band-pass, R,R,2R,C,C, gain K",
        source=OP_AMPS_FOR_EVERYONE + "ch. 16, band-pass section; Q=1/(3-K), mid gain K/(3-K)",
        from_memory=True,
        text="""
            in -- R1 -- a -- C2 -- p
            a -- C1 -- gnd
            p -- R2 -- gnd
            a -- R3 -- out
            hold out = K*p as amp1
            drive in
            read out
            R1 = R;  R2 = 2*R;  R3 = R
            C1 = C;  C2 = C
        """,
        formula="K*s*R*C/(1 + s*R*C*(3 - K) + s^2*R^2*C^2)",
        facts={"w0": "1/(R*C)", "Q": "1/(3 - K)", "gain at w0": "K/(3 - K)"},
    ),
    Formula(
        id="mfb-lp",
        title="multiple-feedback low-pass",
        source=OP_AMPS_FOR_EVERYONE + "ch. 16 and TI SLOA049 sec. 7",
        from_memory=True,
        text="""
            in -- R1 -- a -- R3 -- m -- C1 -- out
            a -- R2 -- out
            a -- C2 -- gnd
            U1: opamp(plus=gnd, minus=m, out=out)
            drive in
            read out
        """,
        formula="-(R2/R1)/(1 + s*C1*(R2 + R3 + R2*R3/R1) + s^2*C1*C2*R2*R3)",
    ),
    Formula(
        id="mfb-hp",
        title="multiple-feedback high-pass",
        source=OP_AMPS_FOR_EVERYONE + "ch. 16",
        from_memory=True,
        text="""
            in -- C1 -- a -- C3 -- m -- R2 -- out
            a -- C2 -- out
            a -- R1 -- gnd
            U1: opamp(plus=gnd, minus=m, out=out)
            drive in
            read out
        """,
        formula="-s^2*C1*C3*R1*R2/(1 + s*R1*(C1 + C2 + C3) + s^2*C2*C3*R1*R2)",
    ),
    Formula(
        id="svf-bp",
        title="state-variable section, band-pass output",
        source=STATE_VARIABLE,
        from_memory=True,
        text=_STATE_VARIABLE_DRAWING + "    read bp\n",
        formula="-Rb*(R1 + R2)/(R1*(Ra + Rb))*s/(R5*C1)"
        "/(s^2 + s*Ra*(R1 + R2)/((Ra + Rb)*R1*R5*C1) + R2/(R1*R5*C1*R6*C2))",
    ),
    Formula(
        id="svf-lp",
        title="state-variable section, low-pass output",
        source=STATE_VARIABLE,
        from_memory=True,
        text=_STATE_VARIABLE_DRAWING + "    read lp\n",
        formula="Rb*(R1 + R2)/(R1*(Ra + Rb))/(R5*C1*R6*C2)"
        "/(s^2 + s*Ra*(R1 + R2)/((Ra + Rb)*R1*R5*C1) + R2/(R1*R5*C1*R6*C2))",
    ),
    Formula(
        id="tt-bp",
        title="two-integrator-loop biquad (lossy integrator, integrator, inverter), band-pass output",
        source=TWO_INTEGRATOR,
        from_memory=True,
        text=_TWO_INTEGRATOR_DRAWING + "    read bp\n",
        formula="-(s/(R1*C1))/(s^2 + s/(R2*C1) + 1/(R3*R4*C1*C2))",
    ),
    Formula(
        id="tt-lp",
        title="two-integrator-loop biquad, low-pass at the second integrator",
        source=TWO_INTEGRATOR,
        from_memory=True,
        text=_TWO_INTEGRATOR_DRAWING + "    read lp\n",
        formula="(1/(R1*R3*C1*C2))/(s^2 + s/(R2*C1) + 1/(R3*R4*C1*C2))",
    ),
    Formula(
        id="twin-t-boot",
        title="twin-T with the foot bootstrapped by k times the buffered output",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- R1 -- a -- R2 -- t
            in -- C1 -- c -- C2 -- t
            a -- C3 -- f
            c -- R3 -- f
            hold out = t as amp1
            hold f = k*out as amp2
            drive in
            read out
            R1 = R;  R2 = R;  R3 = R/2
            C1 = C;  C2 = C;  C3 = 2*C
        """,
        formula="(1 + s^2*R^2*C^2)/(1 + 4*(1 - k)*s*R*C + s^2*R^2*C^2)",
        facts={"w0": "1/(R*C)", "Q": "1/(4*(1 - k))"},
    ),
    Formula(
        id="bridged-t-c",
        title="bridged-T: two series C, shunt R1, bridging R2",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- C1 -- a -- C2 -- out
            a -- R1 -- gnd
            in -- R2 -- out
            drive in
            read out
            C1 = C;  C2 = C
        """,
        formula="(1 + 2*s*R1*C + s^2*R1*R2*C^2)/(1 + s*C*(2*R1 + R2) + s^2*R1*R2*C^2)",
    ),
    Formula(
        id="wien",
        title="Wien network, unequal",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- R1 -- a -- C1 -- out
            out -- R2 || C2 -- gnd
            drive in
            read out
        """,
        formula="s*R2*C1/(1 + s*(R1*C1 + R2*C2 + R2*C1) + s^2*R1*R2*C1*C2)",
        facts={"equal": "s*R*C/(1 + 3*s*R*C + s^2*R^2*C^2)"},
        note="equal parts: 1/3 at w=1/RC, phase 0",
    ),
    Formula(
        id="rc3-hp",
        title="three equal CR sections, high-pass (phase-shift oscillator)",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- C1 -- a -- C2 -- c -- C3 -- out
            a -- R1 -- gnd
            c -- R2 -- gnd
            out -- R3 -- gnd
            drive in
            read out
            C1 = C;  C2 = C;  C3 = C
            R1 = R;  R2 = R;  R3 = R
        """,
        formula="s^3*R^3*C^3/(1 + 5*s*R*C + 6*s^2*R^2*C^2 + s^3*R^3*C^3)",
        note="phase 180 degrees at w*R*C = 1/sqrt(6), where a gain of 29 is needed",
    ),
    Formula(
        id="gic-fdnr",
        title="frequency-dependent negative resistance: Zin = R3/(s^2 C1 C5 R2 R4)",
        source="Bruton 1969; " + RECALLED,
        from_memory=True,
        text="""
            in -- C1 -- n2 -- R2 -- n3 -- R3 -- n4 -- R4 -- n5 -- C5 -- gnd
            U1: opamp(plus=in, minus=n3, out=n4)
            U2: opamp(plus=n5, minus=n3, out=n2)
            drive current into in
            read in
        """,
        formula="R3/(s^2*C1*C5*R2*R4)",
    ),
    Formula(
        id="gyr-1op",
        title="one-op-amp gyrator (lossy inductor): RL to the follower output, C and R at the + input",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- RL -- o
            in -- C -- p -- R -- gnd
            U1: opamp(plus=p, minus=o, out=o)
            drive current into in
            read in
        """,
        formula="RL*(1 + s*R*C)/(1 + s*RL*C)",
    ),
    Formula(
        id="nic",
        title="negative resistance converter, load R, equal arms r",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- Ra -- o -- Rb -- m -- R -- gnd
            U1: opamp(plus=in, minus=m, out=o)
            drive current into in
            read in
            free r                                   # not R, which is the load
            Ra = r;  Rb = r
        """,
        formula="-R",
    ),
    Formula(
        id="howland",
        title="voltage-controlled current source (matched r): load current vin/r independent of load",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- Ra -- p -- Rb -- o
            gnd -- Rc -- m -- Rd -- o
            p -- RL -- gnd
            U1: opamp(plus=p, minus=m, out=o)
            drive in
            read p
            Ra = r;  Rb = r;  Rc = r;  Rd = r
        """,
        formula="RL/r",
    ),
    Formula(
        id="diff-amp",
        title="difference amplifier with mismatched arms, common-mode drive",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- R1 -- m -- R2 -- out
            in -- R3 -- p -- R4 -- gnd
            U1: opamp(plus=p, minus=m, out=out)
            drive in
            read out
        """,
        formula="(R1*R4 - R2*R3)/(R1*(R3 + R4))",
    ),
    Formula(
        id="inv-gbw",
        title="inverting amplifier, op-amp A(s)=wt/s",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- R1 -- m -- R2 -- out
            hold out = -(wt/s)*m as amp1
            drive in
            read out
        """,
        formula="-(R2/R1)/(1 + s/wt*(1 + R2/R1))",
    ),
    Formula(
        id="cfa",
        title="current-feedback amplifier, non-inverting, transimpedance Zt=Rt/(1+s Rt Ct), ideal input buffer",
        source="current-feedback amplifier theory: bandwidth set by Rf*Ct, not by gain; " + RECALLED,
        from_memory=True,
        text="""
            m -- Rg -- gnd
            m -- Rf -- out
            free Rt in ohm;  free Ct in F
            hold m = in as buffer
            hold out = Rt/(1 + s*Rt*Ct)*(i_Rg + i_Rf) as amp
            drive in
            read out
        """,
        formula="(1 + Rf/Rg)/(1 + Rf/Rt + s*Rf*Ct)",
        note="the output is Zt times the current flowing OUT of the buffer, which is i_Rg + i_Rf",
    ),
    Formula(
        id="sk3-unity",
        title="single-op-amp third-order low-pass, equal R, C1 and C3 to ground, C2 to output",
        source="Geffe/Williams unity-gain tables; " + RECALLED,
        from_memory=True,
        text="""
            in -- R1 -- a -- R2 -- c -- R3 -- p
            a -- C1 -- gnd
            c -- C2 -- out
            p -- C3 -- gnd
            U1: opamp(plus=p, minus=out, out=out)
            drive in
            read out
            R1 = R;  R2 = R;  R3 = R
        """,
        formula="1/(1 + s*R*(C1 + 3*C3) + 2*s^2*R^2*C3*(C1 + C2) + s^3*R^3*C1*C2*C3)",
    ),
    Formula(
        id="sk-loaded-source",
        title="two-pole unity section driven from source resistance Rg",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- Rg -- g -- R1 -- a -- R2 -- p
            p -- C1 -- gnd
            a -- C2 -- out
            U1: opamp(plus=p, minus=out, out=out)
            drive in
            read out
        """,
        formula="1/(1 + s*C1*(Rg + R1 + R2) + s^2*(Rg + R1)*R2*C1*C2)",
    ),
)
