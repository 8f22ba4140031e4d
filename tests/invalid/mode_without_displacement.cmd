# a mode without displacement vectors
args: sweep water.xyz --along-mode=-1..1:0.5
exit: 2
says: displacement
fix: properties=
with: water.xyz
