# The same file again changes nothing; another file with the same values finds them there.
bench_book
cp "$sheets/bod.csv" .
"$weirbook" bench --from bod.csv --by tester >/dev/null
remember small.book
"$weirbook" bench --from bod.csv | tail -n 2 | sed 's/on 20[0-9-]*/on {today}/'
unchanged
grep -v ',200,mL' bod.csv | grep -v 'EFF,3,' >shorter.csv
"$weirbook" bench --from shorter.csv --by tester | tail -n 2
