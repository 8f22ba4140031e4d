# the output is a directory
args: levels water.xyz --out taken.json
exit: 2
says: taken.json
fix: director | file | name
with: water.xyz
directory: taken.json
