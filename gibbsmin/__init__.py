"""gibbsmin: certified chemical equilibrium by Gibbs energy minimization.

    import gibbsmin as gm

    system = gm.System.from_elements("C H O N")
    state = gm.equilibrium(system, {"CH4": 1.0, "H2O": 3.0}, temperature="870 degC", pressure="24 bar")
    state.mole_fractions["H2"]

Names are imported on first use, so that importing the package costs nothing.
"""

from __future__ import annotations

from importlib import import_module
from typing import Any

__version__ = "0.1.0"

_HOMES = {
    "Batch": "gibbsmin.equilibrium.batch",
    "Species": "gibbsmin.species.record",
    "State": "gibbsmin.equilibrium.state",
    "System": "gibbsmin.equilibrium.system",
    "equilibria": "gibbsmin.equilibrium.solve",
    "equilibrium": "gibbsmin.equilibrium.solve",
    "interop": "gibbsmin.interop",
    "read_case": "gibbsmin.case.study",
    "read_species": "gibbsmin.species.own",
    "species": "gibbsmin.species.database",
    "sweep": "gibbsmin.studies.sweep",
}

__all__ = sorted([*_HOMES, "__version__"])


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'gibbsmin' has no attribute {name!r}")
    module = import_module(_HOMES[name])
    value = module if module.__name__ == f"gibbsmin.{name}" else getattr(module, name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    return [*globals(), *__all__]
