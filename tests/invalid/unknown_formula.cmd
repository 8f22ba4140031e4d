# an element that does not exist
args: levels Xq2
exit: 2
says: Xq2
fix: file | formula | element
