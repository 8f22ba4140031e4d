# no such bond in the formula
args: levels SiF2 --bond C-O=1.2
exit: 2
says: C-O | C
fix: Si-F
