"""Rules on what may form: conversions, constraints, approach temperatures, frozen feeds."""

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest

import gibbsmin as gm
from gibbsmin.errors import CaseError

BASE = """
title = "rules"

[species]
condensed = false
{species}

[feeds.gas]
mole_percent = {{ CH4 = 93.0, C2H6 = 4.0, N2 = 2.0, CO2 = 1.0 }}
flow = "100 kmol/h"
temperature = "550 degC"

[feeds.steam]
species = "H2O"
steam_to_carbon = 3.0
temperature = "550 degC"

[held]
{held}
pressure = "24 bar"

{rest}
"""
KMOL_H = 1000.0 / 3600.0


@pytest.fixture
def run(tmp_path: Path) -> Callable[..., gm.Result]:
    """Read and run a case with these pieces."""

    def read(species: str = "", held: str = 'temperature = "870 degC"', rest: str = "") -> gm.Result:
        path = tmp_path / "case.toml"
        path.write_text(BASE.format(species=species, held=held, rest=rest), encoding="utf-8")
        return gm.read_case(path).run()

    return read


def test_given_conversion_leaves_the_rest_of_the_species(run: Callable[..., gm.Result]) -> None:
    state = run("conversion = { CH4 = 85.0 }").state(0)
    assert state.certificate.ok
    assert state.amounts["CH4"] == pytest.approx(0.15 * 93.0 * KMOL_H)


def test_given_conversion_with_heat(run: Callable[..., gm.Result]) -> None:
    """The first law: what is held as heat at one conversion comes back as the temperature of it."""
    first = run("conversion = { CH4 = 70.0 }")
    heat = first.heat(0)
    assert heat is not None
    second = run("conversion = { CH4 = 70.0 }", held=f'heat = "{heat} W"')
    assert second.state(0).temperature == pytest.approx(1143.15, abs=1e-6)


def test_carbon_conversion_leaves_graphite_of_the_fuel_carbon(run: Callable[..., gm.Result]) -> None:
    """93 CH4 and 4 C2H6 hold 101 counted C; CO2 does not count."""
    result = run("carbon_conversion = 98.0")
    state = result.state(0)
    assert state.amounts["C(s):graphite"] == pytest.approx(0.02 * 101.0 * KMOL_H)
    gas_carbon = sum(
        n * record.elements.get("C", 0.0)
        for n, record in zip(state.amounts_array, state.system.records, strict=True)
        if not record.condensed
    )
    assert gas_carbon == pytest.approx((102.0 - 0.02 * 101.0) * KMOL_H)


def test_constraint_by_sum_and_by_share_of_the_feeds(run: Callable[..., gm.Result]) -> None:
    by_sum = run(rest='[constraint.slip]\namounts = { CH4 = 1.0, C2H6 = 2.0 }\nsum = "10.1 kmol/h"\n').state(0)
    by_share = run(rest="[constraint.slip]\namounts = { CH4 = 1.0, C2H6 = 2.0 }\npercent_of_feeds = 10.0\n").state(0)
    assert by_sum.amounts["CH4"] + 2.0 * by_sum.amounts["C2H6"] == pytest.approx(10.1 * KMOL_H)
    assert by_share.amounts_array == pytest.approx(by_sum.amounts_array, rel=1e-9)


def test_approach_temperature(run: Callable[..., gm.Result]) -> None:
    state = run(rest='[approach.reforming]\nreaction = "CH4 + H2O = CO + 3 H2"\ntemperature = "-10 K"\n').state(0)
    x = state.mole_fractions
    ln_q = np.log(x["CO"] * x["H2"] ** 3 / (x["CH4"] * x["H2O"]) * 24.0**2)
    assert gm.reaction("CH4 + H2O = CO + 3 H2").ln_k(1133.15) == pytest.approx(ln_q, abs=1e-8)
    assert x["CO2"] * x["H2"] / (x["CO"] * x["H2O"]) == pytest.approx(
        np.exp(gm.reaction("CO + H2O = CO2 + H2").ln_k(1143.15)), rel=1e-8
    )


def test_frozen_feed_shares_the_gas_and_the_heat_but_not_the_reactions(run: Callable[..., gm.Result]) -> None:
    purge = """
[feeds.purge]
mole_percent = { N2 = 50.0, CH4 = 50.0 }
flow = "10 kmol/h"
temperature = "870 degC"
frozen = true
"""
    plain, with_purge = run(), run(rest=purge)
    state = with_purge.state(0)
    assert state.amounts["CH4 [frozen]"] == pytest.approx(5.0 * KMOL_H)
    assert state.gas_amount > plain.state(0).gas_amount + 9.9 * KMOL_H
    assert state.amounts["CH4"] < plain.state(0).amounts["CH4"], "diluted, as by a lower pressure"
    heats = plain.heat(0), with_purge.heat(0)
    assert heats[0] is not None
    assert heats[1] is not None
    assert heats[1] == pytest.approx(heats[0], rel=0.03), "it comes as hot as it leaves"


