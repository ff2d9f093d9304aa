"""Ladders with finite transmission zeros: inverse Chebyshev and elliptic, digits as printed.

``tests/shape/families/test_elliptic.py`` holds them to the prototypes of the package, ``test_ladders`` beside this
file to what can be had without it: zeros, poles by their closed form (inverse Chebyshev), pass-band ripple and least
stop-band loss (elliptic).
"""

from __future__ import annotations

from tests.reference.cases import Ladder

__all__ = ["CASES"]

WINDER_2_22 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.22 p. 72"
WINDER_2_23 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.23 p. 72"
WINDER_2_26_2_27 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Tables 2.26/2.27 p. 76"
WINDER_2_30 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.30 p. 80 (adapted there from the Baez-Lopez thesis)"
RIPPLE_FOUND = "ripple found to be 0.1 dB (not printed in the visible text)"
RIPPLE_FOUND_EVEN = "ripple found to be 0.1 dB (not printed in the visible text); even order: equal terminations, 'b/c' type with one zero pair at infinity"

CASES: tuple[Ladder, ...] = (
    Ladder(
        id="invcheb-n3-20dB",
        family="inverse_chebyshev",
        order=3,
        stop_db=20,
        tol_pole=5e-06,
        tol_zero=3e-05,
        source=WINDER_2_22,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.171717 F;  L2 = 2.343437 H;  Cp2 = 0.320043 F;  C3 = 1.171717 F
        """,
    ),
    Ladder(
        id="invcheb-n3-25dB",
        family="inverse_chebyshev",
        order=3,
        stop_db=25,
        tol_pole=5e-06,
        tol_zero=3e-05,
        source=WINDER_2_22,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.49178 F;  L2 = 2.983563 H;  Cp2 = 0.251377 F;  C3 = 1.49178 F
        """,
    ),
    Ladder(
        id="invcheb-n3-35dB",
        family="inverse_chebyshev",
        order=3,
        stop_db=35,
        tol_pole=5e-06,
        tol_zero=3e-05,
        source=WINDER_2_22,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 2.309844 F;  L2 = 4.619692 H;  Cp2 = 0.162349 F;  C3 = 2.309844 F
        """,
    ),
    Ladder(
        id="invcheb-n3-45dB",
        family="inverse_chebyshev",
        order=3,
        stop_db=45,
        tol_pole=5e-06,
        tol_zero=3e-05,
        source=WINDER_2_22,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 3.471945 F;  L2 = 6.943896 H;  Cp2 = 0.108009 F;  C3 = 3.471945 F
        """,
    ),
    Ladder(
        id="invcheb-n3-80dB",
        family="inverse_chebyshev",
        order=3,
        stop_db=80,
        tol_pole=5e-06,
        tol_zero=3e-05,
        source=WINDER_2_22,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 13.55366 F;  L2 = 27.10734 H;  Cp2 = 0.027668 F;  C3 = 13.55366 F
        """,
    ),
    Ladder(
        id="invcheb-n3-100dB",
        family="inverse_chebyshev",
        order=3,
        stop_db=100,
        tol_pole=5e-06,
        tol_zero=3e-05,
        source=WINDER_2_22,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 29.23161 F;  L2 = 58.46326 H;  Cp2 = 0.012829 F;  C3 = 29.23161 F
        """,
    ),
    Ladder(
        id="invcheb-n5-25dB",
        family="inverse_chebyshev",
        order=5,
        stop_db=25,
        tol_pole=1e-05,
        tol_zero=3e-05,
        source=WINDER_2_23,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.034826 F;  L2 = 0.976387 H;  Cp2 = 0.926384 F;  C3 = 1.997745 F
            L4 = 1.53603 H;  Cp4 = 0.224925 F;  C5 = 0.479829 F
        """,
    ),
    Ladder(
        id="invcheb-n5-30dB",
        family="inverse_chebyshev",
        order=5,
        stop_db=30,
        tol_pole=1e-05,
        tol_zero=3e-05,
        source=WINDER_2_23,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.200989 F;  L2 = 1.250222 H;  Cp2 = 0.723478 F;  C3 = 2.227904 F
            L4 = 1.752054 H;  Cp4 = 0.197192 F;  C5 = 0.573384 F
        """,
    ),
    Ladder(
        id="invcheb-n5-35dB",
        family="inverse_chebyshev",
        order=5,
        stop_db=35,
        tol_pole=1e-05,
        tol_zero=3e-05,
        source=WINDER_2_23,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.357922 F;  L2 = 1.542176 H;  Cp2 = 0.586514 F;  C3 = 2.499294 F
            L4 = 1.989518 H;  Cp4 = 0.173656 F;  C5 = 0.674494 F
        """,
    ),
    Ladder(
        id="invcheb-n5-40dB",
        family="inverse_chebyshev",
        order=5,
        stop_db=40,
        tol_pole=1e-05,
        tol_zero=3e-05,
        source=WINDER_2_23,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.512368 F;  L2 = 1.855072 H;  Cp2 = 0.487587 F;  C3 = 2.810959 F
            L4 = 2.25281 H;  Cp4 = 0.15336 F;  C5 = 0.784536 F
        """,
    ),
    Ladder(
        id="invcheb-n5-60dB",
        family="inverse_chebyshev",
        order=5,
        stop_db=60,
        tol_pole=1e-05,
        tol_zero=3e-05,
        source=WINDER_2_23,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.18689 F;  L2 = 3.398898 H;  Cp2 = 0.266118 F;  C3 = 4.513096 F
            L4 = 3.64663 H;  Cp4 = 0.094743 F;  C5 = 1.345577 F
        """,
    ),
    Ladder(
        id="invcheb-n5-70dB",
        family="inverse_chebyshev",
        order=5,
        stop_db=70,
        tol_pole=1e-05,
        tol_zero=3e-05,
        source=WINDER_2_23,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.601619 F;  L2 = 4.419142 H;  Cp2 = 0.20468 F;  C3 = 5.707146 F
            L4 = 4.615038 H;  Cp4 = 0.074862 F;  C5 = 1.725375 F
        """,
    ),
    Ladder(
        id="invcheb-n5-80dB",
        family="inverse_chebyshev",
        order=5,
        stop_db=80,
        tol_pole=1e-05,
        tol_zero=3e-05,
        source=WINDER_2_23,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 2.099869 F;  L2 = 5.674402 H;  Cp2 = 0.159402 F;  C3 = 7.207034 F
            L4 = 5.829529 H;  Cp4 = 0.059266 F;  C5 = 2.197056 F
        """,
    ),
    Ladder(
        id="invcheb-n5-85dB",
        family="inverse_chebyshev",
        order=5,
        stop_db=85,
        tol_pole=1e-05,
        tol_zero=3e-05,
        source=WINDER_2_23,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 2.388703 F;  L2 = 6.410517 H;  Cp2 = 0.141098 F;  C3 = 8.095517 F
            L4 = 6.548621 H;  Cp4 = 0.052758 F;  C5 = 2.474977 F
        """,
        note="public text copy has C5=2.414977; 2.474977 restores the response (poles 2e-6)",
    ),
    Ladder(
        id="invcheb3dB-n5-30dB",
        family="inverse_chebyshev_3db",
        order=5,
        stop_db=30,
        tol_pole=3e-05,
        tol_zero=3e-05,
        source=WINDER_2_26_2_27,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.42037 F;  L2 = 1.2845 H;  Cp2 = 0.14457 F;  C3 = 1.63337 F;  L4 = 0.91659 H
            Cp4 = 0.5304 F;  C5 = 0.14736 F
        """,
        note="printed C5=0.014736 corrected to 0.14736",
    ),
    Ladder(
        id="invcheb3dB-n3-40dB",
        family="inverse_chebyshev_3db",
        order=3,
        stop_db=40,
        tol_pole=3e-05,
        tol_zero=3e-05,
        source=WINDER_2_26_2_27,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.9432 F;  L2 = 1.88641 H;  Cp2 = 0.0439 F;  C3 = 0.9432 F
        """,
    ),
    Ladder(
        id="cauer-n3-ws2.5-30dB",
        family="elliptic",
        order=3,
        ripple_db=0.1,
        stop_db=30,
        stop_w=2.5,
        tol_ripple_db=0.0003,
        source=WINDER_2_30,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.9472 F;  L2 = 1.0173 H;  Cp2 = 0.1205 F;  C3 = 0.9472 F
        """,
        note=RIPPLE_FOUND,
    ),
    Ladder(
        id="cauer-n5-ws1.5-40dB",
        family="elliptic",
        order=5,
        ripple_db=0.1,
        stop_db=40,
        stop_w=1.5,
        tol_ripple_db=0.0003,
        source=WINDER_2_30,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.0279 F;  L2 = 1.2152 H;  Cp2 = 0.1513 F;  C3 = 1.6318 F;  L4 = 0.9353 H
            Cp4 = 0.4408 F;  C5 = 0.8155 F
        """,
        note=RIPPLE_FOUND,
    ),
    Ladder(
        id="cauer-n5-ws2-50dB",
        family="elliptic",
        order=5,
        ripple_db=0.1,
        stop_db=50,
        stop_w=2,
        tol_ripple_db=0.0003,
        source=WINDER_2_30,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.0876 F;  L2 = 1.2932 H;  Cp2 = 0.07317 F;  C3 = 1.7938 F;  L4 = 1.1433 H
            Cp4 = 0.20038 F;  C5 = 0.9772 F
        """,
        note=RIPPLE_FOUND,
    ),
    Ladder(
        id="cauer-n4-ws2-30dB",
        family="elliptic",
        order=4,
        ripple_db=0.1,
        stop_db=30,
        stop_w=2,
        tol_ripple_db=0.0003,
        source=WINDER_2_30,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.7755 F;  L2 = 1.1765 H;  Cp2 = 0.1796 F;  C3 = 1.3347 F;  L4 = 0.9338 H
        """,
        note=RIPPLE_FOUND_EVEN,
    ),
    Ladder(
        id="cauer-n6-ws1.5-50dB",
        family="elliptic",
        order=6,
        ripple_db=0.1,
        stop_db=50,
        stop_w=1.5,
        tol_ripple_db=0.0003,
        source=WINDER_2_30,
        text="""
            in -- Rs -- a -- L2 || Cp2 -- b -- L4 || Cp4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.8659 F;  L2 = 1.274 H;  Cp2 = 0.1855 F;  C3 = 1.4311 F;  L4 = 1.2723 H
            Cp4 = 0.33007 F;  C5 = 1.2825 F;  L6 = 1.0332 H
        """,
        note=RIPPLE_FOUND_EVEN,
    ),
)
