# no colon
args: levels H2O --occupy "1b2=2"
exit: 2
says: 1b2=2
fix: :
