# a geometry is no shape document
args: sweep water.xyz --bend 2-1-3=90..180:10 --shape water.xyz --out w.svg
exit: 2
says: --shape water.xyz
fix: orbend shape
with: water.xyz
