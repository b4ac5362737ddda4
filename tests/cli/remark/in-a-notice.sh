# A remark on record stands in the draft notices of its day, above what a person is to write; and in rows of many books.
small_plant
echo '001,EFF,BOD5,concentration,daily,max,60,mg/L,' >>plant/limits.csv
"$weirbook" new small.book plant >/dev/null
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,BOD5,75,mg/L\n' >march.csv
"$weirbook" load --by tester march.csv >/dev/null
"$weirbook" remark --by tester --from 2025-03-04 --point EFF --event outage --text 'blower 2 tripped'
"$weirbook" remark --by tester --from 2025-03-05 --cause 'another day'
"$weirbook" permit --month 2025-03 --notices drafts >/dev/null
grep -B3 -A2 'blower' drafts/*.txt
grep -c 'another day' drafts/*.txt
cp small.book twin.book
"$weirbook" permit -b small.book -b twin.book --month 2025-03 --as csv | grep -o '^[a-z.]*,001,EFF,BOD5,concentration,daily.*'
