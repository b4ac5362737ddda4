small_book
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,FLOW,1.5,MGD\n2025-03-11,EFF,FLOW,1.6,MGD\n' >flow.csv
"$weirbook" load --by tester flow.csv >/dev/null
"$weirbook" process --from 2025-03-04 --to 2025-03-04 --as csv
"$weirbook" process --from 2025-03-01 --to 2025-03-31 --step month --as csv
"$weirbook" process --from 2025-03-31 --to 2025-03-01
echo "exit status $?"
