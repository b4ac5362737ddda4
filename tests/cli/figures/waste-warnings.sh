. "${common%/*}/figures/wasting.inc"
wasting_book
echo "== less than nothing"
"$weirbook" waste --mlss 9000 --on 2025-03-14 --as csv
echo "== old readings"
"$weirbook" waste --srt 12.5 --on 2025-03-20 --as csv
echo "== older than that is no answer"
"$weirbook" waste --srt 12.5 --on 2025-06-20
echo "exit status $?"
echo "== a stopped pump, an inventory that shrinks"
printf 'date,point,parameter,value,unit\n2025-03-15,WAS,FLOW,0,MGD\n2025-03-15,AER,MLSS,1500,mg/L\n' >stopped.csv
"$weirbook" load --by tester stopped.csv >/dev/null
"$weirbook" waste --srt 12.5 --on 2025-03-16 --as csv
