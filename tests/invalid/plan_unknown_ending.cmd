# an ending that no form of the plan has
args: plan water.xyz --out plan.csv
exit: 2
says: plan.csv
fix: .qcschema.json
with: water.xyz
