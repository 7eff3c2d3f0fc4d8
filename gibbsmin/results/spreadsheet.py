"""The result as a spreadsheet: one row a state, full precision, units in brackets in the heads."""

from __future__ import annotations

import csv
from io import StringIO
from typing import TYPE_CHECKING, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.results.fractions import gas_fractions

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
    heats = [result.heat(i) for i in range(count)]
    columns: list[tuple[str, list[object]]] = [
        (f"{name} [{_unit(result.input_units.get(name, ''))}]", _cells(values, None))
        for name, values in result.inputs.items()
    ]
    columns += [
        ("temperature [K]", _cells(batch.temperature, None)),
        ("pressure [Pa]", _cells(batch.pressure, None)),
        ("certified [-]", [int(flag) for flag in good]),
        (f"volume [{volume}]", _cells(batch.volume, good)),
        (f"enthalpy [{energy}]", _cells(batch.enthalpy, good)),
        (f"entropy [{entropy}]", _cells(batch.entropy, good)),
        (f"gibbs_energy [{energy}]", _cells(batch.gibbs_energy, good)),
        (f"heat [{energy}]", ["" if h is None or not g else repr(h) for h, g in zip(heats, good, strict=True)]),
        (f"gas [{result.basis}]", _cells(amounts[:, gas].sum(axis=1), good)),
    ]
    columns += [(f"{system.species[k]} [{result.basis}]", _cells(amounts[:, k], good)) for k in listed + solids]
    columns += [(f"{system.species[k]} [mol/mol gas]", _cells(fractions[:, k], good)) for k in listed]
    columns += [
        ("element_residual [-]", _cells(batch.element_residual, good)),
        ("gap [-]", _cells(batch.gap, good)),
        ("worst_affinity [-]", _cells(batch.worst_affinity, good)),
        ("reason", [str(reason) for reason in batch.reason]),
    ]
    text = StringIO()
    writer = csv.writer(text, lineterminator="\r\n")
    writer.writerow([head for head, _ in columns])
    writer.writerows(zip(*(cells for _, cells in columns), strict=True))
    return text.getvalue()


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
