# no such orbital; the nearest are offered
args: levels SiF2 --surface 5a9 --out orbital.glb
exit: 2
says: 5a9
fix: 5a1
