# one verdict, two coordinates
args: shape H2O2 --bend 3-1-2=90..180:5 --twist 3-1-2-4=0..180:10
exit: 2
says: --bend
fix: --help
