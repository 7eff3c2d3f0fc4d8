"""Compilation of numerical functions, and where the compiled code is kept.

numba stamps a cached function by its own file only, so a change in a function that it calls would go unseen. The
cache folder is therefore named after the contents of every file that holds compiled code, and after the versions
of Python, numba and numpy. The package itself may be read-only: the folder lies in the user's cache, or, where
that cannot be written, in a private temporary folder.
"""

from __future__ import annotations

import gc
import hashlib
import os
import platform
import stat
import sys
import tempfile
import threading
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from functools import cache, wraps
from pathlib import Path
from typing import Any, TypeVar, cast

import numba
import numpy as np

from gibbsmin.linking import part_options

Function = TypeVar("Function", bound=Callable[..., Any])

_LOCK = threading.RLock()
_PART: dict[str, Any] = {
    "nogil": True,
    "error_model": "numpy",
    "no_cpython_wrapper": True,
    "no_cfunc_wrapper": True,
    **part_options(),
}
_PACKAGE = Path(__file__).parent
_SOURCES = ("compiled.py", "linking.py", "thermo/polynomial.py", "thermo/table.py", "solver/*.py")


def compiled(function: Function) -> Function:
    """Compile an entry point on its first call from Python; it runs without the global lock and is cached on disk."""
    if numba.config.DISABLE_JIT:
        return function
    with _settings():
        dispatcher = numba.njit(cache=True, nogil=True, error_model="numpy", no_cfunc_wrapper=True)(function)

    @wraps(function)
    def call(*arguments: Any) -> Any:
        if dispatcher.overloads:  # compiled or loaded; to ask for the signatures takes 20 to 50 µs a call
            return dispatcher(*arguments)
        with _settings():
            return dispatcher(*arguments)

    return cast(Function, call)


@contextmanager
def _settings() -> Iterator[None]:
    """Compile into our own cache, with the light optimization: unrolling makes the solver's short loops slower.

    With numba's own default the 53 species of a methane mechanism take 5 to 10 % longer a state.
    Without the collector of cyclic garbage compiling takes a sixth less time.
    """
    with _LOCK:
        config = numba.config
        before = config.CACHE_DIR, config.OPT
        collecting = gc.isenabled()
        config.CACHE_DIR, config.OPT = str(cache_folder()), type(config.OPT)(1)
        gc.disable()
        try:
            yield
        finally:
            config.CACHE_DIR, config.OPT = before
            if collecting:
                gc.enable()


def inlined(function: Function) -> Function:
    """Compile a part of an entry point; it is called from compiled code only, and may not make arrays.

    Without reference counts (``_nrt``) the whole solver compiles in a fifth less time and runs a tenth faster. Sums are
    in the order written: unless told so, numba would take over what the first caller allows.
    """
    return cast(Function, numba.njit(_nrt=False, fastmath=False, **_PART)(function))


def summing(function: Function) -> Function:
    """Compile like `inlined`, with sums in any order, so that long ones become vector instructions."""
    return cast(Function, numba.njit(_nrt=False, fastmath={"reassoc", "contract", "nsz"}, **_PART)(function))


@cache
def cache_folder() -> Path:
    """Folder that holds the compiled code of this very version of the sources."""
    digest = hashlib.sha256(f"{sys.version}{numba.__version__}{np.__version__}{platform.processor()}".encode())
    for pattern in _SOURCES:
        for path in sorted(_PACKAGE.glob(pattern)):
            digest.update(path.read_bytes())
    name = digest.hexdigest()[:16]
    for base in _bases():
        folder = base / name
        try:
            folder.mkdir(parents=True, exist_ok=True)
        except OSError:
            continue
        if _private(folder):
            return folder
    return Path(tempfile.mkdtemp(prefix="gibbsmin-"))


def cache_is_cold() -> bool:
    """Tell whether the next solution must first compile the solver."""
    return next(cache_folder().rglob("*.nbi"), None) is None


def _bases() -> list[Path]:
    """Folders to try, best first."""
    home = os.environ.get("XDG_CACHE_HOME") or os.environ.get("LOCALAPPDATA") or os.path.expanduser("~/.cache")
    user = os.getuid() if hasattr(os, "getuid") else os.environ.get("USERNAME", "user")
    return [Path(home) / "gibbsmin", Path(tempfile.gettempdir()) / f"gibbsmin-{user}"]


def _private(folder: Path) -> bool:
    """Compiled code is run when it is loaded: take it only from a writable folder that nobody else can write."""
    if not os.access(folder, os.W_OK):
        return False
    if not hasattr(os, "getuid"):
        return True
    status = folder.stat()
    return status.st_uid == os.getuid() and not status.st_mode & (stat.S_IWGRP | stat.S_IWOTH)
