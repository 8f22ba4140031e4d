# a minus from a word processor
args: sweep acetylene.xyz --twist 3-1-2-4=−90..90:10
exit: 2
says: −90 | U+2212
fix: - | minus | number
with: acetylene.xyz
