"""One state as bars: shares of the gas on a logarithmic axis, then the solids and liquids."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any, Final

import numpy as np
from matplotlib.axes import Axes
from matplotlib.ticker import FuncFormatter, LogLocator, NullLocator

from gibbsmin.report.figures.drawn import Drawn, listed, number
from gibbsmin.report.figures.names import typed_units
from gibbsmin.report.figures.quantities import threshold
from gibbsmin.report.figures.source import Source
from gibbsmin.report.figures.style import FAINT, POINTS, canvas, formula, shades, unit_word, value_with_unit
from gibbsmin.report.numbers import share
from gibbsmin.report.words import shortened
from gibbsmin.units import from_si

_MOST: Final = 20
_LONGEST: Final = 32  # letters of a name
_MOST_PHASES: Final = 12
_ROW: Final = 0.19  # inch that a bar takes
_FRAME: Final = 0.75  # inch for title and axis of a panel


def state_bars(source: Source, state: Mapping[str, Any]) -> Iterator[Drawn]:
    """Draw the composition of the only state of a case.

    Parameters
    ----------
    source : Source
    state : mapping
        As result.json has it.

    Yields
    ------
    Drawn
        Nothing where the state is not certified.
    """
    if not (state.get("certificate") or {}).get("ok"):
        return
    floor = threshold(source)
    shares, there = state["mole_fractions"], state["phases"]
    fractions = {name: x for name, x in shares.items() if name not in there and (x or 0.0) >= floor}
    gas = dict(sorted(fractions.items(), key=lambda item: -item[1])[:_MOST])
    present = {name: n for name, n in there.items() if name != "gas" and (n or 0.0) > 0.0}
    phases = dict(sorted(present.items(), key=lambda item: -item[1])[:_MOST_PHASES])
    parts = [part for part in (gas, phases) if part]
    if not parts:
        return
    heights = [_ROW * max(len(part), 2) + 0.1 for part in parts]
    title = f"What the mixture settles to{source.held}"
    figure, panels = canvas(
        title, len(parts), 1, sum(heights) + _FRAME * len(parts) + 0.2, height_ratios=heights
    )  # fmt: skip
    unit = typed_units(source.case, source.basis)["amount"]
    if gas:
        _gas_bars(panels[0, 0], gas, floor)
    if phases:
        _phase_bars(panels[-1, 0], {name: from_si(n, unit) for name, n in phases.items()}, unit_word(unit))
    told = [f"{formula(name)} ({_share(x)})" for name, x in gas.items()]
    told += [f"{formula(name)} ({number(from_si(n, unit))} {unit_word(unit)})" for name, n in phases.items()]
    left = len(fractions) - len(gas) + len(present) - len(phases)
    yield Drawn(
        "composition",
        title,
        f"Bars of what the mixture settles to{source.held}: {listed(told)}.",
        figure,
        {
            "species": [*gas, *phases],
            "mole fraction of the gas [mol/mol gas]": np.array([*gas.values(), *(np.nan for _ in phases)], float),
            f"amount [{source.basis}]": np.array(
                [state["amounts"].get(name, np.nan) for name in (*gas, *phases)], float
            ),
        },
        (f"{left} more in the table.",) if left else (),
    )


def _gas_bars(panel: Axes, gas: Mapping[str, float], floor: float) -> None:
    """Draw the shares of the gas."""
    panel.set_xscale("log")
    panel.set_xlim(100.0 * floor, 100.0)
    values = [100.0 * x for x in gas.values()]
    _bars(panel, gas, values, [_share(x) for x in gas.values()])
    panel.xaxis.set_major_locator(LogLocator(10.0, numticks=12))
    panel.xaxis.set_minor_locator(NullLocator())
    panel.xaxis.set_major_formatter(FuncFormatter(lambda value, _: _share(0.01 * value, tick=True)))
    panel.set_xlabel("share of the gas by moles, wet")


def _phase_bars(panel: Axes, phases: Mapping[str, float], unit: str) -> None:
    """Draw the amounts of solids and liquids."""
    panel.set_xlim(0.0, max(phases.values()) * 1.02)
    _bars(panel, phases, list(phases.values()), [value_with_unit(number(n), unit) for n in phases.values()])
    panel.set_xlabel(f"solids and liquids, {unit}")


def _bars(panel: Axes, names: Mapping[str, float], values: list[float], told: list[str]) -> None:
    """Draw horizontal bars, the first on top, each with its value at its end."""
    places = np.arange(len(values))
    panel.barh(places, values, height=0.7, color=shades(1)[0])
    panel.set_yticks(places, [shortened(formula(name), _LONGEST) for name in names])
    panel.set_ylim(max(len(values), 2) - 0.4, -0.6)
    panel.tick_params(axis="y", length=0.0)
    panel.grid(visible=False, axis="y")
    panel.grid(axis="x")
    for place, value, text in zip(places, values, told, strict=True):
        panel.annotate(
            text, (value, place), (4.0, 0.0), textcoords="offset points", va="center", fontsize=POINTS - 1.0,
            annotation_clip=False, color=FAINT,
        )  # fmt: skip


def _share(x: float, tick: bool = False) -> str:
    """Write a share in percent, or below 0.1 % in ppm."""
    if tick:
        return f"{number(100.0 * x)} %" if x > 9.99e-4 else f"{number(1e6 * x)} ppm"
    text = share(x)
    return text if "ppm" in text else f"{text} %"
