# a window with nothing in it
args: sweep water.xyz --bend 2-1-3=90..180:10 --energies 200..300 --out w.svg
exit: 2
says: no line between 200 and 300 eV
fix: --energies
with: water.xyz
