# the two hydrogens come too close at 5 degrees
args: sweep water.xyz --bend 2-1-3=5..90:5
exit: 2
says: 2
says: 3
says: 0.2
fix: range | apart
with: water.xyz
