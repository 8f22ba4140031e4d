# a fragment is a list of atoms
args: levels water.xyz --fragments "O | H2"
exit: 2
says: fragments
fix: write
with: water.xyz
