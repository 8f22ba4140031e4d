# a negative length
args: levels SiF2 --bond Si-F=-1.59
exit: 2
says: -1.59
fix: positive | Å | angstrom | length
