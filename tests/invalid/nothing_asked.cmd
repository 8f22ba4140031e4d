# no command at all
args: 
exit: 2
says: usage | levels
fix: levels | --help | usage
