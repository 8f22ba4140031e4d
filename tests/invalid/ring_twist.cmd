# no torsion about a ring bond
args: sweep cyclopropane.xyz --twist 4-1-2-6=0..90:5
exit: 2
says: ring
fix: ring | path
with: cyclopropane.xyz
