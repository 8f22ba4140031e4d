# a sweep of nothing
args: sweep water.xyz
exit: 2
says: coordinate
fix: --bend
with: water.xyz
