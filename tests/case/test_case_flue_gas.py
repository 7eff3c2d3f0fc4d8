"""Flue gas in a case: its oxygen as a target, what goes back, and its numbers."""

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest

import gibbsmin as gm
from gibbsmin.errors import CaseError

BASE = """
title = "flue gas"

[species]
exclude = ["C(s):graphite"]

[feeds.fuel]
mole_percent = {{ CH4 = 100.0 }}
flow = "100 kmol/h"
temperature = "25 degC"

[feeds.air]
mole_percent = {{ O2 = 21.0, N2 = 79.0 }}
{air}
temperature = "25 degC"

{rest}

[held]
{held}
pressure = "1 atm"

[flue_gas]
frozen_at = "600 degC"
{flue_gas}
"""
BACK = '[feeds.back]\ncomposition = "flue gas"\n{size}\ntemperature = "200 degC"\n'


@pytest.fixture
def run(tmp_path: Path) -> Callable[..., gm.Result]:
    """Read and run a case with these pieces."""

    def read(
        air: str = "air_ratio = 1.2", rest: str = "", held: str = "adiabatic = true", flue_gas: str = ""
    ) -> gm.Result:
        path = tmp_path / "case.toml"
        path.write_text(BASE.format(air=air, rest=rest, held=held, flue_gas=flue_gas), encoding="utf-8")
        return gm.read_case(path).run()

    return read


def number(result: gm.Result, name: str) -> float:
    """Value of a number of the flue gas in the first state."""
    return next(float(one.value[0]) for one in result.key_figures["flue gas"] if one.name == name)


@pytest.mark.parametrize("percent", [0.5, 3.0, 6.0, 12.0])
def test_air_for_a_wanted_oxygen(run: Callable[..., gm.Result], percent: float) -> None:
    """CH4 + 2 L (O2 + 79/21 N2): dry gas 1 + 2 (L - 1) + 2 L 79/21, of which 2 (L - 1) is O2; balance by hand.

    At 600 degC next to nothing dissociates, and hardly any NO forms.
    """
    x = percent / 100.0
    nitrogen = 2.0 * 79.0 / 21.0
    air_ratio = (2.0 - x) / (2.0 * (1.0 - x) - x * nitrogen)
    result = run(f"flue_gas_oxygen_percent = {percent}")
    assert number(result, "oxygen_dry") == pytest.approx(x, abs=1e-9)
    oxygen = result.feeds["air"].amounts["O2"] / result.feeds["fuel"].amounts["CH4"]
    assert oxygen / 2.0 == pytest.approx(air_ratio, rel=5e-5)


def test_wet_recirculation_leaves_the_composition_and_cools_the_flame(run: Callable[..., gm.Result]) -> None:
    """Gas that goes back as it left changes amounts by 1/(1 - r), not composition (balance by hand)."""
    held = 'temperature = "1000 degC"'
    plain, back = run(held=held), run(held=held, rest=BACK.format(size="recirculated_percent = 60.0"))
    assert back.state(0).gas_amount == pytest.approx(plain.state(0).gas_amount / 0.4, rel=1e-9)
    assert back.state(0).mole_fractions_array == pytest.approx(plain.state(0).mole_fractions_array, rel=1e-7, abs=1e-15)
    hot, cooled = run(), run(rest=BACK.format(size="recirculated_percent = 60.0"))
    assert cooled.state(0).temperature < hot.state(0).temperature - 500.0


def test_ratio_to_what_leaves_and_share_of_all_are_the_same_thing(run: Callable[..., gm.Result]) -> None:
    share = run(rest=BACK.format(size="recirculated_percent = 70.0"))
    ratio = run(rest=BACK.format(size=f"recirculation_ratio = {0.7 / 0.3!r}"))
    assert ratio.state(0).temperature == pytest.approx(share.state(0).temperature, abs=1e-6)


def test_dried_recirculation_brings_no_water_back(run: Callable[..., gm.Result]) -> None:
    """Per mol CH4: 2 mol water, 1 - r = 0.5 of the rest leaves, so twice the rest passes (balance by hand)."""
    result = run(held='temperature = "1000 degC"', rest=BACK.format(size="recirculated_percent = 50.0\ndried = true"))
    n, fuel = result.state(0).amounts, result.feeds["fuel"].amounts["CH4"]
    assert n["H2O"] == pytest.approx(2.0 * fuel, rel=1e-4)
    assert n["CO2"] == pytest.approx(2.0 * fuel, rel=1e-4)
    assert n["N2"] == pytest.approx(2.0 * 1.2 * 2.0 * 79.0 / 21.0 * fuel, rel=1e-4)


