# no such file
args: levels nowhere.xyz
exit: 2
says: nowhere.xyz
fix: file | path | name
