"""Fuels by analysis in a case: what is read, what it comes to, what is refused.

Atomic weights as in test_case_sizes.
"""

from pathlib import Path

import pytest

from gibbsmin.case.read import read_case
from gibbsmin.errors import CaseError
from gibbsmin.report.explained import explained

CASE = """\
title = "A made-up fuel"

[species]
allow = ["CO2", "H2O", "O2", "N2", "SO2"]

[feeds.fuel]
flow = "1 kg/s"
temperature = "25 degC"

[feeds.fuel.analysis]
ultimate_percent = { C = 46.0, H = 4.5, O = 28.5, N = 1.0, S = 1.0, ash = 9.0 }
moisture_percent = 10.0

[feeds.oxygen]
species = "O2"
air_ratio = 1.2
temperature = "25 degC"

[held]
temperature = "25 degC"
pressure = "1 bar"
"""
PARTS = "ultimate_percent = { C = 46.0, H = 4.5, O = 28.5, N = 1.0, S = 1.0, ash = 9.0 }"
WATER = "moisture_percent = 10.0"
DRY = 'ultimate_percent = { C = 51.0, H = 5.0, O = 31.8, N = 1.1, S = 1.1, ash = 10.0 }\nbasis = "dry"'
FREE = (
    'ultimate_percent = { C = 56.7, H = 5.6, O = 35.3, N = 1.2, S = 1.2 }\nbasis = "dry ash-free"\n'
    "ash_percent_dry = 10.0"
)
OXIDES = "ash_oxides_percent = { SiO2 = 50.0, CaO = 30.0, K2O = 15.0, SO3 = 5.0 }"
GOOD_OXIDES = (WATER, f"{WATER}\n{OXIDES}")
ALL_OXIDES = ('"SO2"]', '"SO2", "SiO2(s)", "CaO(s)", "K2O(s)"]')


@pytest.fixture
def study(tmp_path: Path):
    """Read the case with replacements made in it."""

    def read(*replacements: tuple[str, str]):
        text = CASE
        for old, new in replacements:
            assert old in text, f"the case has no {old!r}"
            text = text.replace(old, new, 1)
        path = tmp_path / "case.toml"
        path.write_text(text, encoding="utf-8")
        return read_case(path)

    return read


def test_what_a_kilogram_is_made_of(study):
    """By hand: percent over atomic weight; moisture as a liquid, ash by itself."""
    feed = study().feeds["fuel"]
    atoms = {"C": 460 / 12.011, "H": 45 / 1.008, "O": 285 / 15.999, "N": 10 / 14.007, "S": 10 / 32.06}
    assert feed.atoms == pytest.approx(atoms)
    assert feed.amounts == pytest.approx({"H2O(l)": 100 / 18.015, "ash": 90 / 60.083})
    assert feed.mass == pytest.approx(1.0)
    assert feed.element_amounts["H"] == pytest.approx(45 / 1.008 + 200 / 18.015)
    assert "Si" not in feed.element_amounts


def test_one_fuel_on_every_basis(study):
    """The same coal as received, air-dried (2 % of water), dry and dry ash-free, percentages by hand."""
    same = [
        ("ultimate_percent = { C = 45.0, H = 3.6, O = 26.1, N = 2.7, ash = 12.6 }", "as received"),
        ("ultimate_percent = { C = 49.0, H = 3.92, O = 28.42, N = 2.94, ash = 13.72 }", "air-dried"),
        ("ultimate_percent = { C = 50.0, H = 4.0, O = 29.0, N = 3.0, ash = 14.0 }", "dry"),
        ("ultimate_percent = { C = 58.1395, H = 4.6512, O = 33.7209, N = 3.4884 }", "dry ash-free"),
    ]
    found = []
    for parts, basis in same:
        extra = "air_dried_moisture_percent = 2.0" if basis == "air-dried" else ""
        extra += "ash_percent_dry = 14.0" if basis == "dry ash-free" else ""
        one = study((PARTS, f'{parts}\nbasis = "{basis}"\n{extra}'))
        found.append(one.feeds["fuel"])
    for feed in found[1:]:
        assert feed.atoms == pytest.approx(found[0].atoms, rel=1e-5)
        assert feed.amounts == pytest.approx(found[0].amounts, rel=1e-5)


STATED = [
    ("lower_heating_value = '17.5 MJ/kg'", 17.5e6),
    ("lower_heating_value = 17.5e6\nheating_value_basis = 'as received'", 17.5e6),
    # 19 MJ/kg of dry fuel: 0.9 x 19 = 17.1, less 2.4417 (8.936 x 4.5 + 10)/100 = 1.2260
    ("higher_heating_value = '19 MJ/kg'\nheating_value_basis = 'dry'", 15.874e6),
    # by ISO 1928 (from memory), dry H 5, O 31.667, N 1.111: (19000 - 1060 - 26.2) 0.9 - 244.3 = 15878 J/g
    ("higher_heating_value = '19 MJ/kg'\nheating_value_basis = 'dry'\nheating_value_at = 'constant volume'", 15.878e6),
]


