# two coordinates have no lines
args: sweep H2S --bend 2-1-3=92..120:14 --stretch 1-2=1.3..1.4:0.1 --why 5a1
exit: 2
says: a grid has no lines
fix: one coordinate
