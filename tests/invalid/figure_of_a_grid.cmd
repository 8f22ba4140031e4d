# a grid has no lines
args: sweep water.xyz --bend 2-1-3=90..180:10 --stretch 1-2=0.9..1.1:0.1 --out w.png
exit: 2
says: grid over two coordinates has no lines
fix: one coordinate
with: water.xyz
