# a bend is at most 180 degrees
args: sweep water.xyz --bend 2-1-3=90..200:10
exit: 2
says: 200
says: 180
fix: 0 | 180
with: water.xyz
