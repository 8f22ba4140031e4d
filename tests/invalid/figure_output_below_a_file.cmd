# a file is no folder
args: sweep water.xyz --bend 2-1-3=90..180:10 --out water.xyz/w.pdf
exit: 2
says: no folder water.xyz
fix: make the folder
with: water.xyz
