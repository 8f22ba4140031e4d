# 7 electrons cannot leave none unpaired
args: levels NH2 --unpaired 0
exit: 2
says: --unpaired | unpaired
says: 7
fix: 1
