# no such element
args: params Xq
exit: 2
says: Xq
fix: symbol | element
