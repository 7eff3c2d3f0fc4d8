"""Cautions about closed vessels: what a held volume says and what it does not."""

from __future__ import annotations

from gibbsmin.practice.safety.cautions import Caution


def vessel(pressure: float, start: float | None, *, keeps_heat: bool, condensed: bool) -> Caution:
    """Caution about the pressure of a closed vessel.

    Parameters
    ----------
    pressure : float
        Of the settled mixture, [Pa].
    start : float or None
        Of the feeds before, where it is known, [Pa].
    keeps_heat : bool
        Whether heat is held, so that none is lost to the walls.
    condensed : bool
        Whether solids or liquids are there, whose volume is neglected.

    Returns
    -------
    Caution
        What is said of measured peaks is common practice, no source.
    """
    rise = "" if start is None else f" ({pressure / start:.1f} times the start)"
    kept = " and no heat is lost to its walls" if keeps_heat else " and its temperature is held"
    text = f"Closed vessel at {pressure / 1e5:.3g} bar absolute{rise}, where everything in it settles{kept}."
    if keeps_heat:
        text += (
            " Measured peaks of an explosion are some 5 to 15 % lower, but in pipes, in connected vessels and in a"
            " detonation they are far higher. Vent sizing and detonation are not covered."
        )
    if condensed:
        text += " The volume of solids and liquids is neglected; a vessel nearly full of them has a higher pressure."
    return Caution("vessel", f"{text} Codes for pressure vessels and explosion protection decide.", pressure)