@pytest.mark.parametrize(("stated", "lower"), STATED)
@pytest.mark.parametrize("ash", [(), (GOOD_OXIDES, ALL_OXIDES)])
def test_burning_gives_the_stated_heat(study, stated, lower, ash):
    """To CO2, vapour, SO2 and N2 at 25 degC, with the ash as it was, whatever it is made of."""
    result = study(*ash, (PARTS, f"{PARTS}\n{stated}")).run()
    # water evaporates 0.04 % more heat from an ideal vapour than from a real one
    assert -result.heat(0) == pytest.approx(lower, rel=2e-4)


def test_sulfur_of_the_ash_counts_once(study):
    """By hand: 9 % of ash with 5 % SO3 leaves 8.55 %, and S stays; the rest is O that was too low by difference."""
    with_oxides = study(GOOD_OXIDES, ALL_OXIDES)
    feed = with_oxides.feeds["fuel"]
    assert feed.element_amounts["S"] == pytest.approx(10 / 32.06)
    assert feed.amounts["SiO2(s)"] == pytest.approx(1000 * 0.09 * 0.50 / 60.083)
    assert feed.amounts["K2O(s)"] == pytest.approx(1000 * 0.09 * 0.15 / 94.1956)
    assert feed.atoms["O"] == pytest.approx((285 + 4.5) / 15.999)
    assert feed.mass == pytest.approx(1.0)


def test_unreactive_ash_does_not_mix_with_sand(study):
    sand = "[feeds.sand]\nspecies = 'SiO2(s)'\nflow = '1 mol/s'\ntemperature = '25 degC'\n\n[held]"
    result = study(("[held]", sand), ('allow = ["CO2", "H2O", "O2", "N2", "SO2"]', "condensed = true")).run()
    amounts = result.batch.amounts[0]
    names = list(result.system.species)
    assert amounts[names.index("ash")] == pytest.approx(90 / 60.083)
    assert sum(amounts[k] for k, name in enumerate(names) if name.startswith("SiO2")) == pytest.approx(1.0)


BENZENE = """\
title = "Benzene and air, by species or by analysis"

[feeds.fuel]
flow = "1 kg/s"
temperature = "25 degC"
COMPOSITION

[feeds.air]
composition = "air"
air_ratio = 1.1
temperature = "25 degC"

[held]
adiabatic = true
pressure = "1 atm"
"""


def test_a_substance_by_its_analysis_burns_as_by_its_formula(tmp_path):
    """Benzene: C 92.26, H 7.74 %, 3267.6 kJ/mol over 78.114 g/mol (CRC Handbook, from memory)."""
    temperatures = []
    analysis = "[feeds.fuel.analysis]\nultimate_percent = { C = 92.2584, H = 7.7416 }\nhigher_heating_value = 41.831e6"
    for composition in ('species = "C6H6(l):benzene"', analysis):
        path = tmp_path / "case.toml"
        path.write_text(BENZENE.replace("COMPOSITION", composition), encoding="utf-8")
        temperatures.append(read_case(path).run().batch.temperature[0])
    assert temperatures[1] == pytest.approx(temperatures[0], abs=1.0)


def test_hot_fuel_brings_its_heat_and_an_estimate_of_entropy(study):
    """By hand: 0.81 kg of dry matter at 1.0 to 1.4 kJ/kg/K, 0.1 kg of water at 4.19, ash at 0.75 to 0.85."""
    cold, hot = (
        study(),
        study(('temperature = "25 degC"\n\n[feeds.fuel.an', 'temperature = "85 degC"\n\n[feeds.fuel.an')),
    )
    brought = hot.conditions.account.feed_enthalpy[0] - cold.conditions.account.feed_enthalpy[0]
    assert 60e3 * (0.81 * 1.0 + 0.419 + 0.067) < brought < 60e3 * (0.81 * 1.4 + 0.419 + 0.077)
    account = cold.run()
    assert "entropy estimated (Eisermann et al. 1980): fuel" in account.account.remark
    (audit,) = account.audits
    assert audit.entropy_generated > 0.0


