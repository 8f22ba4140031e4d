# 8 electrons cannot leave one unpaired
args: levels H2O --unpaired 1
exit: 2
says: unpaired
says: 8
fix: 0
