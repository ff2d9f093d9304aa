"""How far H is from every family: the nearest member of each, by response or by poles, with its distances.

The fit is by response first, not by poles: element values of four digits move the poles of a high order by tens of
per cent and its response by a thousandth of a dB (a ninth-order Bessel ladder does both). The start is the nearest of
a table of members that covers the whole range of the parameters (:mod:`symnet.shape.members`), so that no local
minimum far away can be taken (:mod:`symnet.shape.fitting`). A fit by poles is there for the opposite case, poles of
high Q that are a little off (:mod:`symnet.shape.nearest`). Then everything is said about the fitted member
(:mod:`symnet.shape.distances`).
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final

import numpy as np

from symnet.shape.candidate import Candidate
from symnet.shape.distances import distances
from symnet.shape.families import CATALOGUE
from symnet.shape.families.family import Family
from symnet.shape.families.prototype import HIGH_PASS, LOW_PASS
from symnet.shape.fitting import ByResponse
from symnet.shape.members import Floats, members
from symnet.shape.nearest import nearest_by_poles, within_reach
from symnet.shape.placing import Placed
from symnet.shape.undoing import View

__all__ = ["fits", "fits_by_poles", "rivals"]

_STEP: Final = 1e-6  # of a finite difference; coordinates run from 0 to 1


def fits(view: View) -> tuple[Candidate, ...]:
    """The member of every family of this order and number of finite zeros whose response over the pass band is nearest."""
    table = members(view.order, len(view.prototype_zeros))
    if not table.families:
        return ()
    fit = ByResponse.of(view, table)
    return _measured(fit, fit.descend())


def rivals(view: View, first: Candidate) -> tuple[Family, ...]:
    """The families with parameters that come near in poles; none if there is no other than the first and that matches."""
    table = members(view.order, len(view.prototype_zeros))
    near = tuple(table.families[k] for k in within_reach(view, table))
    return () if first.matches and near in {(), (first.family,)} else near


def fits_by_poles(view: View, wanted: Sequence[Family] = CATALOGUE) -> tuple[Candidate, ...]:
    """The members with the smallest pole errors, of the families that have parameters and come near; scale by response.

    For a family without parameters there is nothing to choose: its pole error is the same in both fits.
    """
    table = members(view.order, len(view.prototype_zeros))
    near = {k: row for k, row in within_reach(view, table).items() if table.families[k] in wanted}
    if not near:
        return ()
    places = [nearest_by_poles(table.families[k], view, table.places[row]) for k, row in near.items()]
    fit = ByResponse.of(view, table).restarted(np.asarray(list(near)), np.asarray(places))
    return _measured(fit, fit.descend(fixed=True))


def _measured(fit: ByResponse, spread: Floats) -> tuple[Candidate, ...]:
    """The members in the band of H, and all distances from H."""
    k, view = fit.parameters, fit.view
    scale = np.exp(fit.x[:, k]).tolist()
    centre = (np.exp(fit.x[:, k + 1]) if view.is_two_sided else np.ones(len(scale))).tolist()
    found = []
    for row, figures in enumerate(zip(*(d.tolist() for d in distances(fit)), strict=True)):
        family = fit.families[row]
        values, uncertainties = [], []
        for p, t, dt in zip(
            family.parameters(view.order), fit.x[row].tolist(), spread[row].tolist(), strict=False
        ):
            values.append(p.at(t))
            uncertainties.append(abs(p.at(t + _STEP) - p.at(t - _STEP)) / (2 * _STEP) * dt)
        placed = _placed(view, scale[row], centre[row])
        member = Placed(family, view.order, tuple(values), view.band, *placed)
        shape = tuple(fit.poles[row].tolist())
        found.append(Candidate(member, shape, tuple(uncertainties), *figures))
    return tuple(found)


def _placed(view: View, scale: float, centre: float) -> tuple[float, float, float]:
    """W0, that of the low-pass and the width, in rad/s."""
    if view.band == LOW_PASS:
        return scale * view.w0, 1.0, 0.0
    if view.band == HIGH_PASS:
        return view.w0 / scale, 1.0, 0.0
    c = view.w0 * centre
    return c, scale, view.width * c
