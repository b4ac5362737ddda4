# An answer is kept, the doubt is listed last, and the status is 0 once all are answered; an amended value is doubted anew.
small_book
cat >odd.csv <<END
date,time,point,parameter,value,unit
2025-03-06,08:00,EFF,PH,71,pH
2025-03-07,08:00,EFF,PH,70,pH
END
"$weirbook" load --by tester odd.csv >/dev/null
ids() { "$weirbook" doubts --month 2025-03 --as csv | tail -n +2 | cut -d, -f1; }
today() { sed "s/$(date -u +%F)/{today}/g"; }
first=$(ids | head -1)
"$weirbook" doubts --answer "$first" --reason 'decimal point, sheet says 7.1' --by lab
"$weirbook" doubts --month 2025-03 --as csv | today
"$weirbook" doubts --answer "$first" --reason 'seen again' --by shift
for id in $(ids); do
    "$weirbook" doubts --answer "$id" --reason 'looked at' --by lab >/dev/null || echo "$id"
done
"$weirbook" doubts --month 2025-03 | today
"$weirbook" doubts --month 2025-03 >/dev/null
echo "exit status $?"
"$weirbook" amend --date 2025-03-06 --point EFF --parameter PH --value 72 --reason 'another' --by lab >/dev/null
"$weirbook" doubts --month 2025-03 --as csv | head -2
"$weirbook" check | tail -1
