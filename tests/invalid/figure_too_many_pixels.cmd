# a slide of four thousand dots per inch
args: sweep water.xyz --bend 2-1-3=90..180:10 --width slide --dpi 4000 --out w.png
exit: 2
says: pixels cannot be made
fix: dots per inch
with: water.xyz
