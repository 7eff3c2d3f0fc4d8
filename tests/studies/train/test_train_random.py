"""Small graphs at random: what comes in leaves again, whatever the order in which the steps are told."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from studies.train.plant import Plant

from gibbsmin.studies.train.account import WHOLE, accounts
from gibbsmin.studies.train.change import Change
from gibbsmin.studies.train.stream import Stream
from gibbsmin.studies.train.train import Step, solve_train

SPECIES = ("N2", "Ar", "CH4", "H2O")


def enthalpy(stream: Stream) -> float:
    """Enthalpy from the records one by one, J."""
    T = np.array([stream.temperature[0]])
    pairs = zip(stream.substances.records, stream.amounts[0], strict=True)
    return sum(float(n * np.asarray(record.enthalpy(T))[0]) for record, n in pairs if n)


@st.composite
def trains(draw: st.DrawFn) -> tuple[list[Step], dict[str, Stream]]:
    """Draw a line of steps that mix, heat, compress, throttle and part; side streams go on, back, or leave."""
    plant = Plant(" ".join(SPECIES))
    count = draw(st.integers(2, 6))
    feeds = {}
    goes: dict[int, list[str]] = {k: [] for k in range(count)}
    back: dict[int, list[str]] = {k: [] for k in range(count)}
    for f in range(draw(st.integers(1, 3))):
        amounts = {name: draw(st.floats(0.01, 10.0)) for name in SPECIES if draw(st.booleans())} or {"N2": 1.0}
        feeds[f"f{f}"] = plant.stream(amounts, draw(st.floats(300.0, 1200.0)), draw(st.floats(1e5, 3e6)))
        goes[0 if f == 0 else draw(st.integers(0, count - 1))].append(f"f{f}")
    steps = []
    sides: dict[int, list[str]] = {}
    shares = {}
    for k in range(count):
        sides[k] = [f"t{i}" for i in range(draw(st.integers(0, 2)))]
        for side in sides[k]:
            shares[k, side] = (
                draw(st.sampled_from(["", "N2", "Ar CH4", "H2O"])), draw(st.floats(0.0, 0.8))
            )  # fmt: skip
            fate = draw(st.integers(0, count))
            if fate > k and fate < count:
                goes[fate].append(f"s{k}.{side}")
            elif fate <= k:
                back[fate].append(f"s{k}.{side}")
    for k in range(count):
        changes: list[Change | None] = [
            None,
            plant.unreacted("temperature", draw(st.floats(300.0, 1200.0))),
            plant.unreacted("heat", 0.0, draw(st.floats(1e4, 1e5))),
            plant.unreacted("entropy", draw(st.floats(0.5, 1.0)), draw(st.floats(1e5, 3e6))),
        ]
        change = draw(st.sampled_from(changes))
        inlets = [*goes[k], *([f"s{k - 1}"] if k else [])]
        takes = [plant.take(side, shares[k, side][0], share=shares[k, side][1]) for side in sides[k]]
        steps.append(plant.step(f"s{k}", " ".join(inlets), " ".join(back[k]), change, takes))
    return steps, feeds


@given(drawn=trains(), order=st.randoms(use_true_random=False))
@settings(max_examples=15)
def test_matter_and_energy_close(drawn: tuple[list[Step], dict[str, Stream]], order: object) -> None:
    steps, feeds = drawn
    solved = solve_train(steps, feeds)
    assume("beyond all data" not in solved.reasons[0])  # a compressor in a loop that is not cooled
    assert solved.reasons == ("",)
    products = [solved.streams[name] for name in solved.products]
    for name in SPECIES:  # nothing reacts: each species by itself
        brought = sum(feed.named(name)[0] for feed in feeds.values())
        assert sum(one.named(name)[0] for one in products) == pytest.approx(brought, rel=1e-9, abs=1e-300), name
    mass = sum(feed.mass[0] for feed in feeds.values())
    assert sum(one.mass[0] for one in products) == pytest.approx(mass, rel=1e-9)
    found = accounts(solved, 298.15)
    into, out = (sum(enthalpy(one) for one in streams) for streams in (feeds.values(), products))
    whole = found[WHOLE]
    turned = max(abs(into), abs(out), *(abs(one.heat[0]) + abs(one.work[0]) for one in found.values()))
    assert out - into == pytest.approx(whole.heat[0] + whole.work[0], abs=1e-9 * turned)
    for name, account in found.items():
        assert account.element_open[0] <= 1e-9, name
        assert account.energy_open[0] <= 1e-9, name
    shuffled = list(steps)
    order.shuffle(shuffled)  # type: ignore[attr-defined]
    again = solve_train(shuffled, feeds)
    for name, stream in solved.streams.items():
        scale = stream.total[0] + 1e-12
        np.testing.assert_allclose(again.streams[name].amounts, stream.amounts, rtol=1e-8, atol=1e-9 * scale)
        if stream.total[0] > 0.0:
            assert again.streams[name].temperature[0] == pytest.approx(stream.temperature[0], rel=1e-8)


@given(drawn=trains())
@settings(max_examples=15)
def test_adiabatic_steps_make_entropy(drawn: tuple[list[Step], dict[str, Stream]]) -> None:
    """Mixing, throttling and real compression or expansion, each over its own balance; parting species costs it."""
    steps, feeds = drawn
    solved = solve_train(steps, feeds)
    assume(solved.reasons == ("",))
    for name, step in solved.steps.items():
        raised = step.changed.outlet.pressure[0] > step.inlet.pressure[0] and not np.any(step.changed.work)
        if np.any(step.changed.heat) or raised:  # a valve that raises the pressure is none
            continue
        came = sum(one.entropy[0] for one in step.inlets.values())
        left = step.changed.outlet.entropy[0]
        assert left - came >= -1e-9 * (abs(left) + abs(came)), name
