"""Loops whose steady state can be written down, and worked examples of textbooks."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from studies.train.plant import P, Plant, T

from gibbsmin.studies.train.account import WHOLE, accounts
from gibbsmin.studies.train.train import Solved, solve_train

CLOSE = 1e-8


def steady(solved: Solved) -> Solved:
    """Return what was solved, if it holds in every state and balances."""
    assert solved.reasons == ("",) * len(solved.reasons)
    for name, account in accounts(solved, 298.15).items():
        assert (account.element_open <= 1e-9).all(), name
        assert (account.energy_open <= 1e-9).all(), name
    return solved


def test_splitter_with_purge() -> None:
    """Feed F mixes with what goes back; a purge p: everything leaves by it, and F/p goes through."""
    purge = np.array([0.5, 0.1, 0.02, 1.0])
    plant = Plant("N2 Ar", 4)
    steps = [
        plant.step("mixed", "feed", "parted"),
        plant.step("parted", "mixed", takes=[plant.take("purge", share=purge)]),
    ]
    solved = steady(solve_train(steps, {"feed": plant.stream({"N2": 3.0, "Ar": 1.0})}))
    assert solved.products == ("parted.purge",)
    for name, amount in {"N2": 3.0, "Ar": 1.0}.items():
        np.testing.assert_allclose(solved.streams["mixed"].named(name), amount / purge, rtol=CLOSE)
        np.testing.assert_allclose(solved.streams["parted.purge"].named(name), amount, rtol=CLOSE)
    np.testing.assert_allclose(solved.streams["mixed"].temperature, T, rtol=CLOSE)


def ammonia_loop(conversion: float, purge: float) -> Solved:
    plant = Plant("N2 H2 NH3 Ar")
    steps = [
        plant.step("inlet", "feed", "rest"),
        plant.step("converter", "inlet", change=plant.converter("N2", conversion, "Ar")),
        plant.step("condenser", "converter", takes=[plant.take("product", "NH3", share=1.0)]),
        plant.step("rest", "condenser", takes=[plant.take("purge", share=purge)]),
    ]
    return steady(solve_train(steps, {"feed": plant.stream({"N2": 1.0, "H2": 3.0, "Ar": 0.05})}))


@pytest.mark.parametrize(("conversion", "purge"), [(0.25, 0.05), (0.1, 0.2), (0.6, 0.5), (0.3, 1.0), (0.95, 0.01)])
def test_converter_of_given_conversion(conversion: float, purge: float) -> None:
    """Of N2 that enters, n = F + (1 - p)(1 - X) n: the loop converts X/(1 - (1 - X)(1 - p)) of the feed; Ar is Ar/p."""
    solved = ammonia_loop(conversion, purge)
    through = 1.0 / (1.0 - (1.0 - conversion) * (1.0 - purge))
    streams = solved.streams
    assert streams["inlet"].named("N2")[0] == pytest.approx(through, rel=CLOSE)
    assert streams["inlet"].named("H2")[0] == pytest.approx(3.0 * through, rel=CLOSE)
    assert streams["inlet"].named("Ar")[0] == pytest.approx(0.05 / purge, rel=CLOSE)
    assert streams["condenser.product"].named("NH3")[0] == pytest.approx(2.0 * conversion * through, rel=CLOSE)
    assert streams["rest.purge"].named("Ar")[0] == pytest.approx(0.05, rel=CLOSE)


def test_heat_of_the_loop_is_that_of_its_reaction() -> None:
    """Everything at 500 K: the heat is extent times the enthalpy of reaction there, wherever the loop takes it."""
    solved = ammonia_loop(0.25, 0.05)
    records = {record.name: record for record in solved.feeds["feed"].substances.records}
    H = {name: float(np.asarray(record.enthalpy(np.array([T])))[0]) for name, record in records.items()}
    extent = solved.streams["condenser.product"].named("NH3")[0] / 2.0
    wanted = extent * (2.0 * H["NH3"] - H["N2"] - 3.0 * H["H2"])
    assert accounts(solved, 298.15)[WHOLE].heat[0] == pytest.approx(wanted, rel=1e-7)


def test_two_nested_recycles_against_linear_algebra() -> None:
    """Shares of three splitters: the flows solve (1 - A) n = b."""
    plant = Plant("N2")
    inner, outer, drawn = 0.6, 0.7, 0.2
    steps = [
        plant.step("a", "feed", "c.outer"),
        plant.step("b", "a", "d.inner"),
        plant.step("d", "b", takes=[plant.take("draw", share=drawn), plant.take("inner", share=inner)]),
        plant.step("c", "d", takes=[plant.take("outer", share=outer)]),
    ]
    solved = steady(solve_train(steps, {"feed": plant.stream({"N2": 1.0})}))
    back = (1.0 - drawn) * inner  # of what passes b
    on = (1.0 - drawn) * (1.0 - inner)
    a, b = np.linalg.solve(np.array([[1.0, -outer * on], [-1.0, 1.0 - back]]), np.array([1.0, 0.0]))
    assert solved.streams["a"].total[0] == pytest.approx(a, rel=CLOSE)
    assert solved.steps["b"].inlet.total[0] == pytest.approx(b, rel=CLOSE)
    assert solved.streams["c"].total[0] == pytest.approx((1.0 - outer) * on * b, rel=CLOSE)


def test_the_answer_does_not_depend_on_where_the_loop_is_torn() -> None:
    plant = Plant("N2 H2 NH3 Ar")
    found = []
    for torn in ("rest", "inlet", "converter"):
        inlets = {"inlet": "feed rest", "converter": "inlet", "condenser": "converter", "rest": "condenser"}
        changes = {"converter": plant.converter("N2", 0.2, "Ar")}
        takes = {
            "condenser": [plant.take("product", "NH3", share=0.9)],
            "rest": [plant.take("purge", share=0.1)],
        }
        steps = []
        for name, streams in inlets.items():
            kept = " ".join(stream for stream in streams.split() if stream != torn)
            recycled = torn if torn in streams.split() else ""
            steps.append(plant.step(name, kept, recycled, changes.get(name), takes.get(name, ())))
        solved = steady(solve_train(steps, {"feed": plant.stream({"N2": 1.0, "H2": 3.1, "Ar": 0.02}, 350.0)}))
        found.append({name: (stream.amounts, stream.temperature) for name, stream in solved.streams.items()})
    for other in found[1:]:
        for name, (amounts, temperature) in found[0].items():
            np.testing.assert_allclose(other[name][0], amounts, rtol=CLOSE, atol=1e-10)
            np.testing.assert_allclose(other[name][1], temperature, rtol=CLOSE)


def test_warm_recycle() -> None:
    """Argon, whose Cp is 5/2 R: of what is heated to 800 K half goes back, so that the mixture has the mean."""
    plant = Plant("Ar")
    steps = [
        plant.step("mixed", "feed", "hot.back"),
        plant.step("hot", "mixed", change=plant.unreacted("temperature", 800.0), takes=[plant.take("back", share=0.5)]),
    ]
    solved = steady(solve_train(steps, {"feed": plant.stream({"Ar": 1.0}, 300.0)}))
    assert solved.streams["mixed"].temperature[0] == pytest.approx(550.0, rel=1e-7)
    heat = accounts(solved, 298.15)["hot"].heat[0]
    assert heat == pytest.approx(2.0 * 2.5 * 8.314462618 * 250.0, rel=1e-5)  # data of Ar were fitted with an older R


def test_take_of_ratio_and_flow() -> None:
    """What goes back over what leaves; and a flow of which there is not enough takes all."""
    plant = Plant("Ar", 2)
    steps = [
        plant.step("mixed", "feed", "parted.back"),
        plant.step("parted", "mixed", takes=[plant.take("back", ratio=np.array([2.0, 0.0]))]),
        plant.step("drawn", "parted", takes=[plant.take("some", flow=np.array([0.25, 3.0]))]),
    ]
    solved = steady(solve_train(steps, {"feed": plant.stream({"Ar": 1.0})}))
    np.testing.assert_allclose(solved.streams["mixed"].total, [3.0, 1.0], rtol=CLOSE)
    np.testing.assert_allclose(solved.streams["parted.back"].total, [2.0, 0.0], atol=1e-9)
    np.testing.assert_allclose(solved.streams["drawn.some"].total, [0.25, 1.0], rtol=CLOSE)
    np.testing.assert_allclose(solved.streams["drawn"].total, [0.75, 0.0], atol=1e-9)


def test_published_methanol_with_purge() -> None:
    """Felder & Rousseau, Elementary Principles of Chemical Processes, example on recycle and purge (from memory).

    CO2 + 3 H2 = CH3OH + H2O; reactor feed 28.0 % CO2, 70.0 % H2, 2.00 % inert; 60 % of H2 reacts in a pass; all
    methanol and water are condensed; 155 kmol/h of methanol. Printed: fresh feed 681 kmol/h of 25.6, 74.0 and 0.400 %.
    """
    plant = Plant("CO2 H2 CH3OH H2O Ar")
    purge = 0.1227  # 5.4 of 44 mol
    steps = [
        plant.step("reactor_feed", "fresh", "rest"),
        plant.step("reactor", "reactor_feed", change=plant.converter("H2", 0.6, "Ar")),
        plant.step("condenser", "reactor", takes=[plant.take("product", "CH3OH H2O", share=1.0)]),
        plant.step("rest", "condenser", takes=[plant.take("purge", share=purge)]),
    ]
    fresh = plant.stream({"CO2": 681 * 0.256, "H2": 681 * 0.740, "Ar": 681 * 0.004})
    streams = steady(solve_train(steps, {"fresh": fresh})).streams
    into = streams["reactor_feed"]
    for name, share in {"CO2": 0.280, "H2": 0.700, "Ar": 0.0200}.items():
        assert into.named(name)[0] / into.total[0] == pytest.approx(share, rel=0.01), name
    assert streams["condenser.product"].named("CH3OH")[0] == pytest.approx(155.0, rel=0.005)


def test_published_dehydrogenation() -> None:
    """Felder & Rousseau, example on the dehydrogenation of propane (from memory).

    Over all 95 %; the product has 0.555 % of the propane that leaves the reactor, what goes back 5 % of the propylene
    of the product. Printed: 9.00 mol go back per mol of fresh propane, and 9.6 % reacts in a pass.
    """
    plant = Plant("C3H8 C3H6:propene H2")
    assert plant.substances.records[1].elements == {"C": 3, "H": 6}
    steps = [
        plant.step("reactor", "fresh", "separator", change=plant.converter("C3H8", 95.0 / 995.0)),
        plant.step(
            "separator", "reactor",
            takes=[
                plant.take("propane", "C3H8", share=0.00555), plant.take("propylene", "C3H6:propene", share=1.0 / 1.05),
                plant.take("hydrogen", "H2", share=1.0),
            ],
        ),
    ]  # fmt: skip
    streams = steady(solve_train(steps, {"fresh": plant.stream({"C3H8": 100.0})})).streams
    assert streams["separator"].total[0] / 100.0 == pytest.approx(9.00, abs=0.01)
    assert streams["separator.propylene"].named("C3H6:propene")[0] == pytest.approx(95.0, rel=0.001)
    assert streams["separator.propane"].named("C3H8")[0] == pytest.approx(5.0, rel=0.005)


def test_published_methanol_of_synthesis_gas() -> None:
    """Himmelblau, Basic Principles and Calculations in Chemical Engineering, recycle with purge (from memory).

    67.3 % H2, 32.5 % CO, 0.2 % CH4; 18 % of CO reacts in a pass; the purge is to hold 3.2 % CH4. Printed, per 100
    mol of feed: 705 go back, 31.25 of methanol, purge 6.25.
    """
    plant = Plant("CO H2 CH3OH CH4")
    steps = [
        plant.step("converter", "feed", "rest", change=plant.converter("CO", 0.18, "CH4")),
        plant.step("separator", "converter", takes=[plant.take("methanol", "CH3OH", share=1.0)]),
        plant.step("rest", "separator", takes=[plant.take("purge", share=6.25 / (705.0 + 6.25))]),
    ]
    streams = steady(solve_train(steps, {"feed": plant.stream({"H2": 67.3, "CO": 32.5, "CH4": 0.2})})).streams
    assert streams["separator.methanol"].total[0] == pytest.approx(31.25, abs=0.02)
    assert streams["rest"].total[0] == pytest.approx(705.0, rel=0.003)
    purge = streams["rest.purge"]
    assert purge.total[0] == pytest.approx(6.25, rel=0.003)
    assert purge.named("CH4")[0] / purge.total[0] == pytest.approx(0.032, rel=0.003)


@given(
    share=st.lists(st.floats(0.0, 0.95), min_size=3, max_size=3),
    feed=st.lists(st.floats(0.1, 50.0), min_size=3, max_size=3),
)
def test_three_loops_that_feed_each_other(share: list[float], feed: list[float]) -> None:
    """A ring of mixers, each of which passes a share on and lets the rest go: n_i = f_i + s_(i-1) n_(i-1)."""
    plant = Plant("N2")
    steps = []
    for i, part in enumerate(share):
        before = f"m{(i - 1) % 3}.on"
        steps.append(
            plant.step(
                f"m{i}", f"f{i}" if i == 0 else f"f{i} {before}", before if i == 0 else "",
                takes=[plant.take("on", share=part)],
            )
        )  # fmt: skip
    feeds = {f"f{i}": plant.stream({"N2": n}, pressure=P) for i, n in enumerate(feed)}
    solved = steady(solve_train(steps, feeds))
    A = np.eye(3)
    for i in range(3):
        A[i, (i - 1) % 3] -= share[(i - 1) % 3]
    n = np.linalg.solve(A, np.array(feed))
    for i in range(3):
        assert solved.steps[f"m{i}"].inlet.total[0] == pytest.approx(n[i], rel=CLOSE)
