# atoms are given by number
args: sweep water.xyz --bend H-O-H=90..180:10
exit: 2
says: H-O-H
says: H
fix: number | from 1
with: water.xyz
