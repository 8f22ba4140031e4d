# a chain has two possible centres
args: shape N2H4
exit: 2
says: several possible centres
fix: --centre
