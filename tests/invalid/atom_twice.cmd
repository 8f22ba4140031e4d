# one atom named twice
args: sweep water.xyz --bend 1-1-2=90..180:10
exit: 2
says: 1-1-2
says: 1
fix: different | distinct | three
with: water.xyz
