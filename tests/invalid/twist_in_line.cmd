# three atoms in line have no torsion
args: sweep acetylene.xyz --twist 3-1-2-4=0..180:10
exit: 2
says: line
fix: line | other atoms
with: acetylene.xyz
