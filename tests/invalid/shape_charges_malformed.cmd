# a range of charges that is none
args: shape NF2 --charges two
exit: 2
says: two
fix: -1..+2
