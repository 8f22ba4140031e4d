# a window of no height
args: sweep water.xyz --bend 2-1-3=90..180:10 --energies 0..-20 --out w.svg
exit: 2
says: 0..-20
fix: -20..0 | lower | from
with: water.xyz
