"""Quantities at the edge: a number is SI, a text carries its unit, and everything inside is SI float64.

Usual units resolve from the table below; everything else goes to pint, which is imported only then, because its
import would cost a small case a third of its time. Both ways agree (``tests/test_units.py``).

Pressures are absolute. A volume of gas "at normal conditions" is an amount of ideal gas, and its conditions are part
of its name: Nm3 at 0 degC and 101325 Pa (DIN 1343), Sm3 at 15 degC and 101325 Pa (ISO 13443).
"""

from __future__ import annotations

import math
import re
import sys
from functools import lru_cache
from numbers import Real
from typing import TYPE_CHECKING, Any, Final, TypeAlias

from gibbsmin.constants import ATMOSPHERE, R
from gibbsmin.errors import UnitError, nearest

if TYPE_CHECKING:
    import pint

Measurable: TypeAlias = "float | int | str | pint.Quantity[Any]"
"""What may stand for a quantity: a bare number (SI), a text with number and unit, or a pint quantity."""

NORMAL_CUBIC_METRE: Final = ATMOSPHERE / (R * 273.15)
"""Ideal gas in one cubic metre at 0 degC and 101325 Pa, [mol]."""
STANDARD_CUBIC_METRE: Final = ATMOSPHERE / (R * 288.15)
"""Ideal gas in one cubic metre at 15 degC and 101325 Pa, [mol]."""

_NONE: Final = (0.0,) * 5
_BASE: Final = {"[length]": "m", "[mass]": "kg", "[time]": "s", "[temperature]": "K", "[substance]": "mol"}
# A line a dimension: exponents of m, kg, s, K, mol, its name, and then each unit with its factor to SI.
# The pound and the inch are exact; Btu is the International Table value, rounded as pint has it.
_TABLE: Final = f"""
0 0 0 0 0    | a plain number        | 1 1  % 1e-2  ppm 1e-6
0 0 0 1 0    | a temperature         | K 1
0 0 0 0 1    | an amount of substance | mol 1  kmol 1e3  lbmol 453.59237  Nm3 {NORMAL_CUBIC_METRE!r}  Sm3 {STANDARD_CUBIC_METRE!r}
0 0 -1 0 1   | a flow of substance   |
0 1 0 0 0    | a mass                | kg 1  g 1e-3  t 1e3  lb 0.45359237
0 1 -1 0 0   | a mass flow           |
0 0 1 0 0    | a time                | s 1  min 60  h 3600  hr 3600  d 86400
1 0 0 0 0    | a length              | m 1  km 1e3  ft 0.3048
3 0 0 0 0    | a volume              | m3 1  L 1e-3  cm3 1e-6
3 0 -1 0 0   | a volume flow         |
-1 1 -2 0 0  | a pressure            | Pa 1  hPa 1e2  kPa 1e3  MPa 1e6  bar 1e5  mbar 1e2  atm {ATMOSPHERE} torr {ATMOSPHERE / 760}
-1 1 -2 0 0  | a pressure            | psi {0.45359237 * 9.80665 / 0.0254**2!r}
2 1 -2 0 0   | an energy             | J 1  kJ 1e3  MJ 1e6  GJ 1e9  cal 4.184  kcal 4184  kWh 3.6e6  Btu 1055.056
2 1 -3 0 0   | a power               | W 1  kW 1e3  MW 1e6  GW 1e9
2 1 -2 0 -1  | an energy per mole    |
2 1 -2 -1 -1 | an entropy per mole   |
2 1 -2 -1 0  | an entropy            |
"""  # noqa: E501
_ROWS: Final = [[cell.split() for cell in line.split("|")] for line in _TABLE.strip().splitlines()]
_KINDS: Final = {tuple(map(float, powers)): " ".join(name) for powers, name, _ in _ROWS}
_ATOMS: Final = {
    unit: (tuple(map(float, powers)), float(factor))
    for powers, _, units in _ROWS
    for unit, factor in zip(units[::2], units[1::2], strict=True)
}
_SCALES: Final = {"degC": (1.0, 273.15), "degF": (5.0 / 9.0, 459.67 * 5.0 / 9.0)}  # K = factor * value + zero
_NUMBER = re.compile(r"\s*(?P<number>[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)(?P<unit>.*)", re.DOTALL)
_SPELLINGS: Final = (
    (re.compile(r"(?:°|\bdeg(?:rees)?\s+)\s*(?=[CF]\b)"), "deg"),
    (re.compile("℃"), "degC"),
    (re.compile("℉"), "degF"),
    (re.compile("³"), "3"),
    (re.compile("²"), "2"),
    (re.compile(r"\b([NS])m(?:\^|\*\*)3"), r"\1m3"),
    (re.compile(r"\bbar(?:a|\s*\(a\))(?![a-z])"), "bar"),
    (re.compile(r"\bpsia\b"), "psi"),
)
_GAUGE = re.compile(r"(?i)\b(?:[km]?bar|psi|[kmh]?Pa|atm?|kgf?/cm2)(?:g\b| +g\b|\s*\(g\)|\s+gauge\b)|\bgauge\b")
_AMBIGUOUS = re.compile(r"(?i)\b(?:[km]*scf[hdm]?|[km]*scm[hdm]?|sccm|sl(?:pm|m)|standard|normal)\b")
_TON = re.compile(r"(?i)\btons?\b")
_UNSAFE = re.compile(r"\d{2}|[\d)]\s*(?:\*\*|\^)|[^\w\s°%/*^().·µμΩ-]")


