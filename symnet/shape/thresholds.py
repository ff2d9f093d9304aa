"""Every threshold of the verdict, with what it was measured on.

They decide the word only. The figures behind it are always shown, so that nobody has to believe in them. How often
each of them is right is counted by ``tests/shape/confusion.py``, whose tables stand in DEVELOPERS.md.
"""

from __future__ import annotations

from typing import Final

__all__ = [
    "AS_GOOD_AS_SIMPLER",
    "DELAY_PERCENT",
    "EXACT_PERCENT",
    "EXACT_RESPONSE",
    "FARTHEST_POLES_PERCENT",
    "NORMALISED_WITHIN",
    "POLES_ALONE_PERCENT",
    "POLES_PERCENT",
    "POLES_RESPONSE_DB",
    "RESPONSE_DB",
    "ROUNDING",
    "SAME_SHAPE_PERCENT",
    "SETTLED",
    "SIMPLER_POLES",
    "SIMPLER_RATIO",
    "SIMPLER_RESPONSE",
    "TIE_RATIO",
    "TOLD_APART",
    "ZEROS_PERCENT",
]

#: A family this near by response, in units of the limits (0.1 % of the poles, 0.002 dB), is what is meant: tables of
#: four digits come nearer. No other is then looked for by its poles.
SETTLED: Final = 0.02

#: "Exactly", where exact arithmetic does not decide: poles and zeros within this, far above the rounding of doubles and
#: far below any printed digits.
EXACT_PERCENT: Final = 1e-7
#: The same for poles that coincide, which rounding of the coefficients tears apart by its square or cube root: what is
#: left of the response error in dB and the delay error in per cent.
EXACT_RESPONSE: Final = 1e-10

#: Distances below this, in units of the limits, are rounding, and rank nobody: the order of the catalogue does.
ROUNDING: Final = 1e-8

#: A match by response needs both of these. Measured: parts rounded to four digits stay within 0.0004 dB and 0.04 %
#: for published ladders up to order 10; parts of 1 % (60 random draws of Butterworth, Bessel and Chebyshev ladders
#: of order 3, 5 and 7) within 0.041 dB and 2.1 %.
RESPONSE_DB: Final = 0.1
DELAY_PERCENT: Final = 3.0
#: And poles not further off than this. Four-digit elements move those of a Bessel filter of order 10 by 19 %; poles
#: drawn at random that happen to have a Gaussian pass band were 70 to 80 % off.
FARTHEST_POLES_PERCENT: Final = 30.0

#: A match by poles, for a network whose parts are a few per cent off: the pole error, and not more than this in the
#: response. With a free ripple the poles of a stranger can come near by accident: those of the Gaussian-to-6-dB set of
#: order 8 lie within 4.6 % of a Chebyshev filter's, 2.6 dB apart in response; the next nearest is at 7.7 %.
POLES_PERCENT: Final = 5.0
POLES_RESPONSE_DB: Final = 0.5
#: A match by poles alone, far below those accidents. Poles of high Q moved by 1 % change the response by some dB.
POLES_ALONE_PERCENT: Final = 2.0

#: Finite zeros hardly change the pass band and decide the stop band, so they are asked for in every match.
ZEROS_PERCENT: Final = 5.0

#: Between candidates with unequal numbers of fitted parameters, all in units of the limits of the criteria
#: (``Candidate.nearness``). A family with fewer stands first when its response is within the first of these, which is
#: what 1 % parts do to it, or when it is less near by less than the second beyond what fitting makes of any errors. But
#: where the one with more is nearer than the third, it is what is meant.
SIMPLER_RESPONSE: Final = 0.7
SIMPLER_RATIO: Final = 1.3
#: But not where its poles are further off than this many times those of the other, unless both are one shape.
SIMPLER_POLES: Final = 2.0
TOLD_APART: Final = 0.003
#: Where a family has as many parameters as the shape has numbers (order 2), a simpler one within this is meant.
AS_GOOD_AS_SIMPLER: Final = 0.03

#: Two matches with equally many parameters whose response errors differ by less than this factor are called a tie.
TIE_RATIO: Final = 1.5

#: Two members whose poles are this near to each other are one shape. A fitted parameter at the end of its range where
#: the shape is that of a family with fewer parameters is that family, and is said once.
SAME_SHAPE_PERCENT: Final = 1.5

#: A reference that lies this near to 1 rad/s is what the coefficients are normalised to (tables print 5 digits).
NORMALISED_WITHIN: Final = 1e-4
