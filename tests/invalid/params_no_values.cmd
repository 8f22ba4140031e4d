# an element without published values
args: params Xe
exit: 2
says: Xe
fix: --params | set | values
