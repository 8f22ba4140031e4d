# a bend has three atoms
args: sweep water.xyz --bend 2-1-3-2=90..180:10
exit: 2
says: 2-1-3-2
says: three | 3
fix: 2-1-3 | A-B-C | three
with: water.xyz
