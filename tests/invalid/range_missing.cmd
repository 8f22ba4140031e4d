# no range at all
args: sweep water.xyz --bend 2-1-3
exit: 2
says: 2-1-3
fix: = | from..to:step
with: water.xyz
