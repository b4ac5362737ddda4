# With --read-only whatever would write the book is refused, and what reads works.
small_book
remember small.book
try() { "$weirbook" --read-only "$@"; echo "exit status $?"; }
printf 'date,point,parameter,value,unit\n2025-04-01,EFF,BOD5,12,mg/L\n' >april.csv
try load april.csv
try load --dry-run april.csv
try plant --apply plant --reason x
try new other.book plant
try remark --from 2025-03-01 --cause x
try amend --date 2025-03-11 --point EFF --parameter BOD5 --value 1 --reason x
try withdraw 2 --reason x
printf 'sheet,date,time,point,run,argument,value,unit\nround,2025-03-04,,EFF,,PH,7.1,\n' >bench.csv
try bench --from bench.csv
try export --from 2025-03-11 --to 2025-03-11
try check | tail -1
try history --batches --as csv | cut -d, -f1,2
try backup copy.book
"$weirbook" -b small.book --read-onyl export
echo "exit status $?"
unchanged
ls
