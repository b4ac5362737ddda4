small_book
remember small.book
printf 'date,point,parameter,value,unit\n03/04/2025,EFF,BOD5,21,mg/L\n05/06/2025,EFF,BOD5,22,mg/L\n' >dates.csv
"$weirbook" load dates.csv
status=$?
unchanged
printf 'field,value\ndate_order,mdy\n' >dates.dialect.csv
"$weirbook" load --by tester --dialect dates.dialect.csv dates.csv >/dev/null
"$weirbook" export --from 2025-05-01
exit $status
