# a distance below 0.2 angstrom
args: sweep water.xyz --stretch 1-2=0..1:0.1
exit: 2
says: 0
fix: 0.2 | positive | apart | longer | range
with: water.xyz
