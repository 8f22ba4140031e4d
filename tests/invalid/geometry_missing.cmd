# a command without its geometry
args: levels
exit: 2
says: geometry
fix: usage | --help | fix
