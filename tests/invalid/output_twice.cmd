# one file named twice
args: levels water.xyz --out a.json --out a.json
exit: 2
says: a.json
fix: once | twice | name
with: water.xyz
