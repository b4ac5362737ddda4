# A corrected weight gives another result: it contradicts, until it is entered with a reason.
bench_book
cp "$sheets/suspended-solids.csv" .
"$weirbook" bench --from suspended-solids.csv --by tester >/dev/null
sed 's/0\.1188/0.1198/' suspended-solids.csv >corrected.csv
"$weirbook" bench --from corrected.csv --by tester
echo "exit status $?"
"$weirbook" bench --from corrected.csv --by tester --revise --reason 'weight misread' | tail -n 2
sqlite3 small.book 'SELECT date, point, parameter, old, new, reason FROM revisions'
sqlite3 small.book 'SELECT kind, file, accepted, set_aside FROM batches' 2>&1 | tail -n 3
"$weirbook" day 2025-03-12 | grep -A 1 '^EFF *TSS'
"$weirbook" check | head -n 1
