# endless
args: sweep water.xyz --bend 2-1-3=90..180:0
exit: 2
says: step
says: 0
fix: positive
with: water.xyz
