# no such variant
args: levels H2S --variant S:Z
exit: 2
says: S:Z | Z
fix: A
