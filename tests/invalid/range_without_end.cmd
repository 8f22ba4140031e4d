# no upper end
args: sweep water.xyz --bend 2-1-3=90..:2
exit: 2
says: 90..:2
fix: from..to:step | .. | number
with: water.xyz
