# both ends equal
args: sweep water.xyz --bend 2-1-3=90..90:1
exit: 2
says: 90
fix: ends | different
with: water.xyz
