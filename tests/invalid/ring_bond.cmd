# a three-membered ring cannot open along an angle
args: sweep cyclopropane.xyz --bend 1-2-3=60..90:5
exit: 2
says: ring
fix: ring | path
with: cyclopropane.xyz
