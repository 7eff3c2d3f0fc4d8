"""What ``gibbsmin reaction`` prints: the functions of a reaction over T, where it turns, and what it rests on."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise
from math import isfinite, log
from typing import Any, Final

from gibbsmin import __version__
from gibbsmin.practice.reactions.reactions import Reaction
from gibbsmin.report.columns import Column, drawn
from gibbsmin.report.numbers import figures, plain
from gibbsmin.report.table import heading
from gibbsmin.report.words import labelled, shortened
from gibbsmin.thermo.database import load
from gibbsmin.units import from_si

_DEFAULT: Final = (298.15, 500.0, 1000.0, 1500.0, 2000.0)  # K
_SLACK: Final = 2.0  # K; data that begin at 300 K serve at 298.15 K
_CELL: Final = 8  # characters of a number
_FEW: Final = 2  # rows; where the data hold fewer of the usual ones, their ends are shown as well
_BALANCED: Final = 1.0  # J/mol of dG
_UNCERTAIN: Final = 0.5  # of T; a crossover less certain than that has no figure


def default_temperatures(reaction: Reaction) -> list[float]:
    """Temperatures shown where none are asked for, [K]: usual ones within the data of all species.

    Parameters
    ----------
    reaction : Reaction

    Returns
    -------
    list of float
        Where the data of the species do not meet, the crossovers, or the ends of where they may be used.
    """
    common = reaction.temperature_range
    if common is None:
        return list(reaction.crossovers) or list(reaction.search_range or _DEFAULT[:1])
    low, high = common
    usual = [T for T in _DEFAULT if low - _SLACK <= T <= high]
    return usual if len(usual) >= _FEW else sorted({*usual, low, high})


def reaction_table(reaction: Reaction, temperatures: Sequence[float], terms: bool = False) -> list[str]:
    """Lines that show a reaction.

    Parameters
    ----------
    reaction : Reaction
    temperatures : sequence of float
        Rows, [K].
    terms : bool
        Whether to show what each species adds, at each temperature.

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    lines = [*_title(reaction), "", *_functions(reaction, temperatures), "", *_universe(reaction, temperatures), ""]
    if terms:
        for T in temperatures:
            lines += [*_terms(reaction, T), ""]
    return lines + _sentences(reaction, temperatures)


def reaction_document(reaction: Reaction, temperatures: Sequence[float], terms: bool = False) -> dict[str, Any]:
    """Put all of it into one dictionary, SI, with the unit in each key.

    Parameters
    ----------
    reaction, temperatures, terms
        As for `reaction_table`.

    Returns
    -------
    dict
        Safe for JSON.
    """
    return {
        "gibbsmin": __version__,
        "data_version": load().version,
        "equation": reaction.equation,
        "coefficients": reaction.coefficients,
        "equilibrium_constant": reaction.law(),
        "standard_pressure_Pa": reaction.standard_pressure,
        "data_range_K": reaction.temperature_range,
        "searched_range_K": reaction.search_range,
        "crossovers_K": reaction.crossovers,
        "crossover_uncertainties_95_K": [_finite(reaction.crossover_uncertainty(T)) for T in reaction.crossovers],
        "rows": [_row(reaction, T, terms) for T in temperatures],
        "uncertainty_assumed_for": reaction.assumed,
        "cautions": reaction.warnings(temperatures),
        "notes": [*reaction.notes, *reaction.hypothetical(temperatures)],
    }


def _finite(value: float) -> float | None:
    """Give what JSON has no word for as None."""
    return value if isfinite(value) else None


def _row(reaction: Reaction, T: float, terms: bool) -> dict[str, Any]:
    u = reaction.uncertainty(T)
    row = {
        "temperature_K": T,
        "enthalpy_J_per_mol": reaction.enthalpy(T),
        "enthalpy_uncertainty_95_J_per_mol": u.enthalpy,
        "entropy_J_per_mol_K": reaction.entropy(T),
        "entropy_uncertainty_95_J_per_mol_K": u.entropy,
        "gibbs_energy_J_per_mol": reaction.gibbs_energy(T),
        "gibbs_energy_uncertainty_95_J_per_mol": u.gibbs_energy,
        "ln_k": reaction.ln_k(T),
        "ln_k_uncertainty_95": u.ln_k,
        "log10_k": reaction.log10_k(T),
        "entropy_of_surroundings_J_per_mol_K": reaction.entropy_of_surroundings(T),
        "entropy_of_universe_J_per_mol_K": reaction.entropy_of_universe(T),
    }
    if terms:
        row["terms"] = [
            {
                "species": part.name,
                "coefficient": part.coefficient,
                "enthalpy_J_per_mol": part.enthalpy,
                "entropy_J_per_mol_K": part.entropy,
                "gibbs_energy_J_per_mol": part.gibbs_energy,
            }
            for part in reaction.terms(T)
        ]
    return row


