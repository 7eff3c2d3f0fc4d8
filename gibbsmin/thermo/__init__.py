"""Thermochemical data: species records, standard-state functions, the database and its data files.

Names of species: ``FORMULA`` for a gas, ``FORMULA(s)`` or ``FORMULA(l)`` condensed, then ``:form`` where the formula
does not say enough.

1. Proper capitals, the metal or more electropositive element first, groups in brackets: ``Ca(OH)2``.
2. The trade's order where there is one (``CH4 NH3 HCN H2SO4 C2H5OH``), else carbon, hydrogen, then the alphabet.
3. All isomers of one formula carry a form (``C3H6:propene``), so that an addition renames nothing. The bare formula is
   an alias where the trade means one of them (``C2H2``, ``C6H6``); else it is an error that lists the choices.
4. The charge is trailing signs, one each: ``SO4--``. ``e-`` is the electron, ``D`` an element of its own.
5. One species for each composition and condensed state: crystal forms are pieces over T, joined at their transitions.
   Forms that never join (kyanite, anatase) are species of their own, named by the mineral.
6. Matching is exact, capitals count (``CS``, ``Cs``); older spellings are found by search only.
"""
