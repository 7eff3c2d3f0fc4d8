"""What ``gibbsmin.thermo.build`` makes ``species.json`` with; the only code here that reads other packages' data.

``sources`` reads the packages, ``fit`` fits tables, ``draft`` is a record on its way, ``steps`` are the repairs,
``assemble`` puts them in order and adds species, ``write`` writes the file. Nothing here runs when gibbsmin solves.
"""