def test_every_species_of_a_frozen_feed_is_balanced(run: Callable[..., gm.Result]) -> None:
    purge = '[feeds.purge]\nspecies = "C3H8"\nflow = "1 kmol/h"\ntemperature = "25 degC"\nfrozen = true\n'
    result = run(rest=purge, held="adiabatic = true")
    assert result.state(0).certificate.ok
    assert result.state(0).amounts["C3H8 [frozen]"] == pytest.approx(KMOL_H)


@pytest.mark.parametrize(
    ("species", "rest", "key", "words"),
    [
        ("conversion = { CH5 = 50.0 }", "", "species.conversion.CH5", "CH5"),
        ("conversion = { CH4 = 101.0 }", "", "species.conversion.CH4", "at most 100"),
        ("conversion = { CH4 = 50.0 }\ninert = ['CH4']", "", "species.conversion", "inert or excluded"),
        ("", '[approach.a]\nreaction = "CH4 + H2O = CO + H2"\ntemperature = -10', "approach.a.reaction", "3"),
        ("", '[approach.a]\nreaction = "CO + H2O = CO2 + H2"\ntemperature = "-10 degC"', "approach.a", "kelvin"),
        ("", '[approach.a]\nreaction = "CO + H2O = CO2 + H2"\ntemperature = true', "approach.a.temperature", "kelvin"),
        ("", '[approach.a]\nreaction = "C(s) + CO2 = 2 CO"\ntemperature = 5', "species", "graphite"),
        ("", "[constraint.a]\namounts = { CH4 = 1.0 }", "constraint.a", "either sum or percent_of_feeds"),
        ("", '[constraint.a]\namounts = { CH4 = 0.0 }\nsum = "1 kmol/h"', "constraint.a.amounts", "no species"),
        ("", '[constraint.a]\namounts = { CH4 = 1.0 }\nsum = "1 kmol"', "constraint.a.sum", "flows"),
        ("", '[constraint."a b"]\namounts = { CH4 = 1.0 }\nsum = "1 kmol"', "constraint", "will not do as the name"),
        ("", '[approach.a]\nreaction = "CO + H2O = CO2 + H2"\nkelvin = 5', "approach.a", "known here are reaction"),
    ],
)  # fmt: skip
def test_rules_that_will_not_do(run: Callable[..., gm.Result], species: str, rest: str, key: str, words: str) -> None:
    with pytest.raises(CaseError, match=words) as caught:
        run(species, rest=rest)
    assert (caught.value.key or "").startswith(key)


def test_what_a_rule_asks_for_and_cannot_be_is_told_of_the_state(run: Callable[..., gm.Result]) -> None:
    result = run(rest='[constraint.slip]\namounts = { CH4 = 1.0 }\nsum = "200 kmol/h"\n')
    assert not result.batch.certified[0]
    assert "constraints" in result.batch.reason[0]


def test_rules_can_be_varied(run: Callable[..., gm.Result]) -> None:
    rest = '[approach.r]\nreaction = "CH4 + H2O = CO + 3 H2"\ntemperature = -10\n'
    rest += '[[sweep]]\nvary = "approach.r.temperature"\nvalues = ["-20 K", 0, 10.0]\n'
    rest += '[[sweep]]\nvary = "species.carbon_conversion"\nfrom = 90\nto = 100\npoints = 2\n'
    result = run("carbon_conversion = 95.0", rest=rest)
    assert result.batch.certified.all()
    graphite = result.batch.amounts[:, result.system.index["C(s):graphite"]]
    assert graphite == pytest.approx(np.tile([10.1, 0.0], 3) * KMOL_H, abs=1e-12)
    methane = result.batch.amounts[:, result.system.index["CH4"]].reshape(3, 2)
    assert (np.diff(methane, axis=0) < 0.0).all(), "the nearer to equilibrium, the less methane is left"


@pytest.mark.parametrize(
    ("vary", "values", "words"),
    [
        ("approach.r.temperature", '["10 degC"]', "kelvin"),
        ("approach.r.temperature", "[600.0]", "too far"),
        ("species.carbon_conversion", "[101.0]", "at most 100"),
        ("constraint.slip.sum", '["1 kmol/h"]', "Known here"),
    ],
)
def test_values_of_rules_that_will_not_do(run: Callable[..., gm.Result], vary: str, values: str, words: str) -> None:
    rest = '[approach.r]\nreaction = "CH4 + H2O = CO + 3 H2"\ntemperature = -10\n'
    with pytest.raises(CaseError, match=words):
        run("carbon_conversion = 95.0", rest=f'{rest}[[sweep]]\nvary = "{vary}"\nvalues = {values}\n')
