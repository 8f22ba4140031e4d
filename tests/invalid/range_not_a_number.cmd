# nan is a float to many parsers
args: sweep water.xyz --bend 2-1-3=nan..180:2
exit: 2
says: nan
fix: finite | number
with: water.xyz
