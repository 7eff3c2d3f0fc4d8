"""Species and systems from Cantera objects and files (extra ``interop``): ideal gases and fixed-stoichiometry phases.

Cantera's own parametrizations are read into the nine-coefficient pieces of `thermo.polynomial`. The reference pressure
is that of each record: Cantera takes 1 atm for a file that does not say.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from math import log
from pathlib import Path
from typing import Any, Final

from gibbsmin.constants import R
from gibbsmin.errors import InputError, SpeciesError
from gibbsmin.states.system import System
from gibbsmin.thermo.record import Piece, Species

GAS_MODEL: Final = "ideal-gas"
PURE_MODEL: Final = "fixed-stoichiometry"
CANTERA_FILES: Final = (".yaml", ".yml")
"""Endings by which a Cantera file is known."""
BEYOND: Final = 200.0
"""How far a condensed species may be used beyond the range of its data, [K]."""


def system_from_cantera(solutions: Any, inert: Iterable[str] = ()) -> System:
    """Make a system from Cantera objects.

    Parameters
    ----------
    solutions : cantera.ThermoPhase or list of them
        At most one ideal gas, and any number of fixed-stoichiometry phases.
    inert : iterable of str
        Names of species that take no part.

    Returns
    -------
    System
        Species with names, order and standard pressure as they are there.

    Raises
    ------
    InputError
        A phase of another kind, a second gas, or a species whose parametrization cannot be read.
    """
    return System(species_from_cantera(solutions), inert)


def species_from_cantera(solutions: Any) -> list[Species]:
    """Read the species of Cantera objects; arguments and errors as in `system_from_cantera`."""
    phases = list(solutions) if isinstance(solutions, list | tuple) else [solutions]
    gases = [phase.name for phase in phases if phase.thermo_model == GAS_MODEL]
    if len(gases) > 1:
        raise InputError(f"at most one gas can be taken over; got {' and '.join(gases)}")
    found = []
    for phase in phases:
        if phase.thermo_model not in (GAS_MODEL, PURE_MODEL):
            raise InputError(
                f"phase {phase.name!r} is of the kind {phase.thermo_model!r}; only {GAS_MODEL!r} and {PURE_MODEL!r} "
                "phases can be taken over"
            )
        gas = phase.thermo_model == GAS_MODEL
        found += [_record(species, gas, phase) for species in phase.species()]
    return found


def read_cantera_file(path: str | Path) -> list[Species]:
    """Read the species of every ideal-gas and fixed-stoichiometry phase of a Cantera YAML file.

    Parameters
    ----------
    path : str or Path
        The file; its first ideal gas is taken, and all its fixed-stoichiometry phases.

    Returns
    -------
    list of Species

    Raises
    ------
    InputError
        Cantera is not installed, the file cannot be read, or it has no such phase.
    """
    try:
        import cantera
    except ImportError as error:
        raise InputError("reading a Cantera file needs the extra: pip install 'gibbsmin[interop]'") from error
    try:
        import ruamel.yaml

        content = ruamel.yaml.YAML(typ="safe").load(Path(path).read_text(encoding="utf-8"))
        declared = [(entry["name"], entry["thermo"]) for entry in content["phases"]]
        gases = [name for name, model in declared if model == GAS_MODEL][:1]
        pure = [name for name, model in declared if model == PURE_MODEL]
        phases = [cantera.Solution(str(path), name) for name in [*gases, *pure]]
    except Exception as error:  # whatever Cantera or the YAML reader finds wrong, it is the file
        raise InputError(f"{path} cannot be read as a Cantera file: {error}") from error
    if not phases:
        raise InputError(f"{path} has no phase of the kinds {GAS_MODEL!r} and {PURE_MODEL!r}")
    return species_from_cantera(phases)


def _record(species: Any, gas: bool, phase: Any) -> Species:
    """Turn one Cantera species into a record."""
    thermo = species.thermo
    kind = type(thermo).__name__
    if kind not in _READERS:
        raise SpeciesError(f"species {species.name}: data of the kind {kind} cannot be read")
    pieces = tuple(
        Piece(float(low), float(high), tuple(float(c) for c in coefficients))
        for low, high, coefficients in _READERS[kind](thermo)
    )
    low, high = pieces[0].low, pieces[-1].high
    return Species(
        name=species.name,
        formula=species.name,
        phase="gas" if gas else "solid",
        form="",
        elements={element: atoms for element, atoms in species.composition.items() if element != "E"},
        charge=round(species.charge),
        pieces=pieces,
        usable=(50.0, 20000.0) if gas else (max(low - BEYOND, 50.0), high + BEYOND),
        reference_pressure=thermo.reference_pressure,
        gas_constant=R,
        source=f"Cantera object, phase {phase.name}, {phase.source}".strip(", "),
        note="uncertainty not given there",
    )


def _two_ranges(thermo: Any) -> list[tuple[float, float, tuple[float, ...]]]:
    """Seven coefficients in two ranges; Cantera stores the middle temperature, the upper range, then the lower."""
    middle, upper, lower = thermo.coeffs[0], thermo.coeffs[1:8], thermo.coeffs[8:15]
    return [
        (thermo.min_temp, middle, (0.0, 0.0, *lower)),
        (middle, thermo.max_temp, (0.0, 0.0, *upper)),
    ]


def _nine(thermo: Any) -> list[tuple[float, float, tuple[float, ...]]]:
    """Nine coefficients in any number of ranges: count, then low, high and coefficients of each."""
    rows = [thermo.coeffs[1 + 11 * k : 12 + 11 * k] for k in range(int(thermo.coeffs[0]))]
    return [(row[0], row[1], tuple(row[2:])) for row in rows]


def _constant(thermo: Any) -> list[tuple[float, float, tuple[float, ...]]]:
    """Constant Cp°: T0, H°(T0), S°(T0), Cp°, in J and kmol."""
    T0, h0, s0, cp = (value / (1.0 if k == 0 else 1000.0 * R) for k, value in enumerate(thermo.coeffs))
    coefficients = (0.0, 0.0, cp, 0.0, 0.0, 0.0, 0.0, h0 - cp * T0, s0 - cp * log(T0))
    return [(max(thermo.min_temp, 1.0), min(thermo.max_temp, 20000.0), coefficients)]


_READERS: Final[dict[str, Callable[[Any], list[tuple[float, float, tuple[float, ...]]]]]] = {
    "NasaPoly2": _two_ranges,
    "Nasa9PolyMultiTempRegion": _nine,
    "ConstantCp": _constant,
}
