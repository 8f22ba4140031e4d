# K below every published value
args: levels H2O --k=-1
exit: 2
says: -1
fix: between | 1 | 1.75
