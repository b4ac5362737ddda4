# A copy is a whole, sound book, and is never made over a file.
small_book
"$weirbook" remark --from 2025-03-18 --cause 'pump failed' --by 'day shift' >/dev/null
remember small.book
"$weirbook" backup copies.book
unchanged
"$weirbook" -b copies.book check | head -1
"$weirbook" -b small.book export >a.csv
"$weirbook" -b copies.book export >b.csv
cmp a.csv b.csv && echo "the same readings"
"$weirbook" -b small.book history --batches --as csv >a.csv
"$weirbook" -b copies.book history --batches --as csv >b.csv
cmp a.csv b.csv && echo "the same history and heads"
"$weirbook" -b small.book --read-only backup copies.book
echo "exit status $?"
"$weirbook" -b copies.book check >/dev/null && echo "the copy is as it was"
"$weirbook" -b small.book backup no/such/folder.book
echo "exit status $?"
"$weirbook" -b small.book backup small.book
echo "exit status $?"
"$weirbook" -b small.book backup
echo "exit status $?"
ls
