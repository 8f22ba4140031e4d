# atoms are counted from 1
args: sweep water.xyz --bend 2-0-3=90..180:10
exit: 2
says: 2-0-3
says: 0
fix: from 1
with: water.xyz
