# more unpaired electrons than electrons
args: levels H2O --unpaired 10
exit: 2
says: unpaired
says: 10
fix: 0
