# no such form
args: levels H2O --coupling quadratic
exit: 2
says: quadratic
fix: constant
