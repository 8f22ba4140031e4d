# nothing on standard input
args: levels -
exit: 2
says: standard input | stdin | -
fix: number of atoms | atom
