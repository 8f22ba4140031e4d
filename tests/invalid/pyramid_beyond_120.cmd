# three ligands are at most 120 degrees apart
args: sweep PF3 --pyramid 1=90..130:1
exit: 2
says: 130
says: 120
fix: 120
