# a unit that energies do not have
args: sweep water.xyz --bend 2-1-3=90..180:10 --energy-unit kcal --out w.svg
exit: 2
says: kcal
fix: hartree
with: water.xyz
