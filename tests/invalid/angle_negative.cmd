# a bend is at least 0 degrees
args: sweep water.xyz --bend 2-1-3=-10..90:10
exit: 2
says: -10
fix: 0 | 180
with: water.xyz
