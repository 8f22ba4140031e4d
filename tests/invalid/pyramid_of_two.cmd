# a pyramid needs three neighbours
args: sweep water.xyz --pyramid 1=90..120:1
exit: 2
says: three
fix: three
with: water.xyz
