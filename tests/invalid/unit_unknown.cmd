# no such unit
args: levels water.xyz --unit nm
exit: 2
says: nm
fix: angstrom
with: water.xyz
