"""The result as a spreadsheet: one row a state, full precision, units in brackets in the heads."""

from __future__ import annotations

import csv
from io import StringIO
from typing import TYPE_CHECKING, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.results.fractions import gas_fractions
from gibbsmin.results.properties import PROPERTIES

if TYPE_CHECKING:
    from gibbsmin.results.result import Result

TRACE: Final = 1e-9
"""Species that never reach this share of their phase are left to result.json, [-]."""


def spreadsheet(result: Result) -> str:
    """Write the CSV text (RFC 4180, comma, point as decimal sign).

    Parameters
    ----------
    result : Result

    Returns
    -------
    str
        Header and one line a state. States without a certificate have empty cells where numbers would stand.
    """
    batch, system = result.batch, result.system
    gas = np.asarray(system.gas, bool)
    good = np.asarray(batch.certified, bool)
    count = len(good)
    amounts = batch.amounts  # (states, S)
    fractions = gas_fractions(amounts, gas)
    listed = [k for k in range(len(gas)) if gas[k] and fractions[good, k].max(initial=0.0) >= TRACE]
    solids = [k for k in range(len(gas)) if not gas[k] and amounts[good, k].max(initial=0.0) > 0.0]
    energy, entropy = ("W", "W/K") if result.basis == "mol/s" else ("J", "J/K")
    volume = "m3/s" if result.basis == "mol/s" else "m3"
    audits = [result.audit(i) for i in range(count)]
    made = np.array([np.nan if one is None else one.entropy_generated for one in audits])
    lost = np.array([np.nan if one is None else one.lost_work for one in audits])
    columns: list[tuple[str, list[object]]] = [
        (f"{name} [{_unit(result.input_units.get(name, ''))}]", _cells(values, None))
        for name, values in result.inputs.items()
    ]
    columns += [
        ("temperature [K]", _cells(result.held.get("temperature", batch.temperature), None)),
        ("pressure [Pa]", _cells(result.held.get("pressure", batch.pressure), None)),
        ("certified [-]", [int(flag) for flag in good]),
        (f"volume [{volume}]", _cells(batch.volume, good)),
        (f"enthalpy [{energy}]", _cells(batch.enthalpy, good)),
        (f"internal_energy [{energy}]", _cells(batch.internal_energy, good)),
        (f"entropy [{entropy}]", _cells(batch.entropy, good)),
        (f"gibbs_energy [{energy}]", _cells(batch.gibbs_energy, good)),
        (f"heat [{energy}]", _cells(_or_nan(result.heats, count), good)),
        (f"work [{energy}]", _cells(_or_nan(result.works, count), good)),
        (f"entropy_generated [{entropy}]", _cells(made, good)),
        (f"lost_work [{energy}]", _cells(lost, good)),
        (f"gas [{result.basis}]", _cells(amounts[:, gas].sum(axis=1), good)),
    ]
    columns += [
        (f"{one.name} [{_unit(one.rate if result.basis == 'mol/s' else one.unit)}]", _cells(values, good))
        for one in PROPERTIES
        if (values := result.properties.get(one.name)) is not None
    ]
    columns += [
        (f"{group}.{one.name} [{_unit(one.unit)}]", _cells(one.value, good))
        for group, figures in result.key_figures.items()
        for one in figures
    ]
    columns += [(f"{system.species[k]} [{result.basis}]", _cells(amounts[:, k], good)) for k in listed + solids]
    columns += [(f"{system.species[k]} [mol/mol gas]", _cells(fractions[:, k], good)) for k in listed]
    columns += [
        ("element_residual [-]", _cells(batch.element_residual, good)),
        ("gap [-]", _cells(batch.gap, good)),
        ("worst_affinity [-]", _cells(batch.worst_affinity, good)),
        ("held_residual [-]", _cells(batch.held_residual, good)),
        ("reason", [str(reason) for reason in batch.reason]),
    ]
    text = StringIO()
    writer = csv.writer(text, lineterminator="\r\n")
    writer.writerow([head for head, _ in columns])
    writer.writerows(zip(*(cells for _, cells in columns), strict=True))
    return text.getvalue()


def _or_nan(values: NDArray[np.float64] | None, count: int) -> NDArray[np.float64]:
    return np.full(count, np.nan) if values is None else values


def _unit(typed: str) -> str:
    """Write a unit for a head; a dash for a plain number."""
    return "-" if typed in ("", "1") else typed


def _cells(values: NDArray[np.float64], good: NDArray[np.bool_] | None) -> list[object]:
    """Shortest text of each number that reads back the same; empty where the state is not vouched for."""
    known = np.isfinite(values) if good is None else np.isfinite(values) & good
    cells: list[object] = [
        repr(value) if told else "" for value, told in zip(values.tolist(), known.tolist(), strict=True)
    ]
    return cells
