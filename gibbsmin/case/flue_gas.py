"""The flue gas of a case: where it is frozen, what of it goes back, the air that gives it its oxygen, its numbers."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.feed_schema import Feed
from gibbsmin.case.feed_states import FeedStates, ReturnedGas
from gibbsmin.case.fields import RuleError, in_si
from gibbsmin.case.flue_gas_schema import FlueGasTable
from gibbsmin.case.schema import Case
from gibbsmin.errors import InputError
from gibbsmin.practice.flue_gas.emissions import reference_oxygen
from gibbsmin.practice.flue_gas.flue_gas import FlueGasSetting
from gibbsmin.states.batch import Batch
from gibbsmin.studies.flue_gas import air_for_oxygen, returned_gas
from gibbsmin.studies.sweep import solve_in_chunks

if TYPE_CHECKING:
    from gibbsmin.case.recipe import Recipe
    from gibbsmin.case.study import Study
    from gibbsmin.case.train_study import TrainStudy

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Return:
    """A feed that is flue gas going back: its ``name`` and its table ``feed``."""

    name: str
    feed: Feed


def returns(case: Case) -> Return | None:
    """Find the feed that is flue gas going back."""
    found = [Return(name, feed) for name, feed in case.feeds.items() if feed.composition == "flue gas"]
    return found[0] if found else None


def frozen_at(study: Study) -> Floats:
    """Temperature at which the flue gas is taken, (states,), [K]; that which is held unless the case names one."""
    table = study.case.flue_gas
    if table is None or table.frozen_at is None:
        return study.held("temperature", "K")
    T = in_si(table.frozen_at, "K")
    return np.asarray(study.columns.get("flue_gas.frozen_at", np.full(study.states, T)))


def frozen(study: Study, batch: Batch, elements: Floats) -> Batch:
    """Flue gas of settled states: the states themselves unless the case names a temperature."""
    if study.case.flue_gas is None or study.case.flue_gas.frozen_at is None:
        return batch
    pressure = np.where(batch.certified, batch.pressure, 1e5)
    return solve_in_chunks(study.system, elements, {"temperature": frozen_at(study), "pressure": pressure})


def closed_feeds(study: Study) -> FeedStates:
    """Find the air that gives the flue gas its oxygen, and the flue gas that goes back.

    Parameters
    ----------
    study : Study
        Its feeds as the tables have them.

    Returns
    -------
    FeedStates
        The same feeds, complete; those of the study where there is nothing to find.

    Raises
    ------
    RuleError
        There is no such air, or no steady state; with the key.
    """
    feeds, back = study.feed_states, returns(study.case)
    air = next((one for one in study.recipes if _wanted(study, one.name) is not None), None)
    if back is None and air is None:
        return feeds
    T, P = frozen_at(study), study.held("pressure", "Pa")

    def settle(elements: Floats) -> Batch:
        return solve_in_chunks(study.system, elements, {"temperature": T, "pressure": P})

    def closed(ratios: dict[str, Floats]) -> FeedStates:
        sized = replace(feeds, ratios=ratios)
        if back is None:
            return sized
        fresh = study.elements_of(sized)
        share = _share(study, back)
        amounts = returned_gas(study.system, fresh, share, bool(back.feed.dried), settle)
        return replace(sized, returned=_returned(study, back, amounts, P))

    def oxygen(ratio: Floats) -> Floats:
        assert air is not None, "asked for where there is air to find"
        return dry_oxygen(settle(study.elements_of(closed({air.name: ratio}))))

    try:
        if air is None:
            return closed({})
        if "O2" not in study.system.species:
            raise InputError("O2 is not among the species that may form")
        return closed({air.name: air_ratio(study, air, oxygen)})
    except RuleError:
        raise
    except InputError as error:
        name, key = (back.name, "composition") if air is None and back else (air.name if air else "", "")
        raise RuleError(str(error), "feeds", name, key or "flue_gas_oxygen_percent") from None


def dry_oxygen(batch: Batch) -> Floats:
    """O2 of the dry gas of settled states, (states,), mole fraction."""
    gas = {name: np.zeros(len(batch)) for name in ("H2O", "O2", "")}
    for k, record in enumerate(batch.system.records):
        if not record.condensed:
            gas[record.substance if record.substance in gas else ""] += batch.amounts[:, k]
    return np.asarray(gas["O2"] / (gas["O2"] + gas[""]))


def air_ratio(study: Study | TrainStudy, air: Recipe, oxygen: Callable[[Floats], Floats]) -> Floats:
    """Find the air ratio that gives a flue gas the oxygen that the table of the air asks for.

    Parameters
    ----------
    study : Study or TrainStudy
    air : Recipe
        The air.
    oxygen : callable
        From air ratios (states,) to O2 of the dry flue gas (states,).

    Returns
    -------
    array (states,)
        Air ratio, [-].

    Raises
    ------
    InputError
        No air gives so much oxygen.
    """
    wanted = _wanted(study, air.name)
    assert wanted is not None, "that is how the air was found"
    dry = air.gas - air.of_composition(H=2.0, O=1.0)
    oxidant = air.of_composition(O=2.0) / dry if dry > 0.0 else 0.0
    first = np.full(study.states, 1.0) + 0.95 * wanted / np.maximum(oxidant - wanted, 1e-3)
    return air_for_oxygen(wanted, oxidant, first, oxygen)


def setting(
    table: FlueGasTable, columns: Mapping[str, Floats], at: str, recirculated: Floats | float = 0.0
) -> FlueGasSetting:
    """Read how the numbers of the flue gas are reported.

    Parameters
    ----------
    table : FlueGasTable
    columns : mapping of str to array (states,)
        Varied inputs in SI, by dotted name.
    at : str
        How the dotted names of this table begin, with the dot.
    recirculated : array (states,) or float
        Part of the flue gas that goes back, [-].

    Returns
    -------
    FlueGasSetting
    """
    reference = table.reference_oxygen_percent
    share = None if reference is None else reference / 100.0
    if table.application is not None:
        share = reference_oxygen(table.application).oxygen
    stack = table.stack_temperature
    return FlueGasSetting(
        reference_oxygen=share,
        air_oxygen=table.air_oxygen_percent / 100.0,
        only_above_reference=table.only_above_reference,
        stack_temperature=None if stack is None else columns.get(f"{at}stack_temperature", in_si(stack, "K")),
        stack_pressure=None if table.stack_pressure is None else in_si(table.stack_pressure, "Pa"),
        reference_temperature=in_si(table.loss_reference_temperature, "K"),
        wall_loss=table.wall_loss_percent / 100.0,
        siegert=table.siegert_fuel or "",
        dust_carry_over=None if table.dust_percent is None else table.dust_percent / 100.0,
        sulfur_trioxide_share=None if table.sulfur_trioxide_percent is None else table.sulfur_trioxide_percent / 100.0,
        recirculated=recirculated,
    )


def recirculated(case: Case, feeds: FeedStates) -> Floats | float:
    """Part of the flue gas that goes back, (states,), [-]; zero where none does."""
    back = returns(case)
    return 0.0 if back is None else _read_share(back, feeds)


def _wanted(study: Study | TrainStudy, name: str) -> Floats | None:
    """O2 that the flue gas is to hold by the air of this name, (states,), mole fraction."""
    percent = study.case.feeds[name].flue_gas_oxygen_percent
    if percent is None:
        return None
    column = study.columns.get(f"feeds.{name}.flue_gas_oxygen_percent", np.full(study.states, percent))
    return np.asarray(column) / 100.0


def _share(study: Study, back: Return) -> Floats:
    """Part of all flue gas that goes back, (states,), [-]."""
    return np.broadcast_to(np.asarray(_read_share(back, study.feed_states), float), (study.states,))


def _read_share(back: Return, feeds: FeedStates) -> Floats | float:
    """Part of all flue gas that goes back, from whichever key says it."""
    if back.feed.recirculated_percent is not None:
        percent = feeds.columns.get(f"feeds.{back.name}.recirculated_percent", back.feed.recirculated_percent)
        return percent / 100.0
    ratio = feeds.columns.get(f"feeds.{back.name}.recirculation_ratio", back.feed.recirculation_ratio or 0.0)
    return ratio / (1.0 + ratio)


def _returned(study: Study, back: Return, amounts: Floats, held_pressure: Floats) -> ReturnedGas | None:
    """Give the returned gas its temperature and pressure: those of its table, else those of the flue gas.

    None where nothing goes back.
    """
    if not amounts.any():
        return None
    given = {"temperature": (back.feed.temperature, "K"), "pressure": (back.feed.pressure, "Pa")}
    other = {"temperature": frozen_at(study), "pressure": held_pressure}
    found = {}
    for key, (value, unit) in given.items():
        column = study.columns.get(f"feeds.{back.name}.{key}")
        typed = other[key] if value is None else np.full(study.states, in_si(value, unit))
        found[key] = np.asarray(typed if column is None else column)
    here = np.flatnonzero(amounts.any(axis=0))
    records = tuple(study.system.records[k] for k in here)
    return ReturnedGas(back.name, records, amounts[:, here], found["temperature"], found["pressure"])
