# no such option
args: levels H2O --colour
exit: 2
says: --colour
fix: usage | --help | fix
