# a pair of atoms without its other half
args: sweep water.xyz --toward water.xyz --map 2
exit: 2
says: --map 2
fix: 7=10
with: water.xyz
