"""Texts of notation 1 and the network each of them is, frozen: every later release must read them so.

The second text of a pair is the network written back, in which every rule has been applied.
"""

from __future__ import annotations

CORPUS: tuple[tuple[str, str], ...] = (
    (
        "in -- R1 -- out -- C1 -- gnd; drive in; read out",
        """\
in -- R1 -- out -- C1 -- gnd
drive in
read out""",
    ),
    (
        """\
notation 1
in--R1--a--R2+(L2||C2)--out
out -- RL -- gnd
drive in as Vs
read out""",
        """\
in -- R1 -- a -- R2 + (L2 || C2) -- out -- RL -- gnd
drive in as Vs
read out""",
    ),
    (
        """\
in -- R1 = 4k7 -- out -- C1 = 22 nF ±5% -- gnd
drive in; read out""",
        """\
in -- R1 -- out -- C1 -- gnd
drive in
read out
R1 = 4.7 kohm
C1 = 22 nF ±5%""",
    ),
    (
        """\
1 -- R1 -- 2 -- L1 + C1 -- gnd
drive current into 1 as Is
read v_2 - v_1""",
        """\
1 -- R1 -- 2 -- L1 + C1 -- gnd
drive current into 1 as Is
read v_2 - v_1""",
    ),
    (
        """\
in – R1 – a – R2 – out
a – C1 – gnd;  out – C2 – gnd
drive in; read out
R1, R2 = 10 kΩ; C1, C2 = 1 µF""",
        """\
in -- R1 -- a -- R2 -- out
a -- C1 -- gnd
out -- C2 -- gnd
drive in
read out
R1, R2 = 10 kohm
C1, C2 = 1 uF""",
    ),
    (
        """\
Rs, RL = 600 ohm +/-1%
in -- Rs -- out -- RL -- gnd
drive in - gnd
read out - gnd""",
        """\
in -- Rs -- out -- RL -- gnd
drive in
read out
Rs, RL = 600 ohm ±1%""",
    ),
    (
        """\
in -- R1 -- m -- R2 -- out
U1: opamp(plus=gnd, minus=m, out=out)
drive in
read out""",
        """\
in -- R1 -- m -- R2 -- out
U1: opamp(plus=gnd, minus=m, out=out)
drive in
read out""",
    ),
    (
        """\
in -- R1 -- p -- C1 -- gnd
hold out = mu*(p - m)
out -- R2 -- m -- R3 -- gnd
mu = 2e5
drive in; read out""",
        """\
in -- R1 -- p -- C1 -- gnd
hold out = mu*(p - m)
out -- R2 -- m -- R3 -- gnd
drive in
read out
mu = 200000""",
    ),
    (
        """\
g -- R1 -- gnd; d -- R2 -- gnd
push from d to gnd = gm*g as amp1
gm = 2 mS
drive g
read i_R2""",
        """\
g -- R1 -- gnd
d -- R2 -- gnd
push from d to gnd = gm*g as amp1
drive g
read i_R2
gm = 2 mS""",
    ),
    (
        """\
a -- R1 -- b; b -- R2 -- gnd
hold c - b = r*i_R1 as amp2
c -- R3 -- gnd
r = 50 ohm
drive a; read c""",
        """\
a -- R1 -- b -- R2 -- gnd
hold c - b = r*i_R1 as amp2
c -- R3 -- gnd
drive a
read c
r = 50 ohm""",
    ),
    (
        """\
in -- Z1 -- out -- Y1 -- gnd
Z1 = R/(1 + s*R*C)
Y1 = 1/(2 kohm) + s*1 nF
drive in; read out""",
        """\
in -- Z1 -- out -- Y1 -- gnd
drive in
read out
Z1 = R/(1 + s*R*C)
Y1 = 1/(2 kohm) + s*1 nF""",
    ),
    (
        """\
in -- R1 -- a -- R2 -- out; a -- C3 -- gnd; in -- C1 -- b -- C2 -- out; b -- R3 -- gnd
drive in; read out
R1, R2 = R; R3 = R/2; C1, C2 = C; C3 = 2*C
R = 33k; C = 100n""",
        """\
in -- R1 -- a -- R2 -- out
a -- C3 -- gnd
in -- C1 -- b -- C2 -- out
b -- R3 -- gnd
drive in
read out
R1 = R
R2 = R
R3 = R/2
C1 = C
C2 = C
C3 = 2*C
R = 33 kohm
C = 100 nF""",
    ),
    (
        """\
free Z0 in ohm
in -- R1 -- out -- R2 -- gnd
R1, R2 = Z0
drive in; read out""",
        """\
in -- R1 -- out -- R2 -- gnd
drive in
read out
free Z0 in ohm
R1 = Z0
R2 = Z0""",
    ),
    (
        """\
in -- (R1 || C1) + R2 -- out -- C2 -- gnd # a comment
drive in; read out""",
        """\
in -- (R1 || C1) + R2 -- out -- C2 -- gnd
drive in
read out""",
    ),
    (
        "in -- R1 -- out -- R2 ‖ C2 -- gnd; drive in; read out; R2 = 2R2; C2 = 2n2",
        """\
in -- R1 -- out -- R2 || C2 -- gnd
drive in
read out
R2 = 2.2 ohm
C2 = 2.2 nF""",
    ),
    (
        """\
a -- R1 -- x -- R2 -- b; x -- R3 -- gnd
drive a; drive b
read x; read i_R3""",
        """\
a -- R1 -- x -- R2 -- b
x -- R3 -- gnd
drive a
drive b
read x
read i_R3""",
    ),
    (
        """\
U1: opamp(plus=p,
          minus=o,   # follower
          out=o)
in -- R1 -- p -- C1 -- gnd; drive in; read o""",
        """\
U1: opamp(plus=p, minus=o, out=o)
in -- R1 -- p -- C1 -- gnd
drive in
read o""",
    ),
    (
        """\
in -- R1 -- out -- C1 -- gnd
drive in; read out
tau = 75 us; C1 = tau/R1; R1 = 7.5 kohm""",
        """\
in -- R1 -- out -- C1 -- gnd
drive in
read out
tau = 75 us
C1 = tau/R1
R1 = 7.5 kohm""",
    ),
    (
        "in -- L1 = 10 mH ±10% -- out -- R1 = 1 Mohm -- gnd; drive in; read 2*out - in",
        """\
in -- L1 -- out -- R1 -- gnd
drive in
read 2*out - in
L1 = 10 mH ±10%
R1 = 1 Mohm""",
    ),
    (
        "in -- R1 -- out -- C1 -- gnd; drive in; read out; R1 = (1 + 2)*1 kohm; C1 = 1e-9/3",
        """\
in -- R1 -- out -- C1 -- gnd
drive in
read out
R1 = 3 kohm
C1 = 1 F/3000000000""",
    ),
    (
        """\
define rc(in, out; R, C = 10 nF)
  in -- R -- out; out -- C -- gnd
done
A1: rc(in=in, out=a, R=2 kohm)
A2: rc(in=a, out=out, R=A1.R, C)
drive in; read out""",
        """\
define rc(in, out; R, C = 10 nF)
  in -- R -- out -- C -- gnd
done
A1: rc(in=in, out=a, R=2 kohm)
A2: rc(in=a, out=out, R=A1.R, C)
drive in
read out""",
    ),
    (
        """\
define tap(1, 2; k = 0.9)
  1 -- L1 -- gnd; 2 -- L2 -- gnd
  couple L1 to L2 with k
done
define two(p, q; Ra)
  T: tap(1=p, 2=m)
  m -- R1 = Ra -- q
done
X1: two(p=in, q=out, Ra=50 ohm ±1%)
out -- RL -- gnd
drive in; read out""",
        """\
define tap(1, 2; k = 0.9)
  1 -- L1 -- gnd
  2 -- L2 -- gnd
  couple L1 to L2 with k
done
define two(p, q; Ra)
  T: tap(1=p, 2=m)
  m -- R1 -- q
  R1 = Ra
done
X1: two(p=in, q=out, Ra=50 ohm ±1%)
out -- RL -- gnd
drive in
read out""",
    ),
    (
        """\
in -- R1 -- m -- R2 -- out
U1: opamp(plus=gnd, minus=m, out=out, gain=1e5, gbw=1 MHz, Rout=75 ohm)
drive in; read out""",
        """\
in -- R1 -- m -- R2 -- out
U1: opamp(plus=gnd, minus=m, out=out, gain=100000, gbw=1 MHz, Rout=75 ohm)
drive in
read out""",
    ),
    (
        """\
in -- R1 -- a -- L1 -- gnd; out -- L2 || RL -- gnd
couple L1 to L2 with M = 0.5 mH ±5%
drive in; read out; L1, L2 = 1 mH""",
        """\
in -- R1 -- a -- L1 -- gnd
out -- L2 || RL -- gnd
couple L1 to L2 with M
drive in
read out
M = 500 uH ±5%
L1, L2 = 1 mH""",
    ),
    (
        """\
Q1: bjt(collector=c, base=b, emitter=gnd, gm=40 mS, Rpi, Cpi=10 pF)
in -- Rs -- b; c -- Rc -- gnd
drive in; read c; read i_Q1.source""",
        """\
Q1: bjt(collector=c, base=b, emitter=gnd, gm=40 mS, Rpi, Cpi=10 pF)
in -- Rs -- b
c -- Rc -- gnd
drive in
read c
read i_Q1.source""",
    ),
)
