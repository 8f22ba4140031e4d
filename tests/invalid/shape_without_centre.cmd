# a diatomic has no shape to judge
args: shape HF
exit: 2
says: no centre