def _title(reaction: Reaction) -> list[str]:
    """Equation, and what it is for."""
    text = reaction.equation
    first = heading(text) if len(text) <= 80 else [*labelled("reaction", text)]
    return [
        *first,
        "per mole of the equation as written; every gas at 1 bar (the standard",
        "pressure), every solid and liquid pure",
    ]


def _fixed(value: float, decimals: int = 2) -> str:
    """Write a value with fixed decimals, without them or in powers of ten where its column has no room."""
    texts = (f"{value:z.{decimals}f}", f"{value:z.0f}", f"{value:.1e}")
    return next((text for text in texts if len(text) <= _CELL), texts[-1])


def _functions(reaction: Reaction, temperatures: Sequence[float]) -> list[str]:
    """dH, dS, dG, log10 K, each with its uncertainty."""
    u = [reaction.uncertainty(T) for T in temperatures]
    return drawn(
        [
            Column("T", "K", [plain(T) for T in temperatures]),
            Column("dH", "kJ/mol", [_fixed(reaction.enthalpy(T) / 1e3) for T in temperatures]),
            Column("+-", "kJ/mol", [figures(each.enthalpy / 1e3, 2) for each in u]),
            Column("dS", "J/mol/K", [_fixed(reaction.entropy(T)) for T in temperatures]),
            Column("+-", "J/mol/K", [figures(each.entropy, 2) for each in u]),
            Column("dG", "kJ/mol", [_fixed(reaction.gibbs_energy(T) / 1e3) for T in temperatures]),
            Column("+-", "kJ/mol", [figures(each.gibbs_energy / 1e3, 2) for each in u]),
            Column("log10 K", "-", [_fixed(reaction.log10_k(T), 3) for T in temperatures]),
            Column("+-", "-", [figures(each.ln_k / log(10.0), 2) for each in u]),
        ]
    )


def _universe(reaction: Reaction, temperatures: Sequence[float]) -> list[str]:
    """Entropy of reaction, surroundings and both, and the direction that follows."""
    return drawn(
        [
            Column("T", "degC", [plain(from_si(T, "degC")) for T in temperatures]),
            Column("ln K", "-", [_fixed(reaction.ln_k(T), 3) for T in temperatures]),
            Column("dS", "J/mol/K", [_fixed(reaction.entropy(T)) for T in temperatures]),
            Column("surroundings", "J/mol/K", [_fixed(reaction.entropy_of_surroundings(T)) for T in temperatures]),
            Column("universe", "J/mol/K", [_fixed(reaction.entropy_of_universe(T)) for T in temperatures]),
            Column("direction", "", [_direction(reaction, T) for T in temperatures]),
        ]
    )


def _terms(reaction: Reaction, T: float) -> list[str]:
    """Show what each species adds at one temperature, and the sums."""
    lines = [
        f"term by term at {plain(T)} K; nu is the coefficient, positive for products",
        f"{'species':20}{'nu':>7}{'H':>11}{'nu H':>11}{'S':>9}{'nu S':>10}{'nu G':>12}",
        f"{'':20}{'-':>7}{'kJ/mol':>11}{'kJ/mol':>11}{'J/mol/K':>9}{'J/mol/K':>10}{'kJ/mol':>12}",
    ]
    parts = reaction.terms(T)
    for name, nu, H, S, G in parts:
        lines.append(
            f"{shortened(name, 20):20}{nu:>7.4g}{_fixed(H / 1e3):>11}{_fixed(nu * H / 1e3):>11}{_fixed(S):>9}"
            f"{_fixed(nu * S):>10}{_fixed(nu * G / 1e3):>12}"
        )
    H, S, G = reaction.enthalpy(T), reaction.entropy(T), reaction.gibbs_energy(T)
    return [*lines, f"{'products - reactants':38}{_fixed(H / 1e3):>11}{_fixed(S):>19}{_fixed(G / 1e3):>12}"]


