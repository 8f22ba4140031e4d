# unpaired electrons in words
args: shape NF2 --unpaired many
exit: 2
says: many
fix: all
