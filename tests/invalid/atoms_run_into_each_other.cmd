# the two hydrogens meet at 0 degrees
args: sweep water.xyz --bend 2-1-3=0..90:5
exit: 2
says: 2
says: 3
says: 0.2
fix: range | apart
with: water.xyz
