"""From a file to a study: the right system and feeds, and plain messages where they cannot be."""

from pathlib import Path

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from gibbsmin.case.read import read_case
from gibbsmin.errors import CaseError, GibbsminError

SPECIES = 'elements = "from feeds"'
OWN = """\
[[species]]
name = "C3H8O3:invented"
enthalpy_of_formation = "-580 kJ/mol"
standard_entropy = "390 J/mol/K"
heat_capacity = { temperatures = [300, 500, 1000], values = [115, 170, 250], unit = "J/mol/K" }
source = "invented for a test"
"""


def test_elements_come_from_the_feeds(write):
    study = read_case(write())
    assert set(study.system.elements) == {"C", "H", "N", "O"}
    assert {"CH4", "H2O", "H2O(l)", "C(s):graphite", "NH3"} <= set(study.system.species)


def test_elements_by_name(write):
    study = read_case(write((SPECIES, 'elements = "C, H O N S"')))
    assert "H2S" in study.system.species


def test_species_by_name(write):
    names = ["CH4", "H2O", "CO", "CO2", "H2", "N2"]
    study = read_case(write((SPECIES, f"allow = {names}")))
    assert sorted(study.system.species) == sorted(names)


def test_exclusions_by_name_and_alias(write):
    study = read_case(write((SPECIES, 'exclude = ["graphite", "NH3"]')))
    assert not {"C(s):graphite", "NH3"} & set(study.system.species)


def test_no_solids_and_liquids(write):
    assert all(read_case(write((SPECIES, "condensed = false"))).system.gas)


def test_inert_species_keep_out_of_the_element_balance(write):
    study = read_case(write((SPECIES, 'inert = ["N2"]')))
    assert "N" not in study.system.elements
    assert "NH3" not in study.system.species
    row = study.element_rows[0]
    nitrogen = [k for k, name in enumerate(study.system.elements) if "N2" in name]
    assert row[nitrogen] == pytest.approx([0.02])


def test_own_species_from_a_file_beside_the_case(write, tmp_path):
    (tmp_path / "mine.toml").write_text(OWN, encoding="utf-8")
    study = read_case(write((SPECIES, SPECIES + '\nfiles = ["mine.toml"]')))
    assert "C3H8O3:invented" in study.system.species
    fed = read_case(
        write(
            (SPECIES, 'allow = ["CO", "H2", "CO2", "H2O", "N2", "CH4"]\nfiles = ["mine.toml"]'),
            ('species = "H2O"\nsteam_to_carbon = 3.0', 'species = "C3H8O3:invented"\nflow = "1 kmol/h"'),
        )
    )
    elements = dict(zip(fed.system.elements, fed.element_rows[1], strict=True))
    assert elements == pytest.approx({"C": 3.0, "H": 8.0, "O": 3.0, "N": 0.0})


def test_sizes_and_states(write):
    study = read_case(write())
    assert study.states == 3
    assert study.basis == "mol/s"
    assert study.units[0] * 3.6 == pytest.approx([100.0, 303.0])
    assert study.feeds["steam"].amounts == pytest.approx({"H2O": 303.0 / 3.6})
    assert study.feeds["steam"].mass == pytest.approx(303.0 / 3.6 * 18.015e-3)
    assert study.feeds["gas"].element_amounts["H"] == pytest.approx((4 * 93 + 6 * 4) / 3.6)
    assert study.feeds["gas"].temperature == pytest.approx(823.15)
    assert study.feeds["gas"].pressure is None


def test_two_inputs_varied_the_last_one_fastest(write):
    more = '[[sweep]]\nvary = "feeds.steam.steam_to_carbon"\nvalues = [1.0, 2.0]\n\n[show]'
    study = read_case(write(("[show]", more)))
    assert study.held("temperature", "K") == pytest.approx(np.repeat([1073.15, 1123.15, 1173.15], 2))
    assert study.held("pressure", "Pa") == pytest.approx([24e5] * 6)
    assert study.units[:, 1] * 3.6 == pytest.approx([101.0, 202.0] * 3)


