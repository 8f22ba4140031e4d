# ten electrons where eight are
args: levels H2O --occupy "2a1:2 1b2:2 1b1:2 3a1:2 2b2:2"
exit: 2
says: 10
says: 8
fix: 8 | electrons | charge
