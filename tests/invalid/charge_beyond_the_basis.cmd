# 13 electrons in 6 functions
args: levels H2O --charge=-5
exit: 2
says: charge
says: -5
says: 12
fix: charge | electrons