def test_a_mass_flow_that_is_varied(write):
    text = 'vary = "feeds.gas.flow"\nvalues = ["1.8 t/h", "3.6 t/h"]'
    study = read_case(write(('vary = "held.temperature"\nfrom = "800 degC"\nto = "900 degC"\npoints = 3', text)))
    masses = study.units[:, 0] * study.recipes[0].mass
    assert masses == pytest.approx([0.5, 1.0])
    assert study.units[:, 1] / study.units[:, 0] == pytest.approx([3.03, 3.03])


def test_check_says_what_the_case_asks_for(write):
    told = read_case(write((SPECIES, 'exclude = ["graphite"]'))).describe()
    assert told["title"] == "Tube outlet of an invented reformer"
    assert told["basis"] == "mol/s"
    assert told["held"] == {"temperature": "870 degC", "pressure": "24 bar"}
    (axis,) = told["sweep"]
    assert (axis["vary"], axis["first"], axis["last"], axis["unit"]) == ("held.temperature", 800.0, 900.0, "degC")
    assert (axis["points"], axis["logarithmic"], told["design"]) == (3, False, {"kind": "grid"})
    assert told["states"] == 3
    assert [feed["name"] for feed in told["feeds"]] == ["gas", "steam"]
    assert told["elements"]["O"] == pytest.approx((2 + 303) / 3.6)
    assert told["species"]["exclude"] == ["graphite"]
    assert "H2O(l)" in told["species"]["condensed"]
    assert told["units"] == {"temperature": "degC", "pressure": "bar", "amount": "kmol/h"}


BAD = [
    ("CH4 = 93.0", "CH44 = 93.0", 7, "feeds.gas.mole_percent.CH44", "no species 'CH44'"),
    ('species = "H2O"', 'species = "H20"', 12, "feeds.steam.species", "no species 'H20'"),
    (SPECIES, 'exclude = ["C2H2", "grafite"]', 4, "species.exclude[2]", "graphite"),
    (SPECIES, 'exclude = ["graphite", "C(s):graphite"]', 4, "species.exclude[2]", "named before"),
    (SPECIES, 'allow = ["CH4", "H20"]', 4, "species.allow[2]", "no species"),
    (SPECIES, 'inert = ["N3O"]', 4, "species.inert[1]", "no species"),
    (SPECIES, 'elements = "C H Ox N"', 4, "species.elements", "there is no element 'Ox'"),
    (SPECIES, 'elements = "from feed"', 4, "species.elements", "no element"),
    (SPECIES, 'elements = "C H O"', 7, "feeds.gas.mole_percent", "holds N (in N2)"),
    (SPECIES, 'allow = ["CH4", "H2", "H2O", "CO"]', 7, "feeds.gas.mole_percent", "holds N (in N2)"),
    (SPECIES, 'files = ["mine.toml"]', 4, "species.files[1]", "no file 'mine.toml' in the folder"),
    (SPECIES, 'files = ["../mine.toml"]', 4, "species.files[1]", "outside the folder of the case"),
    (SPECIES, 'files = ["/etc/passwd"]', 4, "species.files[1]", "outside the folder of the case"),
    (
        'flow = "100 kmol/h"',
        'amount = "1 kmol"\n[feeds.air]\ncomposition = "air"\nflow = 1.0',
        11,
        "feeds.air.flow",
        "one kind",
    ),
    ('to = "900 degC"', 'to = "90000 degC"', 20, "sweep[1]", "beyond all data"),
    ("steam_to_carbon = 3.0", "air_ratio = 1.0", 13, "feeds.steam.air_ratio", "no O2"),
    ("CH4 = 93.0, C2H6 = 4.0, N2", "CO = 97.0, N2", 13, "feeds.steam.steam_to_carbon", "no carbon that counts"),
]


@pytest.mark.parametrize(("old", "new", "line", "key", "words"), BAD)
def test_what_cannot_be_is_named(write, old, new, line, key, words):
    path = write((old, new))
    with pytest.raises(CaseError) as caught:
        read_case(path)
    assert (caught.value.line, caught.value.key) == (line, key)
    assert words in caught.value.message


