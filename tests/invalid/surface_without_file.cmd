# a surface goes to a file
args: levels SiF2 --surface 5a1
exit: 2
says: no file
fix: --out
