# a dash where two points belong
args: sweep water.xyz --bend 2-1-3=90-180:2
exit: 2
says: 90-180
fix: ..
with: water.xyz
