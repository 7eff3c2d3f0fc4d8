"""gibbsmin: certified chemical equilibrium by Gibbs energy minimization.

    import gibbsmin as gm

    system = gm.System.from_elements("C H O N")
    state = gm.equilibrium(system, {"CH4": 1.0, "H2O": 3.0}, temperature="870 degC", pressure="24 bar")
    state.mole_fractions["H2"]

Names are imported on first use, so that importing the package costs nothing.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from gibbsmin import interop as interop
    from gibbsmin.case.read import read_case as read_case
    from gibbsmin.practice.reactions.reactions import Reaction as Reaction
    from gibbsmin.practice.reactions.reactions import reaction as reaction
    from gibbsmin.results.result import Result as Result
    from gibbsmin.states.batch import Batch as Batch
    from gibbsmin.states.solve import equilibria as equilibria
    from gibbsmin.states.solve import equilibrium as equilibrium
    from gibbsmin.states.state import State as State
    from gibbsmin.states.system import System as System
    from gibbsmin.studies.sweep import sweep as sweep
    from gibbsmin.thermo.database import species as species
    from gibbsmin.thermo.own import read_species as read_species
    from gibbsmin.thermo.record import Species as Species

__version__ = "0.1.0"

_HOMES = {
    "Batch": "gibbsmin.states.batch",
    "Reaction": "gibbsmin.practice.reactions.reactions",
    "Result": "gibbsmin.results.result",
    "Species": "gibbsmin.thermo.record",
    "State": "gibbsmin.states.state",
    "System": "gibbsmin.states.system",
    "equilibria": "gibbsmin.states.solve",
    "equilibrium": "gibbsmin.states.solve",
    "interop": "gibbsmin.interop",
    "reaction": "gibbsmin.practice.reactions.reactions",
    "read_case": "gibbsmin.case.read",
    "read_species": "gibbsmin.thermo.own",
    "species": "gibbsmin.thermo.database",
    "sweep": "gibbsmin.studies.sweep",
}

__all__ = [
    "Batch",
    "Reaction",
    "Result",
    "Species",
    "State",
    "System",
    "__version__",
    "equilibria",
    "equilibrium",
    "interop",
    "reaction",
    "read_case",
    "read_species",
    "species",
    "sweep",
]


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'gibbsmin' has no attribute {name!r}")
    module = import_module(_HOMES[name])
    value = module if module.__name__ == f"gibbsmin.{name}" else getattr(module, name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    return [*globals(), *__all__]
