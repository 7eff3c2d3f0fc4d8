"""The units that a case was typed in, for results to be shown in them."""

from __future__ import annotations

from gibbsmin.case.schema import CaseFrame
from gibbsmin.units import unit_of


def shown_units(case: CaseFrame, basis: str) -> dict[str, str]:
    """Find the units to show results in: those that were typed.

    Parameters
    ----------
    case : CaseFrame
        The case.
    basis : str
        ``"mol"`` or ``"mol/s"``.

    Returns
    -------
    dict of str to str
        ``temperature``, ``pressure`` and ``amount``.
    """
    units = {"temperature": "K", "pressure": "Pa", "amount": basis}
    for key in ("temperature", "pressure"):
        typed_values = [*case.typed(key), *(getattr(feed, key) for feed in case.feeds.values())]
        units[key] = next(
            (unit for value in typed_values if value is not None and (unit := unit_of(value))), units[key]
        )
    sizes = [size for feed in case.feeds.values() for size in (feed.flow, feed.amount, *(feed.amounts or {}).values())]
    typed = [unit_of(size) for size in sizes if size is not None]
    molar = [unit for unit in typed if "mol" in unit]
    if molar:
        units["amount"] = molar[0]
    elif typed and basis == "mol/s" and "/" in typed[0]:
        units["amount"] = f"kmol/{typed[0].rpartition('/')[2]}"
    return units