def quantity(value: Measurable, unit: str, what: str) -> float:
    """Read a quantity and convert it.

    Parameters
    ----------
    value : float, int, str or pint.Quantity
        A bare number is in ``unit``; a text carries number and unit: ``"870 degC"``, ``"24 bar"``, ``"100 kmol/h"``.
    unit : str
        Unit wanted; by the rule of the project an SI unit.
    what : str
        Name of the argument or key, for messages.

    Returns
    -------
    float
        The value in ``unit``.

    Raises
    ------
    UnitError
        Not one finite number, a unit that cannot be read or is ambiguous, a gauge pressure, or a wrong dimension.

    Examples
    --------
    >>> quantity("870 degC", "K", "temperature")
    1143.15
    """
    if isinstance(value, str):
        number, typed = _split(value, unit, what)
        result = _convert(number, typed, unit, what, value)
    elif isinstance(value, Real) and not isinstance(value, bool):
        try:
            result = float(value)
        except OverflowError:
            result = math.inf
    elif _is_pint(value):
        result = _from_pint(value, unit, what)
    else:
        raise UnitError(f"{what}: expected a number in {unit} or a text like {_example(unit)!r}, got {_shown(value)}")
    if not math.isfinite(result):
        raise UnitError(f"{what}: expected a finite number, got {_shown(value)}")
    return result


def one_of(value: Measurable, units: tuple[str, ...], what: str) -> tuple[float, str]:
    """Read a quantity that may have one of several dimensions.

    Parameters
    ----------
    value : float, int, str or pint.Quantity
        As for ``quantity``; a bare number is in the first unit.
    units : tuple of str
        The units that would do, each of another dimension.
    what : str
        Name of the argument or key, for messages.

    Returns
    -------
    value : float
        The value in the unit that fits.
    unit : str
        That unit.
    """
    typed = unit_of(value)
    fitting = [unit for unit in units if typed and _dimension(typed, what, value) == _dimension(unit, what, unit)]
    if typed and not fitting:
        wanted = " or ".join(_wanted(unit, what) for unit in units)
        found = _kind(_dimension(typed, what, value))
        raise UnitError(f"{what}: {_short(value)} is {found}, expected {wanted}{_hint(typed, units[0])}")
    unit = fitting[0] if fitting else units[0]
    return quantity(value, unit, what), unit


def unit_of(value: Measurable) -> str:
    """Return the unit of a quantity as it was typed; empty for a bare number.

    Parameters
    ----------
    value : float, int, str or pint.Quantity
        The quantity.

    Returns
    -------
    str
        What follows the number: ``"degC"`` of ``"870 degC"``.
    """
    if isinstance(value, str):
        match = _NUMBER.fullmatch(value)
        return match["unit"].strip() if match else ""
    units = getattr(value, "units", "") if _is_pint(value) else ""
    return f"{units:~}" if units else ""


