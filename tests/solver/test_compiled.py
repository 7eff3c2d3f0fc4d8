"""Where compiled code is kept."""

import stat
import sys
import tempfile
from collections.abc import Iterator
from pathlib import Path

import pytest

from gibbsmin import compiled, linking


@pytest.fixture(autouse=True)
def _forget_the_folder() -> Iterator[None]:
    compiled.cache_folder.cache_clear()
    yield
    compiled.cache_folder.cache_clear()


@pytest.fixture
def home(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """Make a home for caches and a folder for temporary files of our own."""
    (tmp_path / "temporary").mkdir()
    monkeypatch.setenv("XDG_CACHE_HOME", str(tmp_path / "cache"))
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path / "temporary"))
    return tmp_path


def test_the_users_cache_is_taken(home: Path) -> None:
    assert compiled.cache_folder().parent == home / "cache" / "gibbsmin"
    assert compiled.cache_folder() == compiled.cache_folder()


def test_a_home_that_cannot_be_written_gives_way_to_temporary_files(home: Path) -> None:
    (home / "cache").write_text("a file where a folder should be")
    folder = compiled.cache_folder()
    assert folder.is_dir()
    assert home / "temporary" in folder.parents


def test_a_folder_that_others_can_write_is_not_trusted(home: Path) -> None:
    """Compiled code is run when it is loaded."""
    first = compiled.cache_folder()
    first.chmod(0o777)
    compiled.cache_folder.cache_clear()
    second = compiled.cache_folder()
    assert home / "temporary" in second.parents
    assert not second.stat().st_mode & (stat.S_IWGRP | stat.S_IWOTH)
    second.chmod(0o777)
    compiled.cache_folder.cache_clear()
    third = compiled.cache_folder()
    assert third not in (first, second)
    assert not third.stat().st_mode & (stat.S_IWGRP | stat.S_IWOTH)


def test_cold_until_something_is_kept(home: Path) -> None:
    assert compiled.cache_is_cold()
    folder = compiled.cache_folder() / "solver_1234"
    folder.mkdir()
    (folder / "minimize.nbi").touch()
    assert not compiled.cache_is_cold()


def test_another_source_has_another_folder(home: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    package = home / "package"
    (package / "solver").mkdir(parents=True)
    (package / "solver" / "newton.py").write_text("one = 1\n")
    monkeypatch.setattr(compiled, "_PACKAGE", package)
    names = []
    for text in ("one = 1\n", "one = 2\n", "one = 1\n"):
        (package / "solver" / "newton.py").write_text(text)
        compiled.cache_folder.cache_clear()
        names.append(compiled.cache_folder().name)
    assert names[0] == names[2] != names[1]


def test_every_file_with_compiled_code_is_in_the_name_of_the_folder() -> None:
    """A file left out would let old code run after a change."""
    package = Path(compiled.__file__).parent
    listed = {path for pattern in compiled._SOURCES for path in package.glob(pattern)}
    with_compiled_code = {
        path for path in package.rglob("*.py") if "gibbsmin.compiled import" in path.read_text(encoding="utf-8")
    }
    uses = {path for path in with_compiled_code if "cache_is_cold" not in path.read_text(encoding="utf-8")}
    assert uses <= listed


def test_without_what_it_needs_of_numba_it_compiles_the_longer_way(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setitem(sys.modules, "numba.core.codegen", None)
    assert linking.part_options() == {}
