small_book
remember small.book
: >empty.csv
"$weirbook" load empty.csv
status=$?
unchanged
exit $status
