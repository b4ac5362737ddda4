small_book
remember small.book
mkdir readings
"$weirbook" load readings
status=$?
unchanged
exit $status
