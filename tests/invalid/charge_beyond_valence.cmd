# nine electrons taken from eight
args: levels H2O --charge 9
exit: 2
says: charge
says: 9
says: 8
fix: charge | electrons
