# a nondegenerate level holds two
args: levels H2O --occupy "1b2:4 2a1:2 1b1:2"
exit: 2
says: 1b2
fix: 2
