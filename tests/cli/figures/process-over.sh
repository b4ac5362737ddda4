small_book
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,FLOW,1.5,MGD\n2025-03-11,EFF,FLOW,1.6,MGD\n' >flow.csv
"$weirbook" load --by tester flow.csv >/dev/null
"$weirbook" process --from 2025-03-01 --to 2025-03-31 --over weekday --as csv
"$weirbook" process --from 2025-03-01 --to 2025-03-31 --over month
"$weirbook" process --from 2025-03-01 --to 2025-03-14 --chart
"$weirbook" process --from 2025-03-01 --to 2025-03-14 --chart --as csv
echo "exit status $?"
"$weirbook" process --from 2025-03-01 --to 2025-03-14 --over month --step week
echo "exit status $?"
