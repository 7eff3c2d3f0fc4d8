"""The numbers of a flue gas: analysis, volumes, pollutants, dew points, losses and efficiency.

Two states stand behind them: what the fire settles to, whose feeds are asked for fuel and air, and the frozen one whose
composition goes to the stack, because below some 1000 °C gas and solids no longer follow equilibrium. Gas volumes
are those of an ideal gas at 0 °C and 101325 Pa.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import STANDARD_TEMPERATURE
from gibbsmin.errors import InputError
from gibbsmin.practice.feeds.heating import NORMAL_MOLAR_VOLUME
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import ratio
from gibbsmin.practice.flue_gas.dew_points import dew_points
from gibbsmin.practice.flue_gas.emissions import AIR_OXYGEN, ENRICHED, check_oxygen
from gibbsmin.practice.flue_gas.firing import Firing, firing
from gibbsmin.practice.flue_gas.losses import SIEGERT, Stack, losses
from gibbsmin.practice.flue_gas.pollutants import Basis, dust, pollutants, spread
from gibbsmin.thermo.database import load

Floats = NDArray[np.float64]

_FROZEN_SO3: Final = 900.0 + 273.15
"""Temperature below which SO3 of equilibrium is not reached, [K]; common practice, no source."""


@dataclass(frozen=True)
class FlueGasSetting:
    """What a case says of its flue gas.

    Attributes
    ----------
    reference_oxygen : float or None
        O2 that mass concentrations refer to, dry mole fraction, [-]; None to leave them as they are.
    air_oxygen : float
        O2 of dry air in the reference formula, mole fraction, [-].
    only_above_reference : bool
        Whether gas with less O2 than the reference stays as it is.
    stack_temperature : float, array (states,) or None
        Of the gas that leaves, [K]; None for no losses.
    stack_pressure : float, array (states,) or None
        Of the gas that leaves, [Pa]; None for that of the settled mixture.
    reference_temperature : float
        Temperature from which losses count, [K].
    wall_loss : float
        Heat lost through walls, per lower heating value, [-].
    siegert : str
        Fuel of Siegert's formula, for comparison; empty for none.
    dust_carry_over : float or None
        Share of all solids that leaves with the gas, [-]; None for no dust.
    sulfur_trioxide_share : float or None
        Share of SOx that is SO3 for the acid dew point, [-]; None for that of the frozen gas.
    recirculated : float or array (states,)
        Share of all flue gas that goes back to the fire, [-]; the feeds are then the fresh ones only.

    Raises
    ------
    InputError
        A value that cannot be.
    """

    reference_oxygen: float | None = None
    air_oxygen: float = AIR_OXYGEN
    only_above_reference: bool = False
    stack_temperature: float | Floats | None = None
    stack_pressure: float | Floats | None = None
    reference_temperature: float = STANDARD_TEMPERATURE
    wall_loss: float = 0.0
    siegert: str = ""
    dust_carry_over: float | None = None
    sulfur_trioxide_share: float | None = None
    recirculated: float | Floats = 0.0

    def __post_init__(self) -> None:
        check_oxygen(self.reference_oxygen, self.air_oxygen)
        for name in ("wall_loss", "dust_carry_over", "sulfur_trioxide_share"):
            value = getattr(self, name)
            if value is not None and not 0.0 <= value <= 1.0:
                raise InputError(f"{name}: expected a share from 0 to 1, got {value:g}")
        for name in ("stack_temperature", "stack_pressure", "reference_temperature"):
            value = getattr(self, name)
            if value is not None and np.any(np.asarray(value) <= 0.0):
                raise InputError(f"{name}: expected above zero, in K or Pa, got {np.min(value):g}")
        back = np.asarray(self.recirculated)
        if np.any((back < 0.0) | (back >= 1.0)):
            raise InputError(f"recirculated: expected a share from 0 to below 1, got {back.min():g} to {back.max():g}")
        if self.siegert and self.siegert not in SIEGERT:
            raise InputError(f"siegert: expected one of {', '.join(SIEGERT)}, got {self.siegert!r}")


def flue_gas(settled: Settled, setting: FlueGasSetting, frozen: Settled) -> list[KeyFigure]:
    """All numbers of a flue gas.

    Parameters
    ----------
    settled : Settled
        Feeds and what the fire settles to.
    setting : FlueGasSetting
        What the case says of its flue gas.
    frozen : Settled
        The mixture whose composition leaves; it may be ``settled`` itself.

    Returns
    -------
    list of KeyFigure
        Without fuel and oxidant among the feeds, composition, concentrations and dew points only.
    """
    back = np.asarray(setting.recirculated)
    gases = frozenset(frozen.gases)
    leaving = replace(
        frozen, amounts={name: (1.0 - back) * n if name in gases else n for name, n in frozen.amounts.items()}
    )
    fire = firing(settled, setting.air_oxygen)
    enriched = np.zeros(len(settled.temperature), bool) if fire is None else fire.oxidant_oxygen > ENRICHED
    basis = Basis(
        setting.reference_oxygen,
        setting.air_oxygen,
        setting.only_above_reference,
        enriched,
        None if fire is None else fire.lower,
    )
    pressure = _spread(setting.stack_pressure, settled.pressure)
    figures = _analysis(leaving)
    if fire is not None:
        figures += _fire(fire, leaving, enriched)
        if np.any(back > 0.0):
            figures.append(_mixed_oxidant(settled, frozen, fire, back))
        figures += _volumes(fire, leaving)
    if not np.array_equal(settled.temperature, frozen.temperature, equal_nan=True):
        figures += _unfrozen(settled)
    figures += pollutants(leaving, basis)
    if setting.reference_oxygen is not None:
        given = _spread(setting.reference_oxygen, settled.temperature)
        note = "Dry; what the permit refers to, given and not calculated."
        figures.append(KeyFigure("reference_oxygen", "reference O2, dry", given, "1", "%", note))
    if setting.dust_carry_over is not None:
        figures += dust(leaving, basis, setting.dust_carry_over)
    figures += _dew(leaving, pressure, setting.sulfur_trioxide_share)
    if setting.stack_temperature is None:
        return figures
    T = _spread(setting.stack_temperature, settled.temperature)
    figures.append(KeyFigure("stack_temperature", "stack", T, "K", "degC", "Given, not calculated."))
    if fire is not None and fire.lower is not None and fire.higher is not None:
        stack = Stack(T, pressure, setting.reference_temperature, setting.wall_loss, setting.siegert)
        figures += losses(leaving, fire.lower, fire.higher, stack)
    return figures


def _analysis(leaving: Settled) -> list[KeyFigure]:
    """Give what an analyser shows."""
    at = f"composition of equilibrium at {spread(leaving.temperature)}"
    return [
        KeyFigure("oxygen_dry", "O2 dry", leaving.dry("O2"), "1", "%", f"By volume, {at}."),
        KeyFigure("carbon_dioxide_dry", "CO2 dry", leaving.dry("CO2"), "1", "%", f"By volume, {at}."),
        KeyFigure("water_wet", "H2O wet", leaving.wet("H2O"), "1", "%", f"By volume, {at}."),
    ]


def _fire(fire: Firing, leaving: Settled, enriched: NDArray[np.bool_]) -> list[KeyFigure]:
    """Air ratio and the checks of a fuel analysis."""
    fed = ratio(fire.free_oxygen, fire.need)
    by_gas = np.where(enriched, np.nan, fire.air_ratio(leaving.dry("O2")))
    most = ratio(fire.element("C"), fire.dry_gas)
    figures = [
        KeyFigure(
            "air_ratio_fed", "air ratio, by feeds", fed, note="Free O2 of the oxidants over the need of the fuel."
        ),
        KeyFigure(
            "air_ratio_by_oxygen",
            "air ratio, by dry O2",
            by_gas,
            note="As if burnt completely with air; differs from that by feeds where it was not.",
        ),
        KeyFigure(
            "carbon_dioxide_most",
            "CO2max dry",
            most,
            "1",
            "%",
            "Complete combustion with air and no air left over; CO2 of limestone or air not counted.",
        ),
        KeyFigure(
            "oxidant_oxygen",
            "O2 in oxidant, dry",
            fire.oxidant_oxygen,
            "1",
            "%",
            f"Above {100.0 * ENRICHED:.3g} % it is no air: compare by mass per energy.",
        ),
    ]
    if fire.lower is None or fire.higher is None:
        return figures
    carbon = fire.element("C") * load().get("CO2").molar_mass
    factor = fire.dry_gas * NORMAL_MOLAR_VOLUME
    return [
        *figures,
        KeyFigure("fuel_heat", "fuel heat, LHV", fire.lower, "W" if leaving.is_flow else "J"),
        KeyFigure(
            "fuel_carbon_dioxide",
            "CO2 of fuel per LHV",
            ratio(carbon, fire.lower),
            "kg/J",
            "kg/GJ",
            "All fuel carbon burnt. Usual (IPCC 2006, from memory): natural gas 56, oil 77, hard coal 95, wood 112.",
        ),
        KeyFigure(
            "fuel_factor",
            "fuel factor, dry gas per HHV",
            ratio(factor, fire.higher),
            "m3/J",
            "Nm3/GJ",
            "No air left over. EPA Method 19 (from memory, turned to 0 degC): gas 218, oil 230, coal 245.",
        ),
    ]


def _mixed_oxidant(settled: Settled, frozen: Settled, fire: Firing, back: Floats) -> KeyFigure:
    """O2 of the oxidants and the returned gas together; what hydrogen came back besides that of acids is water."""
    came = settled.element("H") - settled.fed_element("H")
    other = frozen.element("H", [name for name in frozen.gases if name != "H2O"])
    returned = back * frozen.dry_gas + np.maximum(0.0, came - back * other) / 2.0
    oxygen = fire.free_oxygen + back * frozen.amount("O2")
    value = ratio(oxygen, fire.oxidant(dry=False) + returned)
    note = "Oxidants and returned flue gas together, as the burner has them."
    return KeyFigure("oxidant_oxygen_mixed", "O2 at burner wet", value, "1", "%", note)


def _unfrozen(settled: Settled) -> list[KeyFigure]:
    """Give what the fire itself holds of gases that slow down on the way to the stack."""
    note = f"Equilibrium at {spread(settled.temperature)}: what the fire tends to, not what the stack has."
    return [
        KeyFigure(f"{name.lower()}_settled", f"{name} settled, wet", settled.wet(name), "1", "ppmv", note)
        for name in ("NO", "CO")
        if name in settled.amounts
    ]


def _volumes(fire: Firing, leaving: Settled) -> list[KeyFigure]:
    """Air and flue gas per fuel."""
    if fire.normal_volume is not None:
        per, whole, unit, shown = "Nm3 of fuel", fire.normal_volume, "1", "m3/m3"
    else:
        per, whole, unit, shown = "kg of fuel", fire.mass, "m3/kg", "Nm3/kg"
    rows = (
        ("air_needed", "air needed, dry", fire.dry_air, f"O2 of air {100.0 * fire.air_oxygen:.4g} %"),
        ("oxidant_wet", "oxidant, wet", fire.oxidant(dry=False), "as fed"),
        ("flue_gas_wet", "flue gas, wet", leaving.gas, "what leaves"),
        ("flue_gas_dry", "flue gas, dry", leaving.dry_gas, "what leaves"),
    )
    return [
        KeyFigure(
            name, label, ratio(n * NORMAL_MOLAR_VOLUME, whole), unit, shown, f"Per {per}, {what}; 0 degC, 101325 Pa."
        )
        for name, label, n, what in rows
    ]


def _dew(leaving: Settled, pressure: Floats, share: float | None) -> list[KeyFigure]:
    """Dew points, with the SO3 that is given or that of the frozen gas."""
    if share is not None:
        sulfuric = share * leaving.wet("SO2", "SO3", "H2SO4")
        basis = f"{100.0 * share:.3g} % of SOx, as given"
    else:
        sulfuric = leaving.wet("SO3", "H2SO4")
        basis = f"of equilibrium at {spread(leaving.temperature)}"
        if (leaving.temperature < _FROZEN_SO3).any():
            basis += ", far too high where that is below 900 degC"
    others = {name: leaving.wet(name) for name in ("HCl", "HBr", "HNO3") if name in leaving.amounts}
    return dew_points(pressure, leaving.wet("H2O"), sulfuric, others, basis)


def _spread(value: float | Floats | None, default: Floats) -> Floats:
    """Read a setting as an array over the states."""
    return np.broadcast_to(np.asarray(default if value is None else value, float), default.shape)
