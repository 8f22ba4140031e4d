# a centre beyond the last atom
args: shape C2H4 --centre 9
exit: 2
says: atom 9 cannot be the centre
fix: possible
