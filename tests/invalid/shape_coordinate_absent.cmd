# a torsion of atoms that are not there
args: shape SiF2 --twist 3-1-2-4=0..180:10
exit: 2
says: no atom 4
fix: counted from 1
