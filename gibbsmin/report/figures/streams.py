"""Trains: what flows in each stream, and along a sweep the products, temperatures, heat and work."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any, Final

import numpy as np

from gibbsmin.report.figures.choice import by_change
from gibbsmin.report.figures.drawn import Colours, Drawn, listed, number
from gibbsmin.report.figures.lines import composition, result_panels
from gibbsmin.report.figures.names import typed_units
from gibbsmin.report.figures.quantities import (
    Quantity,
    condensed_quantities,
    gas_quantities,
    step_energies,
    stream_temperatures,
)
from gibbsmin.report.figures.source import Source
from gibbsmin.report.figures.style import INK, POINTS, canvas, contrast, formula, unit_word, value_with_unit
from gibbsmin.units import from_si

_SPECIES: Final = 7
_MOST: Final = 24
_ROW: Final = 0.21  # inch that a bar takes
_LETTER: Final = 0.62  # of the size of letters
_REST: Final = "#d9d9d9"
_PRODUCTS: Final = 3


def stream_bars(source: Source, state: Mapping[str, Any], colours: Colours) -> Iterator[Drawn]:
    """Draw the flow of every stream as a bar, parted by species, with its temperature at the end.

    Parameters
    ----------
    source : Source
    state : mapping
        The only state, as result.json has it.
    colours : Colours

    Yields
    ------
    Drawn
        Nothing where no stream is certified.
    """
    streams = {name: one for name, one in state["streams"].items() if one.get("amount")}
    streams = dict(list(streams.items())[:_MOST])
    if not streams:
        return
    units = typed_units(source.case, source.basis)
    unit = unit_word(units["amount"])
    scale = from_si(1.0, units["amount"])
    sums: dict[str, float] = {}
    for one in streams.values():
        for name, n in one["amounts"].items():
            sums[name] = sums.get(name, 0.0) + (n or 0.0)
    main = sorted(sums, key=lambda name: -sums[name])[:_SPECIES]
    title = "Streams by species, with their temperatures"
    figure, panels = canvas(title, height=_ROW * len(streams) + 0.9)
    panel = panels[0, 0]
    largest = scale * max(one["amount"] for one in streams.values())
    panel.set_xlim(0.0, largest * 1.02)
    panel.set_ylim(len(streams) - 0.4, -0.6)
    panel.grid(visible=False, axis="y")
    panel.grid(axis="x")
    for row, one in enumerate(streams.values()):
        start = 0.0
        for name in [*main, ""]:
            n = scale * (one["amounts"].get(name) or 0.0) if name else scale * one["amount"] - start
            if n > 1e-9 * largest:
                colour = (colours.of(name) if name else None) or _REST
                _part(panel, row, start, n, name or _foremost(one["amounts"], main), colour, largest)
            start += n
        temperature = one.get("temperature")
        degrees = unit_word(units["temperature"])
        text = (
            "" if temperature is None else value_with_unit(f"{from_si(temperature, units['temperature']):.0f}", degrees)
        )
        panel.annotate(
            text, (scale * one["amount"], row), (4.0, 0.0), textcoords="offset points", va="center",
            fontsize=POINTS - 1.0, annotation_clip=False,
        )  # fmt: skip
    panel.set_yticks(range(len(streams)), [name.replace("_", " ") for name in streams])
    panel.tick_params(axis="y", length=0.0)
    panel.set_xlabel(f"flow, {unit}" if source.basis == "mol/s" else f"amount, {unit}")
    told = [f"{name.replace('_', ' ')} ({number(scale * one['amount'])} {unit})" for name, one in streams.items()]
    yield Drawn(
        "streams",
        title,
        f"Bars of the streams of the train, parted by species: {listed(told)}.",
        figure,
        {
            "stream": list(streams),
            "temperature [K]": _column(one.get("temperature") for one in streams.values()),
            f"amount [{source.basis}]": _column(one["amount"] for one in streams.values()),
            **{
                f"{name} [{source.basis}]": _column(one["amounts"].get(name, 0.0) for one in streams.values())
                for name in main
            },
        },
        ("Grey: all other species.",),
    )


def _part(panel: Any, row: int, start: float, n: float, name: str, colour: str, largest: float) -> None:
    """Draw a part of a bar, with its formula in it where there is room."""
    panel.barh(row, n, left=start, height=0.72, color=colour, edgecolor="white", linewidth=0.4)
    size = POINTS - 2.0
    text = formula(name)
    if name and n / largest * 290.0 > _LETTER * size * len(text) + 4.0:
        panel.text(
            start + 0.5 * n, row, text, ha="center", va="center", fontsize=size,
            color="white" if contrast(colour) > 4.0 else INK,
        )  # fmt: skip


def _foremost(amounts: Mapping[str, float], main: Sequence[str]) -> str:
    """Name the largest of the species that have no colour, where it is most of them; else nothing."""
    rest = {name: n or 0.0 for name, n in amounts.items() if name not in main}
    name = max(rest, key=lambda name: rest[name], default="")
    return name if name and rest[name] > 0.8 * sum(rest.values()) else ""


def _column(values: Any) -> np.ndarray[Any, np.dtype[np.float64]]:
    return np.array([np.nan if value is None else value for value in values], float)


def products(source: Source) -> list[str]:
    """Name the streams that leave the train, the largest first, three at most."""
    assert source.data is not None, "a sweep"
    known = {str(name) for name in source.data["stream"].values}
    leaving = [str(name) for name in source.head.get("products", []) if name in known]
    amount = {name: float(np.nansum(source.data["amount"].sel(stream=name).values)) for name in leaving}
    return sorted(leaving, key=lambda name: -amount[name])[:_PRODUCTS]


def train_lines(source: Source, colours: Colours) -> Iterator[Drawn]:
    """Figures of a train along one input.

    Parameters
    ----------
    source : Source
    colours : Colours

    Yields
    ------
    Drawn
        What leaves, then temperatures, heat and work.
    """
    for stream in products(source):
        one = composition(source, colours, stream, f"Product {stream.replace('_', ' ')}")
        if one is not None:
            yield one
    energies = [*step_energies(source, "heat"), *step_energies(source, "work")]
    for quantities, name, title in (
        (stream_temperatures(source), "temperatures", "Temperatures of streams"),
        (energies[:_SPECIES], "energy", "Heat and work to be supplied"),
    ):
        drawn = result_panels(source, quantities, name, title)
        if drawn is not None:
            yield drawn


def train_results(source: Source) -> list[Quantity]:
    """Choose what is drawn of a train over two inputs or more: main species of the products, and temperatures."""
    found: list[Quantity] = []
    for stream in products(source):
        shares = [*by_change(gas_quantities(source, stream))[:2], *condensed_quantities(source, stream)[:1]]
        label = stream.replace("_", " ")
        found += [
            Quantity(
                one.name, f"{one.label} in {label}", one.values, one.unit, one.factor, one.zero, one.kind, one.species
            )
            for one in shares
            if one.varies
        ]
    return found + by_change(stream_temperatures(source))[:2]
