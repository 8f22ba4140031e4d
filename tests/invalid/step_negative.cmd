# a downward range starts with the larger value
args: sweep water.xyz --bend 2-1-3=90..180:-10
exit: 2
says: step
says: -10
fix: positive
with: water.xyz
