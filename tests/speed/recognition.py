"""Recognition over the whole catalogue at order 8, against one elliptic prototype of scipy in the same process.

Run as ``python -m tests.speed.recognition [rounds]``. Each row is the time of one ``sn.recognise`` divided by that of
one ``scipy.signal.ellipap(8, 0.5, 60)``, fastest of the rounds in processor time. "Nothing cached": every table, prototype and root of
symnet forgotten; "prototypes cached": only the roots of the polynomial forgotten, as for an H that is new.
"""

from __future__ import annotations

import gc
import sys
import time
from collections.abc import Callable
from fractions import Fraction
from functools import _lru_cache_wrapper
from typing import Any

from scipy.signal import ellipap

from symnet.exact.ratio import Ratio
from symnet.exact.roots import _roots
from symnet.shape.families.chebyshev import chebyshev
from symnet.shape.families.elliptic import elliptic
from symnet.shape.recognise import _product, recognise


def caches() -> list[Any]:
    """Every function of symnet that remembers answers."""
    return [
        x
        for x in gc.get_objects()
        if isinstance(x, _lru_cache_wrapper) and (x.__module__ or "").startswith("symnet")
    ]


def fastest(work: Callable[[], Any], rounds: int, before: Callable[[], Any]) -> float:
    """The time of the fastest round."""
    best = float("inf")
    for _ in range(rounds):
        before()
        start = time.process_time()
        work()
        best = min(best, time.process_time() - start)
    return best


def candidates() -> dict[str, Ratio]:
    """What is recognised: a member as a table prints it, one with zeros, and no member at all."""
    printed = [Fraction(round(c * 10_000), 10_000) for c in chebyshev(8, "0.5 dB").denominator()]
    made = elliptic(8, "0.5 dB", "60 dB")
    stranger = [Fraction(c) for c in (1, 5, 12, 19, 21, 17, 10, 4, 1)]
    return {
        "Chebyshev 8, 0.5 dB, four digits": Ratio.of([1], printed),
        "elliptic 8, 0.5 dB, 60 dB": Ratio.of(_product(made.zeros, "zeros"), _product(made.poles, "poles")),
        "no family": Ratio.of([1], stranger),
    }


def main(rounds: int) -> None:
    """The table."""
    unit = fastest(lambda: ellipap(8, 0.5, 60), 20 * rounds, lambda: None)
    print("| what is recognised | nothing cached | prototypes cached |")
    print("|---|---|---|")
    remembered = caches()
    for name, h in candidates().items():

        def forget() -> None:
            for cache in remembered:
                cache.cache_clear()

        cold = fastest(lambda h=h: recognise(h), min(rounds, 5), forget)  # type: ignore[misc]
        warm = fastest(lambda h=h: recognise(h), rounds, _roots.cache_clear)  # type: ignore[misc]
        print(f"| {name} | {cold / unit:.0f} | {warm / unit:.0f} |")


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 20)
