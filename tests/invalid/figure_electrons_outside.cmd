# electrons beyond the range
args: sweep water.xyz --bend 2-1-3=90..180:10 --electrons-at 60 --out w.svg
exit: 2
says: electrons cannot be shown at 60
fix: --electrons-at
with: water.xyz
