# no threads
args: sweep water.xyz --bend 2-1-3=90..180:10 --jobs 0
exit: 2
says: 0
says: jobs
fix: 1 | thread
with: water.xyz
