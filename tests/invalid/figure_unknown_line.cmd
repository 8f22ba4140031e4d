# a line that is not there
args: sweep water.xyz --bend 2-1-3=90..180:10 --lines 3a1,7b2 --out w.svg
exit: 2
says: 7b2
says: nearest
fix: name lines
with: water.xyz
