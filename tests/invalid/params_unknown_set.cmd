# no such set
args: levels H2O --params hofmann
exit: 2
says: hofmann
fix: hoffmann
