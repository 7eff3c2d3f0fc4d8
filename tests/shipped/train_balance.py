"""Trains by result.json alone: what goes into each step, and into the whole, comes out of it again.

The formula reader is the test's own.
"""

from __future__ import annotations

import re
from typing import Any

import pytest
from shipped.conftest import Run

Stream = dict[str, Any]
State = dict[str, Any]

CLOSE = 1e-9
"""Share of the largest term that a balance may leave open."""


def atoms(name: str) -> dict[str, float]:
    """Atoms in a name; brackets are opened one after the other. Ash is counted as SiO2."""
    if name == "ash":
        return {"Si": 1.0, "O": 2.0}
    formula = re.sub(r"\((?:s|l)\).*|:.*", "", name)
    while match := re.search(r"\(([^()]*)\)(\d*)", formula):
        formula = formula.replace(match[0], match[1] * int(match[2] or 1), 1)
    found: dict[str, float] = {}
    for symbol, count in re.findall(r"([A-Z][a-z]?)(\d*)", formula):
        found[symbol] = found.get(symbol, 0.0) + float(count or 1)
    return found


def elements(stream: Stream) -> dict[str, float]:
    """mol/s of each element."""
    found = dict(stream.get("atoms", {}))
    for name, n in stream["amounts"].items():
        for symbol, count in atoms(name).items():
            found[symbol] = found.get(symbol, 0.0) + count * n
    return found


def ends(state: State, step: str | None) -> tuple[list[Stream], list[Stream]]:
    """Streams into and out of a step, or of the whole train."""
    streams = state["streams"].values()
    if step is None:
        return [one for one in streams if one["from"] is None], [one for one in streams if one["to"] is None]
    return [one for one in streams if one["to"] == step], [one for one in streams if one["from"] == step]


def closes(run: Run, steps: set[str]) -> None:
    """Check elements, mass and energy of each step and of the whole, that entropy never falls, and all certificates."""
    for state in run.data["states"]:
        assert state["certificate"]["ok"] is True
        assert set(state["steps"]) == steps
        for stage in state["stages"].values():
            assert stage["certificate"]["ok"] is True
        for step in (None, *steps):
            account = state["train"] if step is None else state["steps"][step]
            inlets, outlets = ends(state, step)
            assert inlets
            assert outlets
            brought, gone = ([elements(one) for one in streams] for streams in (inlets, outlets))
            for symbol in {symbol for one in brought for symbol in one}:
                fed = sum(one.get(symbol, 0.0) for one in brought)
                assert sum(one.get(symbol, 0.0) for one in gone) == pytest.approx(fed, rel=CLOSE), (step, symbol)
            fed = sum(one["mass"] for one in inlets)
            assert sum(one["mass"] for one in outlets) == pytest.approx(fed, rel=CLOSE)
            terms = [one["enthalpy"] for one in inlets] + [account["heat"], account["work"]]
            terms += [-one["enthalpy"] for one in outlets]
            assert abs(sum(terms)) <= CLOSE * max(map(abs, terms)), step
            turnover = sum(abs(one["entropy"]) for one in outlets)
            assert account["entropy_generated"] >= -1e-12 * turnover, step
        for name in ("heat", "work", "entropy_generated", "lost_work"):
            whole = sum(account[name] for account in state["steps"].values())
            assert state["train"][name] == pytest.approx(whole, rel=CLOSE, abs=1e-6)


def shown(run: Run) -> None:
    """Check that the screen is at most 80 columns wide, and says that the plant is invented and who decides."""
    assert "(invented)" in run.data["title"]
    assert max(map(len, run.screen.splitlines()[:-1])) <= 80
    assert "Local codes and licensed practice decide" in re.sub(r"\s+", " ", run.screen)


def figure(state: State, stage: str, group: str, name: str) -> float:
    """Key figure of a stage."""
    return float(state["stages"][stage]["key_figures"][group][name])
