# inf is a float to many parsers
args: sweep water.xyz --stretch 1-2=0.8..inf:0.1
exit: 2
says: inf
fix: finite | number
with: water.xyz
