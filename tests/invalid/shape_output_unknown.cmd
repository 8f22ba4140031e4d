# a file that the command does not write
args: shape NF2 --out a.txt
exit: 2
says: a.txt
fix: .svg
