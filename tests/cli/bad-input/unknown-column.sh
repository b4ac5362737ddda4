small_book
remember small.book
printf 'date,point,paramter,value,unit\n2025-03-05,EFF,BOD5,21,mg/L\n' >column.csv
"$weirbook" load column.csv
status=$?
unchanged
exit $status
