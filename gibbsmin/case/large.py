"""Large studies: solved part by part, by one process or several, on one machine or a cluster, and kept on disk.

A part is lost at most, whatever happens: every part that is done lies on disk by itself, and a run that goes on skips
it.
"""

from __future__ import annotations

import hashlib
import json
import multiprocessing
import os
from collections.abc import Callable, Iterator
from concurrent.futures import FIRST_COMPLETED, Future, ProcessPoolExecutor, wait
from concurrent.futures.process import BrokenProcessPool
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any, Final

import numpy as np

from gibbsmin import __version__
from gibbsmin.errors import InputError
from gibbsmin.practice.safety.cautions import gather, sentences
from gibbsmin.results.archive import Archive, Plan, cuts, put
from gibbsmin.results.exports import check_exports
from gibbsmin.results.folder import check_place
from gibbsmin.results.judge import judge, peaks
from gibbsmin.results.pieces import Layout, csv_lines, layout_of, piece_of
from gibbsmin.results.provenance import provenance
from gibbsmin.results.result import Result
from gibbsmin.studies.labelled import POINT
from gibbsmin.thermo.database import load

if TYPE_CHECKING:
    import xarray

    from gibbsmin.case.study import Study

LARGE: Final = 20_000
"""Above this number of states a study is solved part by part, and its states are kept on disk only."""

PART: Final = 20_000
"""States of a part at most."""

LOOKS: Final = 40
"""Stretches that are solved beforehand, to see which species matter and what to warn of."""

LOOKED_AT: Final = 10
"""States of such a stretch."""

AHEAD: Final = 2
"""Parts that wait for each process."""

Progress = Callable[[int, int], object]


@dataclass(frozen=True)
class Archived:
    """A large study that is done.

    Attributes
    ----------
    folder : Path
        The result folder.
    document : dict
        What its result.json holds.
    """

    folder: Path
    document: dict[str, Any]

    @property
    def all_certified(self) -> bool:
        """Whether every state is certified."""
        return bool(self.document["certified"] == self.document["count"])

    def dataset(self) -> xarray.Dataset:
        """Open the states: named axes and units, read from disk as they are asked for."""
        import xarray

        return xarray.open_dataset(self.folder / "result.nc", engine="h5netcdf")


@dataclass(frozen=True)
class Ways:
    """How a large study is run.

    Attributes
    ----------
    workers : int
        Processes on this machine.
    resume : bool
        Whether parts of an interrupted run are kept.
    cluster : str
        Address of the scheduler of a Dask cluster; empty for this machine.
    also : tuple of str
        Formats to write the states in besides CSV and NetCDF.
    """

    workers: int = 1
    resume: bool = False
    cluster: str = ""
    also: tuple[str, ...] = ()


def run_large(study: Study, out: Path, ways: Ways, progress: Progress | None = None) -> Archived:
    """Solve a large study into a result folder.

    Parameters
    ----------
    study : Study
    out : Path
        The folder.
    ways : Ways
    progress : callable, optional
        Called with the states done and all states.

    Returns
    -------
    Archived

    Raises
    ------
    InputError
        The folder cannot be written, a format is not to be had, the cluster does not answer, or workers die again and
        again.
    """
    check_place(out)
    check_exports(ways.also, study.all_states)
    looked = _looked_at(study)
    layout = layout_of(looked)
    plan = _plan(study, layout)
    archive = Archive(out, plan, ways.resume)
    pending = archive.pending()
    windows = plan.windows
    done = plan.states - sum(windows[k][1] - windows[k][0] for k in pending)
    if progress is not None:
        progress(done, plan.states)
    for number in _solved(study, archive, pending, ways):
        done += windows[number][1] - windows[number][0]
        if progress is not None:
            progress(done, plan.states)
    document = archive.assemble(_cautions(looked), ways.also)
    return Archived(out, document)


def _looked_at(study: Study) -> list[Result]:
    """Solve some states, spread over all of the study."""
    starts = np.unique(np.linspace(0, study.all_states - LOOKED_AT, LOOKS).round().astype(int))
    return [study.part(int(start), int(start) + LOOKED_AT).solved() for start in starts]


def _cautions(looked: list[Result]) -> list[str]:
    """Cautions of the states that were looked at."""
    judged = [cautions for result in looked for cautions in judge(result)]
    highest: dict[str, float] = {}
    for result in looked:
        for name, x in peaks(result).items():
            highest[name] = max(highest.get(name, 0.0), x)
    return sentences(gather(judged, highest))


