"""Files that are not case files: one plain message each."""

import os
from pathlib import Path

import pytest

from gibbsmin.case.source import MAX_BYTES, open_source
from gibbsmin.errors import CaseError


@pytest.mark.parametrize(
    ("text", "line", "words"),
    [
        ("a = 1\na = 2", 2, "given before in the same table"),
        ("[h]\nx = 1\n[h]\ny = 2", 3, "the table h was opened before"),
        ("[a.b]\n[a.b]", 2, "the table a.b was opened before"),
        ("a = {x = 1, x = 2}", 1, "'x' is given twice"),
        ("a = {x = 1}\na.y = 2", 2, "cannot be added to"),
        ("\na = abc", 2, "texts stand in quotes"),
        ("a", 1, "expected 'key = value'"),
        ("a = 1 2", 1, "more on this line than one value"),
        ("a = 1,5", 1, "more on this line than one value"),
        ("a = [1,\n2", 2, "not closed with ]"),
        ("a = {x = 1\n}", 1, "one line"),
        ('a = "x\n', 1, "not closed with a quote"),
        ('a = """x\ny', 2, "not closed with a quote"),
        ("= 3", 1, "not readable as TOML"),
        ("a = " + "[" * 100_000, None, "nested too deeply"),
        ("a = " + "9" * 5000, None, "cannot be read"),
        (".".join("a" * 100) + " = 1", None, "nested too deeply"),
    ],
)
def test_what_is_not_toml_is_named_with_its_line(tmp_path, text, line, words):
    path = tmp_path / "case.toml"
    path.write_text(text, encoding="utf-8")
    with pytest.raises(CaseError) as caught:
        open_source(path)
    assert caught.value.line == line
    assert words in caught.value.message
    assert str(path) in str(caught.value)
    assert len(caught.value.message) < 300


def test_other_encodings(tmp_path):
    path = tmp_path / "case.toml"
    path.write_bytes('title = "ok"\nnote = "caf\xe9"'.encode("latin-1"))
    with pytest.raises(CaseError, match=r"line 2.*save the file as UTF-8"):
        open_source(path)
    path.write_bytes('title = "x"'.encode("utf-16"))
    with pytest.raises(CaseError, match="UTF-8"):
        open_source(path)


def test_what_editors_of_other_systems_add_is_read(tmp_path):
    path = tmp_path / "case.toml"
    path.write_bytes(b'\xef\xbb\xbftitle = "x"\r\n[held]\r\ntemperature = 300\r\n')
    source = open_source(path)
    assert source.data == {"title": "x", "held": {"temperature": 300}}
    assert source.lines[("held", "temperature")] == 3


def test_not_an_ordinary_file(tmp_path):
    with pytest.raises(CaseError, match="no such file"):
        open_source(tmp_path / "missing.toml")
    with pytest.raises(CaseError, match="a folder"):
        open_source(tmp_path)
    with pytest.raises(CaseError, match="no such file"):
        open_source("a\0b")
    with pytest.raises(CaseError, match=r"no such file|cannot be opened"):
        open_source("a" * 5000)


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="this system has no named pipes")
def test_a_pipe_is_refused_and_not_waited_for(tmp_path):
    os.mkfifo(tmp_path / "pipe")
    with pytest.raises(CaseError, match="not an ordinary file"):
        open_source(tmp_path / "pipe")


def test_a_file_over_one_mebibyte_is_refused(tmp_path):
    path = tmp_path / "case.toml"
    path.write_bytes(b"#" * MAX_BYTES)
    assert open_source(path).data == {}
    path.write_bytes(b"#" * (MAX_BYTES + 1))
    with pytest.raises(CaseError, match="larger than 1 MiB"):
        open_source(path)


def test_an_error_points_to_the_nearest_table(tmp_path):
    path = Path(tmp_path / "case.toml")
    path.write_text("[[sweep]]\n[[sweep]]\nvary = 1\n", encoding="utf-8")
    source = open_source(path)
    assert str(source.error("no", ("sweep", 1, "points"))) == f"{path}, line 2: sweep[2].points: no"
    assert str(source.error("no", ("held", "pressure"))) == f"{path}: held.pressure: no"
