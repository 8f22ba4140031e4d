# a share of the density lies between 0 and 1
args: levels SiF2 --surface 5a1 --share 1.2 --out orbital.glb
exit: 2
says: 1.2
fix: 0.99
