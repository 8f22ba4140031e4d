# a map without another geometry
args: sweep water.xyz --bend 2-1-3=90..120:5 --map 2=3
exit: 2
says: --toward
fix: usage
with: water.xyz
