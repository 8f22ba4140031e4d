# a formula with no ideal geometry
args: levels C20H42
exit: 2
says: C20H42
fix: file | geometry
