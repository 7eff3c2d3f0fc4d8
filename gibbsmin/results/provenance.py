"""What a result rests on: the case, the data, the constants, the versions."""

from __future__ import annotations

import platform
from datetime import UTC, datetime
from importlib.metadata import PackageNotFoundError, version
from typing import Any, Final

from gibbsmin.constants import STANDARD_PRESSURE, R
from gibbsmin.thermo.database import load

_PACKAGES: Final = ("numpy", "numba", "pandas", "pint", "pydantic", "xarray")


def package_version(name: str) -> str:
    """Version of an installed package; a word where it is used without having been installed."""
    try:
        return version(name)
    except PackageNotFoundError:
        return "not installed"


def provenance(case_sha256: str) -> dict[str, Any]:
    """Say what is needed to get the same numbers again.

    Parameters
    ----------
    case_sha256 : str
        Checksum of the case file as read.

    Returns
    -------
    dict
        JSON-safe; keys of the result contract.
    """
    return {
        "case_sha256": case_sha256,
        "data_version": load().version,
        "constants": {
            "source": "SI 2019 (exact), CODATA 2018",
            "gas_constant": R,
            "standard_pressure": STANDARD_PRESSURE,
        },
        "created": datetime.now(UTC).replace(microsecond=0).isoformat(),
        "packages": {
            "python": platform.python_version(),
            **{name: package_version(name) for name in _PACKAGES},
        },
    }
