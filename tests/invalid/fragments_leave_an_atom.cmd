# every atom belongs to one fragment
args: levels water.xyz --fragments "1 | 2"
exit: 2
says: atom 3
fix: one
with: water.xyz