def _sentences(reaction: Reaction, temperatures: Sequence[float]) -> list[str]:
    """Say what the numbers mean, and what to mind."""
    lines = labelled("direction", _course(reaction))
    crossovers = reaction.crossovers
    if crossovers:
        lines += labelled("crossover", f"dG = 0 at {'; '.join(_crossover(reaction, T) for T in crossovers)}")
    elif reaction.search_range:
        lines += labelled("crossover", f"none {_between(reaction.search_range)}")
    lines += labelled("heat", _heat(reaction, temperatures[0]))
    lines += labelled("K", _law(reaction))
    lines += labelled(
        "by hand",
        "dG = dH - T dS / 1000; surroundings at T take up -dH: -1000 dH / T; universe = dS + surroundings "
        "(dH and dG in kJ/mol, entropies in J/mol/K, T in K).",
    )
    lines += labelled("+-", _uncertainty(reaction, temperatures))
    for text in reaction.warnings([*temperatures, *crossovers]):
        lines += labelled("caution", f"{text[0].upper()}{text[1:]}; there Cp is taken as constant.")
    for text in reaction.hypothetical(temperatures):
        lines += labelled("note", f"{text} and 1 bar.")
    for text in reaction.notes:
        lines += labelled("note", f"{text}.")
    return lines + labelled(
        "caution",
        "This says where a reaction may go, not how fast: a mixture that stands for years can explode when it is lit "
        "or meets a catalyst. Local codes and licensed practice decide.",
    )


def _way(G: float) -> str:
    return "forward" if G < 0.0 else "backward"


def _direction(reaction: Reaction, T: float) -> str:
    """Way of the reaction at ``T``, with a question mark where the uncertainty of the data could turn it."""
    G = reaction.gibbs_energy(T)
    if abs(G) < _BALANCED:
        return "balanced"
    return _way(G) + ("?" if abs(G) < reaction.uncertainty(T).gibbs_energy else "")


def _course(reaction: Reaction) -> str:
    """Say in words over which temperatures the reaction goes which way."""
    searched = reaction.search_range
    if searched is None:
        return "no sentence: the data of the species have no temperature in common."
    low, high = searched
    ends = [low, *reaction.crossovers, high]
    ways = [_way(reaction.gibbs_energy(0.5 * (a + b))) for a, b in pairwise(ends)]
    if len(ways) == 1:
        told = f"{ways[0]} {_between(searched)}"
    else:
        told = f"{ways[0]} below {ends[1]:z.1f} K"
        told += "".join(
            f", {way} from {a:z.1f} to {b:z.1f} K" for way, a, b in zip(ways[1:-1], ends[1:-2], ends[2:-1], strict=True)
        )
        told += f", {ways[-1]} above {ends[-2]:z.1f} K"
    return f"{told}, with all species in their standard states; other pressures move it."


def _between(ends: tuple[float, float]) -> str:
    return f"from {plain(ends[0])} to {plain(ends[1])} K"


def _crossover(reaction: Reaction, T: float) -> str:
    """Write a crossover in both scales, with its uncertainty where that says something."""
    u = reaction.crossover_uncertainty(T)
    told = "" if reaction.changes_phase else f" +- {figures(u, 2)} K" if u < _UNCERTAIN * T else ", very uncertain"
    return f"{T:z.1f} K ({from_si(T, 'degC'):z.1f} degC){told}"


def _heat(reaction: Reaction, T: float) -> str:
    H = reaction.enthalpy(T) / 1e3
    way = "gives off" if H < 0.0 else "takes up"
    return f"the reaction {way} {abs(H):z.2f} kJ per mole of the equation at {plain(T)} K and constant pressure."


def _law(reaction: Reaction) -> str:
    """Write K in pressures."""
    law = reaction.law()
    if "p[" not in law:
        return "no gas takes part: K is 1 only where all solids and liquids can exist together."
    condensed = any(record.condensed for record in reaction.species)
    return f"{law}, p in bar" + ("; pure solids and liquids count as 1" if condensed else "")


def _uncertainty(reaction: Reaction, temperatures: Sequence[float]) -> str:
    """Say what the uncertainties are and are not."""
    text = "95 %, from the data of each species, added as if their errors were independent; shared errors can make it "
    text += "smaller or larger."
    if any(_direction(reaction, T).endswith("?") for T in temperatures):
        text += " A direction with ? could be turned by it."
    if reaction.assumed:
        text += f" Assumed after the class of substance for {', '.join(reaction.assumed)}."
    if reaction.changes_phase:
        text += " Two phases of one substance share most of their error: a melting or boiling point is known better."
    return text
