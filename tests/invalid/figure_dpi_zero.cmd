# no picture without pixels
args: sweep water.xyz --bend 2-1-3=90..180:10 --dpi 0 --out w.png
exit: 2
says: --dpi 0
fix: 36 to 4800
with: water.xyz
