"""Coefficients for many value sets at once, against exact evaluation set by set."""

from __future__ import annotations

import numpy as np
import pytest

import symnet as sn
from symnet.errors import MissingValueError, UnknownNameError
from symnet.exact.batches import coefficient_arrays
from tests.networks import seeded

LADDER = "in -- R1 -- a -- L1 -- out; a -- C1 -- gnd; out -- C2 || RL -- gnd; drive in; read out; RL = 600"


def test_each_column_is_h_of_its_set() -> None:
    H = sn.derive(sn.network(LADDER))
    random = np.random.default_rng(7)
    sets = {
        name: random.uniform(0.5, 2, 5000) * scale
        for name, scale in zip(["R1", "L1", "C1", "C2"], (1e3, 1e-2, 1e-8, 1e-8), strict=True)
    }
    n, d = coefficient_arrays(H, sets)
    assert d.shape == (4, 5000)
    for k in (0, 1, 2047, 2048, 4999):
        exact = H.with_values({name: float(array[k]) for name, array in sets.items()}).numeric()
        scale = d[0, k] / float(exact.den[0])
        assert np.allclose(d[:, k], [float(c) * scale for c in exact.den], rtol=1e-12)
        assert np.allclose(n[: len(exact.num), k], [float(c) * scale for c in exact.num], rtol=1e-12)


@pytest.mark.parametrize("seed", range(25))
def test_random_networks(seed: int) -> None:
    """Law: column by column N(s)/D(s) is H(s), whatever parts the network has."""
    try:
        H = sn.derive(sn.network(seeded(seed).text))
        exact = H.numeric()
    except sn.SymnetError:
        return
    n, d = coefficient_arrays(H, {})
    s = 2j * np.pi * 1234.5
    found = np.polyval(n[::-1, 0], s) / np.polyval(d[::-1, 0], s)
    assert found == pytest.approx(exact(s), rel=1e-6, abs=1e-300)


def test_names_are_checked() -> None:
    H = sn.derive(sn.network(LADDER))
    with pytest.raises(UnknownNameError, match="did you mean C1"):
        coefficient_arrays(H, {"C11": [1e-9]})
    with pytest.raises(MissingValueError, match="no value for L1"):
        coefficient_arrays(H, {"R1": [1e3], "C1": [1e-9], "C2": [1e-9]})
