"""Holds every molar mass of the table against periodictable, a library nobody here wrote.

usage: molar_masses.py ELEMENTS.json < `carboy constants list reagents --format json`
Exit status 77: the library is not there.

periodictable carries older single values where IUPAC now gives intervals with a conventional value (Cl 35.453 against 35.45),
so each atom may differ by what IUPAC calls its uncertainty, and no mass by more than 3 parts in 10000.
"""

import json
import pathlib
import sys

try:
    import periodictable
except ImportError:
    sys.exit(77)

elements = json.loads(pathlib.Path(sys.argv[1]).read_text(encoding="utf-8"))["elements"]
water = periodictable.formula("H2O")
failed = 0
worst = 0.0
count = 0
for reagent in json.load(sys.stdin)["entries"]:
    anhydrous, *hydrate = reagent["formula"].split("·")
    formula = periodictable.formula(anhydrous)
    for part in hydrate:
        assert part.endswith("H2O"), reagent["formula"]
        formula = formula + float(part[: -len("H2O")] or 1) * water
    allowed = sum(n * (elements[str(atom)]["uncertainty"] + 5e-4) for atom, n in formula.atoms.items())
    difference = reagent["molar_mass_g_per_mol"] - formula.mass
    if abs(difference) > allowed or abs(difference) > 3e-4 * formula.mass:
        print(f"{reagent['name']}: {reagent['molar_mass_g_per_mol']:.5f} here, {formula.mass:.5f} there")
        failed += 1
    worst = max(worst, abs(difference) / formula.mass)
    count += 1
print(f"{count} molar masses, largest relative difference {worst:.1e}")
sys.exit(1 if failed or count < 120 else 0)
