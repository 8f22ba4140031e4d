# there is no atom 9
args: sweep water.xyz --bend 2-1-9=90..180:10
exit: 2
says: 9
says: 3
fix: from 1
with: water.xyz