def from_si(value: float, unit: str) -> float:
    """Convert a value in SI to ``unit``.

    Parameters
    ----------
    value : float
        The value in the coherent SI unit of the dimension of ``unit`` (K, Pa, mol/s, J, ...).
    unit : str
        Unit wanted; ``"degC"`` and ``"degF"`` are temperatures, not differences.

    Returns
    -------
    float
        The value in ``unit``.
    """
    spelled = _spell(unit)
    if spelled in _SCALES:
        factor, zero = _SCALES[spelled]
        return (value - zero) / factor
    known = _table(spelled)
    if known is not None:
        return value / known[1]
    target = _pint_unit(unit, "unit", unit)
    return float(_registry().Quantity(value, _SI(_dimension(unit, "unit", unit))).to(target).magnitude)


def _split(text: str, unit: str, what: str) -> tuple[float, str]:
    """Take a text apart into number and unit; a unit may be left out only where none is wanted."""
    match = _NUMBER.fullmatch(text)
    if match is None:
        found = repr(_short(text)) if text.strip() else "an empty text"
        raise UnitError(f"{what}: expected a number and a unit like {_example(unit)!r}, got {found}")
    typed = match["unit"].strip()
    if re.match(r",\d", typed):
        raise UnitError(f"{what}: {_short(text)!r} has a comma; write decimals with a point, thousands without a sign")
    if not typed and _dimension(unit, what, unit) != _NONE:
        raise UnitError(
            f"{what}: {_short(text)!r} has no unit; write it like {_example(unit)!r}, or as a bare number in {unit}"
        )
    return float(match["number"]), typed or "1"


def _convert(number: float, typed: str, unit: str, what: str, value: object) -> float:
    """Convert ``number`` from ``typed`` to ``unit``; both in the table, or both by pint."""
    spelled, target = _spell(typed), _spell(unit)
    dimension, wanted = _dimension(typed, what, value), _dimension(unit, what, unit)
    if dimension != wanted:
        right = _wanted(unit, what) + _hint(typed, unit)
        raise UnitError(f"{what}: {_short(value)} is {_kind(dimension)}, expected {right}")
    if spelled == target:
        return number
    if spelled in _SCALES:
        factor, zero = _SCALES[spelled]
        return from_si(factor * number + zero, unit)
    known = _table(spelled)
    if known is not None:
        return from_si(number * known[1], unit)
    source = _registry().Quantity(number, _pint_unit(typed, what, value))
    return float(source.to(_pint_unit(unit, what, unit)).magnitude)


def _refuse(spelled: str, what: str, value: object) -> None:
    """Refuse gauge pressures and units that mean different things to different people."""
    if _GAUGE.search(spelled):
        raise UnitError(
            f"{what}: {_short(value)} is a gauge pressure; write the absolute one: add the atmospheric pressure "
            f"of the site (101325 Pa = 1.01325 bar = 14.696 psi at sea level)"
        )
    if _AMBIGUOUS.search(spelled):
        raise UnitError(
            f"{what}: {_short(value)} does not say its reference conditions, and they differ between trades; "
            f"write Nm3 (0 degC, 101325 Pa), Sm3 (15 degC, 101325 Pa) or mol"
        )
    if _TON.search(spelled):
        raise UnitError(f"{what}: {_short(value)} is ambiguous; write t (1000 kg), short_ton or long_ton")


@lru_cache(maxsize=256)
def _spell(unit: str) -> str:
    """Write the degree signs, raised digits and 'absolute' of a unit the plain way."""
    text = unit.strip()
    for pattern, plain in _SPELLINGS:
        text = pattern.sub(plain, text)
    return text


@lru_cache(maxsize=256)
def _table(unit: str) -> tuple[tuple[float, ...], float] | None:
    """Dimension and factor of a product and quotient of units of the table, or None."""
    powers: tuple[float, ...] = _NONE
    factor = 1.0
    for place, part in enumerate(unit.split("/")):
        for atom in part.split():
            if atom not in _ATOMS:
                return None
            dimension, to_SI = _ATOMS[atom]
            sign = -1 if place else 1
            factor *= to_SI**sign
            powers = tuple(power + sign * one for power, one in zip(powers, dimension, strict=True))
        if not part.strip():
            return None
    return powers, factor


def _dimension(unit: str, what: str, value: object) -> tuple[float, ...]:
    """Exponents of m, kg, s, K, mol (and of anything else pint knows) of a unit."""
    spelled = _spell(unit)
    _refuse(spelled, what, value)
    if spelled in _SCALES:
        return _ATOMS["K"][0]
    known = _table(spelled)
    if known is not None:
        return known[0]
    powers = dict(_pint_unit(unit, what, value).dimensionality)
    five = tuple(float(powers.pop(name, 0.0)) for name in _BASE)
    return five + tuple(float(power) for power in powers.values())


