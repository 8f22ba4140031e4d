# 90 + 7 n is never 180; 174 and 181 are near
args: sweep water.xyz --bend 2-1-3=90..180:7
exit: 2
says: step
says: 7
says: 180
fix: 174
with: water.xyz
