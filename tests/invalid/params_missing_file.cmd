# no such parameter file
args: levels H2O --params mine.toml
exit: 2
says: mine.toml
fix: file | path | set
