# one value is no change
args: sweep H2S --bend 2-1-3=92..180:2 --why 5a1@120
exit: 2
says: not a pair of values
fix: 5a1@92..180