def test_what_check_tells(study):
    lines = explained(study(GOOD_OXIDES, ALL_OXIDES, (PARTS, f"{PARTS}\nhigher_heating_value = '19 MJ/kg'")).describe())
    text = "\n".join(lines)
    assert max(map(len, lines)) <= 80
    row = next(line.split() for line in lines if line.startswith("  C   "))
    assert row == ["C", "46.00", "51.11", "56.48"]  # over 0.9, and that over 0.905
    assert "stated; the correlation of Channiwala and Parikh 2002 gives" in text
    # mol O2: 460/12.011 + 45/4.032 + 10/32.06 - 289.5/31.998 = 40.72
    assert "40.72 mol O2" in text
    assert f"{40.7236 / 0.209476 * 0.0224140:.3f} Nm3" in text
    assert "moisture       11.11 % of the dry fuel" in text
    # (30 + 15)/50, and 0.09 x 0.15/0.019
    assert "base to acid 0.900; alkali index 0.711 kg" in text


def test_what_check_tells_where_little_is_known(study):
    """Tungsten has no usual product, so there is no need of oxygen to tell."""
    little = (
        (WATER, ""),
        ("C = 46.0", "C = 55.9, W = 0.1"),
        ("air_ratio = 1.2", "flow = '2 kg/s'"),
        ('"SO2"]', '"SO2", "W(s)"]'),
    )
    text = " ".join(" ".join(explained(study(*little).describe())).split())
    assert "from the correlation of Channiwala and Parikh 2002, mean error 1.45 %" in text
    assert "W count with no heat of burning" in text
    assert "mol O2" not in text
    assert "base to acid" not in text
    assert "% of the dry fuel" not in text


def test_moisture_of_the_wood_trade(study):
    """25 kg of water to 100 kg of dry wood are 20 % of the whole."""
    wood = study((PARTS, DRY), (WATER, "moisture_percent_dry = 25.0"))
    assert wood.feeds["fuel"].amounts["H2O(l)"] == pytest.approx(200 / 18.015)


def test_proximate_analysis_serves_its_correlation(study):
    """Parikh et al. 2005 (from memory): 0.3536 FC + 0.1559 VM - 0.0078 A, dry; VM 60, ash 9, water 10: FC 21."""
    extra = "proximate_percent = { volatile_matter = 60.0 }\nheating_value_from = 'Parikh, proximate'"
    (recipe,) = [one for one in study((PARTS, f"{PARTS}\n{extra}")).recipes if one.fuel]
    assert recipe.fuel.heat.higher / 1e6 == pytest.approx(0.3536 * 21.0 + 0.1559 * 60.0 - 0.0078 * 9.0)
    assert recipe.heating_value == (recipe.fuel.heat.higher, recipe.fuel.heat.lower)
    differs = study((PARTS, f"{PARTS}\nproximate_percent = {{ volatile_matter = 60.0, ash = 12.0 }}"))
    assert any("proximate analysis has 12 % ash, the ultimate one 9 %" in n for n in differs.recipes[0].fuel.notes)


def test_proximate_analysis_on_every_basis(study):
    """Dry VM 66.667 and FC 23.333; dry ash-free over 0.9: 74.07; as received times 0.9: 60."""
    free = study((PARTS, FREE.replace('basis = "dry', 'proximate_percent.volatile_matter = 74.074\nbasis = "dry')))
    for one in (
        study(
            (PARTS, f"{PARTS}\nproximate_percent = {{ volatile_matter = 60.0, fixed_carbon = 21.0, moisture = 10.0 }}")
        ),
        study((PARTS, f"{DRY}\nproximate_percent = {{ volatile_matter = 66.667 }}")),
        free,
    ):
        analysis = one.recipes[0].fuel.analysis
        assert analysis.volatile_matter == pytest.approx(66.667, abs=1e-3)
        assert analysis.fixed_carbon == pytest.approx(23.333, abs=1e-3)


