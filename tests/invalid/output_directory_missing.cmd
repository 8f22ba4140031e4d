# a directory that is not there
args: levels water.xyz --out nowhere/levels.json
exit: 2
says: nowhere/levels.json
fix: director | folder
with: water.xyz
