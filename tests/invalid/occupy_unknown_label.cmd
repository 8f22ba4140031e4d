# no such irrep in C2v
args: levels H2O --occupy "2a1:2 1t2:6"
exit: 2
says: 1t2
fix: a1
