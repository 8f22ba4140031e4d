# no line of that label in C2v
args: sweep H2S --bend 2-1-3=92..180:2 --why 9t2
exit: 2
says: 9t2
fix: homo
