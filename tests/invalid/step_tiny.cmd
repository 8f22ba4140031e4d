# 9e10 points
args: sweep water.xyz --bend 2-1-3=90..180:1e-9
exit: 2
says: points
fix: step
with: water.xyz
