# a grid has no order of points along which roots could change
args: plan water.xyz --bend 2-1-3=90..180:10 --stretch 1-2=0.9..1.1:0.1
exit: 2
says: grid
fix: one coordinate
with: water.xyz
