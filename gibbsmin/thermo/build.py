"""Makes ``species.json`` from the named packages, ``names.csv``, ``repairs.toml`` and ``additions.toml``.

``python -m gibbsmin.thermo.build`` writes the file; ``--check`` makes it in memory and compares it byte by byte.
The packages are read for their data only: Cantera carries the polynomials of NASA TM-4513, ``chemicals`` the Active
Thermochemical Tables and the CRC and Perry tables, ``janaf`` the NIST-JANAF tables, ``thermochem`` the Burcat file.
"""

from __future__ import annotations

import argparse
import json
import sys
from pathlib import Path

from gibbsmin.thermo.making.write import build, made_from

PATH = Path(__file__).parent / "data" / "species.json"


def difference(old: str, new: str) -> str:
    """Say where two files differ, the package versions first; empty if they are the same."""
    if old == new:
        return ""
    was, here = json.loads(old)["made_from"], made_from()
    if was != here:
        return f"the file was made from {was}, but here are {here}: install those versions, or make the file anew"
    pairs = zip(old.splitlines(), new.splitlines(), strict=False)
    number, a, b = next((i, a, b) for i, (a, b) in enumerate(pairs, 1) if a != b)
    return f"line {number} differs\n  file: {a}\n  made: {b}"


def main(arguments: list[str] | None = None) -> int:
    """Write the file, or with ``--check`` compare it with a new one; return the exit status."""
    parser = argparse.ArgumentParser(prog="python -m gibbsmin.thermo.build", description="Make species.json.")
    parser.add_argument("--check", action="store_true", help="compare only, byte by byte")
    text = build()
    if not parser.parse_args(arguments).check:
        PATH.write_text(text, "utf-8", newline="\n")
        return 0
    found = difference(PATH.read_text("utf-8"), text)
    print(found or "species.json is what the sources make", file=sys.stderr if found else sys.stdout)
    return 1 if found else 0


if __name__ == "__main__":
    sys.exit(main())
