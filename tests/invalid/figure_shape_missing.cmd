# no such shape document
args: sweep water.xyz --bend 2-1-3=90..180:10 --shape nowhere.json --out w.svg
exit: 2
says: --shape nowhere.json
fix: orbend shape
with: water.xyz
