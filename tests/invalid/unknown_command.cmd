# no such command
args: frobnicate H2O
exit: 2
says: frobnicate
fix: usage | --help | fix
