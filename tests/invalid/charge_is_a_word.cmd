# charge that is no number
args: levels H2O --charge plus
exit: 2
says: --charge
says: plus
fix: usage | --help | number | fix
