"""Physical constants in SI units.

Sources: SI 2019 (BIPM, SI Brochure, 9th ed., 2019) for the exact k and N_A; CODATA 2018 agrees with it.
The standard pressure of 1 bar and the reference temperature are IUPAC's (Green Book, 3rd ed., 2007).
"""

from typing import Final

BOLTZMANN: Final = 1.380649e-23  # J/K, exact
AVOGADRO: Final = 6.02214076e23  # 1/mol, exact
R: Final = BOLTZMANN * AVOGADRO  # J/mol/K, exact: 8.31446261815324

STANDARD_PRESSURE: Final = 1.0e5  # Pa
STANDARD_TEMPERATURE: Final = 298.15  # K
ATMOSPHERE: Final = 101325.0  # Pa, exact
