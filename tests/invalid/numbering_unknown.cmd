# no such numbering
args: levels H2O --numbering both
exit: 2
says: both
fix: core
