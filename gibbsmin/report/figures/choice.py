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

_DECADES: Final = 3.0  # of change that count in the choice of species
_DEEPEST: Final = 1e-8  # of the largest value, the least that a logarithmic axis shows
_MUCH: Final = 0.2  # relative change of a key figure from which its place in its set counts
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
    """Key figures that change and say more than an input does, three at most.

    Those that change by more than a fifth of their largest value come first, as the set lists them, since a set
    begins with what matters most; then the others by how much they change.
    """
    found: list[tuple[float, int, Quantity]] = []
    for one in key_quantities(source):
        values = one.values
        if not np.isfinite(values).all() or not one.varies or _is_fed(source, one):
            continue
        change = float(np.ptp(values) / np.abs(values).max())
        found.append((-1.0 if change > _MUCH else -change, len(found), one))
    chosen: list[Quantity] = []
    for _, _, one in sorted(found, key=lambda item: item[:2]):
        if len(chosen) < _CHANGING and not any(_same(one.values, other.values) for other in chosen):
            chosen.append(one)
    return chosen


def key_results(source: Source) -> list[Quantity]:
    """Choose what is drawn where two or more inputs are varied, one result a figure.

    The key figures that the case names for its table; without these the main species and key figures. Temperature
    and heat where they are results, and condensed phases that come or go, are always among them.
    """
    asked = asked_figures(source)
    states = state_quantities(source)
    found = [*asked, *(one for one in states if one.label == "temperature")]
    if not asked:
        found += changing_figures(source)
        told = {one.label.split(",")[0] for one in found}
        gas = [one for one in by_change(gas_quantities(source)) if one.varies and one.label not in told]
        main = gas[: max(_SPECIES - len(found) // 2, 1)]
        found += [replace(one, label=f"{one.label} in the gas, wet") for one in main]
    phases = [one for one in condensed_quantities(source) if comes_or_goes(one)][:_SPECIES]
    found += [replace(one, label=f"amount of {one.label}") for one in phases]
    return [*found, *(one for one in states if one.label not in ("temperature", "pressure"))]


def by_change(quantities: Sequence[Quantity]) -> list[Quantity]:
    """Order by how much a quantity changes, largest first."""
    return sorted(quantities, key=lambda one: one.span[0] - one.span[1])


def is_logarithmic(quantities: Sequence[Quantity], floor: float, decades: float = 3.0) -> bool:
    """Tell whether values, as far as they lie above ``floor`` (as shown), span more than three decades, or others.

    Shares of the gas that fall below the floor count as far as it; where other results reach zero, that is to be seen.
    """
    shown = np.concatenate([one.shown[np.isfinite(one.values)] for one in quantities])
    gas = all(one.kind == "gas" for one in quantities)
    if not shown.size or shown.min() < 0.0 or (not gas and shown.min() == 0.0):
        return False
    above = np.maximum(shown, floor)
    return bool(np.log10(above.max() / above.min()) > decades)


def floor_of(source: Source, quantities: Sequence[Quantity]) -> float:
    """Lowest value of a logarithmic axis, as shown: the decade of the least value, but for shares the threshold."""
    units = {one.unit for one in quantities}
    share = {"%": 100.0, "ppmv": 1e6}
    shown = np.concatenate([one.shown[np.isfinite(one.values)] for one in quantities])
    above = shown[shown > 0.0]
    if not above.size:
        return 1e-8
    least = threshold(source) * share.get(next(iter(units)), 0.0) if len(units) == 1 else 0.0
    lowest = max(float(above.min()), _DEEPEST * float(above.max()))
    return max(least, float(10.0 ** np.floor(np.log10(lowest) + 1e-9)))


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