def _kind(dimension: tuple[float, ...]) -> str:
    """Put a dimension in words."""
    if len(dimension) > len(_BASE):
        return "of another dimension"
    return _KINDS.get(dimension, f"in {_SI(dimension)}")


def _wanted(unit: str, what: str) -> str:
    """Put in words what a quantity in ``unit`` is."""
    return _kind(_dimension(unit, what, unit)) + ("" if unit == "1" else f" ({unit})")


def _hint(typed: str, unit: str) -> str:
    """Point out what the trade writes and a unit does not say: degrees by a letter, gas by a bare volume."""
    if _dimension(unit, "unit", unit)[4] > 0.0 and _dimension(typed, "unit", typed)[:2] == (3.0, 0.0):
        return (
            "; a volume of gas is an amount only with its conditions: Nm3 (0 degC, 101325 Pa), Sm3 (15 degC, 101325 Pa)"
        )
    hints = {"C": "; degrees Celsius are written degC", "F": "; degrees Fahrenheit are written degF"}
    return hints.get(typed.strip(), "")


def _SI(dimension: tuple[float, ...]) -> str:
    """Write the coherent SI unit of a dimension, as pint reads it."""
    powers = zip(_BASE.values(), dimension, strict=False)
    return " * ".join(f"{name}**{power:g}" for name, power in powers if power)


def _example(unit: str) -> str:
    """Give a text that would do where ``unit`` is wanted."""
    usual = {"K": "870 degC", "Pa": "24 bar", "mol/s": "100 kmol/h", "J/mol": "-74.6 kJ/mol", "1": "5"}
    return usual.get(unit, f"5 {unit}")


def _shown(value: object) -> str:
    return f"{type(value).__name__} {_short(repr(value))}"


def _short(value: object) -> str:
    text = str(value)
    return text if len(text) <= 60 else text[:57] + "..."


def _is_pint(value: Any) -> bool:
    """Tell a pint quantity; if pint was never imported, there is none."""
    module = sys.modules.get("pint")
    return module is not None and isinstance(value, module.Quantity)


def _from_pint(value: Any, unit: str, what: str) -> float:
    """Convert a quantity by its own registry."""
    try:
        converted = value.to(unit or "1").magnitude
    except Exception as error:
        wanted = _kind(_dimension(unit, what, unit))
        raise UnitError(f"{what}: {_short(value)} cannot be converted to {unit}; expected {wanted}") from error
    if not isinstance(converted, Real):
        raise UnitError(f"{what}: expected one number, got {_shown(value)}")
    return float(converted)


@lru_cache(maxsize=1)
def _registry() -> Any:
    """Make the unit registry, once, when the table does not suffice."""
    import pint

    registry: Any = pint.UnitRegistry(cache_folder=None)
    registry.define(f"normal_cubic_metre = {NORMAL_CUBIC_METRE!r} * mole")
    registry.define("pound_mole = 453.59237 * mole")
    registry.define(f"standard_cubic_metre = {STANDARD_CUBIC_METRE!r} * mole")
    return registry


def _pint_unit(unit: str, what: str, value: object) -> Any:
    """Hand a unit to pint, with what could run long or mean something else kept out."""
    text, registry = _spell(unit), _registry()
    try:
        if len(text) > 60 or _UNSAFE.search(text):
            raise ValueError("more than a unit")
        for name, long_name in (
            ("Nm3", "normal_cubic_metre"),
            ("Sm3", "standard_cubic_metre"),
            ("lbmol", "pound_mole"),
        ):
            text = re.sub(rf"\b{name}\b", long_name, text)
        text = re.sub(r"(?<=[A-Za-z])([23])\b", r"**\1", text)  # m3 is how the trade writes m**3
        return registry.Unit(text)
    except Exception as error:  # pint raises many kinds, some of them from the tokenizer
        known = [*_ATOMS, *_SCALES, "kmol/h", "kg/h", "Nm3/h", "kJ/mol"]
        message = f"{what}: the unit {_short(unit)!r} of {_short(value)} cannot be read{nearest(unit, known)}"
        raise UnitError(message) from error
