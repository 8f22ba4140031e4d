# a value that the sweep does not reach
args: sweep H2S --bend 2-1-3=92..180:2 --why 5a1@60..180
exit: 2
says: 60 lies outside the sweep
fix: inside the sweep
