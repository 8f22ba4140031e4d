# an oxygen cannot become a hydrogen
args: sweep water.xyz --toward water.xyz --map 1=2
exit: 2
says: cannot become
fix: same element
with: water.xyz
