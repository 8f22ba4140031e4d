# nan is a float to many parsers
args: levels H2O --k nan
exit: 2
says: nan
fix: 1.75 | finite | number | between
