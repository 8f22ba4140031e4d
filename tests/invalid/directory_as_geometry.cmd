# a directory is no geometry
args: levels .
exit: 2
says: .
fix: file | formula
