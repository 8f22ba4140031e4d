# an empty argument
args: levels ""
exit: 2
says: geometry | formula | file | empty
fix: file | formula
