# a tolerance below zero
args: levels H2O --tolerance=-0.1
exit: 2
says: -0.1
fix: positive | tolerance
