"""How a table looks where the temperature is the answer: it comes first, then what was held, heat, work, lost work."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from report_fakes import FakeResult

from gibbsmin.report.held_words import held_words
from gibbsmin.report.summary import summary
from gibbsmin.results.judge import judge
from gibbsmin.results.properties import PROPERTIES


def shown(result: Any) -> list[str]:
    return summary(result, judge(result), Path("results/x"))


class WithoutHeat(FakeResult):
    """The same without any heat."""

    @property
    def heats(self) -> Any:
        """None at all."""
        return np.zeros(len(self.batch))


def adiabatic(count: int = 1) -> FakeResult:
    result = FakeResult(count)
    result.case["held"] = {"adiabatic": True, "pressure": "24 bar"}
    result.held = {"enthalpy": result.batch.enthalpy, "pressure": result.batch.pressure}
    result.account = replace(result.account, given_heat=np.zeros(count), remark="taken at the held pressure: gas")
    return result


def test_the_temperature_that_was_asked_for_comes_first() -> None:
    lines = shown(adiabatic())
    assert lines[2] == "settles at 870.0 degC and 24 bar absolute"
    assert lines[3].split(None, 1) == ["held", "adiabatic, pressure 24 bar"]


def test_heat_that_was_held_is_not_to_be_supplied() -> None:
    result = adiabatic()
    assert "6.800 MW supplied" in "\n".join(shown(result))
    result.__class__ = WithoutHeat
    assert "none: adiabatic" in "\n".join(shown(result))


def test_work_of_an_expansion() -> None:
    result = FakeResult()
    result.case["held"] = {"entropy": "from feeds", "isentropic_efficiency": 0.9, "pressure": "24 bar"}
    result.held = {"entropy": result.batch.entropy, "pressure": result.batch.pressure}
    result.account = replace(result.account, shaft=True)
    text = "\n".join(shown(result))
    assert "0 W to be spent, without heat" in text
    assert "entropy from feeds, isentropic efficiency 0.9, pressure 24 bar" in text


def test_second_law_properties_and_what_they_rest_on() -> None:
    result = adiabatic()
    result.properties = {one.name: np.array([2.0]) for one in PROPERTIES}
    result.properties["heat_capacity"] = np.array([np.inf])
    text = "\n".join(shown(result))
    assert text.isascii()
    assert "second law     " in text
    text = " ".join(text.split())  # lines are wrapped
    assert "with surroundings at 25.0 degC" in text
    assert "cp infinite (" in text
    assert "sound speed 2.000 (2.000) m/s" in text
    assert "taken at the held pressure: gas" in text


def test_a_sweep_has_the_temperature_as_a_column_and_no_column_of_held_heat() -> None:
    lines = shown(adiabatic(4))
    head = next(line for line in lines if line.split()[:1] == ["temperature"])
    # the input of the fake, the answer, and no heat before the products
    assert head.split()[:3] == ["temperature", "temperature", "C(s):graphite"]
    assert any(line.startswith("lost work      between ") and "(state 1)" in line for line in lines)
    assert max(map(len, lines)) <= 80


def test_a_state_that_failed_shows_what_was_held_and_no_temperature() -> None:
    result = adiabatic()
    result.batch.certified[0] = False
    result.batch.reason[0] = "What is held asks for a temperature above all data."
    lines = shown(result)
    assert not any(line.startswith("settles") for line in lines)
    assert any(line.startswith("held") for line in lines)
    assert any("above all data" in line for line in lines)


def test_a_closed_vessel_comes_with_its_caution() -> None:
    result = FakeResult()
    result.held = {"internal_energy": np.array([1.0]), "volume": np.array([39.6])}
    result.account = replace(
        result.account, closed=True, feed_internal_energy=result.account.feed_enthalpy - 39.6 * 3e5
    )
    caution = judge(result)[0][0]
    assert caution.kind == "vessel"
    assert "24 bar absolute (8.0 times the start)" in caution.text
    assert "Vent sizing and detonation are not covered" in caution.text
    assert "Codes" in caution.text
    result.batch.amounts[0, 8] = 1.0
    assert "volume of solids and liquids is neglected" in judge(result)[0][0].text


@pytest.mark.parametrize(
    ("held", "words"),
    [
        ({"temperature": "870 degC", "pressure": "24 bar"}, "temperature 870 degC, pressure 24 bar"),
        ({"heat": "-5 MW", "volume": "of feeds"}, "heat -5 MW, volume of feeds"),
        ({"entropy": "from feeds", "isentropic_efficiency": 0.9}, "entropy from feeds, isentropic efficiency 0.9"),
    ],
)
def test_words(held: dict[str, Any], words: str) -> None:
    assert held_words(held) == words
    assert held_words(held, [f"held.{key}" for key in held]) == ""
