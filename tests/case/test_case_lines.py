"""Every key of a TOML text is found on its line."""

import tomllib

import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.case.lines import key_lines

TRICKY = '''\
# a comment with [table] and x = 1
title = "a # b" # [x]
a.b."c.d" = 1
m = """
x = 1
\\"""
y"""
lit = \'\'\'
[no]
\'\'\'
[species]
exclude = [ # hi ] }
  "C2H2", 'x',
  { p = 1, q = [1,
   2] },
]
[feeds.gas]
mole_percent = { CH4 = 93.0, "H2O(l)" = 4.0 }
[[sweep]]
vary = "x"
from = 2024-01-01 10:00:00
[[sweep]]
values = [2.0, 2.5,
 3.0]
[sweep.sub]
z = 1
[[sweep.k]]
j = 1
[[sweep.k]]
"\\u0041" = """""q"""""
w = 2
'''

LINES = {
    ("title",): 2,
    ("a", "b", "c.d"): 3,
    ("m",): 4,
    ("lit",): 8,
    ("species",): 11,
    ("species", "exclude", 1): 13,
    ("species", "exclude", 2, "q", 1): 15,
    ("feeds",): 17,
    ("feeds", "gas"): 17,
    ("feeds", "gas", "mole_percent", "H2O(l)"): 18,
    ("sweep", 0): 19,
    ("sweep", 0, "from"): 21,
    ("sweep", 1): 22,
    ("sweep", 1, "values", 2): 24,
    ("sweep", 1, "sub", "z"): 26,
    ("sweep", 1, "k", 1): 29,
    ("sweep", 1, "k", 1, "A"): 30,
    ("sweep", 1, "k", 1, "w"): 31,
}


def paths(value, prefix=()):
    """All paths of a parsed document."""
    if prefix:
        yield prefix
    items = value.items() if isinstance(value, dict) else enumerate(value) if isinstance(value, list) else ()
    for key, inner in items:
        yield from paths(inner, (*prefix, key))


def test_a_text_with_every_trick_of_the_grammar():
    found = key_lines(TRICKY)
    assert {key: found.get(key) for key in LINES} == LINES
    assert set(found) == set(paths(tomllib.loads(TRICKY)))


KEYS = st.one_of(
    st.from_regex(r"[A-Za-z0-9_-]{1,6}", fullmatch=True),
    st.from_regex(r"'[ .#=\[\]{}a-z]{0,5}'", fullmatch=True),
    st.from_regex(r'"[ .#=\[\]{}a-z]{0,5}"', fullmatch=True),
)
SCALARS = st.sampled_from(["1", "-2.5e3", "true", '"a ] b"', "'# c'", '"""x\n[t]\n"""', "'''\n'\n'''", '"\\"#"'])
VALUES = st.recursive(
    SCALARS,
    lambda inner: st.one_of(
        st.lists(inner, max_size=3).map(lambda items: "[" + ", ".join(items) + "]"),
        st.lists(inner, max_size=3).map(lambda items: "[ # ]\n" + ",\n".join(items) + "\n]"),
        st.dictionaries(st.from_regex(r"[a-z]{1,4}", fullmatch=True), inner.filter(lambda text: "\n" not in text))
        .filter(lambda items: len(items) < 4)
        .map(lambda items: "{" + ", ".join(f"{key} = {value}" for key, value in items.items()) + "}"),
    ),
    max_leaves=6,
)


@given(st.lists(st.tuples(KEYS, VALUES, st.sampled_from(["", "  # a = 1", "\t"])), max_size=8))
def test_keys_of_any_document_are_found_where_they_were_written(pairs):
    text, written = "", {}
    for key, value, tail in pairs:
        name = key.strip("'\"") if key[0] in "'\"" else key
        if (name,) in written:
            continue
        written[(name,)] = text.count("\n") + 1
        text += f"{key} = {value}{tail}\n"
    parsed = tomllib.loads(text)
    found = key_lines(text)
    assert {key: found[key] for key in written} == written
    assert set(found) == set(paths(parsed))


def test_absurd_depth_is_refused():
    with pytest.raises(RecursionError):
        key_lines(".".join("a" * 100) + " = 1")
