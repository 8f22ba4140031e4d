# xenon has no published set
args: levels XeF2
exit: 2
says: Xe
fix: --params
