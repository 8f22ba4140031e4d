# a file of surfaces without an orbital
args: levels SiF2 --out orbital.glb
exit: 2
says: .glb
fix: --surface
