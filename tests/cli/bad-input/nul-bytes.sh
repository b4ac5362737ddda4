small_book
remember small.book
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,BOD5,2\0000,mg/L\n' >nul.csv
"$weirbook" load nul.csv
status=$?
unchanged
exit $status
