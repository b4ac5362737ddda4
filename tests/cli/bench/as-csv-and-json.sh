# A failed check, a record and a refusal for programs.
bench_book
for sheet in cbod ph-calibration round; do cat "$sheets/$sheet.csv"; done | awk 'NR == 1 || !/^sheet/' >day.csv
"$weirbook" bench --from day.csv --dry-run --as csv
echo "exit status $?"
"$weirbook" bench --from day.csv --by tester --as json
