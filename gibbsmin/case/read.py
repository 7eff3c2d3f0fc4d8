"""Reading a case file: from a path to a study that can be run."""

from __future__ import annotations

from pathlib import Path

from pydantic import ValidationError

from gibbsmin.case.complaints import complaint
from gibbsmin.case.fields import RuleError
from gibbsmin.case.schema import Case, CaseFrame
from gibbsmin.case.source import Source, open_source
from gibbsmin.case.study import Study
from gibbsmin.case.train_schema import TrainCase
from gibbsmin.case.train_study import TrainStudy
from gibbsmin.errors import InputError
from gibbsmin.interop import CANTERA_FILES, read_cantera_file
from gibbsmin.thermo.own import read_species
from gibbsmin.thermo.record import Species


def read_case(path: str | Path, *, outside: bool = False) -> Study | TrainStudy:
    """Read a case file.

    Parameters
    ----------
    path : str or Path
        The file.
    outside : bool
        Whether files that the case names may lie outside its folder.

    Returns
    -------
    Study or TrainStudy
        Checked; ``run()`` solves it, ``describe()`` says what it asks for. A file with ``[[stage]]`` tables is a train.

    Raises
    ------
    CaseError
        The file cannot be read, or asks for what is not possible; with file, line, key, and what would be right.
    """
    source = open_source(path)
    kind = TrainCase if "stage" in source.data else Case
    try:
        case = kind.model_validate(source.data)
    except ValidationError as error:
        raise complaint(error, source, kind) from None
    own = _own_species(case, source, outside)
    try:
        if isinstance(case, TrainCase):
            return TrainStudy.of(case, own, str(source.path), source.sha256)
        assert isinstance(case, Case), "there are two kinds"
        return Study.of(case, own, str(source.path), source.sha256)
    except RuleError as error:
        raise source.error(error.message, error.key) from None


def _own_species(case: CaseFrame, source: Source, outside: bool) -> list[Species]:
    """Read the files of own species that a case names."""
    own: list[Species] = []
    for number, name in enumerate(case.species.files):
        key = ("species", "files", number)
        place = (source.folder / name).resolve()
        if not outside and not place.is_relative_to(source.folder):
            raise source.error(f"{name!r} lies outside the folder of the case; put a copy beside the case", key)
        if not place.is_file():
            raise source.error(f"there is no file {name!r} in the folder of the case", key)
        try:
            own += read_cantera_file(place) if place.suffix in CANTERA_FILES else read_species(place)
        except InputError as error:
            raise source.error(f"{name}: {error}", key) from None
    return own
