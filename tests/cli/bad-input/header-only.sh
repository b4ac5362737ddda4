small_book
remember small.book
echo 'date,point,parameter,value,unit' >header.csv
"$weirbook" load header.csv
status=$?
unchanged
exit $status
