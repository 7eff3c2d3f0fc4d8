"""Which results are worth a line, a map or a panel, and on what axis."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.report.figures.quantities import (
    Quantity,
    comes_or_goes,
    condensed_quantities,
    gas_quantities,
    key_quantities,
    state_quantities,
    threshold,
)
from gibbsmin.report.figures.source import Source

Floats = NDArray[np.float64]

MOST_LINES: Final = 7
"""Most lines in a panel."""

_DECADES: Final = 3.0  # over so many a logarithmic axis
_DEEPEST: Final = 1e-8  # of the largest value, the least that a logarithmic axis shows
_CHANGING: Final = 3  # key figures that are shown unasked
_SPECIES: Final = 3  # species that are shown unasked where two inputs are varied


def main_species(source: Source, gas: Sequence[Quantity]) -> tuple[list[Quantity], list[Quantity]]:
    """Choose the gas species that are drawn: what is large, and what changes.

    A decade above the threshold counts as much as a decade of change above it (three at most), so that nitrogen which
    stays as it is stands beside a trace which rises.

    Parameters
    ----------
    source : Source
    gas : sequence of Quantity
        All that reach the threshold.

    Returns
    -------
    drawn, left : list of Quantity
        By falling largest share.
    """
    floor = 100.0 * threshold(source)
    scores = [np.log10(high / floor) + min(np.log10(high / low), _DECADES) for low, high in _clipped(gas, floor)]
    chosen = sorted(np.argsort(-np.array(scores), kind="stable")[:MOST_LINES])
    return [gas[k] for k in chosen], [one for k, one in enumerate(gas) if k not in chosen]


def asked_figures(source: Source) -> list[Quantity]:
    """Key figures that the case names for its table; those of them that there are."""
    names = (source.case.get("show") or {}).get("columns") or []
    known = {one.name.rpartition(" [")[0]: one for one in key_quantities(source)}
    return [known[name] for name in names if name in known]


def changing_figures(source: Source) -> list[Quantity]:
    """The key figures that change most, relative to their largest value, and say more than an input does."""
    found = []
    for one in key_quantities(source):
        values = one.values
        if not np.isfinite(values).all() or not one.varies or _is_fed(source, one):
            continue
        low, high = one.span
        found.append((-(high - low) / max(abs(low), abs(high)), len(found), one))
    chosen: list[Quantity] = []
    for _, _, one in sorted(found):
        if len(chosen) < _CHANGING and not any(_same(one.values, other.values) for other in chosen):
            chosen.append(one)
    return chosen


def key_results(source: Source) -> list[Quantity]:
    """What is drawn where two or more inputs are varied, one result a figure.

    The key figures that the case names for its table; without these the main species and key figures. Temperature
    and heat where they are results, and condensed phases that come or go, are always among them.
    """
    asked = asked_figures(source)
    found = [*asked, *(one for one in state_quantities(source) if one.label != "pressure")]
    if not asked:
        found += changing_figures(source)
        main = [one for one in by_change(gas_quantities(source)) if one.varies][:_SPECIES]
        found += [replace(one, label=f"{one.label} in the gas, wet") for one in main]
    phases = [one for one in condensed_quantities(source) if comes_or_goes(one)][:_SPECIES]
    return [*found, *(replace(one, label=f"amount of {one.label}") for one in phases)]


def by_change(quantities: Sequence[Quantity]) -> list[Quantity]:
    """Order by how much a quantity changes, largest first."""
    return sorted(quantities, key=lambda one: one.span[0] - one.span[1])


def is_logarithmic(quantities: Sequence[Quantity], floor: float) -> bool:
    """Tell whether values, as far as they lie above ``floor`` (as shown), span more than three decades.

    Shares of the gas that fall below the floor count as far as it; other zeros, and amounts of phases, do not.
    """
    shown = np.concatenate([one.shown[np.isfinite(one.values)] for one in quantities])
    if not shown.size or shown.min() < 0.0 or any(one.kind == "condensed" for one in quantities):
        return False
    above = np.maximum(shown, floor) if all(one.kind == "gas" for one in quantities) else shown[shown > floor]
    return bool(above.size and np.log10(above.max() / above.min()) > _DECADES)


def floor_of(source: Source, quantities: Sequence[Quantity]) -> float:
    """Lowest value of a logarithmic axis, as shown: the threshold for shares, else the decade of the least value."""
    units = {one.unit for one in quantities}
    share = {"%": 100.0, "ppmv": 1e6}
    if len(units) == 1 and (unit := next(iter(units))) in share:
        return threshold(source) * share[unit]
    shown = np.concatenate([one.shown[np.isfinite(one.values)] for one in quantities])
    above = shown[shown > 0.0]
    if not above.size:
        return 1e-8
    return float(10.0 ** np.floor(np.log10(max(above.min(), _DEEPEST * above.max()))))


def _clipped(quantities: Sequence[Quantity], floor: float) -> list[tuple[float, float]]:
    """Lowest and highest value of each, no lower than ``floor``; those without a number left out."""
    return [(max(low, floor), max(high, floor)) for low, high in (one.span for one in quantities) if np.isfinite(high)]


def _is_fed(source: Source, one: Quantity) -> bool:
    """Whether a key figure tells of the feeds: by its name, or as it does not follow all inputs, or is one of them."""
    values = one.values
    if one.label.endswith(" fed") or "inlet" in one.label:
        return True
    if source.kind != "grid":
        return any(_same(values, one.values) for one in source.inputs)
    if any(np.ptp(values, axis=k).max() <= 1e-9 * np.abs(values).max() for k in range(values.ndim)):
        return True
    mesh = np.meshgrid(*(one.values for one in source.inputs), indexing="ij")
    return any(_same(values, one) for one in mesh)


def _same(one: Floats, two: Floats) -> bool:
    """Whether two results are the same but for scale and zero."""
    a, b = one.ravel() - one.mean(), two.ravel() - two.mean()
    size = np.sqrt((a @ a) * (b @ b))
    return bool(size > 0.0 and abs(a @ b) > (1.0 - 1e-9) * size)
