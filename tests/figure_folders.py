"""Result folders made by hand, so that figures are tested without the solver: a gas, a solid that goes, key figures."""

from __future__ import annotations

import json
from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import Any

import numpy as np
import xarray

SPECIES = ["H2", "CH4", "NO", "N2", "C(s):graphite", "H2O(l)"]
LEGEND = {
    "reforming": {
        "h2_dry": {"label": "H2, dry", "unit": "1", "shown": "%", "note": ""},
        "duty": {"label": "duty", "unit": "W", "shown": "", "note": ""},
        "t_eq": {"label": "T_eq of shift", "unit": "K", "shown": "degC", "note": ""},
        "nothing": {"label": "never there", "unit": "1", "shown": "%", "note": ""},
    }
}


def case_of(vary: Sequence[str], **tables: Any) -> dict[str, Any]:
    """Tables of a case, as result.json has them."""
    return {
        "title": "Made by hand",
        "feeds": {"gas": {"flow": "100 kmol/h", "temperature": "550 degC"}},
        "held": {"temperature": "870 degC", "pressure": "24 bar"},
        "sweep": [{"vary": name, "values": [1, 2]} for name in vary],
        "show": {"threshold": 1e-6, "columns": []},
        **tables,
    }


def sweep_folder(
    folder: Path,
    axes: Mapping[str, tuple[Any, str]],
    points: bool = False,
    species: Sequence[str] = SPECIES,
    **tables: Any,
) -> xarray.Dataset:
    """Write a sweep: the first input is a temperature from 500 degC up; the solid goes at 700 degC.

    Parameters
    ----------
    folder : Path
    axes : mapping of str to (values, unit)
        Varied inputs.
    points : bool
        Whether they are the inputs of points, and no grid.
    **tables
        Of the case, instead of the usual ones.

    Returns
    -------
    xarray.Dataset
        What lies in result.nc.
    """
    values = [np.asarray(one, float) for one, _ in axes.values()]
    mesh = values if points else np.meshgrid(*values, indexing="ij")
    dims = ["point"] if points else list(axes)
    T, others = mesh[0], sum(mesh[1:], np.zeros_like(mesh[0]))
    amounts = np.stack(
        [
            30.0 + 0.05 * (T - 500.0) + others,
            60.0 * np.exp(-(T - 500.0) / 150.0) + 0.0 * others,
            1e-7 * np.exp((T - 500.0) / 40.0) + 0.0 * others,
            10.0 + 0.0 * others,
            np.maximum(700.0 - T, 0.0) * 0.01 + 0.0 * others,
            np.zeros_like(others),
        ],
        axis=-1,
    )[..., : len(species)]
    gas = np.array([not name.endswith(("(l)", "graphite")) for name in species])
    shares = np.where(gas, amounts / amounts[..., gas].sum(axis=-1, keepdims=True), amounts > 0.0)
    certified = np.ones(T.shape, bool)
    figures = {
        "h2_dry": shares[..., 0],
        "duty": 1e6 + 1e4 * T + 1e5 * others,
        "t_eq": 0.9 * T + 273.15 + 0.1 * T**2 / 1000.0 + others,
        "nothing": np.full(T.shape, np.nan),
    }
    variables: dict[str, Any] = {
        "temperature": (dims, T + 273.15, {"units": "K"}),
        "heat": (dims, 1e4 * (T - 480.0) + 1e3 * others, {"units": "W"}),
        "amount": ([*dims, "species"], amounts, {"units": "mol/s"}),
        "mole_fraction": ([*dims, "species"], shares, {"units": "1"}),
        "certified": (dims, certified),
        "reason": (dims, np.full(T.shape, "")),
        **{
            f"reforming.{name}": (dims, value, {"units": LEGEND["reforming"][name]["unit"]})
            for name, value in figures.items()
        },
    }
    along = {
        name: (dims if points else name, one, {"units": unit})
        for (name, (_, unit)), one in zip(axes.items(), values, strict=True)
    }
    data = xarray.Dataset(variables, {**along, "species": list(species)}, {"basis": "mol/s"})
    folder.mkdir(parents=True, exist_ok=True)
    data.to_netcdf(folder / "result.nc", engine="h5netcdf")
    write_head(folder, case_of(list(axes), **tables), states=[{"inputs": {}}])
    return data


def write_head(folder: Path, case: Mapping[str, Any], **more: Any) -> None:
    """Write result.json."""
    head = {
        "schema": 1,
        "title": "Made by hand",
        "basis": "mol/s",
        "case": case,
        "gibbsmin": "0",
        "key_figures": LEGEND,
    }
    (folder / "result.json").write_text(json.dumps({**head, **more}), encoding="utf-8")


def state_folder(folder: Path, **state: Any) -> None:
    """Write the result of a single state."""
    folder.mkdir(parents=True, exist_ok=True)
    usual = {
        "certificate": {"ok": True},
        "phases": {"gas": 100.0, "C(s):graphite": 3.0},
        "amounts": {"H2": 60.0, "CH4": 39.99, "NO": 0.01, "C(s):graphite": 3.0, "H2O(l)": 0.0},
        "mole_fractions": {"H2": 0.6, "CH4": 0.3999, "NO": 1e-4, "C(s):graphite": 1.0, "H2O(l)": 0.0},
    }
    write_head(folder, case_of([]), states=[{**usual, **state}])


def train_folder(folder: Path, points: int) -> xarray.Dataset | None:
    """Write the result of a train of two streams, ``points`` values of an input or, at 1, a single state."""
    streams, steps, species = ["feed", "hot.side"], ["heater", "whole train"], ["N2", "H2O", "H2O(l)"]
    folder.mkdir(parents=True, exist_ok=True)
    case = {
        "feeds": {"feed": {"flow": "1 kmol/h", "temperature": "25 degC"}},
        "stage": [{"name": "heater", "inlets": ["feed"], "held": {}}],
    }
    head = {
        "schema": 1,
        "gibbsmin": "0",
        "basis": "mol/s",
        "title": "Train",
        "order": ["heater"],
        "products": ["hot.side"],
    }
    x = np.linspace(1.0, 2.0, points)
    amounts = np.stack([np.stack([x, 0.1 * x, 0.0 * x], -1), np.stack([x, 0.2 * x**2, 0.05 * x], -1)], 1)
    temperature = np.stack([0.0 * x + 298.15, 500.0 + 10.0 * x], -1)
    if points == 1:
        told = {
            name: {
                "temperature": float(temperature[0, k]),
                "amount": float(amounts[0, k].sum()),
                "amounts": dict(zip(species, amounts[0, k].tolist(), strict=True)),
            }
            for k, name in enumerate(streams)
        }
        (folder / "result.json").write_text(json.dumps({**head, "case": case, "states": [{"streams": told}]}))
        return None
    name = "stages.heater.take.side.percent"
    case["sweep"] = [{"vary": name}]  # type: ignore[assignment]
    heat = np.stack([1e3 * x, 1e3 * x], -1)
    data = xarray.Dataset(
        {
            "amount": ([name, "stream", "species"], amounts, {"units": "mol/s"}),
            "temperature": ([name, "stream"], temperature, {"units": "K"}),
            "step_heat": ([name, "step"], heat, {"units": "W"}),
            "step_work": ([name, "step"], 0.0 * heat, {"units": "W"}),
            "certified": ([name], np.ones(points, bool)),
        },
        {name: (name, x, {"units": "1"}), "stream": streams, "step": steps, "species": species},
    )
    data.to_netcdf(folder / "result.nc", engine="h5netcdf")
    (folder / "result.json").write_text(json.dumps({**head, "case": case, "states": [{}]}))
    return data
