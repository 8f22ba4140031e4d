# no step
args: sweep water.xyz --bend 2-1-3=90..180
exit: 2
says: 90..180
fix: step
with: water.xyz
