# a set of two has no third component
args: levels PF3 --surface 6e:3 --out orbital.glb
exit: 2
says: 2 components
fix: 6e:2
