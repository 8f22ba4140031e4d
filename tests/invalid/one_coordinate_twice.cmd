# the same angle as both axes of a grid
args: sweep water.xyz --bend 2-1-3=90..100:5 --bend 2-1-3=90..100:5
exit: 2
says: 2-1-3
fix: other | twice | coordinates
with: water.xyz
