# no such format
args: levels water.xyz --out levels.docx
exit: 2
says: docx
fix: .json
with: water.xyz
