"""A part of a large study as plain arrays, ready to be kept and put together again."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.results.fractions import gas_fractions
from gibbsmin.results.result import Result

Floats = NDArray[np.float64]

KEPT: Final = 1e-12
"""Mole fraction that a species must reach in one of the states looked at beforehand, to be kept [-]."""

SHOWN: Final = 1e-6
"""Mole fraction that a species must reach there to have a column in the CSV file [-]."""


@dataclass(frozen=True)
class Variable:
    """A column of a large study: its ``name``, its ``unit``, what it is, and the unit that people read it in."""

    name: str
    unit: str
    meaning: str
    shown: str = ""


@dataclass(frozen=True)
class Layout:
    """What is kept of every state.

    Attributes
    ----------
    variables : tuple of Variable
        Numbers of a state, in the order of the columns.
    species : tuple of str
        Species whose amounts are kept.
    left_out : tuple of str
        Species that are not.
    gas : tuple of bool
        Which of ``species`` are of the gas.
    shown : tuple of bool
        Which of them the CSV file has; the data set has all.
    """

    variables: tuple[Variable, ...]
    species: tuple[str, ...]
    left_out: tuple[str, ...]
    gas: tuple[bool, ...]
    shown: tuple[bool, ...]


_STATE: Final = (
    ("temperature", "K", "temperature of the settled mixture"),
    ("pressure", "Pa", "absolute pressure"),
    ("volume", "m3", "volume"),
    ("enthalpy", "J", "enthalpy; the elements at 298.15 K are zero"),
    ("entropy", "J/K", "entropy"),
    ("element_residual", "1", "worst error of an element balance, relative to the element"),
    ("gap", "1", "duality gap, in units of RT"),
    ("worst_affinity", "1", "highest affinity of an absent phase, in units of RT"),
    ("held_residual", "1", "what the held energy or entropy leaves unmet, as a relative error of the temperature"),
)
_RATES: Final = {"m3": "m3/s", "J": "W", "J/K": "W/K"}


def layout_of(results: Sequence[Result]) -> Layout:
    """Choose what is kept, from states looked at beforehand.

    Parameters
    ----------
    results : sequence of Result
        Some states of the study, spread over all of it.

    Returns
    -------
    Layout
    """
    result = results[0]
    flow = result.basis == "mol/s"
    variables = [Variable(name, _RATES.get(unit, unit) if flow else unit, text) for name, unit, text in _STATE]
    energy, per_K = ("W", "W/K") if flow else ("J", "J/K")
    if result.heats is not None:
        variables.append(Variable("heat", energy, "heat to be supplied"))
    if result.works is not None and result.account.shaft:
        variables.append(Variable("work", energy, "shaft work to be supplied"))
    if result.entropies_generated is not None:
        variables.append(Variable("entropy_generated", per_K, "entropy generated in the system and its surroundings"))
    figures = {
        f"{group}.{one.name}": Variable(f"{group}.{one.name}", one.unit, one.label, one.shown)
        for each in results
        for group, ones in each.key_figures.items()
        for one in ones
    }
    variables += figures.values()
    gas = np.asarray(result.system.gas, bool)
    amounts = np.nan_to_num(np.concatenate([one.batch.amounts for one in results]))
    share = np.where(gas, gas_fractions(amounts, gas), amounts > 0.0).max(axis=0, initial=0.0)
    kept = share >= KEPT
    names = np.array(result.system.species)
    return Layout(
        tuple(variables),
        tuple(names[kept]),
        tuple(names[~kept]),
        tuple(map(bool, gas[kept])),
        tuple(map(bool, share[kept] >= SHOWN)),
    )


def piece_of(result: Result, layout: Layout) -> dict[str, Any]:
    """Put the states of a part into arrays.

    Parameters
    ----------
    result : Result
        The part.
    layout : Layout

    Returns
    -------
    dict of str to array
        ``numbers`` (states, variables), ``amounts`` (states, species), ``gas`` (states,) amount of all gas, ``inputs``
        (states, inputs) as typed, ``certified`` (states,) and ``reasons`` (states,) text.
    """
    batch = result.batch
    figures = {f"{group}.{one.name}": one.value for group, ones in result.key_figures.items() for one in ones}
    own: Mapping[str, Floats | None] = {
        "heat": result.heats,
        "work": result.works,
        "entropy_generated": result.entropies_generated,
    }
    unknown = np.full(len(batch), np.nan)
    columns = []
    for one in layout.variables:
        values = own.get(one.name, figures.get(one.name))
        if values is None:
            values = getattr(batch, one.name, None)
        columns.append(unknown if values is None else values)
    at = [result.system.index[name] for name in layout.species]
    inputs = list(result.inputs.values())
    return {
        "numbers": np.column_stack(columns),
        "amounts": batch.amounts[:, at],
        "gas": batch.amounts[:, np.asarray(result.system.gas, bool)].sum(axis=1),
        "inputs": np.column_stack(inputs) if inputs else np.zeros((len(batch), 0)),
        "certified": np.asarray(batch.certified, bool),
        "reasons": np.array(batch.reason, dtype=str),
    }


def csv_lines(piece: Mapping[str, Any], layout: Layout) -> str:
    """Write the rows of a part as CSV, ten figures each; empty cells where a state is not vouched for."""
    gas, shown = np.asarray(layout.gas, bool), np.asarray(layout.shown, bool)
    with np.errstate(divide="ignore", invalid="ignore"):
        share = piece["amounts"][:, shown & gas] / piece["gas"][:, None]
    table = np.column_stack((piece["inputs"], piece["numbers"], piece["amounts"][:, shown & ~gas], share))
    row = "%.10g," * table.shape[1]
    lines = []
    told = zip(table.tolist(), piece["certified"].tolist(), piece["reasons"].tolist(), strict=True)
    for values, good, reason in told:
        if good:
            lines.append((row % tuple(values)).replace("nan", "") + "1,")
        else:
            lines.append((row % tuple(values)).replace("nan", "") + f'0,"{reason}"')
    return "\r\n".join(lines) + "\r\n"


def csv_head(inputs: Sequence[tuple[str, str]], layout: Layout, basis: str) -> str:
    """Write the head of the CSV file; ``inputs`` are names and units."""
    heads = [f"{name} [{unit if unit not in ('', '1') else '-'}]" for name, unit in inputs]
    heads += [f"{one.name} [{one.unit if one.unit != '1' else '-'}]" for one in layout.variables]
    listed = [
        pair for pair, shown in zip(zip(layout.species, layout.gas, strict=True), layout.shown, strict=True) if shown
    ]
    heads += [f"{name} [{basis}]" for name, is_gas in listed if not is_gas]
    heads += [f"{name} [mol/mol gas]" for name, is_gas in listed if is_gas]
    return ",".join([*(_quoted(head) for head in heads), "certified [-]", "reason"]) + "\r\n"


def _quoted(text: str) -> str:
    """Quote a head where it holds a comma."""
    return f'"{text}"' if "," in text else text
