"""Gas analysis as the trade writes it."""

from __future__ import annotations

from collections.abc import Mapping


def dry(gas: Mapping[str, float], water: str = "H2O") -> dict[str, float]:
    """Mole fractions of a gas with its water taken out.

    Parameters
    ----------
    gas : mapping of str to float
        Mole fractions of the wet gas, [-].
    water : str
        Name of the species that is taken out.

    Returns
    -------
    dict of str to float
        Mole fractions without water, [-]; empty where the gas is water alone.

    Examples
    --------
    >>> dry({"CO2": 0.25, "H2O": 0.5, "N2": 0.25})
    {'CO2': 0.5, 'N2': 0.5}
    """
    rest = 1.0 - gas.get(water, 0.0)
    if rest <= 1e-12:
        return {}
    return {name: x / rest for name, x in gas.items() if name != water}
