small_book
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,FLOW,1.5,MGD\n' >flow.csv
"$weirbook" load --by tester flow.csv >/dev/null
"$weirbook" day 2025-03-04
"$weirbook" day 2025-03-04 --as csv
"$weirbook" day 2025-03-05