def test_first_law_with_recirculation(run: Callable[..., gm.Result]) -> None:
    """What leaves at the recirculation temperature carries the heat that is taken out: no more, no less."""
    size = "recirculated_percent = 60.0"
    cooled = run(held='temperature = "200 degC"', rest=BACK.format(size=size))
    plain = run(held='temperature = "200 degC"')
    heats = plain.heat(0), cooled.heat(0)
    assert heats[1] == pytest.approx(heats[0], rel=2e-5)


def test_both_at_once_along_a_sweep(run: Callable[..., gm.Result]) -> None:
    sweep = '[[sweep]]\nvary = "feeds.back.recirculated_percent"\nvalues = [0.0, 30.0, 60.0]\n'
    oxygen = '[[sweep]]\nvary = "feeds.air.flue_gas_oxygen_percent"\nvalues = [2.0, 4.0]\n'
    rest = BACK.format(size="recirculated_percent = 10.0") + sweep + oxygen
    result = run("flue_gas_oxygen_percent = 3.0", rest=rest)
    assert result.batch.certified.all()
    found = next(one.value for one in result.key_figures["flue gas"] if one.name == "oxygen_dry")
    assert found == pytest.approx(np.tile([0.02, 0.04], 3), abs=1e-9)
    flames = result.batch.temperature.reshape(3, 2)
    assert (np.diff(flames, axis=0) < -200.0).all(), "more gas goes back, the flame cools"
    assert (np.diff(flames, axis=1) < 0.0).all(), "more air, the flame cools"


def test_presets_of_reference_oxygen(run: Callable[..., gm.Result]) -> None:
    """3 % for gas firing by Directive (EU) 2015/2193; NOx as NO2 scales by (20.95 - 3)/(20.95 - O2)."""
    result = run(flue_gas='application = "gas or liquid fuel"')
    oxygen, ppm = number(result, "oxygen_dry"), number(result, "nox_dry")
    wanted = ppm * 0.0460055 / (8.314462618 * 273.15 / 101325.0) * (0.2095 - 0.03) / (0.2095 - oxygen)
    assert number(result, "nox_at_reference_oxygen") == pytest.approx(wanted, rel=5e-5)


@pytest.mark.parametrize(
    ("pieces", "words"),
    [
        ({"air": "flue_gas_oxygen_percent = 21.5"}, "between 0 and 21"),
        ({"air": "flue_gas_oxygen_percent = 3.0", "held": 'entropy = "from feeds"'}, "held pressure"),
        ({"rest": BACK.format(size="recirculated_percent = 100.0")}, "less than 100"),
        ({"rest": BACK.format(size='flow = "1 kmol/h"')}, "is sized by"),
        ({"rest": BACK.format(size="recirculation_ratio = 1\nfrozen = true")}, "frozen does not go with flue gas"),
        ({"air": "recirculation_ratio = 1"}, 'goes with composition = "flue gas"'),
        ({"air": "air_ratio = 1.1\ndried = true"}, "dried goes with"),
        ({"flue_gas": 'application = "waste"\nreference_oxygen_percent = 11'}, "leave one out"),
        ({"flue_gas": 'application = "rocket"'}, "turbine or engine"),
    ],
)  # fmt: skip
def test_what_will_not_do(run: Callable[..., gm.Result], pieces: dict[str, str], words: str) -> None:
    with pytest.raises(CaseError, match=words):
        run(**pieces)


def test_a_flame_needs_a_temperature_at_which_its_gas_is_frozen(run: Callable[..., gm.Result], tmp_path: Path) -> None:
    path = tmp_path / "case.toml"
    run(rest=BACK.format(size="recirculated_percent = 10.0"))
    path.write_text(path.read_text(encoding="utf-8").replace('frozen_at = "600 degC"', ""), encoding="utf-8")
    with pytest.raises(CaseError, match="frozen_at") as caught:
        gm.read_case(path)
    assert caught.value.key == "feeds.back"
