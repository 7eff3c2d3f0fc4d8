"""What can be drawn of a result: shares of the gas, condensed amounts, temperature, heat, key figures, streams."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.elements import parse_formula, split_name
from gibbsmin.errors import FormulaError
from gibbsmin.report.figures.names import typed_units
from gibbsmin.report.figures.style import formula, in_formulas, unit_word
from gibbsmin.report.key_figure_table import in_shown_unit
from gibbsmin.units import from_si

if TYPE_CHECKING:
    import xarray

    from gibbsmin.report.figures.source import Source

Floats = NDArray[np.float64]

LEAST: Final = 1e-6
"""Mole fraction below which a gas species is not drawn, unless the case shows others [-]."""


@dataclass(frozen=True)
class Quantity:
    """A result over the points that are drawn.

    Attributes
    ----------
    name : str
        Head of its column in files, with the unit of ``values``.
    label : str
        What people read.
    values : array
        In SI, as the data set has them; nan where a state is not certified. Shape of the source.
    unit : str
        Unit to show it in, as people write it; empty for a plain number.
    factor, zero : float
        Shown is ``factor * values - zero``.
    kind : str
        ``"gas"``, ``"condensed"``, ``"state"`` or ``"key"``.
    species : str
        Its species, where it is of one.
    """

    name: str
    label: str
    values: Floats
    unit: str = ""
    factor: float = 1.0
    zero: float = 0.0
    kind: str = "state"
    species: str = ""

    @property
    def shown(self) -> Floats:
        """The values in the unit that they are shown in."""
        return self.factor * self.values - self.zero

    @property
    def span(self) -> tuple[float, float]:
        """Lowest and highest value shown; nan where there is none."""
        known = self.shown[np.isfinite(self.values)]
        return (float(known.min()), float(known.max())) if known.size else (np.nan, np.nan)

    @property
    def varies(self) -> bool:
        """Whether it takes more than one value, beyond rounding."""
        low, high = self.span
        return bool(high - low > 1e-6 * max(abs(low), abs(high)))


def threshold(source: Source) -> float:
    """Mole fraction below which the case shows no species, [-]."""
    asked = (source.case.get("show") or {}).get("threshold")
    return float(asked) if isinstance(asked, int | float) and 0.0 < asked < 1.0 else LEAST


def is_gas(name: str) -> bool:
    """Tell a gas by its name; what is no formula, such as ash, is none.

    Examples
    --------
    >>> is_gas("CH4"), is_gas("C(s):graphite"), is_gas("ash")
    (True, False, False)
    """
    try:
        parse_formula(split_name(name).formula)
    except FormulaError:
        return False
    return split_name(name).phase == "gas"


def gas_quantities(source: Source, stream: str = "") -> list[Quantity]:
    """Shares of the gas, of every species that reaches the threshold, by falling largest share.

    Parameters
    ----------
    source : Source
        A sweep.
    stream : str
        Which stream of a train; empty for a case of one mixture.

    Returns
    -------
    list of Quantity
        Mole fractions, shown in percent.
    """
    names, amounts = _amounts(source, stream)
    at = np.flatnonzero(_gas(source, names))
    total = amounts[..., at].sum(axis=-1)
    with np.errstate(invalid="ignore", divide="ignore"):
        shares = np.where(total[..., None] > 0.0, amounts[..., at] / total[..., None], np.nan)
    largest = _largest(shares)
    found = []
    for place in np.argsort(-largest, kind="stable"):
        name = names[at[place]]
        if largest[place] >= threshold(source):
            head = f"{stream}: {name} [mol/mol gas]" if stream else f"{name} [mol/mol gas]"
            label = formula(name)
            found.append(Quantity(head, label, shares[..., place], "%", 100.0, 0.0, "gas", name))
    return found


def condensed_quantities(source: Source, stream: str = "") -> list[Quantity]:
    """Amounts of solids and liquids that occur, those that come or go first, then by amount; as `gas_quantities`."""
    names, amounts = _amounts(source, stream)
    unit = typed_units(source.case, source.basis)["amount"]
    found = []
    gas = _gas(source, names)
    for k, name in enumerate(names):
        if not gas[k] and np.nan_to_num(amounts[..., k]).max(initial=0.0) > 0.0:
            head = f"{stream}: {name} [{source.basis}]" if stream else f"{name} [{source.basis}]"
            factor = from_si(1.0, unit)
            values = amounts[..., k]
            found.append(Quantity(head, formula(name), values, unit_word(unit), factor, 0.0, "condensed", name))
    return sorted(found, key=lambda one: (not comes_or_goes(one), -float(np.nanmax(one.values))))


def comes_or_goes(quantity: Quantity) -> bool:
    """Whether a phase is there in some states and not in others."""
    known = quantity.values[np.isfinite(quantity.values)]
    return bool((known > 0.0).any() and (known <= 0.0).any())


def state_quantities(source: Source) -> list[Quantity]:
    """Temperature, pressure, heat and work, as far as they are results and vary."""
    assert source.data is not None, "a sweep"
    units = typed_units(source.case, source.basis)
    held = source.case.get("held") or {}
    free = [key for key in ("temperature", "pressure") if key in source.data and held.get(key) is None]
    found = [_degrees(_good(source, key), key, units[key]) for key in free]
    for key, label in (("heat", "heat to be supplied"), ("work", "shaft work to be supplied")):
        if key in source.data and not (key == "heat" and (held.get("adiabatic") or held.get("heat") is not None)):
            unit = str(source.data[key].attrs.get("units", ""))
            found.append(prefixed_quantity(f"{key} [{unit}]", label, _good(source, key), unit))
    return [one for one in found if one.varies]


def key_quantities(source: Source) -> list[Quantity]:
    """Key figures, in the order of the result; those without any number left out."""
    assert source.data is not None, "a sweep"
    units = typed_units(source.case, source.basis)
    found = []
    for name, told in _legend(source).items():
        values = _good(source, name)
        if np.isfinite(values).any():
            found.append(_key(name, told, values, units["temperature"]))
    return found


def _legend(source: Source) -> dict[str, dict[str, str]]:
    """Label, unit and shown unit of each key figure, by SET.NAME, in the order of the result.

    A study whose states are on disk only keeps them with the data set; result.json then tells their ranges.
    """
    assert source.data is not None, "a sweep"
    sets = source.head.get("key_figures") or {}
    known = {f"{group}.{name}": dict(told) for group, ones in sets.items() for name, told in ones.items()}
    inputs = [one.name for one in source.inputs]
    for name in source.head.get("ranges") or {}:
        if "." in name and name in source.data and name not in inputs:
            attributes = source.data[name].attrs
            told = {"label": "long_name", "unit": "units", "shown": "shown"}
            known.setdefault(name, {key: str(attributes.get(attribute, "")) for key, attribute in told.items()})
    return {name: told for name, told in known.items() if name in source.data and told.get("label")}


def prefixed_quantity(name: str, label: str, values: Floats, unit: str, kind: str = "state") -> Quantity:
    """Show a power or an energy with the SI prefix that keeps its numbers handy."""
    known = np.abs(values[np.isfinite(values)])
    largest = float(known.max()) if known.size else 0.0
    scale, prefix = next(((s, p) for s, p in ((1e9, "G"), (1e6, "M"), (1e3, "k")) if largest >= s), (1.0, ""))
    return Quantity(name, label, values, prefix + unit, 1.0 / scale, 0.0, kind)


def stream_temperatures(source: Source) -> list[Quantity]:
    """Temperature of every stream of a train that varies by a degree or more."""
    assert source.data is not None, "a sweep"
    unit = typed_units(source.case, source.basis)["temperature"]
    found = []
    for stream in map(str, source.data["stream"].values):
        values = _masked(source, source.data["temperature"].sel(stream=stream))
        found.append(_degrees(values, "temperature", unit, stream))
    return [one for one in found if one.span[1] - one.span[0] >= 1.0]


def step_energies(source: Source, key: str) -> list[Quantity]:
    """Heat or work of every step of a train where it varies, the whole train with them; one prefix for all."""
    assert source.data is not None, "a sweep"
    unit = str(source.data[f"step_{key}"].attrs.get("units", ""))
    every = prefixed_quantity("", "", _masked(source, source.data[f"step_{key}"]), unit)
    found = []
    for k, step in enumerate(map(str, source.data["step"].values)):
        label = step.replace("_", " ") if key == "heat" else f"{step.replace('_', ' ')}, {key}"
        found.append(Quantity(f"{step}: {key} [{unit}]", label, every.values[..., k], every.unit, every.factor))
    largest = np.nanmax(np.abs(every.values), initial=0.0)
    return [one for one in found if one.varies and np.ptp(one.values[np.isfinite(one.values)]) > 1e-6 * largest]


def _degrees(values: Floats, key: str, unit: str, stream: str = "") -> Quantity:
    """Show a temperature or pressure in the unit that was typed."""
    si = "K" if key == "temperature" else "Pa"
    zero = -from_si(0.0, unit)
    factor = from_si(1.0, unit) + zero
    label = stream.replace("_", " ") if stream else key
    head = f"{stream}: {key} [{si}]" if stream else f"{key} [{si}]"
    return Quantity(head, label, values, unit_word(unit), factor, zero)


def _key(name: str, told: Mapping[str, Any], values: Floats, degrees: str) -> Quantity:
    """Make a quantity of a key figure, in the unit that the trade reads it in."""
    unit, shown = str(told.get("unit", "1")), str(told.get("shown") or "")
    head, label = f"{name} [{'-' if unit == '1' else unit}]", in_formulas(told["label"])
    if shown in ("", "W", "J") and unit in ("W", "J"):
        return prefixed_quantity(head, label, values, unit, "key")
    if unit == "K" and shown in ("", "degC"):
        shown = shown or degrees
    factor, zero = in_shown_unit(shown)
    return Quantity(head, label, values, unit_word(shown or unit), factor, zero, "key")


def _amounts(source: Source, stream: str) -> tuple[list[str], Floats]:
    """Names of the species, and amounts (..., S) of those states that are certified."""
    data: xarray.Dataset | None = source.data
    assert data is not None, "a sweep"
    array = data["amount"].sel(stream=stream) if stream else data["amount"]
    return [str(name) for name in data["species"].values], _masked(source, array)


def _gas(source: Source, names: Sequence[str]) -> list[bool]:
    """Tell which species are of the gas: those with a share between nothing and all, and of the rest by name."""
    assert source.data is not None, "a sweep"
    if "mole_fraction" not in source.data:
        return [is_gas(name) for name in names]
    shares = source.data["mole_fraction"].values.reshape(-1, len(names))
    parted = np.any((shares > 0.0) & (shares < 1.0), axis=0).tolist()
    return [flag or is_gas(name) for flag, name in zip(parted, names, strict=True)]


def _good(source: Source, key: str) -> Floats:
    assert source.data is not None, "a sweep"
    return _masked(source, source.data[key])


def _masked(source: Source, array: xarray.DataArray) -> Floats:
    """Values of the states that are certified, nan for the rest."""
    assert source.data is not None, "a sweep"
    certified = np.asarray(source.data["certified"].values, bool)
    values = np.array(array.values, float)
    values[~certified] = np.nan
    return values


def _largest(shares: Floats) -> Floats:
    """Largest share of each species in any state, (S,); zero where it is in none."""
    flat = np.nan_to_num(shares.reshape(-1, shares.shape[-1]))
    found: Floats = flat.max(axis=0, initial=0.0)
    return found
