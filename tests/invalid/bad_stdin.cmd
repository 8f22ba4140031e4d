# an error on standard input has its line
args: levels -
exit: 2
says: standard input | stdin | <
says: :4: | line 4
says: Xq
fix: symbol
stdin: unknown_element.xyz
