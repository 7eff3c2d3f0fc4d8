"""Chemical elements and formulas: symbols, atomic weights, and the reading of names.

Atomic weights: abridged standard atomic weights of the IUPAC Commission on Isotopic Abundances and Atomic
Weights (Prohaska et al., Pure Appl. Chem. 94 (2022) 573, doi:10.1515/pac-2019-0603; 2021 table), the conventional
value where an interval is given; D is the mass of the nuclide. Elements without a standard weight are left out.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

from gibbsmin.errors import FormulaError, nearest

# One line a period; g/mol.
_TABLE: Final = """
H 1.0080 D 2.01410177811 He 4.002602
Li 6.94 Be 9.0121831 B 10.81 C 12.011 N 14.007 O 15.999 F 18.998403162 Ne 20.1797
Na 22.98976928 Mg 24.305 Al 26.9815384 Si 28.085 P 30.973761998 S 32.06 Cl 35.45 Ar 39.95
K 39.0983 Ca 40.078 Sc 44.955907 Ti 47.867 V 50.9415 Cr 51.9961 Mn 54.938043 Fe 55.845 Co 58.933194 Ni 58.6934
Cu 63.546 Zn 65.38 Ga 69.723 Ge 72.630 As 74.921595 Se 78.971 Br 79.904 Kr 83.798
Rb 85.4678 Sr 87.62 Y 88.905838 Zr 91.224 Nb 92.90637 Mo 95.95 Ru 101.07 Rh 102.90549 Pd 106.42 Ag 107.8682
Cd 112.414 In 114.818 Sn 118.710 Sb 121.760 Te 127.60 I 126.90447 Xe 131.293
Cs 132.90545196 Ba 137.327 La 138.90547 Ce 140.116 Pr 140.90766 Nd 144.242 Sm 150.36 Eu 151.964 Gd 157.249
Tb 158.925354 Dy 162.500 Ho 164.930329 Er 167.259 Tm 168.934219 Yb 173.045 Lu 174.9668
Hf 178.486 Ta 180.94788 W 183.84 Re 186.207 Os 190.23 Ir 192.217 Pt 195.084 Au 196.966570
Hg 200.592 Tl 204.38 Pb 207.2 Bi 208.98040 Th 232.0377 Pa 231.03588 U 238.02891
"""
_WORDS = _TABLE.split()
ATOMIC_WEIGHT: Final[dict[str, float]] = {
    symbol: float(weight) * 1e-3 for symbol, weight in zip(_WORDS[::2], _WORDS[1::2], strict=True)
}
"""Atomic weight of each element, [kg/mol]."""

ELECTRON_MASS: Final = 5.48579909065e-7
"""Molar mass of the electron, [kg/mol] (CODATA 2018)."""

CHARGE: Final = "charge"
"""Name of the row that balances electric charge beside the elements."""

PHASES: Final = {"": "gas", "(s)": "solid", "(l)": "liquid"}
"""Phase that a name's ending stands for."""

_TOKEN = re.compile(r"([A-Z][a-z]?)|(\()|(\))|(\d+(?:\.\d+)?|\.\d+)")
_NAME = re.compile(r"(?P<formula>.*?)(?P<ending>\([sl]\))?(?::(?P<form>\S+))?")


@dataclass(frozen=True, slots=True)
class Name:
    """A species name taken apart: ``formula``, ``phase`` (gas, liquid, solid) and ``form`` (may be empty)."""

    formula: str
    phase: str
    form: str


def split_name(name: str) -> Name:
    """Take a species name apart into formula, phase and form.

    Parameters
    ----------
    name : str
        ``FORMULA`` for a gas, ``FORMULA(s)`` or ``FORMULA(l)`` for a condensed species, then ``:form`` if needed.

    Returns
    -------
    Name

    Examples
    --------
    >>> split_name("C(s):graphite")
    Name(formula='C', phase='solid', form='graphite')
    """
    match = _NAME.fullmatch(name)
    if match is None or not match["formula"]:
        raise FormulaError(f"{name!r} is not a species name; expected FORMULA, FORMULA(s) or FORMULA(l), then :form")
    return Name(match["formula"], PHASES[match["ending"] or ""], match["form"] or "")


def parse_formula(formula: str) -> tuple[dict[str, float], int]:
    """Read a chemical formula.

    Parameters
    ----------
    formula : str
        Symbols with counts, groups in round brackets, trailing signs for the charge (``SO4--``). ``e-`` is the
        electron. Counts may be fractions (``Fe0.947O``).

    Returns
    -------
    elements : dict of str to float
        Atoms of each element in one formula unit, in the order of the formula.
    charge : int
        Electric charge in units of e.

    Raises
    ------
    FormulaError
        An unknown element, an unbalanced bracket, a count of zero, or a character that does not belong.

    Examples
    --------
    >>> parse_formula("Ca(OH)2")
    ({'Ca': 1.0, 'O': 2.0, 'H': 2.0}, 0)
    >>> parse_formula("SO4--")
    ({'S': 1.0, 'O': 4.0}, -2)
    """
    if formula == "e-":
        return {}, -1
    body = formula.rstrip("+-")
    signs = formula[len(body) :]
    if "+" in signs and "-" in signs:
        raise FormulaError(f"formula {formula!r} has signs of both kinds")
    charge = signs.count("+") - signs.count("-")
    stack: list[dict[str, float]] = [{}]
    last: dict[str, float] = {}
    position = 0
    while position < len(body):
        match = _TOKEN.match(body, position)
        if match is None:
            raise FormulaError(f"formula {formula!r}: {body[position]!r} does not belong in a formula")
        symbol, opening, closing, count = match.groups()
        if symbol is not None and symbol not in ATOMIC_WEIGHT and len(symbol) == 2 and symbol[0] in ATOMIC_WEIGHT:
            raise FormulaError(f"formula {formula!r}: there is no element {symbol!r}{nearest(symbol, ATOMIC_WEIGHT)}")
        if symbol is not None and symbol not in ATOMIC_WEIGHT:
            raise FormulaError(f"formula {formula!r}: there is no element {symbol!r}")
        if count is not None:
            if not last or float(count) == 0.0:
                raise FormulaError(f"formula {formula!r}: the count {count} stands in the wrong place or is zero")
            for element, atoms in last.items():
                stack[-1][element] += atoms * (float(count) - 1.0)
            last = {}
        elif opening:
            stack.append({})
            last = {}
        else:
            if closing and (len(stack) == 1 or not stack[-1]):
                raise FormulaError(f"formula {formula!r}: a bracket is empty or was never opened")
            last = stack.pop() if closing else {str(symbol): 1.0}
            for element, atoms in last.items():
                stack[-1][element] = stack[-1].get(element, 0.0) + atoms
        position = match.end()
    if len(stack) > 1 or not stack[0]:
        raise FormulaError(
            f"formula {formula!r}: a bracket is not closed" if len(stack) > 1 else "the formula is empty"
        )
    return stack[0], charge


def molar_mass(elements: Mapping[str, float], charge: int = 0) -> float:
    """Molar mass of a formula unit.

    Parameters
    ----------
    elements : mapping of str to float
        Atoms of each element, [-].
    charge : int
        Electric charge, [-].

    Returns
    -------
    float
        Molar mass, [kg/mol].
    """
    return sum(ATOMIC_WEIGHT[element] * atoms for element, atoms in elements.items()) - charge * ELECTRON_MASS
