import json
import re
import statistics
import time
from collections import Counter
from importlib.resources import files

import pytest

from gibbsmin.elements import parse_formula
from gibbsmin.errors import SpeciesError
from gibbsmin.thermo.database import Database, from_record, load, species, to_record


def text() -> str:
    return files("gibbsmin.thermo").joinpath("data", "species.json").read_text("utf-8")


def test_reads_fast() -> None:
    def once() -> float:
        start = time.perf_counter()
        Database(json.loads(text()))
        return time.perf_counter() - start

    # 100 ms is promised; the machine of a test may be busy.
    assert statistics.median(once() for _ in range(7)) < 0.2


def test_load_gives_one_database() -> None:
    assert load() is load()


def test_names_and_aliases_are_unique() -> None:
    data = load()
    count = Counter(data.names)
    for record in data.to_records():
        count.update(record["aliases"])
    assert [name for name, times in count.items() if times > 1] == []


def test_aliases_lead_home() -> None:
    for record in load().to_records():
        for alias in record["aliases"]:
            assert load().get(alias).name == record["name"]


def test_an_alias_that_is_a_formula_has_the_composition() -> None:
    for record in load().to_records():
        for alias in record["aliases"]:
            if alias.endswith(("(s)", "(l)")) and alias[0].isupper() and "." not in alias and ":" not in alias:
                elements, charge = parse_formula(alias[:-3])
                assert (elements, charge) == (record["elements"], record["charge"])


@pytest.mark.parametrize(
    ("asked", "found"),
    [
        ("H2O", "H2O"),
        ("steam", "H2O"),
        ("water", "H2O(l)"),
        ("ice", "H2O(s)"),
        ("C2H2", "C2H2:acetylene"),
        ("soot", "C(s):graphite"),
        ("C(s)", "C(s):graphite"),
        ("OCS", "COS"),
        ("corundum", "Al2O3(s):alpha"),
        ("Fe(s):gamma", "Fe(s)"),
        ("quartz", "SiO2(s)"),
        ("electron", "e-"),
        ("acetone", "C3H6O:acetone"),
    ],
)
def test_get(asked: str, found: str) -> None:
    assert load().get(asked).name == found
    assert asked in load()


def test_capitals_count() -> None:
    assert load().get("CS").elements == {"C": 1.0, "S": 1.0}
    assert load().get("Cs").elements == {"Cs": 1.0}


def test_a_formula_of_isomers_lists_them() -> None:
    with pytest.raises(SpeciesError, match=r"'C4H10' .* C4H10:isobutane, C4H10:n-butane"):
        load().get("C4H10")


@pytest.mark.parametrize(
    ("asked", "hint"),
    [
        ("AL2O3(a)", "'Al2O3(s):alpha' here"),
        ("acetylen", "acetylene"),
        ("CH40", "'CH4'"),
        ("OH2", "H2O"),
        ("CH4:x", "there is CH4"),
    ],
)
def test_an_unknown_name_is_helped(asked: str, hint: str) -> None:
    assert asked not in load()
    with pytest.raises(SpeciesError, match=re.escape(repr(asked))) as caught:
        load().get(asked)
    assert hint in str(caught.value)


def test_species_are_made_once() -> None:
    assert load().get("CO2") is load().get("carbon dioxide")


@pytest.mark.parametrize(
    ("words", "first"),
    [
        ("methane", "CH4"),
        ("AL2O3(a)", "Al2O3(s):alpha"),
        ("OH2", "H2O"),
        ("HEMATITE", "Fe2O3(s)"),
        ("Na Cl", "Na2Cl2"),
        ("C2H6O", "C2H5OH"),
    ],
)
def test_search(words: str, first: str) -> None:
    assert load().search(words)[0].name == first


def test_search_by_elements_holds_them_all() -> None:
    found = load().search("fe o")
    assert {"Fe2O3(s)", "Fe3O4(s)", "FeO"} <= {one.name for one in found}
    assert all(one.elements.keys() == {"Fe", "O"} for one in found)


def test_search_for_nothing_finds_nothing() -> None:
    assert load().search("  ") == []
    assert load().search("no such thing") == []


def test_with_elements() -> None:
    names = {one.name for one in load().with_elements({"C", "H", "O"})}
    assert {"CH4", "CO2", "H2O", "H2O(l)", "C(s):graphite"} <= names
    assert not any("N" in load().get(name).elements for name in names)
    assert all(one.charge == 0 for one in load().with_elements(["C", "H", "O"]))


def test_with_elements_leaves_condensed_out_if_told() -> None:
    assert not any(one.condensed for one in load().with_elements({"Fe", "O"}, condensed=False))


def test_with_elements_gives_ions_if_told() -> None:
    names = {one.name for one in load().with_elements({"N", "O"}, ions=True)}
    assert {"e-", "NO+", "O2-"} <= names
    assert "Na+" not in names


def test_deuterium_is_an_element_of_its_own() -> None:
    assert not any("D" in one.elements for one in load().with_elements({"H", "O"}))
    assert "HDO" in {one.name for one in load().with_elements({"H", "D", "O"})}


def test_off_by_default_means_by_name_only() -> None:
    names = {one.name for one in load().with_elements({"Fe", "O", "Si"})}
    assert "Fe0.947O(s)" in names
    assert not {"FeO(s)", "SiO2(s):cristobalite"} & names
    assert load().get("FeO(s)").name == "FeO(s)"
    assert not load().offered("FeO(s)")
    assert load().offered("wustite")


def test_an_unknown_element_is_refused() -> None:
    with pytest.raises(SpeciesError, match="no element 'Xx'"):
        load().with_elements({"C", "Xx"})


def test_records_go_round() -> None:
    for name in ("CO2", "Fe(s)", "e-", "ZnSO4(s)"):
        one = load().get(name)
        assert from_record(json.loads(json.dumps(to_record(one)))) == one


def test_all_records_make_species() -> None:
    again = Database({"format": 1, "version": "x", "made_from": {}, "species": load().to_records()})
    assert len(again) == len(load()) > 1300
    assert [again.get(name) for name in again.names] == [load().get(name) for name in load().names]


def test_another_format_is_refused() -> None:
    with pytest.raises(SpeciesError, match="format 2"):
        Database({"format": 2})


def test_class_and_version() -> None:
    assert load().species_class("CH4") == "gas hydrocarbon"
    assert load().version == "1.0"
    assert set(load().made_from) == {"cantera", "chemicals", "janaf", "thermochem"}


def test_species_is_a_short_way() -> None:
    assert species("CO2") is load().get("CO2")
