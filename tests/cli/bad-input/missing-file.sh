small_book
remember small.book
"$weirbook" load nowhere.csv
status=$?
unchanged
exit $status