BAD = [
    ((PARTS, PARTS.replace("46.0", "48.0")), "ultimate_percent", "sums to 102 with 10 % of moisture; expected 100"),
    ((WATER, "moisture_percent = 100.0"), "moisture_percent", "expected less than 100"),
    ((WATER, f"{WATER}\nmoisture_percent_dry = 11.0"), "moisture_percent_dry", "say the same; leave one out"),
    ((WATER, "moisture = 10.0"), "moisture", "did you mean 'moisture_percent'"),
    ((PARTS, PARTS.replace("S = 1.0", "Su = 1.0")), "ultimate_percent.Su", "no species 'Su'"),
    ((PARTS, PARTS.replace("S = 1.0", '"H2O(l)" = 1.0')), "ultimate_percent.H2O(l)", "give it as moisture_percent"),
    ((PARTS, PARTS.replace("S = 1.0", '"FeS2(s)" = 1.0')), "", "heating value of FeS2"),
    ((PARTS, PARTS.replace("S = 1.0", "SO2 = -1.0")), "ultimate_percent.SO2", "at least 0"),
    ((PARTS, f'{PARTS}\nbasis = "air-dried"'), "", "needs air_dried_moisture_percent"),
    ((PARTS, f'{PARTS}\nbasis = "as fired"'), "basis", "expected 'as received', 'air-dried', 'dry' or 'dry ash-free'"),
    ((PARTS, f'{PARTS}\nbasis = "dry ash-free"'), "", "needs ash_percent_dry"),
    ((PARTS, f"{PARTS}\nash_percent_dry = 9.0"), "ash_percent_dry", "the ash stands in ultimate_percent"),
    ((PARTS, FREE.replace("S = 1.2", "S = 1.2, ash = 0.0")), "ultimate_percent.ash", "holds no ash"),
    ((PARTS, FREE.replace("S = 1.2", '"CaO(s)" = 1.2')), "ultimate_percent.CaO(s)", "holds elements only"),
    ((PARTS, f"{DRY}\nmoisture_in_hydrogen = true"), "moisture_in_hydrogen", "a dry analysis holds no moisture"),
    ((PARTS, f"{PARTS}\noxygen_by_difference = true"), "oxygen_by_difference", "O is given"),
    ((PARTS, f'{PARTS}\nash = "reacts"'), "ash", "give ash_oxides_percent"),
    ((WATER, f"{WATER}\nash_oxides_percent = {{ SiO2 = 60.0, CaO = 30.0 }}"), "ash_oxides_percent", "sum to 90"),
    ((WATER, f"{WATER}\nash_oxides_percent = {{}}"), "ash_oxides_percent", "holds nothing"),
    ((", ash = 9.0 }", f", Cl = 9.0 }}\n{OXIDES}"), "ash_oxides_percent", "has no ash"),
    ((WATER, f'{WATER}\nlower_heating_value = "17 MJ"'), "lower_heating_value", "17 MJ is an energy"),
    (
        (WATER, f"{WATER}\nlower_heating_value = 17e6\nhigher_heating_value = 18e6"),
        "lower_heating_value",
        "give one, the other follows",
    ),
    ((WATER, f'{WATER}\nheating_value_at = "constant volume"'), "heating_value_at", "goes with higher_heating_value"),
    ((WATER, f'{WATER}\nheating_value_from = "Boye"'), "heating_value_from", "'Dulong', 'Boie'"),
    ((WATER, f'{WATER}\nheating_value_from = "ISO 8217"'), "heating_value_from", "needs density of the fuel"),
    (
        (WATER, f"{WATER}\nproximate_percent = {{ volatile_matter = 60.0, fixed_carbon = 30.0 }}"),
        "proximate_percent",
        "sums to 109",
    ),
    (
        (WATER, f"{WATER}\nproximate_percent = {{ fixed_carbon = 30.0 }}"),
        "proximate_percent.volatile_matter",
        "missing",
    ),
    ((WATER, f"{WATER}\nproximate_percent = {{ volatile = 30.0 }}"), "proximate_percent.volatile", "'volatile_matter'"),
    ((PARTS, "ultimate_percent = { C = 5.0, H = 0.5, O = 49.0, ash = 35.5 }"), "", "finds no heat in this fuel"),
    ((PARTS, "ultimate_percent = { C = 40.0, H = 1.0, Cl = 49.0 }"), "", "more Cl, F and Br than H"),
]


@pytest.mark.parametrize(("replaced", "key", "words"), BAD)
def test_what_is_wrong_is_named(study, replaced, key, words):
    with pytest.raises(CaseError) as caught:
        study(replaced)
    assert words in caught.value.message
    assert f"feeds.fuel.analysis.{key}".rstrip(".") in str(caught.value)
    assert caught.value.line >= 10


@pytest.mark.parametrize(
    ("replaced", "key", "words"),
    [
        (('flow = "1 kg/s"', 'flow = "1 mol/s"'), "feeds.fuel.flow", "a fuel by analysis has no molar mass"),
        (('flow = "1 kg/s"', 'flow = "1 kg/s"\nfrozen = true'), "feeds.fuel.frozen", "cannot be frozen"),
        (('flow = "1 kg/s"', 'flow = "1 kg/s"\nmoisture_mole_percent = 9.0'), "feeds.fuel.moisture_mole", "for gases"),
        (('temperature = "25 degC"\npressure', 'entropy = "from feeds"\npressure'), "feeds.fuel.analysis", "estimate"),
    ],
)
def test_what_a_fuel_cannot_be(study, replaced, key, words):
    with pytest.raises(CaseError, match=words) as caught:
        study(replaced)
    assert caught.value.key.startswith(key)
