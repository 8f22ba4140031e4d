"""Writes exponents.csv beside this file from the mendeleev package (version 1.3.0, MIT).

    python3 -m venv venv && venv/bin/pip install mendeleev==1.3.0 && venv/bin/python mendeleev.py

Slater's rules: Phys. Rev. 36, 57 (1930), as zeff/n (for n <= 3, where his effective n is n).
Clementi & Raimondi, J. Chem. Phys. 38, 2686 (1963); Clementi, Raimondi & Reinhardt, J. Chem. Phys.
47, 1300 (1967), as zeff/n. Allen's electronegativity is the mean of the spectroscopic orbital
energies over the valence electrons, in eV.
"""

import csv
import os
import sys

# This script has the package's name: look for the package elsewhere.
HERE = os.path.dirname(os.path.abspath(__file__))
sys.path = [path for path in sys.path if os.path.abspath(path or ".") != HERE]
from mendeleev import element  # noqa: E402

MAIN_GROUP = """H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Ga Ge As Se Br Kr Rb Sr In Sn Sb
Te I Xe Cs Ba Tl Pb Bi""".split()


def exponent(atom, letter, method):
    n = atom.period
    if method == "slater" and n > 3:
        return ""
    zeff = atom.zeff(n, letter, method=method)
    return "" if zeff is None else f"{zeff / n:.4f}"


with open(os.path.join(HERE, "exponents.csv"), "w", newline="") as out:
    table = csv.writer(out, lineterminator="\n")
    table.writerow(["element", "slater", "clementi_s", "clementi_p", "allen_ev", "source"])
    for symbol in MAIN_GROUP:
        atom = element(symbol)
        table.writerow([
            symbol,
            exponent(atom, "s", "slater"),
            exponent(atom, "s", "clementi"),
            exponent(atom, "p", "clementi"),
            "" if atom.en_allen is None else f"{atom.en_allen:.4g}",
            "mendeleev 1.3.0",
        ])
