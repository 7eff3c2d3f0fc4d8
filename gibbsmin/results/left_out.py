"""Species that a case leaves out, with the activity that they would have."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING, Any

import numpy as np

from gibbsmin.constants import STANDARD_PRESSURE, R
from gibbsmin.thermo.database import load

if TYPE_CHECKING:
    from gibbsmin.results.result import Result


def left_out(result: Result, index: int) -> dict[str, float]:
    """Work out how much there would be of the species that a case excludes by name.

    Parameters
    ----------
    result : Result
    index : int
        A state that is certified.

    Returns
    -------
    dict of str to float
        Activity of a solid or liquid (above 1 it would form), mole fraction of a gas, [-]; both next to the mixture as
        it is, before any of it forms. Species of elements that the mixture does not have are left out.
    """
    names = _excluded(result.case)
    if not names:
        return {}
    state = result.state(index)
    lam = dict(zip(result.system.elements, state.element_potentials_array, strict=True))
    own = {record.name: record for record in result.system.records}
    found: dict[str, float] = {}
    for name in names:
        record = own.get(name) or load().get(name)
        potentials = [count * lam.get(symbol, -np.inf) for symbol, count in record.elements.items()]
        if record.charge or not np.all(np.isfinite(potentials)):
            continue
        ln_a = float(np.sum(potentials) - record.gibbs_energy(state.temperature) / (R * state.temperature))
        if not record.condensed:
            ln_a -= np.log(state.pressure / STANDARD_PRESSURE)
        found[record.name] = float(np.exp(min(ln_a, 700.0)))
    return found


def _excluded(case: Mapping[str, Any]) -> list[str]:
    """Names that the case excludes."""
    return list(case.get("species", {}).get("exclude", []))
