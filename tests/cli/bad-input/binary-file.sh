small_book
remember small.book
printf '\177ELF\002\001\001\000\000\000\001\002\003' >program
"$weirbook" load program
status=$?
unchanged
exit $status
