"""What ``gibbsmin species`` prints: a list of species, or the data sheet of one."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from itertools import pairwise

from gibbsmin.constants import STANDARD_TEMPERATURE
from gibbsmin.report.numbers import MISSING, plain
from gibbsmin.report.table import heading
from gibbsmin.report.words import labelled, shortened
from gibbsmin.thermo.checkup import Finding
from gibbsmin.thermo.record import Species

_TEMPERATURES = (298.15, 400, 500, 600, 800, 1000, 1200, 1400, 1600, 1800, 2000, 2500, 3000, 4000, 5000, 6000)  # K


def species_list(found: Sequence[Species]) -> list[str]:
    """One line a species: name, range, formation enthalpy, entropy, other names.

    Parameters
    ----------
    found : sequence of Species

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    lines = [
        f"{'':28}{'data from - to':>14}{'H 298 K':>11}{'S 298 K':>9}",
        f"{'species':28}{'K':>14}{'kJ/mol':>11}{'J/mol/K':>9}  other names",
    ]
    for record in found:
        low, high = record.temperature_range
        lines.append(
            f"{shortened(record.name, 27):28}{f'{low:.0f} - {high:.0f}':>14}{_formation(record):>11}"
            f"{_entropy(record):>9}  {shortened(', '.join(record.aliases), 16)}".rstrip()
        )
    return lines


def species_sheet(record: Species) -> list[str]:
    """All that is known of one species, with its functions over T.

    Parameters
    ----------
    record : Species

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    low, high = record.temperature_range
    lines = heading(record.name)
    if record.aliases:
        lines += labelled("also", ", ".join(record.aliases))
    lines += labelled("is", f"{record.phase} {record.formula}, {1e3 * record.molar_mass:.4f} g/mol")
    lines += labelled("H at 298.15 K", f"{_formation(record)} kJ/mol{_plus_minus(record)}")
    lines += labelled(
        "S at 298.15 K", f"{_entropy(record)} J/mol/K, +- {record.entropy_uncertainty:.2g} at 95 %, at 1 bar"
    )
    lines += labelled("data", f"from {plain(low)} to {plain(high)} K; beyond, Cp stays constant")
    lines += labelled("candidate", f"from {plain(record.usable[0])} to {plain(record.usable[1])} K")
    lines += labelled("source", record.source or "not given")
    if record.note:
        lines += labelled("note", record.note)
    for piece, after in pairwise(record.pieces):
        if piece.form != after.form:
            jump = _jump(record, piece.high)
            lines += labelled("transition", f"{piece.form} to {after.form} at {plain(piece.high)} K, {jump:.2f} kJ/mol")
    forms = any(piece.form for piece in record.pieces)
    head = f"{'T':>10}{'Cp':>12}{'H':>13}{'S':>12}{'G':>13}" + ("   form" if forms else "")
    unit = f"{'K':>10}{'J/mol/K':>12}{'kJ/mol':>13}{'J/mol/K':>12}{'kJ/mol':>13}"
    lines += ["", head, unit]
    for T in _rows(low, high):
        lines.append(
            f"{plain(T):>10}{record.heat_capacity(T):>12.2f}{record.enthalpy(T) / 1e3:>13.3f}"
            f"{record.entropy(T):>12.2f}{record.gibbs_energy(T) / 1e3:>13.2f}"
            + (f"   {record.form_at(T)}".rstrip() if forms else "")
        )
    return [*lines, "", "H: the elements at 298.15 K are zero. G = H - T S. At 1 bar."]


def findings_list(findings: Iterable[Finding]) -> list[str]:
    """One labelled paragraph a finding of the data check."""
    lines: list[str] = []
    for finding in findings:
        lines += labelled("finding", f"{finding.species}, {finding.test}: {finding.message}")
    return lines


def _rows(low: float, high: float) -> list[float]:
    """Temperatures of the sheet: the usual ones inside the data, and both ends."""
    inside = {float(T) for T in _TEMPERATURES if low <= T <= high}
    return sorted({*inside, low, high}) if high < 1e5 else sorted({*inside, low})


def _reaches_standard(record: Species) -> bool:
    low, high = record.temperature_range
    return low <= STANDARD_TEMPERATURE + 2.0 and high >= STANDARD_TEMPERATURE


def _formation(record: Species) -> str:
    return f"{record.standard_enthalpy / 1e3:.3f}" if _reaches_standard(record) else MISSING


def _entropy(record: Species) -> str:
    return f"{record.standard_entropy:.2f}" if _reaches_standard(record) else MISSING


def _plus_minus(record: Species) -> str:
    """Uncertainty of the enthalpy, and where it comes from."""
    origin = "assumed for its class" if record.uncertainty_assumed else record.uncertainty_source
    return f", +- {record.enthalpy_uncertainty / 1e3:.2g} at 95 %" + (f" ({origin})" if origin else "")


def _jump(record: Species, T: float) -> float:
    """Enthalpy of the transition at ``T``, kJ/mol."""
    above = float(record.enthalpy(T * (1.0 + 1e-12)))
    return (above - float(record.enthalpy(T))) / 1e3
