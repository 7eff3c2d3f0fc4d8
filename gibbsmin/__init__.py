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
    from gibbsmin import interop
    from gibbsmin.case.study import read_case
    from gibbsmin.equilibrium.batch import Batch
    from gibbsmin.equilibrium.solve import equilibria, equilibrium
    from gibbsmin.equilibrium.state import State
    from gibbsmin.equilibrium.system import System
    from gibbsmin.species.own import read_species
    from gibbsmin.species.record import Species
    from gibbsmin.studies.sweep import sweep

__version__ = "0.1.0"
