"""Passive two-ports with their exact H(s) or Zin(s), as the textbooks print them."""

from __future__ import annotations

from tests.reference.cases import Formula

__all__ = ["CASES"]

RECALLED = "textbook standard; formula recalled, proven here symbolically by nodal analysis"

CASES: tuple[Formula, ...] = (
    Formula(
        id="rlc-lp",
        title="series R-L, shunt C",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- R -- a -- L -- out
            out -- C -- gnd
            drive in
            read out
        """,
        formula="1/(1 + s*R*C + s^2*L*C)",
    ),
    Formula(
        id="lp2-loaded",
        title="series L, shunt C, load R (stiff source)",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- L -- out
            out -- C || R -- gnd
            drive in
            read out
        """,
        formula="1/(1 + s*L/R + s^2*L*C)",
    ),
    Formula(
        id="ladder3-single",
        title="series L1, shunt C, series L2, load R (stiff source)",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- L1 -- a -- L2 -- out
            a -- C -- gnd
            out -- R -- gnd
            drive in
            read out
        """,
        formula="1/(1 + s*(L1 + L2)/R + s^2*L1*C + s^3*L1*L2*C/R)",
    ),
    Formula(
        id="pi-double",
        title="Rs, C1, L, C2, Rl pi section",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- Rs -- a -- L -- out
            a -- C1 -- gnd
            out -- C2 || Rl -- gnd
            drive in
            read out
        """,
        formula="Rl/(Rs + Rl + s*(L + C1*Rs*Rl + C2*Rs*Rl) + s^2*(L*C1*Rs + L*C2*Rl) + s^3*L*C1*C2*Rs*Rl)",
    ),
    Formula(
        id="lag",
        title="lag network R1 over R2+C",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- R1 -- out
            out -- R2 + C -- gnd
            drive in
            read out
        """,
        formula="(1 + s*R2*C)/(1 + s*(R1 + R2)*C)",
    ),
    Formula(
        id="zobel",
        title="loudspeaker conjugate: (R+sL) in parallel with series R, L/R^2 gives R",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- (R1 + L) || (R2 + C) -- gnd
            drive current into in
            read in
            R1 = R;  R2 = R
            C = L/R^2
        """,
        formula="R",
    ),
    Formula(
        id="lattice-zin",
        title="input impedance of that lattice",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- L1 -- c -- R -- d -- L2 -- gnd
            in -- C1 -- d
            c -- C2 -- gnd
            drive current into in
            read in
            L1 = L;  L2 = L
            C1 = L/R^2;  C2 = L/R^2
        """,
        formula="R",
        note="the lattice is the all-pass one: series arms L, crossed arms L/R^2, load R",
    ),
    Formula(
        id="bridged-t-eq",
        title="constant-R bridged-T equaliser: bridging Z1=L||... here series arm L, shunt arm C=L/R^2, "
        "arms R, R, load R",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- Ra -- m -- Rb -- out
            in -- L -- out
            m -- C -- gnd
            out -- Rl -- gnd
            drive in
            read out
            Ra = R;  Rb = R;  Rl = R
            C = L/R^2
        """,
        formula="R/(R + s*L)",
    ),
    Formula(
        id="xo1-sum",
        title="first-order crossover pair input impedance with L=R^2 C",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- C -- a -- R1 -- gnd
            in -- L -- c -- R2 -- gnd
            drive current into in
            read in
            R1 = R;  R2 = R
            L = R^2*C
        """,
        formula="R",
    ),
    Formula(
        id="s21-series",
        title="series impedance between matched ports: S21 = 2 Z0/(2 Z0+Z) (here 2*Vout/Vs)",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- Rs -- a -- Z -- out -- Rl -- gnd
            drive in
            read out
            free Z0 in ohm
            Rs = Z0;  Rl = Z0
        """,
        formula="Z0/(2*Z0 + Z)",
        facts={"S11": "Z/(Z + 2*Z0)", "port": "a"},
    ),
    Formula(
        id="s21-shunt",
        title="shunt admittance Y=1/Zp between matched ports: S21 = 2/(2+Y Z0)",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- Rs -- out
            out -- Zp || Rl -- gnd
            drive in
            read out
            free Z0 in ohm
            Rs = Z0;  Rl = Z0
        """,
        formula="1/(2 + Z0/Zp)",
        facts={"S11": "-Z0/(2*Zp + Z0)", "port": "out"},
    ),
    Formula(
        id="tee-abcd",
        title="T of Z1,Z2 series and Z3 shunt: open-circuit voltage gain 1/A with A=1+Z1/Z3",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- Z1 -- a -- Z2 -- out
            a -- Z3 -- gnd
            drive in
            read out
        """,
        formula="1/(1 + Z1/Z3)",
        facts={
            "A": "1 + Z1/Z3",
            "B": "Z1 + Z2 + Z1*Z2/Z3",
            "C": "1/Z3",
            "D": "1 + Z2/Z3",
            "last": "Z2",
        },
    ),
    Formula(
        id="pi-abcd",
        title="pi of Y1,Y2 shunt and series Z: short-circuit transfer, B=Z",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- R1 -- gnd
            in -- Z -- out
            out -- R2 -- gnd
            drive in
            read out
        """,
        formula="1/(1 + Z/R2)",
        facts={
            "A": "1 + Z/R2",
            "B": "Z",
            "C": "1/R1 + 1/R2 + Z/(R1*R2)",
            "D": "1 + Z/R1",
            "last": "Z",
        },
    ),
    Formula(
        id="xfmr-load",
        title="ideal transformer n:1 reflects its load: Zin = n^2 RL",
        source=RECALLED,
        from_memory=True,
        text="""
            T1: transformer(p1=in, p2=gnd, s1=a, s2=gnd, n=n)
            a -- RL -- gnd
            drive current into in
            read in
        """,
        formula="n^2*RL",
    ),
    Formula(
        id="double-tuned",
        title="double-tuned circuit, equal LC, coupling k: poles at w0/sqrt(1 +- k)",
        source=RECALLED,
        from_memory=True,
        text="""
            in -- L1 || C1 -- gnd
            out -- L2 || C2 -- gnd
            couple L1 to L2 with k
            drive current into in
            read out
            L1 = L;  L2 = L
            C1 = C;  C2 = C
        """,
        formula="s*k*L/((1 + (1 + k)*s^2*L*C)*(1 + (1 - k)*s^2*L*C))",
    ),
)
