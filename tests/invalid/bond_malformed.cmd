# no dash between the atoms
args: levels SiF2 --bond SiF=1.59
exit: 2
says: SiF
fix: Si-F
