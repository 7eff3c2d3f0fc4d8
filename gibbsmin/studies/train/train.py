"""All steps of a train in every state, with its recycles at their steady state."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.studies.train.change import Change, Changed
from gibbsmin.studies.train.graph import Node, ordered
from gibbsmin.studies.train.mixing import beyond, mixed
from gibbsmin.studies.train.recycle import CLOSE, MATTERS, Steady, steady
from gibbsmin.studies.train.stream import Stream, Substances
from gibbsmin.studies.train.takes import Take

Floats = NDArray[np.float64]
States = NDArray[np.intp]

BALANCE: Final = 1e-8
"""Element that the whole train may leave open, relative to what the feeds bring of it, before it is called unsteady."""

GATHERS: Final = 1e-3
"""Open part from which a loop that hardly changes is unsteady all the same: it holds too much for a round to show."""

BEYOND: Final = "The stream would get a temperature beyond all data. Move less heat, or work less on it."

LEADING: Final = 0.1
"""Part of the largest from which something is named as what gathers in a loop."""


@dataclass(frozen=True)
class Step:
    """A step: its ``node`` in the graph, its ``change`` (None only mixes), and what it parts from the outlet."""

    node: Node
    change: Change | None = None
    takes: tuple[Take, ...] = ()


@dataclass(frozen=True)
class StepResult:
    """A step in every state.

    Attributes
    ----------
    inlets : dict of str to Stream
        What it takes, by name.
    inlet : Stream
        All of it, mixed.
    changed : Changed
        What its change gave, before anything is parted from it.
    outlets : dict of str to Stream
        What it gives, by name, its own stream first.
    """

    inlets: Mapping[str, Stream]
    inlet: Stream
    changed: Changed
    outlets: Mapping[str, Stream]


@dataclass(frozen=True)
class Solved:
    """A train in every state.

    Attributes
    ----------
    feeds : dict of str to Stream
    steps : dict of str to StepResult
        In the order in which they were solved.
    steady : Steady or None
        The recycles; None where there are none.
    products : tuple of str
        Streams that no step takes.
    reasons : tuple of str
        Why a state does not hold, one a state; empty where it does.
    """

    feeds: Mapping[str, Stream]
    steps: Mapping[str, StepResult]
    steady: Steady | None
    products: tuple[str, ...]
    reasons: tuple[str, ...]

    @property
    def streams(self) -> dict[str, Stream]:
        """All streams by name: feeds, then what each step gives."""
        found = dict(self.feeds)
        for step in self.steps.values():
            found |= step.outlets
        return found


def solve_train(steps: Sequence[Step], feeds: Mapping[str, Stream]) -> Solved:
    """Solve all steps of a train.

    Parameters
    ----------
    steps : sequence of Step
        In any order.
    feeds : mapping of str to Stream
        What comes in, by name; all of the same substances and states.

    Returns
    -------
    Solved

    Raises
    ------
    GraphError
        The connections are wrong.
    InputError
        A step cannot do what it is to do.
    """
    order = ordered([step.node for step in steps], feeds)
    by_name = {step.node.name: step for step in steps}
    line = [by_name[name] for name in order]
    first = next(iter(feeds.values()))
    substances, states = first.substances, np.arange(len(first))
    torn = [stream for step in line for stream in step.node.recycled]
    loop = None
    back: dict[str, Stream] = {}
    if torn:
        loop = _steady(line, feeds, torn, substances, len(states))
        back = _unpacked(loop.x, torn, substances)
    done = _round(line, feeds, back, states)
    taken = {stream for step in line for stream in step.node.inlets}
    products = tuple(name for result in done.values() for name in result.outlets if name not in taken)
    solved = Solved(feeds, done, loop, products, ())
    return replace(solved, reasons=_reasons(solved, back))


def _round(
    line: Sequence[Step], feeds: Mapping[str, Stream], back: Mapping[str, Stream], states: States
) -> dict[str, StepResult]:
    """Solve each step once, in order, with the recycled streams as given."""
    streams = {**feeds, **back}
    done: dict[str, StepResult] = {}
    for step in line:
        inlets = {name: streams[name] for name in step.node.inlets}
        inlet = mixed(list(inlets.values()))
        changed = Changed(inlet, np.zeros(len(states)), np.zeros(len(states)))
        if step.change is not None:
            changed = step.change(inlet, states)
        rest, sides = changed.outlet, {}
        for take in step.takes:
            sides[f"{step.node.name}.{take.name}"], rest = take(rest, states)
        outlets = {step.node.name: rest, **sides}
        done[step.node.name] = StepResult(inlets, inlet, changed, outlets)
        streams |= {name: stream for name, stream in outlets.items() if name not in back}
    return done


def _steady(
    line: Sequence[Step], feeds: Mapping[str, Stream], torn: Sequence[str], substances: Substances, count: int
) -> Steady:
    """Find the recycled streams."""
    size = len(substances)
    first = np.zeros((count, len(torn), size + 2))
    first[:, :, size], first[:, :, size + 1] = 298.15, 1e5
    brought = np.sum([feed.amounts for feed in feeds.values()], axis=0)
    alone = {name for step in line if step.node.inlets == step.node.recycled for name in step.node.recycled}
    for k, name in enumerate(torn):
        if name in alone:  # a step that takes nothing else cannot begin with nothing
            first[:, k, :size] = brought
            first[:, k, size + 1] = np.max([feed.pressure for feed in feeds.values()], axis=0)

    def evaluate(x: Floats, states: States) -> Floats:
        some = {name: feed.part(states) for name, feed in feeds.items()}
        done = _round(line, some, _unpacked(x, torn, substances), states)
        given = {name: stream for result in done.values() for name, stream in result.outlets.items()}
        return _packed([given[name] for name in torn])

    def scale(x: Floats) -> Floats:
        parts = x.reshape(len(x), len(torn), size + 2)
        floor = np.zeros_like(parts)
        floor[:, :, :size] = MATTERS * parts[:, :, :size].sum(axis=2, keepdims=True)
        return floor.reshape(len(x), -1)

    return steady(first.reshape(count, -1), scale, evaluate)


def _packed(streams: Sequence[Stream]) -> Floats:
    """Write streams side by side, (states, d): amounts, temperature, pressure of each."""
    columns = [np.column_stack((one.amounts, one.temperature, one.pressure)) for one in streams]
    return np.column_stack(columns)


def _unpacked(x: Floats, names: Sequence[str], substances: Substances) -> dict[str, Stream]:
    """Read streams back."""
    parts = x.reshape(len(x), len(names), len(substances) + 2)
    size = len(substances)
    return {
        name: Stream.of(substances, np.maximum(parts[:, k, :size], 0.0), parts[:, k, size], parts[:, k, size + 1])
        for k, name in enumerate(names)
    }


def _reasons(solved: Solved, back: Mapping[str, Stream]) -> tuple[str, ...]:
    """Say of each state why it does not hold; ``back`` are the recycled streams that its last round began with."""
    count = len(next(iter(solved.feeds.values())))
    reasons = [""] * count
    for name, step in solved.steps.items():
        if step.changed.batch is None:
            outlet = step.changed.outlet
            far = beyond(outlet.temperature) & (outlet.total > 0.0) & (outlet is not step.inlet)
            found = [BEYOND if one else "" for one in far]
        else:
            found = list(step.changed.batch.reason)
        for state, reason in enumerate(found):
            if reason and not reasons[state]:
                reasons[state] = f"{name}: {reason}"
    if solved.steady is None:
        return tuple(reasons)
    left = element_balance(solved)
    for state in range(count):
        if reasons[state]:
            continue
        open_parts = {symbol: float(part[state]) for symbol, part in left.items()}
        steady_here, residual = bool(solved.steady.settled[state]), solved.steady.residual[state]
        worst = max(map(abs, open_parts.values()), default=0.0)
        if steady_here and BALANCE < worst < GATHERS:
            reasons[state] = (
                f"The recycle is steady to {residual:.1e} a round, but so little leaves the loop that its elements "
                f"close to {worst:.1e} only (limit {BALANCE:g}). Take out more of the loop."
            )
        elif worst > BALANCE:
            reasons[state] = (
                f"The recycle has no steady state: it gathers {_gathers(solved, back, state)}, and less of "
                f"{_leading(open_parts) or 'what comes in'} leaves than comes in. "
                "Take a part of the loop out (a purge), or remove what gathers."
            )
        elif not steady_here:
            reasons[state] = (
                f"The recycle did not become steady: it still changes by {residual:.1e} a round "
                f"(limit {CLOSE:g}). Take out more of the loop, or say more of its streams."
            )
    return tuple(reasons)


def _gathers(solved: Solved, back: Mapping[str, Stream], state: int) -> str:
    """Name the species of which the recycled streams got more in the last round; if it shows in none, most of them."""
    streams = solved.streams
    grew: dict[str, float] = {}
    there: dict[str, float] = {}
    for name, before in back.items():
        n = streams[name].amounts[state]
        for record, now, more in zip(before.substances.records, n, n - before.amounts[state], strict=True):
            grew[record.substance] = grew.get(record.substance, 0.0) + float(more)
            there[record.substance] = there.get(record.substance, 0.0) + float(now)
    return _leading(grew) or _leading(there) or "something"


def _leading(parts: Mapping[str, float]) -> str:
    """Name what is at least ``LEADING`` of the largest, the largest first."""
    largest = max(parts.values(), default=0.0)
    names = [name for name, part in parts.items() if part > 0.0 and part >= LEADING * largest]
    return ", ".join(sorted(names, key=lambda name: -parts[name]))


def element_balance(solved: Solved) -> dict[str, Floats]:
    """Work out what comes in less what leaves the train, over what comes in, by element, (states,) each, [-]."""
    streams = solved.streams
    symbols = dict.fromkeys(
        symbol for feed in solved.feeds.values() for symbol in (*feed.substances.elements, *feed.atoms)
    )
    found = {}
    for symbol in symbols:
        brought = np.sum([feed.element(symbol) for feed in solved.feeds.values()], axis=0)
        gone = np.sum([streams[name].element(symbol) for name in solved.products], axis=0)
        if brought.any():
            found[symbol] = np.divide(brought - gone, brought, out=np.zeros_like(brought), where=brought > 0.0)
    return found
