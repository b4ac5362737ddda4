small_book
remember small.book
head -c 100000000 /dev/zero | tr '\0' x >long.csv
"$weirbook" load long.csv
status=$?
unchanged
exit $status