def _plan(study: Study, layout: Layout) -> Plan:
    """Say what the study is and how it is cut."""
    told = provenance(study.sha256)
    case = study.case.model_dump(by_alias=True, exclude_none=True)
    identity = [case, layout.species, [one.name for one in layout.variables], load().version, __version__, PART]
    fingerprint = hashlib.sha256(json.dumps(identity, sort_keys=True, default=str).encode()).hexdigest()
    if study.design.kind == "grid":
        axes = tuple((axis.name, axis.unit, np.asarray(axis.values, float)) for axis in study.typed_axes)
    else:
        axes = ((POINT, "1", np.arange(study.all_states, dtype=float)),)
    return Plan(
        title=study.case.title,
        case=case,
        fingerprint=fingerprint,
        basis=study.basis,
        axes=axes,
        inputs=tuple((axis.vary, axis.typed_unit) for axis in study.axes),
        states=study.all_states,
        cuts=cuts(study.shape, PART),
        layout=layout,
        provenance={"gibbsmin": __version__, "provenance": told},
    )


def solve_part(study: Study, layout: Layout, window: tuple[int, int]) -> dict[str, Any]:
    """Solve a part of a study; its arrays, and its rows of CSV as bytes."""
    piece = piece_of(study.part(*window).solved(), layout)
    return {**piece, "csv": np.frombuffer(csv_lines(piece, layout).encode("utf-8"), np.uint8)}


def _solved(study: Study, archive: Archive, pending: list[int], ways: Ways) -> Iterator[int]:
    """Solve the pending parts, and yield the number of each as it is kept."""
    if ways.cluster:
        yield from _on_cluster(study, archive, pending, ways.cluster)
    elif ways.workers > 1 and len(pending) > 1:
        yield from _in_processes(study, archive, pending, ways.workers)
    else:
        for number in pending:
            put(archive.parts, number, solve_part(study, archive.plan.layout, archive.plan.windows[number]))
            yield number


_STUDY: dict[str, Any] = {}


def _begin(study: Study, layout: Layout, parts: Path) -> None:
    """Keep in a worker what all parts have in common."""
    _STUDY.update(study=study, layout=layout, parts=parts)


def _work(number: int, window: tuple[int, int]) -> int:
    """Solve and keep a part in a worker."""
    put(_STUDY["parts"], number, solve_part(_STUDY["study"], _STUDY["layout"], window))
    return number


def _in_processes(study: Study, archive: Archive, pending: list[int], workers: int) -> Iterator[int]:
    """Solve parts in processes of this machine; the solver is compiled already, so that each only loads it."""
    pool = ProcessPoolExecutor(
        min(workers, len(pending)),
        multiprocessing.get_context("spawn"),
        _begin,
        (study, archive.plan.layout, archive.parts),
    )
    waiting = list(pending)
    running: set[Future[int]] = set()
    try:
        while waiting or running:
            while waiting and len(running) < AHEAD * workers:
                number = waiting.pop(0)
                running.add(pool.submit(_work, number, archive.plan.windows[number]))
            finished, running = wait(running, return_when=FIRST_COMPLETED)
            for one in finished:
                yield one.result()
    except BrokenProcessPool:
        raise InputError(
            "a worker was killed, perhaps for want of memory; what is done is kept: run again with --resume, and fewer"
            " --workers"
        ) from None
    finally:
        pool.shutdown(wait=True, cancel_futures=True)


def _on_cluster(study: Study, archive: Archive, pending: list[int], address: str) -> Iterator[int]:
    """Solve parts on a Dask cluster; a part whose worker dies is given to another."""
    try:
        from distributed import Client, as_completed
    except ImportError:
        raise InputError("--cluster needs the extra cluster: pip install gibbsmin[cluster]") from None
    try:
        client = Client(address, timeout="10s")
    except (OSError, ValueError) as error:
        raise InputError(f"no Dask scheduler answers at {address}: {error}") from error
    with client:
        shared = client.scatter([study, archive.plan.layout], broadcast=True)
        numbers: dict[str, int] = {}
        waiting = list(pending)
        pool = as_completed([])
        ahead = AHEAD * max(len(client.scheduler_info()["workers"]), 1)

        def more() -> None:
            while waiting and len(numbers) < ahead:
                number = waiting.pop(0)
                future = client.submit(solve_part, *shared, archive.plan.windows[number], pure=False, retries=3)
                numbers[future.key] = number
                pool.add(future)

        more()
        for future in pool:
            number = numbers.pop(future.key)
            put(archive.parts, number, future.result())
            future.release()
            more()
            yield number


def cores() -> int:
    """Processors that this process may use."""
    affinity = getattr(os, "sched_getaffinity", None)
    return len(affinity(0)) if affinity else os.cpu_count() or 1