def test_a_temperature_beyond_all_data_is_told_before_anything_runs(write):
    no_sweep = '[[sweep]]\nvary = "held.temperature"\nfrom = "800 degC"\nto = "900 degC"\npoints = 3\n'
    with pytest.raises(CaseError, match=r"line 17: held\.temperature: 20 K is beyond all data"):
        read_case(write((no_sweep, ""), ('temperature = "870 degC"', "temperature = 20")))


SPOILERS = [
    "",
    '"',
    "'",
    "[",
    "]",
    "{",
    "}",
    "=",
    ".",
    ",",
    "#",
    "\n",
    "-",
    "9",
    "e",
    "nan",
    "true",
    "[[sweep]]\n",
    "é",
    "\\",
]


@given(st.lists(st.tuples(st.integers(0, 600), st.integers(0, 12), st.sampled_from(SPOILERS)), min_size=1, max_size=3))
@settings(deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
def test_a_spoiled_case_is_read_or_refused_in_words(write, edits):
    path = write()
    text = path.read_text(encoding="utf-8")
    for place, length, new in edits:
        text = text[:place] + new + text[place + length :]
    path.write_text(text, encoding="utf-8")
    try:
        told = f"{read_case(path).states} states"
    except CaseError as error:
        told = error.message
    assert told.strip()


def test_a_file_outside_the_folder_only_when_told(write, tmp_path):
    inner = tmp_path / "inner"
    inner.mkdir()
    (tmp_path / "mine.toml").write_text(OWN, encoding="utf-8")
    text = write((SPECIES, SPECIES + '\nfiles = ["../mine.toml"]')).read_text(encoding="utf-8")
    (inner / "case.toml").write_text(text, encoding="utf-8")
    with pytest.raises(CaseError, match="outside the folder"):
        read_case(inner / "case.toml")
    assert "C3H8O3:invented" in read_case(inner / "case.toml", outside=True).system.species


def test_a_link_out_of_the_folder_is_outside(write, tmp_path):
    outer = tmp_path / "outer"
    outer.mkdir()
    (outer / "mine.toml").write_text(OWN, encoding="utf-8")
    inner = tmp_path / "inner"
    inner.mkdir()
    (inner / "mine.toml").symlink_to(outer / "mine.toml")
    text = write((SPECIES, SPECIES + '\nfiles = ["mine.toml"]')).read_text(encoding="utf-8")
    (inner / "case.toml").write_text(text, encoding="utf-8")
    with pytest.raises(CaseError, match="outside the folder"):
        read_case(inner / "case.toml")


def test_own_species_that_are_wrong_are_named_with_their_file(write, tmp_path):
    (tmp_path / "mine.toml").write_text(OWN.replace("source", "sauce"), encoding="utf-8")
    with pytest.raises(CaseError, match=r"mine\.toml") as caught:
        read_case(write((SPECIES, SPECIES + '\nfiles = ["mine.toml"]')))
    assert isinstance(caught.value, GibbsminError)
    assert caught.value.key == "species.files[1]"


def test_species_of_a_cantera_file(write):
    """The packaged mechanism gri30 (GRI-Mech 3.0, from the package cantera) beside the case, named in `files`."""
    import cantera

    path = write(('elements = "from feeds"', 'elements = "from feeds"\nfiles = ["mechanism.yaml"]'))
    packaged = Path(cantera.__file__).parent / "data" / "gri30.yaml"
    (path.parent / "mechanism.yaml").write_bytes(packaged.read_bytes())
    study = read_case(path)
    record = study.system.records[study.system.index["CH2(S)"]]
    assert "gri30" in record.source
    assert study.run().batch.certified.all()
    (path.parent / "mechanism.yaml").write_text("phases: nothing")
    with pytest.raises(CaseError, match=r"mechanism\.yaml.*cannot be read as a Cantera file"):
        read_case(path)
