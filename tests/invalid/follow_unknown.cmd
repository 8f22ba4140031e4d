# a view that does not exist
args: sweep water.xyz --bend 2-1-3=90..120:5 --follow colour
exit: 2
says: colour
fix: energy | character
with: water.xyz
