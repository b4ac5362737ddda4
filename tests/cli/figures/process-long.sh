# A century asked for is a table of the days the book holds.
small_book
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,FLOW,1.5,MGD\n' >flow.csv
"$weirbook" load --by tester flow.csv >/dev/null
"$weirbook" process --from 1900-01-01 --to 2199-12-31 --as csv | cut -d, -f1 | sed 1d | sort -u | sed -n '1p;$p'
"$weirbook" process --from 1900-01-01 --to 1950-12-31
