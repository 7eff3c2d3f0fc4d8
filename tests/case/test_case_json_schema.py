"""The JSON Schema of case files: complete for editors, and true for the cases that are shipped."""

import re
import tomllib
from pathlib import Path

import pytest

from gibbsmin.case.json_schema import case_schema
from gibbsmin.case.schema import Case

CASES = sorted((Path(__file__).parents[2] / "cases").glob("*.toml"))
KINDS = {
    "object": dict,
    "array": list,
    "string": str,
    "boolean": bool,
    "integer": int,
    "number": (int, float),
    "null": type(None),
}


def faults(value, schema, root, place="case"):
    """List what a value breaks of a schema, for the words that the schema of cases uses (JSON Schema 2020-12)."""
    known = {"title", "description", "examples", "default", "$defs", "$schema"}
    if "$ref" in schema:
        schema = {
            **root["$defs"][schema["$ref"].removeprefix("#/$defs/")],
            **{k: v for k, v in schema.items() if k != "$ref"},
        }
    found = []
    for word, rule in schema.items():
        if word in known:
            continue
        if word == "type":
            good = isinstance(value, KINDS[rule]) and (rule == "boolean" or not isinstance(value, bool))
            found += [] if good else [f"{place}: not {rule}"]
        elif word == "anyOf":
            found += [] if any(not faults(value, one, root) for one in rule) else [f"{place}: none of the kinds"]
        elif word == "oneOf":
            found += [] if sum(not faults(value, one, root) for one in rule) == 1 else [f"{place}: not just one kind"]
        elif word == "allOf":
            found += [fault for one in rule for fault in faults(value, one, root, place)]
        elif word == "properties":
            for key in value.keys() & rule.keys() if isinstance(value, dict) else ():
                found += faults(value[key], rule[key], root, f"{place}.{key}")
        elif word == "required":
            found += [f"{place}: {key} missing" for key in rule if key not in value]
        elif word == "additionalProperties":
            rest = value.keys() - schema.get("properties", {}).keys() if isinstance(value, dict) else set()
            for key in rest:
                found += (
                    [f"{place}: {key} unknown"] if rule is False else faults(value[key], rule, root, f"{place}.{key}")
                )
        elif word == "propertyNames":
            for key in value:
                found += faults(key, rule, root, place)
        elif word == "items":
            for number, one in enumerate(value if isinstance(value, list) else ()):
                found += faults(one, rule, root, f"{place}[{number}]")
        elif word in ("enum", "const"):
            found += [] if value in (rule if word == "enum" else [rule]) else [f"{place}: not {rule}"]
        elif isinstance(value, str) and word in ("minLength", "pattern"):
            good = len(value) >= rule if word == "minLength" else re.search(rule, value)
            found += [] if good else [f"{place}: {word}"]
        elif isinstance(value, (int, float)) and word in ("minimum", "maximum", "exclusiveMinimum", "exclusiveMaximum"):
            good = {
                "minimum": value >= rule,
                "maximum": value <= rule,
                "exclusiveMinimum": value > rule,
                "exclusiveMaximum": value < rule,
            }[word]
            found += [] if good else [f"{place}: {word}"]
        elif word not in ("minLength", "pattern", "minimum", "maximum", "exclusiveMinimum", "exclusiveMaximum"):
            raise AssertionError(f"the schema uses {word!r}, which this test does not know")
    return found


def test_every_key_has_a_description_and_an_example():
    schema = case_schema()
    for table in (schema, *schema["$defs"].values()):
        assert table["additionalProperties"] is False
        for name, key in table["properties"].items():
            assert len(key["description"]) > 10, name
            assert key["examples"], name


def test_every_example_is_good():
    schema = case_schema()
    for table in (schema, *schema["$defs"].values()):
        for name, key in table["properties"].items():
            for example in key["examples"]:
                assert not faults(example, key, schema, name)


def test_every_example_of_a_table_is_read():
    case = {
        "title": "x",
        "feeds": {"gas": {"species": "CH4", "flow": 1.0}},
        "held": {"temperature": 900, "pressure": 1e5},
    }
    for name, field in Case.model_fields.items():
        for example in field.examples:
            more = {"feeds": case["feeds"] | example} if name == "feeds" else {name: example}
            if name == "design":  # goes with ranges only
                more["sweep"] = [{"vary": "held.temperature", "from": 900, "to": 1000}]
            Case.model_validate({**case, **more})


@pytest.mark.parametrize("path", CASES, ids=lambda path: path.stem)
def test_the_schema_holds_for_shipped_cases(path):
    schema = case_schema()
    assert not faults(tomllib.loads(path.read_text(encoding="utf-8")), schema, schema)


@pytest.mark.parametrize(
    "spoiled",
    [
        {"titel": "x"},
        {"title": 3},
        {"held": {"temperature": 300.0}},
        {"held": {"temperature": 300.0, "pressure": [1]}},
        {"held": {"temperature": 300.0, "adiabatic": True, "pressure": 1e5}},
        {"held": {"temperature": 300.0, "volume": 2.0, "pressure": 1e5}},
        {"held": {"entropy": "of feeds", "pressure": 1e5}},
        {"held": {"entropy": "from feeds", "pressure": 1e5, "isentropic_efficiency": 1.1}},
        {"surroundings": {"temprature": 300.0}},
        {"feeds": {"gas": {"mole_percent": {"CH4": -1.0}}}},
        {"feeds": {"g a s": {"species": "CH4"}}},
        {"sweep": [{"vary": "held.temperature", "points": 1}]},
        {"sweep": [{"from": 3}]},
        {"show": {"sort": "mass"}},
    ],
)
def test_the_schema_refuses_what_the_reader_refuses(spoiled):
    schema = case_schema()
    good = {"title": "x", "feeds": {"gas": {"species": "CH4"}}, "held": {"temperature": 300, "pressure": "1 bar"}}
    assert not faults(good, schema, schema)
    assert faults({**good, **spoiled}, schema, schema)
