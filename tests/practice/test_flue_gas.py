"""Numbers of flue gas: invented fires recomputed by hand, rules of the trade, and what can be said of any gas."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from fired import AIR_OXYGEN, MASS_PERCENT, coal, methane
from hypothesis import given
from hypothesis import strategies as st
from settled_from import by_hand, figures

from gibbsmin.errors import InputError
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.flue_gas.flue_gas import FlueGasSetting, flue_gas
from gibbsmin.practice.flue_gas.pollutants import spread

NORMAL = 22.414e-3
"""Ideal gas at 0 °C and 101325 Pa [m3/mol] (CODATA)."""


def report(fire: Settled, **setting: object) -> dict[str, float]:
    """Key figures of one state by name."""
    chosen = FlueGasSetting(**setting)
    return {name: float(value[0]) for name, value in figures(flue_gas(fire, chosen, fire)).items()}


def test_methane_worked_by_hand() -> None:
    """CH4 + 2.4 O2 + 2.4 · 79.05/20.95 N2: 9.056 N2, 0.4 O2, 1 CO2, 2 H2O; dry 10.456, wet 12.456 per mole."""
    found = report(methane(1.2))
    assert found["oxygen_dry"] == pytest.approx(0.4 / 10.456, rel=1e-4)
    assert found["carbon_dioxide_dry"] == pytest.approx(1.0 / 10.456, rel=1e-4)
    assert found["water_wet"] == pytest.approx(2.0 / 12.456, rel=1e-4)
    assert found["flue_gas_dry"] == pytest.approx(10.456, rel=1e-4)
    assert found["flue_gas_wet"] == pytest.approx(12.456, rel=1e-4)
    assert found["air_needed"] == pytest.approx(2.0 / 0.2095, rel=1e-9)
    assert found["oxidant_wet"] == pytest.approx(2.4 / 0.2095, rel=1e-9)
    assert found["air_ratio_fed"] == pytest.approx(1.2)
    assert found["air_ratio_by_oxygen"] == pytest.approx(1.2)
    assert found["dew_point_water"] - 273.15 == pytest.approx(55.6, abs=0.1)  # 16268 Pa, steam tables


def test_methane_against_the_usual_figures() -> None:
    """CO2max of natural gas 11.7 to 12.1 % (common practice); 56.1 kg/GJ of CO2 on LHV (IPCC 2006), 55 for methane."""
    found = report(methane())
    assert found["carbon_dioxide_most"] == pytest.approx(0.117, abs=0.001)
    assert found["fuel_carbon_dioxide"] * 1e9 == pytest.approx(54.8, abs=0.1)  # 44.010 g over 802.6 kJ
    assert found["fuel_heat"] == pytest.approx(802.6e3, rel=1e-3)


def test_coal_worked_by_hand() -> None:
    """The analysis of ``coal``: o = 72.655 mol/kg; air 7.774, dry gas 7.564 and wet gas 8.120 Nm3/kg at no excess.

    Air of 20.9476 % O2 (ISO 2533). At λ = 1.2: O2 3.572, CO2 15.35 %.
    """
    air = 0.209476
    found = report(coal(1.2, air), air_oxygen=air)
    assert found["air_needed"] == pytest.approx(7.774, abs=1e-3)
    assert found["oxygen_dry"] == pytest.approx(0.03572, abs=1e-5)
    assert found["carbon_dioxide_dry"] == pytest.approx(0.1535, abs=1e-4)
    assert found["carbon_dioxide_most"] == pytest.approx(0.01 * 18.503, abs=1e-5)  # 62.443 · 0.022414 / 7.564
    assert found["air_ratio_by_oxygen"] == pytest.approx(1.2, abs=1e-6)
    exact = report(coal(1.0, air), air_oxygen=air)
    assert exact["flue_gas_dry"] == pytest.approx(7.564, abs=1e-3)
    assert exact["flue_gas_wet"] == pytest.approx(8.120, abs=1e-3)


def test_fuel_factor_of_epa_method_19() -> None:
    """F_d = 1e6 (3.64 H + 1.53 C + 0.57 S + 0.14 N - 0.46 O) / GCV, in dscf per million Btu, mass percent and Btu/lb.

    40 CFR 60, appendix A-7, Method 19, equation 19-13, from memory; 68 °F is 293.15 K. Its printed figures: 9780 for
    bituminous coal, 8710 for natural gas.
    """
    per = 0.3048**3 * 273.15 / 293.15 / 1055.056e6  # Nm3/J per dscf/MMBtu
    C, H, O, N, S = (MASS_PERCENT[symbol] for symbol in "CHONS")
    factor = 1e6 * (3.64 * H + 1.53 * C + 0.57 * S + 0.14 * N - 0.46 * O) / (31.12e6 / 2326.0)
    found = report(coal())["fuel_factor"]
    assert found == pytest.approx(factor * per, rel=4e-3)
    assert found == pytest.approx(9780.0 * per, rel=0.02)
    assert report(methane())["fuel_factor"] == pytest.approx(8710.0 * per, rel=0.015)


@given(st.floats(1.02, 2.5), st.floats(1e-6, 1e-3))
def test_mass_per_energy_by_the_way_of_method_19(air_ratio: float, nitric_oxide: float) -> None:
    """E = C F_d 20.9/(20.9 - O2), with C in the dry gas as it is; the traces disturb F_d little."""
    fire = methane(air_ratio, {"NO": nitric_oxide})
    found = report(fire, air_oxygen=AIR_OXYGEN)
    concentration = found["nox_mass"] * found["fuel_factor"]  # kg/J on HHV
    expected = concentration * AIR_OXYGEN / (AIR_OXYGEN - found["oxygen_dry"]) * 890.6 / 802.6
    assert found["nox_per_energy"] == pytest.approx(expected, rel=2e-3)


@given(st.floats(1.0, 2.0), st.floats(0.0, 0.12))
def test_mass_per_energy_does_not_know_the_reference(air_ratio: float, reference: float) -> None:
    """mg/MJ = c_ref · V_ref / LHV, where V_ref is the dry gas diluted to the reference."""
    found = report(methane(air_ratio, {"SO2": 1e-4}), reference_oxygen=reference)
    at_reference = found["flue_gas_dry"] * (0.2095 - found["oxygen_dry"]) / (0.2095 - reference)
    expected = found["sox_at_reference_oxygen"] * at_reference * NORMAL / 802.6e3
    assert found["sox_per_energy"] == pytest.approx(expected, rel=1e-3)


@given(st.floats(1.0, 5.0), st.floats(0.0, 3.0))
def test_dry_and_water_make_wet(air_ratio: float, steam: float) -> None:
    found = report(methane(air_ratio, {"H2O": 2.0 + steam}))
    assert found["flue_gas_dry"] + 2.0 + steam == pytest.approx(found["flue_gas_wet"])
    assert found["oxygen_dry"] * (1.0 - found["water_wet"]) * found["flue_gas_wet"] == pytest.approx(
        2.0 * (air_ratio - 1.0), abs=1e-9
    )


def test_pollutants_worked_by_hand() -> None:
    """In 1000 mol of dry gas of no O2: 0.1 NO + 0.02 NO2, 0.05 SO2 + 0.01 SO3, 0.03 CH4 + 0.01 C2H4, 0.2 HCN.

    As NO2 46.006, SO2 64.058, C 12.011 g/mol; 22.414 L/mol.
    """
    amounts = {"NO": 0.1, "NO2": 0.02, "SO2": 0.05, "SO3": 0.01, "CH4": 0.03, "C2H4": 0.01, "HCN": 0.2, "H2O": 50.0}
    amounts["N2"] = 1000.0 - sum(amounts.values()) + 50.0
    found = report(by_hand(amounts, {}))
    assert 1e6 * found["nox_dry"] == pytest.approx(120.0)
    assert 1e6 * found["nox_mass"] == pytest.approx(120.0 * 46.006 / 22.414, rel=1e-4)
    assert 1e6 * found["sox_mass"] == pytest.approx(60.0 * 64.058 / 22.414, rel=1e-4)
    assert 1e6 * found["so3_dry"] == pytest.approx(10.0)
    assert 1e6 * found["toc_mass"] == pytest.approx(50.0 * 12.011 / 22.414, rel=1e-4)
    assert 1e6 * found["hcn_dry"] == pytest.approx(200.0)
    assert "hcl_dry" not in found
    assert "air_ratio_fed" not in found  # nothing is fed that burns


def test_dust_is_the_ash_that_is_carried_along() -> None:
    """95 g of ash as silica in 1 kg of coal, 20 % of it in the dry gas."""
    found = report(coal(1.2, ash={"SiO2(s)": 95.0 / 60.083}), dust_carry_over=0.2, reference_oxygen=0.06)
    dry, oxygen = found["flue_gas_dry"], found["oxygen_dry"]
    expected = 0.2 * 0.095 / dry * (20.95 - 6.0) / (20.95 - 100.0 * oxygen)
    assert found["dust_at_reference_oxygen"] == pytest.approx(expected, rel=1e-4)
    assert found["dust_per_energy"] == pytest.approx(0.2 * 0.095 / 30.03e6, rel=1e-4)


def test_oxygen_firing_has_no_reference_but_mass_per_energy() -> None:
    fire = by_hand(
        {"CO2": 1.0, "H2O": 2.0, "O2": 0.1, "SO2": 1e-3}, {"gas": {"CH4": 1.0}, "oxygen": {"O2": 2.1}}, 1300.0
    )
    feeds = {name: replace(feed, lower=np.array([8e5 * (name == "gas")])) for name, feed in fire.feeds.items()}
    found = report(replace(fire, feeds=feeds), reference_oxygen=0.03)
    assert found["oxidant_oxygen"] == pytest.approx(1.0)
    assert np.isnan(found["air_ratio_by_oxygen"])
    assert "sox_at_reference_oxygen" not in found
    assert found["sox_per_energy"] == pytest.approx(1e-3 * 64.058e-3 / 8e5, rel=1e-4)
    assert "fuel_factor" not in found  # the higher heating value is not known


def test_recirculated_gas_does_not_leave() -> None:
    """Twice the flue gas, half of it led back: the same leaves."""
    fire = methane()
    twice = replace(fire, amounts={name: 2.0 * n for name, n in fire.amounts.items()})
    setting = {"stack_temperature": 420.0, "reference_oxygen": 0.03}
    found = report(twice, recirculated=0.5, **setting)
    del found["oxidant_oxygen_mixed"]
    assert found == pytest.approx(report(fire, **setting), nan_ok=True)


def test_ash_does_not_go_back() -> None:
    """Gas three times that of the fuel, two thirds of it led back; the ash is that of the fuel."""
    ash = {"SiO2(s)": 95.0 / 60.083}
    fire = coal(1.2, ash=ash)
    thrice = replace(fire, amounts={name: (1.0 if name in ash else 3.0) * n for name, n in fire.amounts.items()})
    setting = {"dust_carry_over": 0.2, "stack_temperature": 420.0}
    once, back = report(fire, **setting), report(thrice, recirculated=2.0 / 3.0, **setting)
    for name in ("dust_mass", "dust_per_energy", "loss_ash", "loss_flue_gas"):
        assert back[name] == pytest.approx(once[name])


@pytest.mark.parametrize("dried", [False, True])
def test_oxidant_with_returned_gas(dried: bool) -> None:
    """CH4 with 2.2 O2 and half of the flue gas back: 0.2 O2, 1 CO2, and 2 H2O unless it is dried, come with it.

    Burner: (2.2 + 0.2)/(2.2 + 3.2) = 0.4444 of O2 in wet oxidant, (2.2 + 0.2)/(2.2 + 1.2) = 0.7059 where it is dried.
    """
    water = 2.0 if dried else 4.0
    amounts = {"CO2": 2.0, "H2O": water, "O2": 0.4}
    fire = by_hand(amounts, {"gas": {"CH4": 1.0}, "oxygen": {"O2": 2.2}}, 1300.0)
    found = report(fire, recirculated=0.5)
    assert found["oxidant_oxygen"] == pytest.approx(1.0)
    assert found["oxidant_oxygen_mixed"] == pytest.approx(2.4 / (3.4 if dried else 5.4))


def test_nitric_oxide_of_the_flame_stands_beside_the_frozen_gas() -> None:
    hot = methane(traces={"NO": 3e-2, "CO": 1e-2}, celsius=1800.0)
    found = figures(flue_gas(hot, FlueGasSetting(), methane(traces={"NO": 1e-3, "CO": 1e-7})))
    assert found["no_settled"][0] == pytest.approx(3e-2 / float(hot.gas[0]))
    assert found["co_settled"][0] == pytest.approx(1e-2 / float(hot.gas[0]))
    assert found["nox_dry"][0] < 1e-4
    assert "no_settled" not in report(hot)


def test_sulfur_trioxide_is_that_of_the_frozen_gas_or_a_share() -> None:
    fire = coal()
    assert "dew_point_sulfuric_acid_okkes" not in report(fire)
    given_share = report(fire, sulfur_trioxide_share=0.02)
    x = 0.02 * float(fire.wet("SO2")[0])
    by_gas = report(replace(fire, **_with(fire, {"SO3": x * float(fire.gas[0])})))
    name = "dew_point_sulfuric_acid_verhoff_banchero"
    assert by_gas[name] == pytest.approx(given_share[name], abs=0.01)
    cold = replace(fire, temperature=np.array([420.0]), **_with(fire, {"SO3": 1e-3}))
    notes = [figure.note for figure in flue_gas(cold, FlueGasSetting(), cold) if "H2SO4" in figure.label]
    assert notes
    assert all("far too high" in note for note in notes)


def _with(fire: Settled, more: dict[str, float]) -> dict[str, object]:
    """Amounts and records with further species."""
    added = by_hand(more, {})
    return {"amounts": {**fire.amounts, **added.amounts}, "records": {**fire.records, **added.records}}


def test_turbines_are_limited_by_volume_at_15_percent() -> None:
    """(20.95 - 15)/(20.95 - O2) for NOx and CO in ppmv as in mg/Nm3; acids are given by mass only."""
    found = report(methane(2.5, {"NO": 1e-3, "CO": 1e-4, "SO2": 1e-4}), reference_oxygen=0.15)
    factor = (20.95 - 15.0) / (20.95 - 100.0 * found["oxygen_dry"])
    assert found["nox_volume_at_reference_oxygen"] == pytest.approx(found["nox_dry"] * factor)
    assert found["co_volume_at_reference_oxygen"] == pytest.approx(found["co_dry"] * factor)
    ratio = found["nox_at_reference_oxygen"] / found["nox_volume_at_reference_oxygen"]
    assert ratio == pytest.approx(46.006e-3 / NORMAL, rel=1e-4)
    assert "sox_volume_at_reference_oxygen" not in found


def test_labels_say_equilibrium_and_never_emission() -> None:
    fire = methane(traces={"NO": 1e-4, "CO": 1e-4, "SO2": 1e-4, "SO3": 1e-5})
    found = flue_gas(fire, FlueGasSetting(reference_oxygen=0.105, stack_temperature=420.0), fire)
    labels = [figure.label for figure in found]
    for gas in ("NOx", "CO", "SOx", "SO3"):
        assert all("at equilibrium" in label for label in labels if label.startswith(f"{gas} "))
        assert f"{gas} at 10.5 % O2, at equilibrium" in labels
    assert not any("emission" in (figure.label + figure.note).lower() for figure in found)
    assert all("1000 degC" in figure.note for figure in found if "at equilibrium" in figure.label)
    assert max(map(len, labels)) <= 34
    assert {figure.shown for figure in found} <= {
        "", "%", "ppmv", "mg/Nm3", "mg/MJ", "kg/GJ", "Nm3/GJ", "m3/m3", "Nm3/kg", "degC",
    }  # fmt: skip


def test_states_without_an_answer_stay_without_one() -> None:
    fire = methane(traces={"NO": 1e-4})
    lost = replace(fire, amounts={name: np.array([np.nan]) for name in fire.amounts})
    found = flue_gas(lost, FlueGasSetting(reference_oxygen=0.03, stack_temperature=420.0), lost)
    of_feeds = {"air_ratio_fed", "carbon_dioxide_most", "oxidant_oxygen", "fuel_heat", "fuel_carbon_dioxide"}
    of_feeds |= {"fuel_factor", "air_needed", "oxidant_wet", "reference_oxygen", "stack_temperature", "loss_wall"}
    assert [one.name for one in found if one.name not in of_feeds and not np.isnan(one.value).all()] == []


def test_spread_of_states() -> None:
    assert spread(np.array([np.nan, 1000.0 + 273.15, 900.0 + 273.15])) == "900 to 1000 degC"
    assert spread(np.array([np.nan])) == "unknown"


@pytest.mark.parametrize(
    ("setting", "message"),
    [
        ({"wall_loss": 2.0}, "wall_loss: expected a share from 0 to 1, got 2"),
        ({"reference_oxygen": 3.0}, "reference oxygen: expected a mole fraction"),
        ({"stack_temperature": -20.0}, "stack_temperature: expected above zero"),
        ({"recirculated": np.array([0.2, 1.0])}, "recirculated: expected a share from 0 to below 1"),
        ({"siegert": "peat"}, "siegert: expected one of natural gas"),
        ({"sulfur_trioxide_share": -0.1}, "sulfur_trioxide_share: expected a share"),
    ],
)
def test_bad_settings(setting: dict[str, object], message: str) -> None:
    with pytest.raises(InputError, match=message):
        FlueGasSetting(**setting)
