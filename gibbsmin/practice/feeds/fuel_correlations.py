"""Heating values of fuels by correlation with their analysis.

Mass percent of dry fuel and MJ/kg of dry fuel, higher value, unless said. Marked from memory: coefficients and stated
errors that were not read in the source. Ranges are those of the fuels that a correlation was fitted to where its author
gives them, and else the kind of fuel it is for, put in terms of oxygen and hydrogen (common practice, no source).
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Final, Literal

from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.fuel_analysis import AS_RECEIVED, DRY, DRY_ASH_FREE, Analysis, Basis

CorrelationName = Literal[
    "Channiwala and Parikh",
    "Dulong",
    "Boie",
    "Boie, lower",
    "Milne",
    "Institute of Gas Technology",
    "Mott and Spooner",
    "Friedl",
    "Sheng and Azevedo",
    "Parikh, proximate",
    "ISO 8217",
    "ISO 8217, lower",
]

DEFAULT: Final[CorrelationName] = "Channiwala and Parikh"

Percent = Mapping[str, float]


@dataclass(frozen=True)
class Correlation:
    """A published way from an analysis to a heating value.

    Attributes
    ----------
    source : str
        Author and year.
    fuels : str
        What it is for.
    error : str
        Error that its author states, or that none is known here.
    value : callable
        Heating value, [MJ/kg], from the quantities of `measures`.
    ranges : mapping of str to tuple of float
        Least and most of what it was fitted to, by the names of `measures`.
    needs : tuple of str
        Measures beyond the ultimate analysis.
    basis : Basis
        Of the analysis and of the value.
    lower : bool
        Whether it gives the lower value.
    """

    source: str
    fuels: str
    error: str
    value: Callable[[Percent], float]
    ranges: Mapping[str, tuple[float, float]] = field(default_factory=dict)
    needs: tuple[str, ...] = ()
    basis: Basis = DRY
    lower: bool = False

    def estimate(self, fuel: Analysis) -> float:
        """Heating value of a fuel on the correlation's own basis.

        Parameters
        ----------
        fuel : Analysis

        Returns
        -------
        float
            [J/kg].

        Raises
        ------
        FeedError
            The correlation needs what the analysis does not give, or finds no heat in it.
        """
        known = measures(fuel, self.basis)
        missing = [name for name in self.needs if name not in known]
        if missing:
            raise FeedError(f"the correlation of {self.source} needs {' and '.join(missing)} of the fuel")
        found = 1e6 * self.value(known)
        if not found > 0.0:
            raise FeedError(
                f"the correlation of {self.source} finds no heat in this fuel ({found / 1e6:.3g} MJ/kg); state its "
                "heating value"
            )
        return found

    def outside(self, fuel: Analysis) -> list[str]:
        """Say in what a fuel lies outside the range of the correlation; empty where it does not."""
        known = measures(fuel, self.basis)
        return [
            f"{name} {known[name]:.4g} (range {low:g} to {high:g})"
            for name, (low, high) in self.ranges.items()
            if name in known and not low <= known[name] <= high
        ]


def measures(fuel: Analysis, basis: Basis) -> dict[str, float]:
    """Gather what correlations are made of, by name.

    Parameters
    ----------
    fuel : Analysis
    basis : Basis
        As received or dry.

    Returns
    -------
    dict of str to float
        Mass percent of C, H, O, N, S, ``ash``, ``moisture`` on the basis; ``O daf`` and ``H daf`` of dry ash-free
        fuel; where they are known, ``volatile matter`` and ``fixed carbon`` of dry fuel and ``density`` [kg/m3].
    """
    dry = fuel.per_kilogram(DRY) if basis == AS_RECEIVED else 1.0
    known = {symbol: fuel.percent(symbol, basis) for symbol in ("C", "H", "O", "N", "S")}
    known["ash"] = fuel.minerals * dry
    known["moisture"] = fuel.moisture if basis == AS_RECEIVED else 0.0
    known |= {f"{symbol} daf": fuel.percent(symbol, DRY_ASH_FREE) for symbol in ("O", "H")}
    others = {
        "volatile matter": fuel.volatile_matter, "fixed carbon": fuel.fixed_carbon, "density": fuel.density,
    }  # fmt: skip
    return known | {name: value for name, value in others.items() if value is not None}


def _linear(**factors: float) -> Callable[[Percent], float]:
    """Sum of factors times percentages."""
    return lambda p: sum(factor * p[name] for name, factor in factors.items())


def _mott_spooner(p: Percent) -> float:
    oxygen = 0.145 if p["O"] <= 15.0 else 0.153 - 0.00072 * p["O"]
    return 0.336 * p["C"] + 1.419 * p["H"] + 0.0942 * p["S"] - oxygen * p["O"]


def _friedl(p: Percent) -> float:
    C, H, N = p["C"], p["H"], p["N"]
    return (3.55 * C**2 - 232.0 * C - 2230.0 * H + 51.2 * C * H + 131.0 * N + 20600.0) / 1000.0


def _sheng_azevedo(p: Percent) -> float:
    C, H = p["C"], p["H"]
    return -1.3675 + 0.3137 * C + 0.7009 * H + 0.0318 * (100.0 - C - H - p["ash"])


def _parikh_proximate(p: Percent) -> float:
    return 0.3536 * p["fixed carbon"] + 0.1559 * p["volatile matter"] - 0.0078 * p["ash"]


def _oil(p: Percent) -> float:
    fuel = 1.0 - 0.01 * (p["moisture"] + p["ash"] + p["S"])
    return (52.190 - 8.802e-6 * p["density"] ** 2) * fuel + 0.0942 * p["S"]


def _oil_lower(p: Percent) -> float:
    fuel = 1.0 - 0.01 * (p["moisture"] + p["ash"] + p["S"])
    made = (46.704 - 8.802e-6 * p["density"] ** 2 + 3.167e-3 * p["density"]) * fuel
    return made + 0.01 * (9.420 * p["S"] - 2.449 * p["moisture"])


_BIOMASS: Final = {"O daf": (30.0, 60.0), "H daf": (3.0, 10.0)}
_COAL: Final = {"O daf": (0.0, 30.0), "H daf": (0.0, 8.0)}
_OIL: Final = {"O daf": (0.0, 2.0), "H daf": (8.0, 16.0)}
_UNKNOWN: Final = "no error known here"

CORRELATIONS: Final[Mapping[CorrelationName, Correlation]] = {
    "Channiwala and Parikh": Correlation(
        "Channiwala and Parikh 2002",
        "gases, liquids and solids",
        "mean error 1.45 %",
        _linear(C=0.3491, H=1.1783, S=0.1005, O=-0.1034, N=-0.0151, ash=-0.0211),
        {
            "C": (0.0, 92.25),
            "H": (0.43, 25.15),
            "O": (0.0, 50.0),
            "N": (0.0, 5.6),
            "S": (0.0, 94.1),
            "ash": (0.0, 71.4),
        },
    ),
    "Dulong": Correlation(
        "Dulong, coefficients of Perry's Handbook",
        "coal",
        "11 % too low for wood; no error for coal known here",
        _linear(C=0.3383, H=1.443, O=-1.443 / 8.0, S=0.0942),
        {**_COAL, "O": (0.0, 15.0)},
    ),
    "Boie": Correlation(
        "Boie 1953 (as in Annamalai et al. 1987, from memory)",
        "solids and liquids",
        _UNKNOWN,
        _linear(C=0.3516, H=1.16225, O=-0.1109, N=0.0628, S=0.10465),
    ),
    "Boie, lower": Correlation(
        "Boie 1953",
        "solids and liquids",
        _UNKNOWN,
        _linear(C=0.34835, H=0.9387, O=-0.1080, N=0.0628, S=0.10467, moisture=-0.02449),
        basis=AS_RECEIVED,
        lower=True,
    ),
    "Milne": Correlation(
        "Milne, Brennan and Glenn 1990 (from memory)",
        "biomass",
        _UNKNOWN,
        _linear(C=0.341, H=1.322, O=-0.12, N=-0.12, S=0.0686, ash=-0.0153),
        _BIOMASS,
    ),
    "Institute of Gas Technology": Correlation(
        "Institute of Gas Technology 1978 (from memory)",
        "coal",
        _UNKNOWN,
        _linear(C=0.341, H=1.323, S=0.0685, ash=-0.0153, O=-0.1194, N=-0.1194),
        _COAL,
    ),
    "Mott and Spooner": Correlation(
        "Mott and Spooner 1940 (from memory)",
        "coal to peat",
        _UNKNOWN,
        _mott_spooner,
        {"O daf": (0.0, 40.0), "H daf": (0.0, 8.0)},
    ),
    "Friedl": Correlation(
        "Friedl et al. 2005 (from memory)",
        "biomass from plants",
        "standard error 0.34 MJ/kg (from memory)",
        _friedl,
        _BIOMASS,
    ),
    "Sheng and Azevedo": Correlation(
        "Sheng and Azevedo 2005 (from memory)",
        "biomass",
        "nine in ten within 5 % (from memory)",
        _sheng_azevedo,
        _BIOMASS,
    ),
    "Parikh, proximate": Correlation(
        "Parikh et al. 2005 (from memory)",
        "solids",
        "mean error 3.7 % (from memory)",
        _parikh_proximate,
        {"fixed carbon": (1.0, 91.5), "volatile matter": (0.92, 90.6), "ash": (0.12, 77.7)},
        ("volatile matter", "fixed carbon"),
    ),
    "ISO 8217": Correlation(
        "ISO 8217 (annex, from memory)",
        "residual fuel oils",
        _UNKNOWN,
        _oil,
        _OIL,
        ("density",),
        AS_RECEIVED,
    ),
    "ISO 8217, lower": Correlation(
        "ISO 8217 (annex, from memory)",
        "residual fuel oils",
        _UNKNOWN,
        _oil_lower,
        _OIL,
        ("density",),
        AS_RECEIVED,
        lower=True,
    ),
}
"""Correlations by the name that a case gives them."""
