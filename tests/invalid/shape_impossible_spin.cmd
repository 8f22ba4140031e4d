# an odd count with an even number of unpaired electrons
args: shape NF2 --unpaired 2
exit: 2
says: 2 unpaired
fix: 1, 3
