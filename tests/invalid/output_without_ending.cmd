# the ending chooses the format
args: levels water.xyz --out levels
exit: 2
says: levels
fix: .json
with: water.xyz
