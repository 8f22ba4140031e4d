# an element that the set does not have
args: shape XeF4
exit: 2
says: no values for Xe
fix: --params FILE
